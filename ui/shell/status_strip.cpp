#include "ui/shell/status_strip.h"

#include <QHBoxLayout>
#include <QPainter>

namespace ebbline::shell {

namespace {

// Limits of the accuracy table: beyond them the tick becomes a triangle with words.
constexpr double kMostResidual = 1e-9;
constexpr double kMostDifference = 1e-6;

QLabel* quietLabel() {
  auto* label = new QLabel;
  label->setProperty("look", "quiet");
  return label;
}

}  // namespace

StatusStrip::StatusStrip(page::PartLoadModel& model, const theme::ThemeHolder& holder, QWidget* parent)
    : QWidget(parent), model_(model), holder_(holder) {
  setProperty("look", "strip");
  setAttribute(Qt::WA_StyledBackground);
  setFixedHeight(holder.theme().space.status);
  solved_ = quietLabel();
  residual_ = quietLabel();
  checked_ = quietLabel();
  found_ = new QPushButton;
  found_->setProperty("look", "finding");
  found_->setFlat(true);
  found_->setCursor(Qt::PointingHandCursor);
  found_->hide();
  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(36, 0, 16, 0);
  row->setSpacing(28);
  row->addWidget(solved_);
  row->addWidget(residual_);
  row->addWidget(checked_);
  row->addStretch(1);
  row->addWidget(found_);
  connect(found_, &QPushButton::clicked, this, [this] { emit showUnderSupplied(worst_); });
  connect(&model_, &page::PartLoadModel::pictureChanged, this, &StatusStrip::refresh);
  connect(&model_, &page::PartLoadModel::networkChanged, this, &StatusStrip::refresh);
  connect(&model_, &page::PartLoadModel::checkedChanged, this, &StatusStrip::showChecked);
  connect(&holder_, &theme::ThemeHolder::changed, this, [this] {
    found_->setIcon(theme::icon(theme::Icon::kChevronRight, holder_.theme()));
    update();
  });
  found_->setIcon(theme::icon(theme::Icon::kChevronRight, holder_.theme()));
  found_->setLayoutDirection(Qt::RightToLeft);
  refresh();
}

void StatusStrip::refresh() {
  const network::PartLoadPicture* picture = model_.picture();
  residual_->clear();
  found_->hide();
  worst_ = 0;
  mark_ = Mark::kNone;
  if (!picture) {
    solved_->setText(model_.faults().empty() ? tr("no loop open") : tr("not solved: the loop has faults"));
    mark_ = model_.faults().empty() ? Mark::kNone : Mark::kTriangle;
  } else if (!picture->summary.usable()) {
    solved_->setText(tr("not solved: %1").arg(QString::fromStdString(picture->summary.why)));
    mark_ = Mark::kTriangle;
  } else {
    solved_->setText(tr("solved %1 ms").arg(theme::numberText(picture->solve_ms, picture->solve_ms < 10 ? 1 : 0)));
    const network::Summary& summary = picture->summary;
    const bool good = summary.flow_residual <= kMostResidual && summary.pressure_residual <= kMostResidual;
    residual_->setText(good ? tr("flow residual %1").arg(theme::residualText(summary.flow_residual))
                            : tr("flow residual %1, pressure residual %2: beyond 1e-9, do not use")
                                  .arg(theme::residualText(summary.flow_residual),
                                       theme::residualText(summary.pressure_residual)));
    mark_ = good ? Mark::kTick : Mark::kTriangle;
    if (picture->under_supplied > 0) {
      const auto first = static_cast<std::size_t>(picture->first_under_supplied);
      worst_ = picture->results.terminals[first].id;
      found_->setText(picture->under_supplied == 1 ? tr("1 terminal under-supplied")
                                                   : tr("%1 terminals under-supplied").arg(picture->under_supplied));
      found_->setToolTip(tr("Choose the one with the largest shortfall"));
      found_->show();
    }
  }
  showChecked();
}

void StatusStrip::showChecked() {
  const page::Checked& checked = model_.checked();
  checked_->setProperty("look", "quiet");
  switch (checked.kind) {
    case page::Checked::Kind::kNot: checked_->clear(); break;
    case page::Checked::Kind::kRunning: checked_->setText(tr("second method is running")); break;
    case page::Checked::Kind::kDone: {
      const QString at = checked.at.toString(QStringLiteral("HH:mm"));
      if (!checked.opinion.second.usable()) {
        checked_->setText(tr("second method gave no answer: %1")
                              .arg(QString::fromStdString(checked.opinion.second.why)));
        break;
      }
      const double difference = checked.opinion.difference.relative;
      const bool agrees = difference <= kMostDifference;
      if (!agrees) mark_ = Mark::kTriangle;
      const QString words = agrees ? tr("second method agrees %1 (%2)") : tr("second method differs by %1 (%2)");
      checked_->setText(words.arg(theme::residualText(difference), at));
    }
  }
  update();
}

void StatusStrip::say(const QString& words) {
  checked_->setText(words);
  update();
}

QString StatusStrip::text() const {
  QStringList parts;
  for (const QLabel* label : {solved_, residual_, checked_})
    if (!label->text().isEmpty()) parts << label->text();
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
  painter.setPen(QPen(colours.hairline, 1));
  for (const QLabel* label : {residual_, checked_})
    if (!label->text().isEmpty()) painter.drawLine(label->x() - 14, 7, label->x() - 14, height() - 7);
}

}  // namespace ebbline::shell
