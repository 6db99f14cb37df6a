#pragma once
// Which drawn thing is near a place: a uniform grid over segments, points and boxes. Built once from all shapes and
// then only asked; building 50,000 shapes takes a few milliseconds, so a change of the drawing builds it anew.

#include <cstdint>
#include <optional>
#include <vector>

#include "core/loop/loop.h"

namespace ebbline::loop {

/// An upright rectangle of the sheet, corners included.
struct Box {
  Point low;   ///< Smallest x and y.
  Point high;  ///< Largest x and y.
  bool operator==(const Box&) const = default;
};

/// Something that can be hit. The caller chooses what `key` means; several shapes may share one.
struct Shape {
  enum class Kind : std::uint8_t { kSegment, kBox };
  std::uint32_t key = 0;
  Kind kind = Kind::kSegment;
  Point a;  ///< Segment: one end. Box: any corner.
  Point b;  ///< Segment: other end (equal to `a` for a point). Box: the opposite corner.
};

/// Distance [m of the sheet] from a place to a shape; 0 inside a box.
double distanceTo(const Shape& shape, Point from);

/// True if any point of the shape lies in the box, edges included.
bool touches(const Shape& shape, const Box& box);

class SpatialIndex {
 public:
  SpatialIndex() = default;
  /// Shapes with a coordinate that is not finite are left out.
  explicit SpatialIndex(std::vector<Shape> shapes);

  struct Hit {
    std::uint32_t key = 0;
    double distance_m = 0;
    std::size_t shape = 0;  ///< Position among the shapes kept.
  };
  /// Nearest shape within the radius (included); of equally near ones the first given.
  std::optional<Hit> nearest(Point from, double radius_m) const;

  /// Keys of all shapes that touch the box, each once, rising.
  std::vector<std::uint32_t> within(const Box& box) const;

  std::size_t size() const { return shapes_.size(); }

 private:
  struct Cells {
    int first_column, last_column, first_row, last_row;
  };
  Cells cellsOf(const Box& box) const;
  Box boxOf(int column, int row) const;
  template <class Visit>
  void forEachCellOf(const Shape& shape, const Visit& visit) const;

  std::vector<Shape> shapes_;
  Box bounds_;
  double cell_width_m_ = 1;
  double cell_height_m_ = 1;
  int columns_ = 0;
  int rows_ = 0;
  std::vector<std::uint32_t> starts_;  // per cell: where its shapes start in members_
  std::vector<std::uint32_t> members_;
};

}  // namespace ebbline::loop
