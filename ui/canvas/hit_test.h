#pragma once
// Which drawn thing lies under a place.

#include "ui/canvas/geometry.h"

namespace ebbline::canvas {

/// `place` in the px of the geometry. Symbols win over taps and runs, the nearest wins among equals; 0 within no reach.
loop::Id thingAt(const Geometry& geometry, QPointF place, double reach = 6);

}  // namespace ebbline::canvas
