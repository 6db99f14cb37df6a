#include "ui/canvas/hit_test.h"

#include <cmath>

namespace ebbline::canvas {
namespace {

loop::Point point(QPointF at) {
  return {at.x(), at.y()};
}

loop::SpatialIndex boxesOf(const Geometry& geometry) {
  std::vector<loop::Shape> shapes;
  shapes.reserve(geometry.marks.size());
  for (size_t i = 0; i < geometry.marks.size(); ++i) {
    const QRectF& box = geometry.marks[i].box;
    shapes.push_back(
        {static_cast<std::uint32_t>(i), loop::Shape::Kind::kBox, point(box.topLeft()), point(box.bottomRight())});
  }
  return loop::SpatialIndex(std::move(shapes));
}

loop::SpatialIndex linesOf(const Geometry& geometry) {
  std::vector<loop::Shape> shapes;
  shapes.reserve(geometry.taps.size() + geometry.pieces.size());
  for (const Tap& tap : geometry.taps)
    shapes.push_back({tap.id, loop::Shape::Kind::kSegment, point(tap.a), point(tap.b)});
  for (const Piece& piece : geometry.pieces)
    shapes.push_back({geometry.strands[static_cast<size_t>(piece.strand)].id, loop::Shape::Kind::kSegment,
                      point(piece.a), point(piece.b)});
  return loop::SpatialIndex(std::move(shapes));
}

}  // namespace

HitTest::HitTest(const Geometry& geometry) : boxes_(boxesOf(geometry)), lines_(linesOf(geometry)) {
  symbols_.reserve(geometry.marks.size());
  for (const Mark& mark : geometry.marks) symbols_.push_back({mark.id, mark.centre});
}

loop::Id HitTest::at(QPointF place, double reach) const {
  loop::Id best = 0;
  double nearest = 1e300;
  for (const std::uint32_t key : boxes_.within({point(place), point(place)})) {
    const QPointF away = place - symbols_[key].centre;
    const double distance = std::hypot(away.x(), away.y());
    if (distance < nearest) nearest = distance, best = symbols_[key].id;
  }
  if (best != 0) return best;
  const auto line = lines_.nearest(point(place), reach);
  return line ? line->key : 0;
}

}  // namespace ebbline::canvas
