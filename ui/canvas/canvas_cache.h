#pragma once
// What LoopCanvas keeps between frames, rebuilt from the top down only as far as something changed.

#include <memory>
#include <optional>

#include "ui/canvas/hit_test.h"
#include "ui/canvas/loop_canvas.h"
#include "ui/canvas/painting.h"

namespace ebbline::canvas {

struct LoopCanvas::Cache {
  std::unique_ptr<Topology> topology;  ///< Null: the loop changed.
  Geometry geometry;
  bool geometryValid = false;   ///< False: scale, theme or options changed.
  std::optional<HitTest> hits;  ///< Made when the pointer first asks.
  Dresser dresser;
  const Dressing* dressing = nullptr;  ///< Null: results, colours, selection changed.
  std::vector<Label> labels;
  bool labelsValid = false;
  SymbolPixmaps pixmaps;
  QImage frame;             ///< The drawing as last painted, without what floats over it.
  bool frameValid = false;  ///< False: something it shows changed, or its size.
  QPointF frameOrigin;      ///< Where metre (0, 0) stands in it.
};

}  // namespace ebbline::canvas
