#include "core/loop/spatial_index.h"

#include <algorithm>
#include <cmath>
#include <utility>

namespace ebbline::loop {
namespace {

Box spanOf(const Shape& shape) {
  return {{std::min(shape.a.x_m, shape.b.x_m), std::min(shape.a.y_m, shape.b.y_m)},
          {std::max(shape.a.x_m, shape.b.x_m), std::max(shape.a.y_m, shape.b.y_m)}};
}

bool overlap(const Box& a, const Box& b) {
  return a.low.x_m <= b.high.x_m && b.low.x_m <= a.high.x_m && a.low.y_m <= b.high.y_m && b.low.y_m <= a.high.y_m;
}

bool isFinite(const Shape& shape) {
  return std::isfinite(shape.a.x_m) && std::isfinite(shape.a.y_m) && std::isfinite(shape.b.x_m) &&
         std::isfinite(shape.b.y_m);
}

// Side of the line a-b on which p lies.
double sideOf(Point a, Point b, Point p) {
  return (b.x_m - a.x_m) * (p.y_m - a.y_m) - (b.y_m - a.y_m) * (p.x_m - a.x_m);
}

// Cells a shape is entered in are found with this slack, so that rounding at a cell border never loses it.
Box widened(Box box, double by_m) {
  return {{box.low.x_m - by_m, box.low.y_m - by_m}, {box.high.x_m + by_m, box.high.y_m + by_m}};
}

}  // namespace

double distanceTo(const Shape& shape, Point from) {
  if (shape.kind == Shape::Kind::kBox) {
    const Box box = spanOf(shape);
    const double dx = std::max({box.low.x_m - from.x_m, 0.0, from.x_m - box.high.x_m});
    const double dy = std::max({box.low.y_m - from.y_m, 0.0, from.y_m - box.high.y_m});
    return std::hypot(dx, dy);
  }
  const double dx = shape.b.x_m - shape.a.x_m;
  const double dy = shape.b.y_m - shape.a.y_m;
  const double length2 = dx * dx + dy * dy;
  const double along = (from.x_m - shape.a.x_m) * dx + (from.y_m - shape.a.y_m) * dy;
  const double share = length2 > 0 ? std::clamp(along / length2, 0.0, 1.0) : 0.0;
  return std::hypot(from.x_m - shape.a.x_m - share * dx, from.y_m - shape.a.y_m - share * dy);
}

bool touches(const Shape& shape, const Box& box) {
  if (!overlap(spanOf(shape), box)) return false;
  if (shape.kind == Shape::Kind::kBox) return true;
  // Spans overlap: the segment misses the box only if all four corners lie on one side of its line.
  const Point corners[] = {box.low, {box.high.x_m, box.low.y_m}, box.high, {box.low.x_m, box.high.y_m}};
  int left = 0;
  int right = 0;
  for (const Point& corner : corners) {
    const double side = sideOf(shape.a, shape.b, corner);
    left += side > 0;
    right += side < 0;
  }
  return left < 4 && right < 4;
}

SpatialIndex::SpatialIndex(std::vector<Shape> shapes) : shapes_(std::move(shapes)) {
  shapes_.erase(std::remove_if(shapes_.begin(), shapes_.end(), [](const Shape& s) { return !isFinite(s); }),
                shapes_.end());
  if (shapes_.empty()) return;
  bounds_ = spanOf(shapes_.front());
  for (const Shape& shape : shapes_) {
    const Box span = spanOf(shape);
    bounds_.low = {std::min(bounds_.low.x_m, span.low.x_m), std::min(bounds_.low.y_m, span.low.y_m)};
    bounds_.high = {std::max(bounds_.high.x_m, span.high.x_m), std::max(bounds_.high.y_m, span.high.y_m)};
  }
  // About one cell per shape, as square as the sheet allows.
  const double width = std::max(bounds_.high.x_m - bounds_.low.x_m, 1e-6);
  const double height = std::max(bounds_.high.y_m - bounds_.low.y_m, 1e-6);
  const auto count = static_cast<double>(shapes_.size());
  const double most = std::min(count, 4096.0);
  columns_ = static_cast<int>(std::clamp(std::round(std::sqrt(count * width / height)), 1.0, most));
  rows_ = static_cast<int>(std::clamp(std::round(count / columns_), 1.0, most));
  cell_width_m_ = width / columns_;
  cell_height_m_ = height / rows_;

  starts_.assign(static_cast<std::size_t>(columns_) * static_cast<std::size_t>(rows_) + 1, 0);
  for (const Shape& shape : shapes_) forEachCellOf(shape, [this](std::size_t cell) { ++starts_[cell + 1]; });
  for (std::size_t cell = 1; cell < starts_.size(); ++cell) starts_[cell] += starts_[cell - 1];
  members_.resize(starts_.back());
  std::vector<std::uint32_t> next(starts_.begin(), starts_.end() - 1);
  for (std::uint32_t i = 0; i < shapes_.size(); ++i)
    forEachCellOf(shapes_[i], [&](std::size_t cell) { members_[next[cell]++] = i; });
}

SpatialIndex::Cells SpatialIndex::cellsOf(const Box& box) const {
  const auto cell = [](double at, double low, double size, int count) {
    return static_cast<int>(std::clamp(std::floor((at - low) / size), 0.0, static_cast<double>(count - 1)));
  };
  return {cell(box.low.x_m, bounds_.low.x_m, cell_width_m_, columns_),
          cell(box.high.x_m, bounds_.low.x_m, cell_width_m_, columns_),
          cell(box.low.y_m, bounds_.low.y_m, cell_height_m_, rows_),
          cell(box.high.y_m, bounds_.low.y_m, cell_height_m_, rows_)};
}

Box SpatialIndex::boxOf(int column, int row) const {
  const Point low{bounds_.low.x_m + column * cell_width_m_, bounds_.low.y_m + row * cell_height_m_};
  return {low, {low.x_m + cell_width_m_, low.y_m + cell_height_m_}};
}

template <class Visit>
void SpatialIndex::forEachCellOf(const Shape& shape, const Visit& visit) const {
  const double slack =
      1e-9 * std::max({cell_width_m_, cell_height_m_, std::abs(bounds_.low.x_m), std::abs(bounds_.low.y_m),
                       std::abs(bounds_.high.x_m), std::abs(bounds_.high.y_m)});
  const Cells cells = cellsOf(widened(spanOf(shape), slack));
  for (int row = cells.first_row; row <= cells.last_row; ++row)
    for (int column = cells.first_column; column <= cells.last_column; ++column)
      if (touches(shape, widened(boxOf(column, row), slack)))
        visit(static_cast<std::size_t>(row) * static_cast<std::size_t>(columns_) + static_cast<std::size_t>(column));
}

std::optional<SpatialIndex::Hit> SpatialIndex::nearest(Point from, double radius_m) const {
  std::optional<Hit> best;
  const Box around = widened({from, from}, radius_m);
  if (shapes_.empty() || !(radius_m >= 0) || !overlap(around, bounds_)) return best;
  const Cells cells = cellsOf(around);
  for (int row = cells.first_row; row <= cells.last_row; ++row)
    for (int column = cells.first_column; column <= cells.last_column; ++column) {
      const auto cell = static_cast<std::size_t>(row) * static_cast<std::size_t>(columns_) + column;
      for (std::uint32_t m = starts_[cell]; m < starts_[cell + 1]; ++m) {
        const std::size_t shape = members_[m];
        const double distance = distanceTo(shapes_[shape], from);
        if (distance > radius_m) continue;
        const bool nearer = !best || distance < best->distance_m;
        if (nearer || (distance == best->distance_m && shape < best->shape))
          best = Hit{shapes_[shape].key, distance, shape};
      }
    }
  return best;
}

std::vector<std::uint32_t> SpatialIndex::within(const Box& box) const {
  std::vector<std::uint32_t> keys;
  if (shapes_.empty() || !overlap(box, bounds_)) return keys;
  const Cells cells = cellsOf(box);
  for (int row = cells.first_row; row <= cells.last_row; ++row)
    for (int column = cells.first_column; column <= cells.last_column; ++column) {
      const auto cell = static_cast<std::size_t>(row) * static_cast<std::size_t>(columns_) + column;
      for (std::uint32_t m = starts_[cell]; m < starts_[cell + 1]; ++m)
        if (touches(shapes_[members_[m]], box)) keys.push_back(shapes_[members_[m]].key);
    }
  std::sort(keys.begin(), keys.end());
  keys.erase(std::unique(keys.begin(), keys.end()), keys.end());
  return keys;
}

}  // namespace ebbline::loop
