#include "ui/page/control_line.h"

#include <algorithm>
#include <functional>

#include <QHBoxLayout>
#include <QKeyEvent>
#include <QMenu>
#include <QStyle>
#include <QToolButton>
#include <QVBoxLayout>

namespace ebbline::page {

using quantity::Quantity;
using quantity::UnitSystem;

namespace {

QString withUnit(double fileValue, Quantity quantity, UnitSystem units) {
  // SI shows what the file says; converted numbers are rounded to what is usual for the quantity.
  const std::string number =
      units == UnitSystem::kSi ? quantity::formatForEditing(quantity::fileToBase(fileValue, quantity), quantity, units)
                               : quantity::format(quantity::fileToBase(fileValue, quantity), quantity, units);
  const std::string_view unit = quantity::unitLabel(quantity, units);
  return QString::fromStdString(number) + ' ' + QString::fromUtf8(unit.data(), static_cast<qsizetype>(unit.size()));
}

const loop::Sensor* sensorOf(const loop::Loop& loop, loop::Id id) {
  const auto at = std::find_if(loop.sensors.begin(), loop.sensors.end(), [id](const auto& s) { return s.id == id; });
  return at == loop.sensors.end() ? nullptr : &*at;
}

/// The loop's control under every strategy it has the places and set-points for.
std::vector<loop::Control> possibleControls(const loop::Loop& loop) {
  std::vector<loop::Control> all;
  const auto add = [&](loop::Strategy strategy) {
    all.push_back(loop.control);
    all.back().strategy = strategy;
  };
  add(loop::Strategy::kConstantSpeed);
  if (loop.control.set_point_kpa) {
    add(loop::Strategy::kDpPump);
    if (loop.control.header_supply && loop.control.header_return) add(loop::Strategy::kDpHeaders);
  }
  if (loop.control.sensors.size() > 1) add(loop::Strategy::kFieldSensor);
  for (const loop::Sensor& sensor : loop.sensors) {
    if (!sensor.set_point_kpa) continue;
    add(loop::Strategy::kFieldSensor);
    all.back().sensors = {sensor.id};
  }
  return all;
}

}  // namespace

SetPointField::SetPointField(Quantity quantity, QWidget* parent) : QLineEdit(parent), quantity_(quantity) {
  setFixedWidth(104);
  connect(this, &QLineEdit::editingFinished, this, &SetPointField::enter);
}

void SetPointField::showValue(double fileValue, UnitSystem units) {
  units_ = units;
  shown_ = withUnit(fileValue, quantity_, units);
  setText(shown_);
  setWrong({});
}

void SetPointField::enter() {
  if (text() == shown_) return setWrong({});
  const auto value = quantity::parseToFileUnit(text().toStdString(), quantity_, units_);
  if (!value) {
    const text::Remark& remark = value.error();
    return setWrong(QString::fromStdString(text::sentence(remark) + " " + text::remedy(remark)));
  }
  if (*value <= 0) return setWrong(tr("It must be greater than 0."));
  if (quantity_ == Quantity::kPercent && *value > 100) return setWrong(tr("The speed may be 100 % at most."));
  setWrong({});
  shown_ = text();
  emit entered(*value, text());
}

void SetPointField::setWrong(const QString& why) {
  if (property("wrong").toBool() != !why.isEmpty()) {
    setProperty("wrong", !why.isEmpty());
    style()->unpolish(this);
    style()->polish(this);
  }
  setAccessibleDescription(why);
  emit refused(why);
}

void SetPointField::keyPressEvent(QKeyEvent* event) {
  if (event->key() == Qt::Key_Escape && text() != shown_) {
    setText(shown_);
    setWrong({});
    return selectAll();
  }
  QLineEdit::keyPressEvent(event);
}

ControlLine::ControlLine(document::Document& document, const theme::ThemeHolder& holder, QWidget* parent)
    : QWidget(parent), document_(document), holder_(holder) {
  row_ = new QHBoxLayout;
  row_->setSpacing(8);
  reason_ = new QLabel;
  reason_->setProperty("look", "under");
  reason_->setWordWrap(true);
  reason_->hide();
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(4);
  column->addLayout(row_);
  column->addWidget(reason_);
  connect(&document_, &document::Document::replaced, this, &ControlLine::rebuild);
  connect(&document_, &document::Document::changed, this, [this] {
    if (document_.loop().control.strategy != shownControl_.strategy ||
        document_.loop().control.sensors != shownControl_.sensors)
      rebuild();
    else
      fill();
  });
  rebuild();
}

void ControlLine::setUnits(UnitSystem units) {
  units_ = units;
  fill();
}

QString ControlLine::seriesKey(loop::Strategy strategy) {
  switch (strategy) {
    case loop::Strategy::kConstantSpeed:
      return QStringLiteral("constant_speed");
    case loop::Strategy::kDpPump:
      return QStringLiteral("dp_pump");
    case loop::Strategy::kDpHeaders:
      return QStringLiteral("dp_headers");
    case loop::Strategy::kFieldSensor:
      return QStringLiteral("field_sensor");
  }
  return QStringLiteral("constant_speed");
}

QString ControlLine::shortWords(const loop::Loop& loop, const theme::Theme& theme) {
  return theme.seriesOf(seriesKey(loop.control.strategy)).words;
}

QString ControlLine::words(const loop::Loop& loop, UnitSystem units) {
  const loop::Control& control = loop.control;
  const auto set = [units](const std::optional<double>& kpa) {
    return kpa ? withUnit(*kpa, Quantity::kPressure, units) : tr("no set-point");
  };
  switch (control.strategy) {
    case loop::Strategy::kConstantSpeed:
      return tr("constant speed, %1").arg(withUnit(control.speed_percent, Quantity::kPercent, units));
    case loop::Strategy::kDpPump:
      return tr("constant DP at the pump, %1").arg(set(control.set_point_kpa));
    case loop::Strategy::kDpHeaders:
      return tr("constant DP at the headers, %1").arg(set(control.set_point_kpa));
    case loop::Strategy::kFieldSensor:
      break;
  }
  QStringList each;
  for (const loop::Id id : control.sensors)
    if (const loop::Sensor* sensor = sensorOf(loop, id))
      each << QString::fromStdString(sensor->tag) + QStringLiteral(", ") + set(sensor->set_point_kpa);
  return tr("field sensor %1").arg(each.join(tr(" and ")));
}

void ControlLine::rebuild() {
  while (QLayoutItem* item = row_->takeAt(0)) {
    if (item->widget()) item->widget()->deleteLater();
    delete item;
  }
  fields_.clear();
  reason_->hide();
  if (document_.isEmpty()) return;
  shownControl_ = document_.loop().control;
  auto* lead = new QLabel(tr("Strategy:"));
  lead->setProperty("look", "quiet");
  row_->addWidget(lead);
  addStrategies();
  switch (shownControl_.strategy) {
    case loop::Strategy::kConstantSpeed:
      addField(tr("at speed"), Quantity::kPercent, shownControl_.speed_percent, [this](double v, const QString&) {
        loop::Control control = document_.loop().control;
        control.speed_percent = v;
        return loop::Change{"Set pump speed", {loop::PutControl{control}}};
      });
      break;
    case loop::Strategy::kDpPump:
    case loop::Strategy::kDpHeaders:
      addField(tr("held at"), Quantity::kPressure, shownControl_.set_point_kpa.value_or(0),
               [this](double v, const QString&) {
                 loop::Control control = document_.loop().control;
                 control.set_point_kpa = v;
                 return loop::Change{"Set set-point", {loop::PutControl{control}}};
               });
      break;
    case loop::Strategy::kFieldSensor:
      for (const loop::Id id : shownControl_.sensors) {
        const loop::Sensor* sensor = sensorOf(document_.loop(), id);
        if (!sensor) continue;
        addField(tr("%1 held at").arg(QString::fromStdString(sensor->tag)), Quantity::kPressure,
                 sensor->set_point_kpa.value_or(0), [this, id](double v, const QString& typed) {
                   loop::Sensor changed = *sensorOf(document_.loop(), id);
                   changed.set_point_kpa = v;
                   changed.typed["set_point_kpa"] = typed.toStdString();
                   return loop::Change{"Set set-point of " + changed.tag, {loop::Put{changed}}};
                 });
      }
      break;
  }
  row_->addStretch(1);
  fill();
}

/// The strategies this loop has the places and set-points for; choosing one is a step that can be undone.
void ControlLine::addStrategies() {
  auto* button = new QToolButton;
  button->setProperty("look", "heading");
  button->setPopupMode(QToolButton::InstantPopup);
  button->setFocusPolicy(Qt::StrongFocus);
  button->setText(shortWords(document_.loop(), holder_.theme()));
  button->setFont(holder_.theme().font(theme::Text::kStrong));
  button->setAccessibleName(tr("Strategy"));
  auto* menu = new QMenu(button);
  const auto add = [&](loop::Control control) {
    loop::Loop chosen;  // only what the words are made of
    chosen.control = control;
    chosen.sensors = document_.loop().sensors;
    QAction* action = menu->addAction(words(chosen, units_));
    action->setCheckable(true);
    action->setChecked(control.strategy == shownControl_.strategy && control.sensors == shownControl_.sensors);
    // Queued: the line is built anew by the change, and its button must not go while its menu is still open.
    connect(
        action, &QAction::triggered, this,
        [this, control] {
          push({"Choose strategy", {loop::PutControl{control}}});
        },
        Qt::QueuedConnection);
  };
  for (const loop::Control& control : possibleControls(document_.loop())) add(control);
  button->setMenu(menu);
  row_->addWidget(button);
}

void ControlLine::addField(const QString& before, Quantity quantity, double value,
                           std::function<loop::Change(double, const QString&)> change) {
  auto* label = new QLabel(before);
  auto* field = new SetPointField(quantity);
  label->setProperty("look", "quiet");
  label->setBuddy(field);
  field->setAccessibleName(before);
  field->setToolTip(tr("Any unit may be typed. Enter sets it, Esc takes it back."));
  row_->addWidget(label);
  row_->addWidget(field);
  field->showValue(value, units_);
  fields_.push_back(field);
  connect(field, &SetPointField::entered, this,
          [this, change](double v, const QString& typed) { push(change(v, typed)); });
  connect(field, &SetPointField::refused, reason_, [this](const QString& why) {
    reason_->setText(why);
    reason_->setVisible(!why.isEmpty());
  });
}

void ControlLine::fill() {
  const loop::Loop& loop = document_.loop();
  shownControl_ = loop.control;
  for (std::size_t i = 0; i < fields_.size(); ++i) {
    double value = 0;
    if (loop.control.strategy == loop::Strategy::kConstantSpeed) {
      value = loop.control.speed_percent;
    } else if (loop.control.strategy == loop::Strategy::kFieldSensor) {
      const loop::Sensor* sensor = sensorOf(loop, loop.control.sensors[i]);
      value = sensor ? sensor->set_point_kpa.value_or(0) : 0;
    } else {
      value = loop.control.set_point_kpa.value_or(0);
    }
    fields_[i]->showValue(value, units_);
  }
}

void ControlLine::push(const loop::Change& change) {
  const std::vector<text::Remark> remarks = document_.push(change);
  if (remarks.empty()) return;
  reason_->setText(QString::fromStdString(text::oneLine(remarks.front())));
  reason_->show();
}

}  // namespace ebbline::page
