#include "ui/shell/status_strip.h"

#include <QHBoxLayout>
#include <QPainter>

namespace ebbline::shell {

namespace {

// Limits of the accuracy table: beyond them the tick becomes a triangle with words.
constexpr double kMostResidual = 1e-9;
constexpr double kMostDifference = 1e-6;

}  // namespace

FindingButton::FindingButton(const theme::ThemeHolder& holder, QWidget* parent)
    : QAbstractButton(parent), holder_(holder) {
  setCursor(Qt::PointingHandCursor);
  setFocusPolicy(Qt::StrongFocus);
}

QSize FindingButton::sizeHint() const {
  const QFontMetrics metrics(holder_.theme().font(theme::Text::kLabel, 600));
  return {metrics.horizontalAdvance(text()) + 36, 24};
}

void FindingButton::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  const theme::Colours& colours = holder_.theme().colours;
  const QColor ink = underMouse() ? colours.accent : colours.ink1;
  painter.setFont(holder_.theme().font(theme::Text::kLabel, 600));
  painter.setPen(ink);
  painter.drawText(rect().adjusted(8, 0, -24, 0), Qt::AlignLeft | Qt::AlignVCenter, text());
  theme::drawIcon(painter, theme::Icon::kChevronRight, QPointF(width() - 12, height() / 2.0), ink);
  if (!hasFocus()) return;
  painter.setPen(QPen(colours.focus, 2));
  painter.setBrush(Qt::NoBrush);
  painter.drawRoundedRect(QRectF(rect()).adjusted(1, 1, -1, -1), 3, 3);
}

StatusStrip::StatusStrip(page::PartLoadModel& model, const theme::ThemeHolder& holder, QWidget* parent)
    : QWidget(parent), model_(model), holder_(holder) {
  setProperty("look", "strip");
  setAttribute(Qt::WA_StyledBackground);
  setFixedHeight(holder.theme().space.status);
  found_ = new FindingButton(holder);
  found_->hide();
  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(36, 0, 16, 0);
  row->setSpacing(28);
  row->addStretch(1);
  row->addWidget(found_);
  connect(found_, &QAbstractButton::clicked, this, [this] { emit showUnderSupplied(worst_); });
  connect(&model_, &page::PartLoadModel::pictureChanged, this, &StatusStrip::refresh);
  connect(&model_, &page::PartLoadModel::networkChanged, this, &StatusStrip::refresh);
  connect(&model_, &page::PartLoadModel::checkedChanged, this, &StatusStrip::showChecked);
  refresh();
}

void StatusStrip::refresh() {
  const network::PartLoadPicture* picture = model_.picture();
  put(residual_, {});
  found_->hide();
  worst_ = 0;
  mark_ = Mark::kNone;
  if (!picture) {
    put(solved_, model_.faults().empty() ? tr("no loop open") : tr("not solved: the loop has faults"));
    mark_ = model_.faults().empty() ? Mark::kNone : Mark::kTriangle;
  } else if (!picture->summary.usable()) {
    put(solved_, tr("not solved: %1").arg(QString::fromStdString(picture->summary.why)));
    mark_ = Mark::kTriangle;
  } else {
    put(solved_, picture->solve_ms < 0.01 ? tr("solved in under 0.01 ms")
                                          : tr("solved %1 ms").arg(theme::roundedText(picture->solve_ms, 2)));
    const network::Summary& summary = picture->summary;
    const bool good = summary.flow_residual <= kMostResidual && summary.pressure_residual <= kMostResidual;
    put(residual_,
        good ? tr("flow residual %1").arg(theme::residualText(summary.flow_residual))
             : tr("flow residual %1, pressure residual %2: beyond 1e-9, do not use")
                   .arg(theme::residualText(summary.flow_residual), theme::residualText(summary.pressure_residual)));
    mark_ = good ? Mark::kTick : Mark::kTriangle;
    if (picture->under_supplied > 0) {
      const auto first = static_cast<std::size_t>(picture->first_under_supplied);
      worst_ = picture->results.terminals[first].id;
      found_->setText(picture->under_supplied == 1 ? tr("1 terminal under-supplied")
                                                   : tr("%1 terminals under-supplied").arg(picture->under_supplied));
      found_->setToolTip(tr("Choose the one with the largest shortfall"));
      found_->updateGeometry();
      found_->show();
    }
  }
  showChecked();
}

void StatusStrip::showChecked() {
  const page::Checked& checked = model_.checked();
  switch (checked.kind) {
    case page::Checked::Kind::kNot:
      put(checked_, {});
      break;
    case page::Checked::Kind::kRunning:
      put(checked_, tr("second method is running"));
      break;
    case page::Checked::Kind::kDone: {
      const QString at = checked.at.toString(QStringLiteral("HH:mm"));
      if (!checked.opinion.second.usable()) {
        put(checked_, tr("second method gave no answer: %1").arg(QString::fromStdString(checked.opinion.second.why)));
        break;
      }
      const double difference = checked.opinion.difference.relative;
      const bool agrees = difference <= kMostDifference;
      if (!agrees) mark_ = Mark::kTriangle;
      const QString words = agrees ? tr("second method agrees %1 (%2)") : tr("second method differs by %1 (%2)");
      put(checked_, words.arg(theme::residualText(difference), at));
    }
  }
  update();
}

void StatusStrip::say(const QString& words) {
  put(checked_, words);
}

QString StatusStrip::text() const {
  QStringList parts;
  for (const QString& part : {solved_, residual_, checked_})
    if (!part.isEmpty()) parts << part;
  if (!found_->isHidden()) parts << found_->text();
  return parts.join(QStringLiteral(" | "));
}

void StatusStrip::paintEvent(QPaintEvent* event) {
  QWidget::paintEvent(event);
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  const theme::Colours& colours = holder_.theme().colours;
  const QPointF at(20, height() / 2.0);
  if (mark_ == Mark::kTick) theme::drawIcon(painter, theme::Icon::kTick, at, colours.ok);
  if (mark_ == Mark::kTriangle) theme::drawIcon(painter, theme::Icon::kWarning, at, colours.under);
  painter.setFont(holder_.theme().font(theme::Text::kLabel));
  const QFontMetricsF metrics(painter.font());
  double x = 36;
  for (const QString& part : {solved_, residual_, checked_}) {
    if (part.isEmpty()) continue;
    if (x > 36) {
      painter.setPen(QPen(colours.hairline, 1));
      painter.drawLine(QPointF(x - 14, 7), QPointF(x - 14, height() - 7));
    }
    const double room = (found_->isHidden() ? width() : found_->x()) - x - 8;
    const QString words = metrics.elidedText(part, Qt::ElideRight, room);
    painter.setPen(colours.ink2);
    painter.drawText(QRectF(x, 0, room, height()), Qt::AlignVCenter, words);
    x += metrics.horizontalAdvance(words) + 28;
  }
}

void StatusStrip::put(QString& part, const QString& words) {
  if (part == words) return;
  part = words;
  setAccessibleName(text());
  update();
}

}  // namespace ebbline::shell
