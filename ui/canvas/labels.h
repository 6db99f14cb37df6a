#pragma once
// Words beside the symbols: placed once per zoom, most important first, none over another; those that find no free
// place are left to the hover card. Nothing is written smaller than 6 px.

#include <QString>
#include <vector>

#include "ui/canvas/dressing.h"

namespace ebbline::canvas {

enum class LabelInk { kStrong, kPlain, kQuiet, kUnder, kAccent };

struct Label {
  loop::Id id = 0;
  QString text;
  QPointF baseline;  ///< Start of the text, in the px of the geometry.
  QRectF box;
  int px = 11;
  int weight = 400;
  LabelInk ink = LabelInk::kQuiet;
};

constexpr int kSmallestText = 6;  ///< px; smaller labels are hidden.

std::vector<Label> placeLabels(const Geometry& geometry, const Dressing& dressing, const Topology& topology,
                               const LoopPicture& picture, const theme::Theme& theme, const PaintOptions& options);

QFont labelFont(const Label& label, const theme::Theme& theme);

/// "−17 %".
QString shortfallText(double shortfall);

}  // namespace ebbline::canvas
