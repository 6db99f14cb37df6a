#include "ui/theme/controls.h"

#include <QKeyEvent>
#include <QMouseEvent>
#include <QPainter>

namespace ebbline::theme {
namespace {

void drawFocusRing(QPainter& painter, const QRectF& box, const Theme& theme) {
  painter.setPen(QPen(theme.colours.focus, 2));
  painter.setBrush(Qt::NoBrush);
  painter.drawRoundedRect(box, theme.radius.button, theme.radius.button);
}

constexpr int kRing = 3;  // room for the focus ring round a control
constexpr int kGap = 28;  // between two text tabs
constexpr int kUnderline = 3;

}  // namespace

SegmentedSwitch::SegmentedSwitch(const QStringList& words, const ThemeHolder& holder, QWidget* parent)
    : QWidget(parent), words_(words), holder_(holder) {
  setFocusPolicy(Qt::StrongFocus);
  setSizePolicy(QSizePolicy::Fixed, QSizePolicy::Fixed);
  connect(&holder, &ThemeHolder::changed, this, [this] {
    updateGeometry();
    update();
  });
}

void SegmentedSwitch::setChosen(int index) {
  if (index < 0 || index >= words_.size() || index == chosen_) return;
  chosen_ = index;
  update();
  emit chosenChanged(index);
}

QSize SegmentedSwitch::sizeHint() const {
  int widest = 29;
  const QFontMetrics metrics(holder_.theme().font(Text::kLabel, 600));
  for (const QString& word : words_) widest = std::max(widest, metrics.horizontalAdvance(word) + 16);
  return {widest * static_cast<int>(words_.size()) + 2 + 2 * kRing, 22 + 2 * kRing};
}

QRect SegmentedSwitch::cell(int index) const {
  const QRect frame = rect().adjusted(kRing + 1, kRing + 1, -kRing - 1, -kRing - 1);
  const int each = frame.width() / static_cast<int>(words_.size());
  return {frame.left() + index * each, frame.top(), each, frame.height()};
}

void SegmentedSwitch::paintEvent(QPaintEvent*) {
  const Theme& theme = holder_.theme();
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  const QRectF frame = QRectF(rect()).adjusted(kRing + .5, kRing + .5, -kRing - .5, -kRing - .5);
  painter.setPen(QPen(theme.colours.rule, 1));
  painter.setBrush(theme.colours.field);
  painter.drawRoundedRect(frame, theme.radius.button, theme.radius.button);
  for (int i = 0; i < words_.size(); ++i) {
    const bool chosen = i == chosen_;
    if (chosen) {
      painter.setPen(Qt::NoPen);
      painter.setBrush(theme.colours.accentWash);
      painter.drawRoundedRect(cell(i), theme.radius.field, theme.radius.field);
    }
    painter.setFont(theme.font(Text::kLabel, chosen ? 600 : 400));
    painter.setPen(chosen ? theme.colours.accent : theme.colours.ink2);
    painter.drawText(cell(i), Qt::AlignCenter, words_[i]);
  }
  if (hasFocus()) drawFocusRing(painter, QRectF(rect()).adjusted(1, 1, -1, -1), theme);
}

void SegmentedSwitch::mousePressEvent(QMouseEvent* event) {
  for (int i = 0; i < words_.size(); ++i)
    if (cell(i).adjusted(0, -kRing, 0, kRing).contains(event->pos())) setChosen(i);
}

void SegmentedSwitch::keyPressEvent(QKeyEvent* event) {
  if (event->key() == Qt::Key_Right || event->key() == Qt::Key_Down)
    setChosen(std::min(chosen_ + 1, static_cast<int>(words_.size()) - 1));
  else if (event->key() == Qt::Key_Left || event->key() == Qt::Key_Up)
    setChosen(std::max(chosen_ - 1, 0));
  else if (event->key() == Qt::Key_Space)
    setChosen((chosen_ + 1) % static_cast<int>(words_.size()));
  else
    QWidget::keyPressEvent(event);
}

void SegmentedSwitch::focusInEvent(QFocusEvent* event) {
  update();
  QWidget::focusInEvent(event);
}

TextTabs::TextTabs(const ThemeHolder& holder, QWidget* parent) : QTabBar(parent), holder_(holder) {
  setDrawBase(false);
  setExpanding(false);
  setFocusPolicy(Qt::StrongFocus);
  setMouseTracking(true);
  setAttribute(Qt::WA_Hover);
  connect(&holder, &ThemeHolder::changed, this, [this] {
    // The sizes follow the font of the theme; setting the font makes the bar lay itself out again.
    setFont(holder_.theme().font(Text::kBody));
    updateGeometry();
    update();
  });
}

QSize TextTabs::tabSizeHint(int index) const {
  const QFontMetrics metrics(holder_.theme().font(Text::kBody, 600));
  return {metrics.horizontalAdvance(tabText(index)) + kGap, holder_.theme().space.toolbar};
}

void TextTabs::paintEvent(QPaintEvent*) {
  const Theme& theme = holder_.theme();
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  for (int i = 0; i < count(); ++i) {
    const bool chosen = i == currentIndex();
    const bool hovered = tabRect(i).contains(mapFromGlobal(QCursor::pos())) && underMouse();
    const QFont font = theme.font(Text::kBody, chosen ? 600 : 400);
    const QRect box = tabRect(i);
    const int width = QFontMetrics(font).horizontalAdvance(tabText(i));
    const QRect word(box.left() + kGap / 2, box.top(), width, box.height());
    painter.setFont(font);
    painter.setPen(!isTabEnabled(i) ? theme.colours.ink4 : chosen || hovered ? theme.colours.ink1 : theme.colours.ink2);
    painter.drawText(word, Qt::AlignVCenter | Qt::AlignLeft | Qt::TextDontClip, tabText(i));
    if (chosen)
      painter.fillRect(QRect(word.left(), box.bottom() + 1 - kUnderline, width, kUnderline), theme.colours.accent);
    if (chosen && hasFocus()) drawFocusRing(painter, QRectF(word).adjusted(-7, 6, 7, -6), theme);
  }
}

IconButton::IconButton(Icon icon, const QString& words, const ThemeHolder& holder, QWidget* parent)
    : QAbstractButton(parent), icon_(icon), holder_(holder) {
  setText(words);
  setToolTip(words);
  setAccessibleName(words);
  setFocusPolicy(Qt::TabFocus);
  setAttribute(Qt::WA_Hover);
  setSizePolicy(QSizePolicy::Fixed, QSizePolicy::Fixed);
  connect(&holder, &ThemeHolder::changed, this, qOverload<>(&QWidget::update));
}

void IconButton::setGlyph(Icon icon) {
  icon_ = icon;
  update();
}

void IconButton::paintEvent(QPaintEvent*) {
  const Theme& theme = holder_.theme();
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  const QRectF box = QRectF(rect()).adjusted(2, 2, -2, -2);
  if (isEnabled() && (underMouse() || isChecked() || isDown())) {
    painter.setPen(Qt::NoPen);
    painter.setBrush(isChecked() ? theme.colours.accentWash : theme.colours.hairline);
    painter.drawRoundedRect(box, theme.radius.button, theme.radius.button);
  }
  const QColor ink = !isEnabled() ? theme.colours.ink4 : isChecked() ? theme.colours.accent : theme.colours.ink2;
  drawIcon(painter, icon_, QRectF(rect()).center(), ink);
  if (hasFocus()) drawFocusRing(painter, QRectF(rect()).adjusted(1, 1, -1, -1), theme);
}

}  // namespace ebbline::theme
