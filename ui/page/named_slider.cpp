#include "ui/page/named_slider.h"

#include <cmath>

#include <QHBoxLayout>
#include <QMouseEvent>
#include <QVBoxLayout>

#include "ui/theme/theme.h"

namespace ebbline::page {

namespace {
constexpr double kHandle = 16;  // px, as the style sheet draws it
}

PercentSlider::PercentSlider(QWidget* parent) : QSlider(Qt::Horizontal, parent) {
  setRange(0, 1000);
  setSingleStep(10);
  setPageStep(100);
  setMinimumWidth(64);
  connect(this, &QSlider::valueChanged, this, [this](int value) { emit moved(value / 10.0); });
}

void PercentSlider::showPercent(double percent) {
  const QSignalBlocker quiet(this);
  if (!isSliderDown()) setValue(static_cast<int>(std::lround(percent * 10)));
}

void PercentSlider::mousePressEvent(QMouseEvent* event) {
  if (event->button() == Qt::LeftButton) {
    const double share = (event->position().x() - kHandle / 2) / (width() - kHandle);
    const int wanted = static_cast<int>(std::lround(1000 * std::clamp(share, 0.0, 1.0)));
    // Within the handle the hand takes hold of it; elsewhere the handle comes to the hand.
    if (std::abs(wanted - value()) * (width() - kHandle) / 1000 > kHandle / 2) setValue(wanted);
  }
  QSlider::mousePressEvent(event);
}

NamedSlider::NamedSlider(const QString& name, bool strong, QWidget* parent) : QWidget(parent) {
  label_ = new QLabel;
  value_ = new QLabel;
  slider_ = new PercentSlider;
  label_->setProperty("look", strong ? "strong" : "quiet");
  value_->setProperty("look", strong ? "strong" : "quiet");
  label_->setMinimumWidth(0);
  label_->setSizePolicy(QSizePolicy::Ignored, QSizePolicy::Preferred);
  label_->setFixedHeight(20);
  value_->ensurePolished();
  // Of one size, so that a new number does not lay the window out again while the slider moves.
  value_->setFixedSize(value_->fontMetrics().horizontalAdvance(QStringLiteral("100 %")) + 2, 20);
  label_->setAlignment(Qt::AlignLeft | Qt::AlignVCenter);
  value_->setAlignment(Qt::AlignRight | Qt::AlignVCenter);
  auto* words = new QHBoxLayout;
  words->setSpacing(2);
  words->addWidget(label_, 1);
  words->addWidget(value_);
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(0);
  column->addLayout(words);
  column->addWidget(slider_);
  setFocusProxy(slider_);
  setName(name);
  showPercent(0);
  connect(slider_, &PercentSlider::moved, this, [this](double percent) {
    value_->setText(theme::numberText(percent, 0) + QStringLiteral(" %"));
    emit moved(percent);
  });
}

void NamedSlider::setName(const QString& name) {
  name_ = name;
  slider_->setAccessibleName(name);
  elide();
}

void NamedSlider::showPercent(double percent) {
  const QString text = theme::numberText(percent, 0) + QStringLiteral(" %");
  if (value_->text() != text) value_->setText(text);
  slider_->showPercent(percent);
}

void NamedSlider::elide() {
  label_->setText(label_->fontMetrics().elidedText(name_, Qt::ElideRight, std::max(8, label_->width())));
  setToolTip(label_->text() == name_ ? QString() : name_);
}

void NamedSlider::resizeEvent(QResizeEvent* event) {
  QWidget::resizeEvent(event);
  if (layout()) layout()->activate();
  elide();
}

}  // namespace ebbline::page
