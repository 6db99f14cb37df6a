// Mouse, wheel, touchpad and keys of LoopCanvas, and its hover card.

#include <QKeyEvent>
#include <QNativeGestureEvent>
#include <QPainter>
#include <QWheelEvent>
#include <algorithm>
#include <cmath>

#include "ui/canvas/canvas_cache.h"
#include "ui/canvas/facts.h"

namespace ebbline::canvas {
namespace {

constexpr double kKeyStep = 48;     // px an arrow key pans
constexpr double kZoomStep = 1.25;  // factor of + and −
constexpr double kDragStart = 4;    // px before a press becomes a pan

}  // namespace

bool LoopCanvas::event(QEvent* event) {
  if (event->type() == QEvent::NativeGesture) {
    const auto* gesture = static_cast<QNativeGestureEvent*>(event);
    if (gesture->gestureType() == Qt::ZoomNativeGesture) {
      zoomBy(1 + gesture->value(), gesture->position());
      return true;
    }
  }
  return QWidget::event(event);
}

void LoopCanvas::resizeEvent(QResizeEvent* event) {
  QWidget::resizeEvent(event);
  if (fitted_) fit();
}

void LoopCanvas::showEvent(QShowEvent* event) {
  QWidget::showEvent(event);
  if (fitted_) fit();
}

void LoopCanvas::mousePressEvent(QMouseEvent* event) {
  keyboardFocus_ = false;
  const bool pan = event->button() == Qt::MiddleButton || (event->button() == Qt::LeftButton && spaceHeld_);
  if (pan) {
    dragFrom_ = event->position();
    dragging_ = true;
    setCursor(Qt::ClosedHandCursor);
    return;
  }
  if (event->button() != Qt::LeftButton) return;
  const loop::Id id = hit(event->position());
  choose(id);
  if (id == 0) dragFrom_ = event->position();  // the ground can be dragged
  hovered_ = 0;
  update();
}

void LoopCanvas::mouseMoveEvent(QMouseEvent* event) {
  if (!dragFrom_) {
    hover(event->position());
    return;
  }
  const QPointF step = event->position() - *dragFrom_;
  if (!dragging_ && std::hypot(step.x(), step.y()) < kDragStart) return;
  dragging_ = true;
  hovered_ = 0;
  setCursor(Qt::ClosedHandCursor);
  panBy(step);
  *dragFrom_ += QPointF(std::round(step.x()), std::round(step.y()));
}

void LoopCanvas::mouseReleaseEvent(QMouseEvent*) {
  dragFrom_.reset();
  dragging_ = false;
  setCursor(spaceHeld_ ? Qt::OpenHandCursor : Qt::ArrowCursor);
}

void LoopCanvas::mouseDoubleClickEvent(QMouseEvent* event) {
  if (event->button() != Qt::LeftButton) return;
  if (const loop::Id id = hit(event->position()))
    emit activated(id);
  else
    fit();
}

void LoopCanvas::wheelEvent(QWheelEvent* event) {
  event->accept();
  // A touchpad tells px and scrolls the sheet; a wheel (or a touchpad with Ctrl) zooms where the pointer is.
  const bool touchpad = !event->pixelDelta().isNull() && !(event->modifiers() & Qt::ControlModifier);
  if (touchpad)
    panBy(event->pixelDelta());
  else if (event->modifiers() & Qt::ShiftModifier)
    panBy({event->angleDelta().y() / 120.0 * kKeyStep, 0});
  else
    zoomBy(std::pow(1.0015, event->angleDelta().y()), event->position());
  hovered_ = 0;
}

void LoopCanvas::keyPressEvent(QKeyEvent* event) {
  keyboardFocus_ = true;
  const QPointF middle = QRectF(rect()).center();
  switch (event->key()) {
    case Qt::Key_Plus:
    case Qt::Key_Equal:
      zoomBy(kZoomStep, middle);
      return;
    case Qt::Key_Minus:
      zoomBy(1 / kZoomStep, middle);
      return;
    case Qt::Key_0:
    case Qt::Key_Home:
      fit();
      return;
    case Qt::Key_Left:
      panBy({kKeyStep, 0});
      return;
    case Qt::Key_Right:
      panBy({-kKeyStep, 0});
      return;
    case Qt::Key_Up:
      panBy({0, kKeyStep});
      return;
    case Qt::Key_Down:
      panBy({0, -kKeyStep});
      return;
    case Qt::Key_Escape:
      choose(0);
      return;
    case Qt::Key_Return:
    case Qt::Key_Enter:
      if (selected_ != 0) emit activated(selected_);
      return;
    case Qt::Key_Space:
      if (!event->isAutoRepeat()) {
        spaceHeld_ = true;
        setCursor(Qt::OpenHandCursor);
      }
      return;
    default:
      QWidget::keyPressEvent(event);
  }
}

void LoopCanvas::keyReleaseEvent(QKeyEvent* event) {
  if (event->key() != Qt::Key_Space || event->isAutoRepeat()) {
    QWidget::keyReleaseEvent(event);
    return;
  }
  spaceHeld_ = false;
  unsetCursor();
}

void LoopCanvas::leaveEvent(QEvent*) {
  hovered_ = 0;
  update();
}

void LoopCanvas::focusInEvent(QFocusEvent* event) {
  keyboardFocus_ = event->reason() == Qt::TabFocusReason || event->reason() == Qt::BacktabFocusReason;
  QWidget::focusInEvent(event);
  update();
}

void LoopCanvas::focusOutEvent(QFocusEvent* event) {
  spaceHeld_ = false;
  QWidget::focusOutEvent(event);
  update();
}

// Tab walks the terminals in their order and leaves the drawing after the last, Shift+Tab before the first.
bool LoopCanvas::focusNextPrevChild(bool next) {
  const auto& terminals = loop_.terminals;
  if (!hasFocus() || terminals.empty()) return QWidget::focusNextPrevChild(next);
  const auto found =
      std::find_if(terminals.begin(), terminals.end(), [this](const loop::Terminal& t) { return t.id == selected_; });
  const auto size = static_cast<std::ptrdiff_t>(terminals.size());
  std::ptrdiff_t index = found - terminals.begin();
  if (found == terminals.end()) index = next ? -1 : size;
  index += next ? 1 : -1;
  if (index < 0 || index >= size) return QWidget::focusNextPrevChild(next);
  keyboardFocus_ = true;
  choose(terminals[static_cast<size_t>(index)].id);
  reveal(selected_);
  return true;
}

// Brings what was chosen by key into sight, without moving more than needed.
void LoopCanvas::reveal(loop::Id id) {
  ensureCache();
  for (const Mark& mark : cache_->geometry.marks) {
    if (mark.id != id) continue;
    const QRectF box = mark.box.translated(origin_), room = QRectF(rect()).adjusted(40, 40, -40, -60);
    QPointF step;
    if (box.left() < room.left()) step.setX(room.left() - box.left());
    if (box.right() > room.right()) step.setX(room.right() - box.right());
    if (box.top() < room.top()) step.setY(room.top() - box.top());
    if (box.bottom() > room.bottom()) step.setY(room.bottom() - box.bottom());
    if (!step.isNull()) panBy(step);
    return;
  }
}

void LoopCanvas::hover(QPointF place) {
  const loop::Id id = hit(place);
  const bool changed = id != hovered_;
  hovered_ = id;
  hoverPlace_ = place;
  if (changed || id != 0) update();
}

// Up to four lines beside the pointer; never over it, never outside the drawing.
void LoopCanvas::paintCard(QPainter& painter) {
  if (hovered_ == 0 || dragging_) return;
  const LoopPicture picture{&loop_, results_ ? &*results_ : nullptr, units_, colourBy_, selected_};
  const Facts facts = factsOf(hovered_, *cache_->topology, picture);
  if (facts.title.isEmpty()) return;
  const theme::Theme& theme = holder_.theme();
  const QFont strong = theme.font(theme::Text::kLabel, 600), plain = theme.font(theme::Text::kLabel);
  const QFontMetricsF bold(strong), metrics(plain);
  const double line = theme.style(theme::Text::kLabel).line * theme.textFactor, pad = 10;
  double width = bold.horizontalAdvance(facts.title);
  for (const Fact& fact : facts.lines)
    width = std::max(width, metrics.horizontalAdvance(fact.name) + 24 + bold.horizontalAdvance(fact.value));
  QRectF card(0, 0, std::ceil(width) + 2 * pad, line * static_cast<double>(facts.lines.size() + 1) + 2 * pad - 4);
  card.moveTopLeft(hoverPlace_ + QPointF(18, 18));
  if (card.right() > this->width() - 8) card.moveRight(hoverPlace_.x() - 18);
  if (card.bottom() > height() - 8) card.moveBottom(hoverPlace_.y() - 18);
  card.moveLeft(std::max(4.0, card.left()));
  card.moveTop(std::max(4.0, card.top()));
  card.moveTopLeft(QPointF(std::round(card.left()) + 0.5, std::round(card.top()) + 0.5));
  painter.setRenderHint(QPainter::Antialiasing);
  painter.setPen(QPen(theme.colours.rule, 1));
  painter.setBrush(theme.colours.card);
  painter.drawRoundedRect(card, theme.radius.card, theme.radius.card);
  double baseline = card.top() + pad + bold.ascent() - 1;
  painter.setFont(strong);
  painter.setPen(theme.colours.ink1);
  painter.drawText(QPointF(card.left() + pad, baseline), facts.title);
  for (const Fact& fact : facts.lines) {
    baseline += line;
    painter.setFont(plain);
    painter.setPen(theme.colours.ink2);
    painter.drawText(QPointF(card.left() + pad, baseline), fact.name);
    painter.setFont(strong);
    painter.setPen(fact.under ? theme.colours.under : theme.colours.ink1);
    painter.drawText(QPointF(card.right() - pad - bold.horizontalAdvance(fact.value), baseline), fact.value);
  }
}

}  // namespace ebbline::canvas
