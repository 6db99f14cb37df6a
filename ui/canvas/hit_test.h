#pragma once
// Which drawn thing lies under a place. Asks the spatial index of core, filled with what is really drawn at this zoom
// (a pair's return stands beside its supply, symbols keep their size), so its lengths are px and not metres.

#include "core/loop/spatial_index.h"
#include "ui/canvas/geometry.h"

namespace ebbline::canvas {

class HitTest {
 public:
  HitTest() = default;
  explicit HitTest(const Geometry& geometry);

  /// `place` in the px of the geometry. Symbols win over taps and runs, the nearest wins among equals; 0 within no
  /// reach.
  loop::Id at(QPointF place, double reach = 6) const;

 private:
  struct Symbol {
    loop::Id id = 0;
    QPointF centre;
  };
  std::vector<Symbol> symbols_;
  loop::SpatialIndex boxes_;  ///< Keys: places in symbols_.
  loop::SpatialIndex lines_;  ///< Keys: ids.
};

}  // namespace ebbline::canvas
