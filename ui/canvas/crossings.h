#pragma once
// Lines that cross without being joined are drawn as overpasses: the one below is cut for a gap of ground.

#include <vector>

#include "ui/canvas/geometry.h"

namespace ebbline::canvas {

/// One line before cutting.
struct Line {
  std::vector<QPointF> points;
  int strand = 0;
  bool over = false;  ///< Goes over others where they cross: the return.
  bool leg = false;   ///< Thin: the line below it needs a smaller gap.
};

/// Cuts `lines` into pieces. `gap` is the share of the full 8-px gap; 0 leaves crossings as they are.
std::vector<Piece> cutAtCrossings(const std::vector<Line>& lines, double gap);

}  // namespace ebbline::canvas
