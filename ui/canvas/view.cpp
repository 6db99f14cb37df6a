#include "ui/canvas/view.h"

#include <QFontMetricsF>
#include <QMarginsF>
#include <algorithm>

namespace ebbline::canvas {
namespace {

GeometryOptions forFit(const theme::Theme& theme, const PaintOptions& options) {
  return {theme.stroke.pairGap, options.largestSymbol, false, false};
}

// Room for the words that are not part of the geometry: level names left, plant's lines right, key at the foot.
QMarginsF wordMargins(const loop::Loop& loop, const theme::Theme& theme, const PaintOptions& options,
                      ColourBy colourBy) {
  const QFontMetricsF metrics(theme.font(theme::Text::kNote, 600));
  QMarginsF out(28, 32, 28, 28);
  if (options.levels) {
    double widest = 0;
    for (const loop::Level& level : loop.levels)
      widest = std::max(widest, metrics.horizontalAdvance(QString::fromStdString(level.name)));
    if (widest > 0) out.setLeft(16 + std::min(widest, 160.0) + 16);
  }
  if (options.key) out.setBottom(colourBy == ColourBy::kNone ? 64 : 104);  // a scale stands over the weights
  return out;
}

// The plant's words stand to its right; only where the plant is the rightmost thing do they need room.
double plantWords(const loop::Loop& loop, const Geometry& geometry, const theme::Theme& theme,
                  const PaintOptions& options) {
  if (!options.tags) return 0;
  const QFontMetricsF metrics(theme.font(theme::Text::kNote, 600));
  double out = 0;
  for (const Mark& mark : geometry.marks) {
    if (mark.part.kind != PartKind::kPlant || mark.quarterTurns == 2) continue;
    const loop::Plant& plant = loop.plants[static_cast<size_t>(mark.part.index)];
    const double width = std::max(metrics.horizontalAdvance(QString::fromStdString(plant.tag)),
                                  metrics.horizontalAdvance(QStringLiteral("min 20.0 L/s")));
    out = std::max(out, mark.box.right() + 10 + width - geometry.bounds.right());
  }
  return std::max(0.0, out);
}

}  // namespace

View fitView(const loop::Loop& loop, const Topology& topology, const QRectF& box, const theme::Theme& theme,
             const PaintOptions& options, ColourBy colourBy) {
  const QMarginsF margins = wordMargins(loop, theme, options, colourBy);
  const QRectF room = box.marginsRemoved(margins);
  View view;
  view.origin = box.center();
  if (room.width() < 10 || room.height() < 10) return view;
  // Symbols and the gap of pairs do not grow with the scale, so the fit is found by a few corrections.
  double scale = 10;
  for (int round = 0; round < 6; ++round) {
    const Geometry geometry = makeGeometry(loop, topology, scale, forFit(theme, options));
    if (geometry.bounds.isNull()) return view;
    const double right = plantWords(loop, geometry, theme, options);
    const double wide = geometry.bounds.width() + right, tall = geometry.bounds.height();
    const double factor = std::min(room.width() / std::max(wide, 1.0), room.height() / std::max(tall, 1.0));
    view.scale = scale;
    view.origin = room.center() - geometry.bounds.center() - QPointF(right / 2, 0);
    if (factor > 0.995 && factor < 1.005) break;
    scale = std::clamp(scale * factor, kSmallestScale, kLargestScale);
  }
  return view;
}

double wantedAspect(const loop::Loop& loop) {
  const Topology topology(loop);
  const Geometry geometry = makeGeometry(loop, topology, 20, {});
  if (geometry.bounds.width() < 1) return 1;
  return std::clamp(geometry.bounds.height() / geometry.bounds.width(), 0.2, 3.0);
}

}  // namespace ebbline::canvas
