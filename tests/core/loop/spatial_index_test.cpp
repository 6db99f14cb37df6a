#include "core/loop/spatial_index.h"

#include <limits>
#include <random>
#include <set>

#include <gtest/gtest.h>

#include "tests/support/seed.h"

namespace ebbline::loop {
namespace {

class Sheet {
 public:
  explicit Sheet(std::uint64_t seed) : random_(seed) {}
  double between(double least, double most) {
    return least + (most - least) * static_cast<double>(random_() >> 11) * 0x1p-53;
  }
  Point point() { return {between(-200, 800), between(0, 90)}; }
  std::vector<Shape> shapes(std::size_t count) {
    std::vector<Shape> all(count);
    for (std::size_t i = 0; i < count; ++i) {
      const Point a = point();
      const Point far = point();
      const double x = a.x_m + between(-8, 8);
      const Point choices[] = {a, {x, a.y_m}, {a.x_m, x}, {x, a.y_m + between(-9, 9)}, far};
      all[i] = {static_cast<std::uint32_t>(i / 2), random_() % 4 == 0 ? Shape::Kind::kBox : Shape::Kind::kSegment, a,
                choices[random_() % (count > 100 && i % 50 != 0 ? 4 : 5)]};
    }
    return all;
  }

 private:
  std::mt19937_64 random_;
};

TEST(SpatialIndex, NearestIsThatOfBruteForce) {
  Sheet sheet(test::seed());
  int hits = 0;
  for (const std::size_t count : {1U, 2U, 7U, 300U, 3000U}) {
    const auto shapes = sheet.shapes(count);
    const SpatialIndex index(shapes);
    for (int i = 0; i < 400; ++i) {
      const Point from = sheet.point();
      const double radius = sheet.between(0, i % 10 == 0 ? 2000 : 8);
      double least = std::numeric_limits<double>::infinity();
      std::size_t best = 0;
      for (std::size_t s = 0; s < shapes.size(); ++s)
        if (distanceTo(shapes[s], from) < least) least = distanceTo(shapes[best = s], from);
      const auto hit = index.nearest(from, radius);
      ASSERT_EQ(hit.has_value(), least <= radius);
      if (!hit) continue;
      ++hits;
      ASSERT_EQ(hit->shape, best);
      ASSERT_EQ(hit->key, shapes[best].key);
      ASSERT_EQ(hit->distance_m, least);
    }
  }
  EXPECT_GT(hits, 300);
}

TEST(SpatialIndex, BoxQueryIsThatOfBruteForce) {
  Sheet sheet(test::seed());
  for (const std::size_t count : {1U, 5U, 300U, 3000U}) {
    const auto shapes = sheet.shapes(count);
    const SpatialIndex index(shapes);
    for (int i = 0; i < 200; ++i) {
      const Point low = sheet.point();
      const Box box{low, {low.x_m + sheet.between(0, 60), low.y_m + sheet.between(0, 20)}};
      std::set<std::uint32_t> expected;
      for (const Shape& shape : shapes)
        if (touches(shape, box)) expected.insert(shape.key);
      const auto found = index.within(box);
      ASSERT_EQ(std::vector<std::uint32_t>(expected.begin(), expected.end()), found);
    }
  }
}

TEST(SpatialIndex, SegmentTouchesABoxExactlyWhenAPointOfItLiesInside) {
  // Against many points along the segment: independent of the side test used.
  Sheet sheet(test::seed());
  int touching = 0;
  for (int i = 0; i < 3000; ++i) {
    const Shape segment{0,
                        Shape::Kind::kSegment,
                        {sheet.between(0, 10), sheet.between(0, 10)},
                        {sheet.between(0, 10), sheet.between(0, 10)}};
    const Box box{{3, 4}, {6, 5}};
    bool inside = false;
    double nearest = 1e9;
    for (int s = 0; s <= 2000; ++s) {
      const double x = segment.a.x_m + (segment.b.x_m - segment.a.x_m) * s / 2000;
      const double y = segment.a.y_m + (segment.b.y_m - segment.a.y_m) * s / 2000;
      inside |= x >= 3 && x <= 6 && y >= 4 && y <= 5;
      nearest = std::min(nearest, distanceTo({0, Shape::Kind::kBox, box.low, box.high}, {x, y}));
    }
    if (inside) {
      EXPECT_TRUE(touches(segment, box));
    } else if (nearest > 0.02) {
      EXPECT_FALSE(touches(segment, box));
    }
    touching += inside;
  }
  EXPECT_GT(touching, 300);
}

TEST(SpatialIndex, DistanceOfKnownCases) {
  const Shape segment{0, Shape::Kind::kSegment, {0, 0}, {10, 0}};
  EXPECT_DOUBLE_EQ(distanceTo(segment, {5, 3}), 3);
  EXPECT_DOUBLE_EQ(distanceTo(segment, {13, 4}), 5);
  const Shape box{0, Shape::Kind::kBox, {4, 4}, {0, 0}};
  EXPECT_DOUBLE_EQ(distanceTo(box, {2, 2}), 0);
  EXPECT_DOUBLE_EQ(distanceTo(box, {7, 8}), 5);
}

TEST(SpatialIndex, EmptyAndUnusualInputGivesNothing) {
  EXPECT_FALSE(SpatialIndex{}.nearest({0, 0}, 1e9).has_value());
  EXPECT_TRUE(SpatialIndex{}.within({{-1e9, -1e9}, {1e9, 1e9}}).empty());
  const double nan = std::numeric_limits<double>::quiet_NaN();
  const SpatialIndex index({{1, Shape::Kind::kSegment, {nan, 0}, {1, 1}}, {2, Shape::Kind::kSegment, {5, 5}, {5, 5}}});
  EXPECT_EQ(index.size(), 1U);
  EXPECT_EQ(index.nearest({5, 5}, 0)->key, 2U);
  EXPECT_FALSE(index.nearest({5, 5}, -1).has_value());
  EXPECT_FALSE(index.nearest({nan, 5}, 1).has_value());
}

}  // namespace
}  // namespace ebbline::loop
