#include "ui/plot/plot.h"

#include <algorithm>
#include <cmath>

#include <QChart>
#include <QGraphicsLayout>
#include <QKeyEvent>
#include <QLineSeries>
#include <QMouseEvent>
#include <QValueAxis>
#include <QWheelEvent>

#include "ui/plot/ticks.h"

namespace ebbline::plot {

namespace {

constexpr double kHoverReach = 12;  // px
constexpr double kMostZoom = 20;

QMarginsF marginsFor(const theme::Theme& theme) {
  const double f = theme.textFactor;
  return {48 * f, 80 * f, 64 * f, 40 * f};  // room for tick labels, titles, end labels, axis title
}

double distance(QPointF a, QPointF b) {
  return std::hypot(a.x() - b.x(), a.y() - b.y());
}

}  // namespace

Plot::Plot(const theme::ThemeHolder& holder, QWidget* parent) : QChartView(parent), holder_(holder) {
  auto* chart = new QChart;
  axisX_ = new QValueAxis(chart);
  axisY_ = new QValueAxis(chart);
  for (QValueAxis* axis : {axisX_, axisY_}) {
    axis->setLabelsVisible(false);
    axis->setTickType(QValueAxis::TicksDynamic);
  }
  chart->addAxis(axisX_, Qt::AlignBottom);
  chart->addAxis(axisY_, Qt::AlignLeft);
  chart->legend()->hide();
  chart->setAnimationOptions(QChart::NoAnimation);
  chart->setMargins({});
  chart->setBackgroundRoundness(0);
  chart->setBackgroundVisible(false);  // drawBackground() paints both grounds
  setChart(chart);
  setRenderHint(QPainter::Antialiasing);
  setFrameShape(QFrame::NoFrame);
  setViewportUpdateMode(QGraphicsView::FullViewportUpdate);
  setMouseTracking(true);
  setFocusPolicy(Qt::StrongFocus);
  setMinimumSize(320, 260);
  connect(&holder_, &theme::ThemeHolder::changed, this, &Plot::restyle);
  Plot::restyle();
}

void Plot::restyle() {
  for (QValueAxis* axis : {axisX_, axisY_}) axis->setLinePen(Qt::NoPen);      // the rule line is ours, with short ticks
  for (QValueAxis* axis : {axisX_, axisY_}) axis->setGridLineVisible(false);  // drawBackground() paints the grid
  layOut();
  viewport()->update();
}

void Plot::setTitles(const QString& title, const QString& second) {
  title_ = title;
  second_ = second;
  setAccessibleName(title);
  setAccessibleDescription(second);
  viewport()->update();
}

void Plot::setAxes(const Axis& x, const Axis& y) {
  x_ = x;
  y_ = y;
  resetZoom();
}

void Plot::resetZoom() {
  showRange(x_, y_);
}

void Plot::showRange(const Axis& x, const Axis& y) {
  shownX_ = x;
  shownY_ = y;
  const auto show = [](QValueAxis& axis, const Axis& range) {
    const double step = tickStep(range.high - range.low);
    // The old step on the new range could mean thousands of grid lines for a moment.
    axis.setTickInterval(std::max(step, axis.tickInterval()));
    axis.setRange(range.low, range.high);
    axis.setTickInterval(step);
  };
  show(*axisX_, x);
  show(*axisY_, y);
  viewport()->update();
}

QLineSeries* Plot::seriesOf(const Line& line) {
  const auto at = std::find_if(lines_.begin(), lines_.end(), [&](const Line& one) { return one.key == line.key; });
  if (at != lines_.end()) {
    const auto index = static_cast<std::size_t>(at - lines_.begin());
    *at = line;
    return series_[index];
  }
  auto* series = new QLineSeries;
  chart()->addSeries(series);
  series->attachAxis(axisX_);
  series->attachAxis(axisY_);
  lines_.push_back(line);
  series_.push_back(series);
  return series;
}

void Plot::setLine(const Line& line) {
  QLineSeries* series = seriesOf(line);
  if (series->pen() != line.pen) series->setPen(line.pen);
  QList<QPointF> points(line.points.begin(), line.points.end());
  if (series->points() != points) series->replace(points);
  viewport()->update();
}

void Plot::removeLine(const QString& key) {
  for (std::size_t i = 0; i < lines_.size(); ++i) {
    if (lines_[i].key != key) continue;
    chart()->removeSeries(series_[i]);
    delete series_[i];
    series_.erase(series_.begin() + static_cast<std::ptrdiff_t>(i));
    lines_.erase(lines_.begin() + static_cast<std::ptrdiff_t>(i));
    return;
  }
}

void Plot::clearLines() {
  chart()->removeAllSeries();
  series_.clear();
  lines_.clear();
  viewport()->update();
}

void Plot::setMarks(std::vector<Mark> marks) {
  marks_ = std::move(marks);
  if (stop_ >= 0) setHovered(stop_ < static_cast<int>(stops().size()) ? std::optional(stops()[stop_]) : std::nullopt);
  viewport()->update();
}

void Plot::setTags(std::optional<QPointF> at) {
  tags_ = at;
}

void Plot::addTrailPoint(QPointF at) {
  if (!trail_.empty() && trail_.back() == at) return;
  trail_.push_back(at);
  const auto most = static_cast<std::size_t>(look().motion.trailPoints);
  if (trail_.size() > most) trail_.erase(trail_.begin(), trail_.end() - static_cast<std::ptrdiff_t>(most));
}

void Plot::clearTrail() {
  trail_.clear();
}

void Plot::setState(PlotState state, const QString& words) {
  state_ = state;
  words_ = words;
  const bool drawn = state == PlotState::kIdle || state == PlotState::kStale;
  for (QLineSeries* series : series_) series->setVisible(drawn);
  if (!drawn) setHovered({});
  viewport()->update();
}

QPointF Plot::toPixels(QPointF value) const {
  const QRectF area = chart()->plotArea();
  const double x = (value.x() - shownX_.low) / (shownX_.high - shownX_.low);
  const double y = (value.y() - shownY_.low) / (shownY_.high - shownY_.low);
  return {area.left() + x * area.width(), area.bottom() - y * area.height()};
}

void Plot::layOut() {
  const QMarginsF margins = marginsFor(look());
  const QRectF whole(QPointF(0, 0), QSizeF(viewport()->size()));
  chart()->resize(whole.size());
  chart()->setPlotArea(whole.marginsRemoved({margins.left(), margins.top(), margins.right(), margins.bottom()}));
  chart()->layout()->activate();  // else axis and grid keep the old size until the next event
}

void Plot::resizeEvent(QResizeEvent* event) {
  QChartView::resizeEvent(event);
  layOut();
}

std::vector<Plot::Hovered> Plot::stops() const {
  std::vector<Hovered> stops;
  for (const Mark& mark : marks_) stops.push_back({mark.at, mark.words, mark.more});
  return stops;
}

std::optional<Plot::Hovered> Plot::nearest(QPointF pixel) const {
  std::optional<Hovered> best;
  double reach = kHoverReach;
  for (const Hovered& stop : stops()) {
    const double away = distance(toPixels(stop.at), pixel);
    if (away > reach) continue;
    reach = away;
    best = stop;
  }
  if (best) return best;
  for (const Line& line : lines_) {
    if (!line.hover) continue;
    for (std::size_t i = 0; i + 1 < line.points.size(); ++i) {
      const QPointF a = toPixels(line.points[i]);
      const QPointF b = toPixels(line.points[i + 1]);
      const QPointF along = b - a;
      const double length2 = QPointF::dotProduct(along, along);
      const double share = length2 > 0 ? std::clamp(QPointF::dotProduct(pixel - a, along) / length2, 0.0, 1.0) : 0;
      const double away = distance(a + share * along, pixel);
      if (away >= reach) continue;
      reach = away;
      best = Hovered{line.points[i] + share * (line.points[i + 1] - line.points[i]), line.words, {}};
    }
  }
  return best;
}

void Plot::setHovered(std::optional<Hovered> hovered) {
  hovered_ = std::move(hovered);
  setAccessibleDescription(hovered_ ? cardText() : second_);
  viewport()->update();
}

void Plot::mouseMoveEvent(QMouseEvent* event) {
  QChartView::mouseMoveEvent(event);
  const bool drawn = state_ == PlotState::kIdle || state_ == PlotState::kStale;
  stop_ = -1;
  pointer_ = drawn && chart()->plotArea().contains(event->position()) ? std::optional(event->position()) : std::nullopt;
  setHovered(pointer_ ? nearest(*pointer_) : std::nullopt);
}

void Plot::leaveEvent(QEvent* event) {
  QChartView::leaveEvent(event);
  pointer_.reset();
  if (stop_ < 0) setHovered({});
}

void Plot::keyPressEvent(QKeyEvent* event) {
  const auto all = stops();
  const int count = static_cast<int>(all.size());
  const int step = event->key() == Qt::Key_Right || event->key() == Qt::Key_Down ? 1
                   : event->key() == Qt::Key_Left || event->key() == Qt::Key_Up  ? -1
                                                                                 : 0;
  if (step != 0 && count > 0) {
    stop_ = stop_ < 0 ? (step > 0 ? 0 : count - 1) : (stop_ + step + count) % count;
    pointer_.reset();
    setHovered(all[static_cast<std::size_t>(stop_)]);
  } else if (event->key() == Qt::Key_Escape && stop_ >= 0) {
    stop_ = -1;
    setHovered({});
  } else if (event->key() == Qt::Key_Plus || event->key() == Qt::Key_Minus) {
    zoom(event->key() == Qt::Key_Plus ? 1.25 : 0.8, chart()->plotArea().center());
  } else {
    event->ignore();
  }
}

void Plot::focusInEvent(QFocusEvent* event) {
  QChartView::focusInEvent(event);
  viewport()->update();
}

void Plot::focusOutEvent(QFocusEvent* event) {
  QChartView::focusOutEvent(event);
  stop_ = -1;
  if (!pointer_) setHovered({});
}

void Plot::wheelEvent(QWheelEvent* event) {
  if (!(event->modifiers() & Qt::ControlModifier)) return event->ignore();
  zoom(std::pow(1.25, event->angleDelta().y() / 120.0), event->position());
}

void Plot::zoom(double factor, QPointF about) {
  const QRectF area = chart()->plotArea();
  if (area.isEmpty()) return;
  const auto narrowed = [factor](const Axis& shown, const Axis& whole, double share) {
    const double full = whole.high - whole.low;
    const double span = std::clamp((shown.high - shown.low) / factor, full / kMostZoom, full);
    const double kept = shown.low + share * (shown.high - shown.low);
    const double low = std::clamp(kept - share * span, whole.low, whole.high - span);
    return Axis{whole.title, low, low + span};
  };
  showRange(narrowed(shownX_, x_, (about.x() - area.left()) / area.width()),
            narrowed(shownY_, y_, (area.bottom() - about.y()) / area.height()));
}

}  // namespace ebbline::plot
