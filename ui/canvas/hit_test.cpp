#include "ui/canvas/hit_test.h"

#include <algorithm>
#include <cmath>

namespace ebbline::canvas {
namespace {

double distance(QPointF place, QPointF a, QPointF b) {
  const QPointF u = b - a, w = place - a;
  const double square = u.x() * u.x() + u.y() * u.y();
  const double t = square > 0 ? std::clamp((w.x() * u.x() + w.y() * u.y()) / square, 0.0, 1.0) : 0;
  const QPointF d = w - u * t;
  return std::hypot(d.x(), d.y());
}

loop::Id symbolAt(const Geometry& geometry, QPointF place) {
  loop::Id best = 0;
  double nearest = 1e300;
  for (const Mark& mark : geometry.marks) {
    if (!mark.box.contains(place)) continue;
    const QPointF d = place - mark.centre;
    const double away = std::hypot(d.x(), d.y());
    if (away < nearest) nearest = away, best = mark.id;
  }
  return best;
}

}  // namespace

loop::Id thingAt(const Geometry& geometry, QPointF place, double reach) {
  if (const loop::Id symbol = symbolAt(geometry, place)) return symbol;
  loop::Id best = 0;
  double nearest = reach;
  const auto look = [&](QPointF a, QPointF b, loop::Id id) {
    const QRectF box = QRectF(a, b).normalized().adjusted(-reach, -reach, reach, reach);
    if (!box.contains(place)) return;
    const double away = distance(place, a, b);
    if (away <= nearest) nearest = away, best = id;
  };
  for (const Tap& tap : geometry.taps) look(tap.a, tap.b, tap.id);
  for (const Piece& piece : geometry.pieces) look(piece.a, piece.b, geometry.strands[static_cast<size_t>(piece.strand)].id);
  return best;
}

}  // namespace ebbline::canvas
