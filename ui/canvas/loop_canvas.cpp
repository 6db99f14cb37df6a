#include "ui/canvas/loop_canvas.h"

#include <QAccessible>
#include <QPainter>
#include <cmath>

#include "ui/canvas/canvas_cache.h"
#include "ui/canvas/facts.h"
#include "ui/canvas/view.h"

namespace ebbline::canvas {

LoopCanvas::LoopCanvas(const theme::ThemeHolder& holder, QWidget* parent)
    : QWidget(parent), holder_(holder), cache_(std::make_unique<Cache>()) {
  setMouseTracking(true);
  setFocusPolicy(Qt::StrongFocus);
  setAttribute(Qt::WA_OpaquePaintEvent);
  setAccessibleName(tr("Drawing of the loop"));
  connect(&holder, &theme::ThemeHolder::changed, this, [this] {
    cache_->geometryValid = false;
    if (fitted_) fit();
    update();
  });
}

LoopCanvas::~LoopCanvas() = default;

const loop::Loop& LoopCanvas::loop() const {
  return loop_;
}

void LoopCanvas::setLoop(loop::Loop loop, bool keepView) {
  loop_ = std::move(loop);
  results_.reset();
  cache_->topology.reset();
  cache_->geometryValid = false;
  hovered_ = 0;
  if (selected_ != 0) {
    ensureCache();
    if (!cache_->topology->part(selected_)) selected_ = 0;
  }
  const QString title = QString::fromStdString(loop_.project.title);
  setAccessibleName(title.isEmpty() ? tr("Drawing of the loop") : tr("Drawing of the loop %1").arg(title));
  if (!keepView) fit();
  update();
}

void LoopCanvas::setResults(network::Results results) {
  results_ = std::move(results);
  stale_ = false;
  cache_->dressing = nullptr;
  cache_->labelsValid = false;
  if (selected_ != 0) describeChoice();
  update();
}

void LoopCanvas::clearResults() {
  results_.reset();
  cache_->dressing = nullptr;
  cache_->labelsValid = false;
  update();
}

void LoopCanvas::setColourBy(ColourBy colourBy) {
  colourBy_ = colourBy;
  cache_->dressing = nullptr;
  if (fitted_) fit();  // the scale at the foot needs room of its own
  update();
}

void LoopCanvas::setUnits(quantity::UnitSystem units) {
  units_ = units;
  cache_->dressing = nullptr;
  cache_->labelsValid = false;
  if (selected_ != 0) describeChoice();
  update();
}

void LoopCanvas::setOptions(const PaintOptions& options) {
  options_ = options;
  cache_->geometryValid = false;
  if (fitted_) fit();
  update();
}

void LoopCanvas::setStale(bool stale) {
  if (stale == stale_) return;
  stale_ = stale;
  update();
}

void LoopCanvas::select(loop::Id id) {
  if (id == selected_) return;
  selected_ = id;
  cache_->dressing = nullptr;
  cache_->labelsValid = false;
  describeChoice();
  update();
}

void LoopCanvas::choose(loop::Id id) {
  select(id);
  emit picked(id);
}

void LoopCanvas::ensureCache() const {
  Cache& cache = *cache_;
  const theme::Theme& theme = holder_.theme();
  if (!cache.topology) {
    cache.topology = std::make_unique<Topology>(loop_);
    cache.geometryValid = false;
  }
  if (!cache.geometryValid || cache.geometry.scale != scale_) {
    cache.geometry =
        makeGeometry(loop_, *cache.topology, scale_,
                     {theme.stroke.pairGap * theme.strokeFactor, options_.largestSymbol * theme.strokeFactor, true});
    cache.geometryValid = true;
    cache.hits.reset();
    cache.dressing = nullptr;
    cache.labelsValid = false;
    cache.pixmaps.clear();
  }
  const LoopPicture picture{&loop_, results_ ? &*results_ : nullptr, units_, colourBy_, selected_};
  if (!cache.dressing) {
    cache.dressing = &cache.dresser.dress(cache.geometry, *cache.topology, picture, theme);
    cache.frameValid = false;
  }
  if (!cache.labelsValid) {
    cache.frameValid = false;
    cache.labels = placeLabels(cache.geometry, *cache.dressing, *cache.topology, picture, theme, options_);
    cache.labelsValid = true;
  }
}

void LoopCanvas::fit() {
  fitted_ = true;
  if (!cache_->topology) cache_->topology = std::make_unique<Topology>(loop_);
  const theme::Theme& theme = holder_.theme();
  PaintOptions options = options_;
  options.largestSymbol *= theme.strokeFactor;
  const View view = fitView(loop_, *cache_->topology, QRectF(rect()), theme, options, colourBy_);
  scale_ = view.scale;
  origin_ = QPointF(std::round(view.origin.x()), std::round(view.origin.y()));
  update();
  emit viewChanged();
}

void LoopCanvas::zoomBy(double factor, QPointF about) {
  const double next = std::clamp(scale_ * factor, kSmallestScale, kLargestScale);
  origin_ = about - (about - origin_) * (next / scale_);
  origin_ = QPointF(std::round(origin_.x()), std::round(origin_.y()));
  scale_ = next;
  fitted_ = false;
  update();
  emit viewChanged();
}

void LoopCanvas::panBy(QPointF px) {
  origin_ += QPointF(std::round(px.x()), std::round(px.y()));
  fitted_ = false;
  update();
  emit viewChanged();
}

QPointF LoopCanvas::toScreen(loop::Point at) const {
  return origin_ + QPointF(at.x_m * scale_, -at.y_m * scale_);
}

loop::Id LoopCanvas::hit(QPointF place) const {
  ensureCache();
  if (!cache_->hits) cache_->hits.emplace(cache_->geometry);
  return cache_->hits->at(place - origin_);
}

QString LoopCanvas::describe(loop::Id id) const {
  ensureCache();
  const LoopPicture picture{&loop_, results_ ? &*results_ : nullptr, units_, colourBy_, selected_};
  return factsOf(id, *cache_->topology, picture).sentence();
}

void LoopCanvas::describeChoice() {
  setAccessibleDescription(selected_ == 0 ? QString() : describe(selected_));
  QAccessibleEvent changed(this, QAccessible::DescriptionChanged);
  QAccessible::updateAccessibility(&changed);
}

// The drawing as a picture of its own: what floats over it, and its fading, cost one copy and no drawing.
const QImage& LoopCanvas::frame() {
  Cache& cache = *cache_;
  const double ratio = devicePixelRatioF();
  const QSize pixels(static_cast<int>(std::ceil(width() * ratio)), static_cast<int>(std::ceil(height() * ratio)));
  if (cache.frame.size() != pixels || cache.frame.devicePixelRatio() != ratio) {
    cache.frame = QImage(pixels, QImage::Format_RGB32);
    cache.frame.setDevicePixelRatio(ratio);
    cache.frameValid = false;
  }
  if (cache.frameValid && cache.frameOrigin == origin_) return cache.frame;
  const theme::Theme& theme = holder_.theme();
  cache.frame.fill(theme.colours.sheet);
  cache.pixmaps.use(ratio);
  PixelRects rects(cache.frame);
  ScreenAids screen{cache.pixmaps, rects};
  const LoopPicture picture{&loop_, results_ ? &*results_ : nullptr, units_, colourBy_, selected_};
  const Scene scene{cache.geometry, *cache.dressing, cache.labels, picture, theme, options_};
  QPainter painter(&cache.frame);
  ScenePainter(painter, scene, QRectF(rect()), origin_, &screen).paint();
  cache.frameOrigin = origin_;
  cache.frameValid = true;
  return cache.frame;
}

void LoopCanvas::paintEvent(QPaintEvent*) {
  ensureCache();
  const theme::Theme& theme = holder_.theme();
  QPainter painter(this);
  if (loop_.joints.empty() && loop_.plants.empty()) {
    painter.fillRect(rect(), theme.colours.sheet);
    painter.setFont(theme.font(theme::Text::kBody));
    painter.setPen(theme.colours.ink3);
    painter.drawText(rect(), Qt::AlignCenter, tr("Nothing drawn yet. Open a loop or one of the samples."));
    return;
  }
  if (stale_) {
    painter.fillRect(rect(), theme.colours.sheet);
    painter.setOpacity(0.55);
  }
  painter.drawImage(QPointF(0, 0), frame());
  painter.setOpacity(1);
  paintCard(painter);
  if (hasFocus() && keyboardFocus_) {
    painter.setPen(QPen(theme.colours.focus, 2));
    painter.setBrush(Qt::NoBrush);
    painter.drawRect(rect().adjusted(1, 1, -1, -1));
  }
}

}  // namespace ebbline::canvas
