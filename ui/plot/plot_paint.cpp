#include <algorithm>
#include <cmath>

#include <QChart>
#include <QPainter>
#include <QPainterPath>

#include "ui/plot/plot.h"
#include "ui/plot/ticks.h"

namespace ebbline::plot {

using theme::Text;

namespace {

constexpr double kStaleCover = 0.45;  // the plot shows at 55 %

/// Keeps boxes of labels apart.
class Room {
 public:
  bool isFree(const QRectF& box) const {
    return std::none_of(taken_.begin(), taken_.end(), [&](const QRectF& one) { return one.intersects(box); });
  }
  void take(const QRectF& box) { taken_.push_back(box); }

 private:
  std::vector<QRectF> taken_;
};

struct Place {
  QPointF anchor;    // on the line
  QPointF baseline;  // of the text's left end
};

}  // namespace

void Plot::drawBackground(QPainter* painter, const QRectF& rect) {
  painter->fillRect(rect, look().colours.panel);
  const QRectF area = chart()->plotArea();
  painter->fillRect(area, look().colours.sheet);
  // The grid is painted with the ticks' own rule: the chart's grid may lag behind a new size.
  painter->setPen(QPen(look().colours.grid, look().stroke.grid));
  for (const double tick : ticksWithin(shownX_.low, shownX_.high, tickStep(shownX_.high - shownX_.low))) {
    const double x = std::round(toPixels({tick, 0}).x()) + 0.5;
    painter->drawLine(QPointF(x, area.top()), QPointF(x, area.bottom()));
  }
  for (const double tick : ticksWithin(shownY_.low, shownY_.high, tickStep(shownY_.high - shownY_.low))) {
    const double y = std::round(toPixels({0, tick}).y()) + 0.5;
    painter->drawLine(QPointF(area.left(), y), QPointF(area.right(), y));
  }
}

void Plot::drawForeground(QPainter* painter, const QRectF&) {
  painter->setRenderHint(QPainter::Antialiasing);
  paintTitles(*painter);
  paintAxes(*painter);
  if (state_ == PlotState::kEmpty || state_ == PlotState::kWithheld) return paintWords(*painter);
  paintTrail(*painter);
  paintTags(*painter);
  paintMarks(*painter);
  paintLabels(*painter);
  if (state_ == PlotState::kStale) {
    QColor cover = look().colours.panel;
    cover.setAlphaF(static_cast<float>(kStaleCover));
    painter->fillRect(QRectF(viewport()->rect()), cover);
  }
  paintCrosshair(*painter);
  paintCard(*painter);
}

void Plot::paintEvent(QPaintEvent* event) {
  QChartView::paintEvent(event);
  if (hasFocus()) {
    QPainter painter(viewport());
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setPen(QPen(look().colours.focus, 2));
    painter.drawRoundedRect(QRectF(viewport()->rect()).adjusted(1, 1, -1, -1), 3, 3);
  }
  emit painted();
}

void Plot::paintTitles(QPainter& painter) const {
  const double f = look().textFactor;
  painter.setPen(look().colours.ink1);
  painter.setFont(look().font(Text::kTitle));
  painter.drawText(QPointF(0, 17 * f), title_);
  painter.setPen(look().colours.ink2);
  painter.setFont(look().font(Text::kLabel));
  const QString second = QFontMetricsF(painter.font()).elidedText(second_, Qt::ElideRight, viewport()->width() - 4);
  painter.drawText(QPointF(0, 36 * f), second);
}

void Plot::paintAxes(QPainter& painter) const {
  const QRectF area = chart()->plotArea();
  const QFont font = look().font(Text::kLabel);
  const QFontMetricsF metrics(font);
  const double middle = metrics.capHeight() / 2;
  painter.setFont(font);
  painter.setPen(QPen(look().colours.rule, look().stroke.axis));
  painter.drawLine(area.bottomLeft(), area.bottomRight());
  for (const double tick : ticksWithin(shownX_.low, shownX_.high, tickStep(shownX_.high - shownX_.low)))
    painter.drawLine(QPointF(toPixels({tick, 0}).x(), area.bottom()),
                     QPointF(toPixels({tick, 0}).x(), area.bottom() + 4));
  painter.setPen(look().colours.ink2);
  const auto [tagX, tagY] = tagBoxes();
  const double stepX = tickStep(shownX_.high - shownX_.low);
  for (const double tick : ticksWithin(shownX_.low, shownX_.high, stepX)) {
    const QString text = theme::numberText(tick, decimalsOf(stepX));
    const double x = toPixels({tick, 0}).x();
    const double wide = metrics.horizontalAdvance(text);
    const QRectF box(x - wide / 2, area.bottom() + 7, wide, metrics.height());
    if (!box.intersects(tagX)) painter.drawText(QPointF(box.left(), box.top() + metrics.ascent()), text);
  }
  const double stepY = tickStep(shownY_.high - shownY_.low);
  for (const double tick : ticksWithin(shownY_.low, shownY_.high, stepY)) {
    const QString text = theme::numberText(tick, decimalsOf(stepY));
    const double y = toPixels({0, tick}).y();
    const double wide = metrics.horizontalAdvance(text);
    const QRectF box(area.left() - 8 - wide, y - middle, wide, 2 * middle);
    if (!box.intersects(tagY)) painter.drawText(box.bottomLeft(), text);
  }
  const QFont note = look().font(Text::kNote);
  const QFontMetricsF small(note);
  painter.setFont(note);
  painter.drawText(QPointF(area.left() - 30 * look().textFactor, area.top() - 10), y_.title);
  painter.drawText(QPointF(area.right() - small.horizontalAdvance(x_.title), area.bottom() + 36 * look().textFactor),
                   x_.title);
}

void Plot::paintTrail(QPainter& painter) const {
  const auto count = static_cast<double>(trail_.size());
  painter.save();
  painter.setClipRect(chart()->plotArea());
  painter.setPen(Qt::NoPen);
  for (std::size_t i = 0; i + 1 < trail_.size(); ++i) {
    QColor ink = look().colours.ink2;
    ink.setAlphaF(static_cast<float>(0.65 * (static_cast<double>(i) + 1) / count));
    painter.setBrush(ink);
    painter.drawEllipse(toPixels(trail_[i]), 2, 2);
  }
  painter.restore();
}

std::pair<QRectF, QRectF> Plot::tagBoxes() const {
  const bool drawn = state_ == PlotState::kIdle || state_ == PlotState::kStale;
  const QRectF area = chart()->plotArea();
  if (!tags_ || !drawn || !area.contains(toPixels(*tags_))) return {};
  const QPointF at = toPixels(*tags_);
  const QFontMetricsF metrics(look().font(Text::kLabel, 600));
  const double high = 18 * look().textFactor;
  const double wideX = metrics.horizontalAdvance(theme::roundedText(tags_->x(), 3)) + 12;
  const double wideY = metrics.horizontalAdvance(theme::roundedText(tags_->y(), 3)) + 12;
  return {QRectF(at.x() - wideX / 2, area.bottom() + 4, wideX, high),
          QRectF(area.left() - 4 - wideY, at.y() - high / 2, wideY, high)};
}

void Plot::paintTags(QPainter& painter) const {
  const auto [boxX, boxY] = tagBoxes();
  if (boxX.isNull()) return;
  const theme::Colours& colours = look().colours;
  const QRectF area = chart()->plotArea();
  const QPointF at = toPixels(*tags_);
  painter.setPen(theme::dashedPen(colours.ink1, 1.25, {1.5, 3}));
  painter.drawLine(QPointF(area.left(), at.y()), at);
  painter.drawLine(at, QPointF(at.x(), area.bottom()));
  painter.setFont(look().font(Text::kLabel, 600));
  const auto tag = [&](const QRectF& box, double value) {
    painter.setPen(Qt::NoPen);
    painter.setBrush(colours.ink1);
    painter.drawRoundedRect(box, 2, 2);
    painter.setPen(colours.sheet);
    painter.drawText(box, Qt::AlignCenter, theme::roundedText(value, 3));
  };
  tag(boxX, tags_->x());
  tag(boxY, tags_->y());
}

void Plot::paintMarks(QPainter& painter) const {
  const theme::Colours& colours = look().colours;
  for (const Mark& mark : marks_) {
    const QPointF at = toPixels(mark.at);
    if (!chart()->plotArea().adjusted(-4, -4, 4, 4).contains(at)) continue;
    if (mark.shape == Mark::Shape::kSeries) {
      theme::drawMarker(painter, mark.marker, at, mark.ink, colours.sheet);
      continue;
    }
    const bool operating = mark.shape == Mark::Shape::kOperating;
    painter.setPen(QPen(colours.ink1, operating ? 2 : 1.5));
    painter.setBrush(colours.sheet);
    painter.drawEllipse(at, operating ? 7 : 4.5, operating ? 7 : 4.5);
    if (!operating) continue;
    painter.setPen(Qt::NoPen);
    painter.setBrush(mark.ink);
    painter.drawEllipse(at, 2.5, 2.5);
  }
}

namespace {

/// Last point of the line that lies within the plot, in pixels.
std::optional<QPointF> lastWithin(const std::vector<QPointF>& pixels, const QRectF& area) {
  for (auto one = pixels.rbegin(); one != pixels.rend(); ++one)
    if (area.adjusted(-1, -1, 1, 1).contains(*one)) return *one;
  return {};
}

std::vector<Place> placesFor(LabelAt at, const std::vector<QPointF>& pixels, const QRectF& area, QSizeF text,
                             double middle) {
  std::vector<Place> places;
  const auto last = lastWithin(pixels, area);
  if (!last) return places;
  const double w = text.width();
  if (at == LabelAt::kRightEnd) {
    for (const double lift : {0.0, -14.0, 14.0}) places.push_back({*last, *last + QPointF(6, middle + lift)});
  } else if (at == LabelAt::kUpperEnd) {
    places = {{*last, *last + QPointF(6, middle)},
              {*last, *last + QPointF(-w / 2, -5)},
              {*last, *last + QPointF(-w - 6, middle)},
              {*last, *last + QPointF(8, middle + 18)}};
  } else if (at == LabelAt::kStart) {
    const QPointF first = pixels.front();
    for (const double lift : {-5.0, 2 * middle + 6, -19.0, 2 * middle + 20})
      places.push_back({first, first + QPointF(8, lift)});
  } else if (at == LabelAt::kMiddle) {
    for (const double share : {0.5, 0.35, 0.65, 0.22, 0.8}) {
      const QPointF on = pixels[static_cast<std::size_t>(share * static_cast<double>(pixels.size() - 1))];
      places.push_back({on, on + QPointF(-w / 2, -6)});
      places.push_back({on, on + QPointF(-w / 2, 2 * middle + 7)});
    }
  }
  return places;
}

}  // namespace

void Plot::paintLabels(QPainter& painter) const {
  const QRectF area = chart()->plotArea();
  Room room;
  for (const Mark& mark : marks_) {
    const double r = mark.shape == Mark::Shape::kOperating ? 10 : 6;
    room.take(QRectF(toPixels(mark.at) - QPointF(r, r), QSizeF(2 * r, 2 * r)));
  }
  std::vector<const Line*> order;
  for (const Line& line : lines_)
    if (!line.label.isEmpty() && line.points.size() > 1) order.push_back(&line);
  std::stable_sort(order.begin(), order.end(), [](auto* a, auto* b) { return a->importance > b->importance; });
  const QRectF bounds = QRectF(viewport()->rect()).adjusted(0, area.top() - 16, 0, 0);
  for (const Line* line : order) {
    const QFont font = look().font(Text::kNote, line->labelWeight);
    const QFontMetricsF metrics(font);
    const QSizeF size(metrics.horizontalAdvance(line->label), metrics.height());
    std::vector<QPointF> pixels;
    for (const QPointF& point : line->points) pixels.push_back(toPixels(point));
    for (const Place& place : placesFor(line->at, pixels, area, size, metrics.capHeight() / 2)) {
      const QRectF box(place.baseline - QPointF(2, metrics.ascent() - 1), size + QSizeF(4, -2));
      if (!room.isFree(box) || box.right() > viewport()->width() || box.left() < area.left() - 2 ||
          box.top() < bounds.top() || box.bottom() > area.bottom() + 8)
        continue;
      paintHalo(painter, place.baseline, *line,
                area.contains(box.center()) ? look().colours.sheet : look().colours.panel);
      room.take(box);
      break;
    }
  }
}

void Plot::paintHalo(QPainter& painter, QPointF baseline, const Line& line, const QColor& ground) const {
  const QFont font = look().font(Text::kNote, line.labelWeight);
  const int type = painter.device()->devType();
  if (type != QInternal::Widget && type != QInternal::Pixmap && type != QInternal::Image)
    return theme::drawHaloText(painter, baseline, line.label, font, line.labelInk, ground);
  // Outlining and stroking the letters afresh for each frame took a third of the plot's painting.
  constexpr int kMost = 200;
  constexpr double kMargin = 3;
  const double ratio = painter.device()->devicePixelRatioF() * std::max(1.0, painter.transform().m11());
  const QString key = line.label + QChar(0x1f) + line.labelInk.name() + ground.name() + QString::number(font.weight()) +
                      '/' + QString::number(font.pixelSize()) + '/' + QString::number(ratio);
  const QFontMetricsF metrics(font);
  const QPointF offset(kMargin, kMargin + std::ceil(metrics.ascent()));
  if (halos_.size() > kMost) halos_.clear();
  QPixmap& kept = halos_[key];
  if (kept.isNull()) {
    const QSizeF size(metrics.horizontalAdvance(line.label) + 2 * kMargin, metrics.height() + 2 * kMargin + 1);
    kept = QPixmap((size * ratio).toSize() + QSize(1, 1));
    kept.setDevicePixelRatio(ratio);
    kept.fill(Qt::transparent);
    QPainter once(&kept);
    theme::drawHaloText(once, offset, line.label, font, line.labelInk, ground);
  }
  const QPointF corner = baseline - offset;
  painter.drawPixmap(QPointF(std::round(corner.x()), std::round(corner.y())), kept);
}

void Plot::paintWords(QPainter& painter) const {
  const QRectF area = chart()->plotArea();
  const bool reason = state_ == PlotState::kWithheld;
  painter.setFont(look().font(Text::kBody));
  painter.setPen(reason ? look().colours.under : look().colours.ink2);
  painter.drawText(area.adjusted(24, 24, -24, -24), Qt::AlignCenter | Qt::TextWordWrap, words_);
}

void Plot::paintCrosshair(QPainter& painter) const {
  if (!crosshair_ || !pointer_) return;
  const QRectF area = chart()->plotArea();
  painter.setPen(QPen(look().colours.ink3, 1, Qt::DotLine));
  painter.drawLine(QPointF(pointer_->x(), area.top()), QPointF(pointer_->x(), area.bottom()));
  painter.drawLine(QPointF(area.left(), pointer_->y()), QPointF(area.right(), pointer_->y()));
}

std::vector<std::pair<QString, QString>> Plot::cardLines(const Hovered& hovered) const {
  const auto split = [](const QString& title) {
    const int comma = static_cast<int>(title.lastIndexOf(QStringLiteral(", ")));
    return comma < 0 ? std::pair(title, QString()) : std::pair(title.left(comma), title.mid(comma + 2));
  };
  const auto [nameX, unitX] = split(x_.title);
  const auto [nameY, unitY] = split(y_.title);
  std::vector<std::pair<QString, QString>> lines{{nameX, theme::roundedText(hovered.at.x(), 3) + ' ' + unitX},
                                                 {nameY, theme::roundedText(hovered.at.y(), 3) + ' ' + unitY}};
  lines.insert(lines.end(), hovered.more.begin(), hovered.more.end());
  return lines;
}

QString Plot::cardText() const {
  if (!hovered_) return {};
  QString text = hovered_->words;
  for (const auto& [name, value] : cardLines(*hovered_)) text += QStringLiteral("; ") + name + ' ' + value;
  return text;
}

void Plot::paintCard(QPainter& painter) const {
  if (!hovered_) return;
  const theme::Colours& colours = look().colours;
  const QPointF at = toPixels(hovered_->at);
  painter.setPen(QPen(colours.ink1, 2));
  painter.setBrush(Qt::NoBrush);
  painter.drawEllipse(at, 4.5, 4.5);
  const auto lines = cardLines(*hovered_);
  const QFont font = look().font(Text::kLabel);
  const QFont bold = look().font(Text::kLabel, 600);
  const QFontMetricsF metrics(bold);
  const double row = 18 * look().textFactor;
  double width = metrics.horizontalAdvance(hovered_->words);
  for (const auto& [name, value] : lines)
    width = std::max(width, metrics.horizontalAdvance(name) + 24 + metrics.horizontalAdvance(value));
  const QSizeF size(width + 20, row * static_cast<double>(lines.size() + 1) + 12);
  QPointF corner = at + QPointF(16, -16 - size.height());
  if (corner.x() + size.width() > viewport()->width() - 2) corner.setX(at.x() - 16 - size.width());
  if (corner.y() < 2) corner.setY(at.y() + 16);
  const QRectF box(corner, size);
  painter.setPen(QPen(colours.rule, 1));
  painter.setBrush(colours.card);
  painter.drawRoundedRect(box, look().radius.card, look().radius.card);
  const auto cell = [&](std::size_t i) {
    return QRectF(box.left() + 10, box.top() + 6 + row * static_cast<double>(i), size.width() - 20, row);
  };
  painter.setPen(colours.ink1);
  painter.setFont(bold);
  painter.drawText(cell(0), Qt::AlignVCenter | Qt::AlignLeft, hovered_->words);
  for (std::size_t i = 0; i < lines.size(); ++i) {
    painter.setFont(font);
    painter.setPen(colours.ink2);
    painter.drawText(cell(i + 1), Qt::AlignVCenter | Qt::AlignLeft, lines[i].first);
    painter.setFont(bold);
    painter.setPen(colours.ink1);
    painter.drawText(cell(i + 1), Qt::AlignVCenter | Qt::AlignRight, lines[i].second);
  }
}

}  // namespace ebbline::plot
