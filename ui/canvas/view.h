#pragma once
// Which part of the sheet is seen.

#include "ui/canvas/geometry.h"
#include "ui/canvas/loop_picture.h"

namespace ebbline::canvas {

struct View {
  double scale = 1;  ///< px per metre.
  QPointF origin;    ///< Where metre (0, 0) stands.
};

constexpr double kSmallestScale = 0.02, kLargestScale = 400;  ///< px per metre

/// The largest view in which the whole loop with its words stands inside `box`.
View fitView(const loop::Loop& loop, const Topology& topology, const QRectF& box, const theme::Theme& theme,
             const PaintOptions& options, ColourBy colourBy);

}  // namespace ebbline::canvas
