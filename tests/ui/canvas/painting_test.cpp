#include "ui/canvas/painting.h"

#include <gtest/gtest.h>

#include <QPainter>
#include <cmath>
#include <random>

#include "tests/ui/canvas/trial_loop.h"

namespace ebbline::canvas {
namespace {

/// Largest difference of a channel between two pictures of one size, and the share of pixels further apart than 24.
struct Difference {
  int largest = 0;
  double share = 0;
};

Difference between(const QImage& a, const QImage& b) {
  Difference out;
  int apart = 0;
  for (int y = 0; y < a.height(); ++y)
    for (int x = 0; x < a.width(); ++x) {
      const QRgb p = a.pixel(x, y), q = b.pixel(x, y);
      const int d =
          std::max({std::abs(qRed(p) - qRed(q)), std::abs(qGreen(p) - qGreen(q)), std::abs(qBlue(p) - qBlue(q))});
      out.largest = std::max(out.largest, d);
      apart += d > 24 ? 1 : 0;
    }
  out.share = static_cast<double>(apart) / (a.width() * a.height());
  return out;
}

TEST(PixelRects, FillLikeAnAntialiasedPainter) {
  std::mt19937 random(7);
  std::uniform_real_distribution<double> place(-10, 70), size(0.2, 30);
  std::uniform_int_distribution<int> channel(0, 255);
  for (int i = 0; i < 300; ++i) {
    const QRectF box(place(random), place(random), size(random), size(random));
    const QColor colour(channel(random), channel(random), channel(random), i % 3 == 0 ? channel(random) : 255);
    QImage ours(64, 48, QImage::Format_RGB32);
    ours.fill(QColor(200, 210, 190));
    QImage theirs = ours.copy();
    PixelRects(ours).fill(box, colour.rgba());
    QPainter painter(&theirs);
    painter.setRenderHint(QPainter::Antialiasing);
    painter.fillRect(box, colour);
    ASSERT_LE(between(ours, theirs).largest, 4)
        << box.x() << ' ' << box.y() << ' ' << box.width() << ' ' << box.height();
  }
}

TEST(PixelRects, TheComparisonSeesHalfAPixel) {
  QImage a(64, 48, QImage::Format_RGB32), b;  // seeded fault: the same box half a pixel aside
  a.fill(Qt::white);
  b = a.copy();
  PixelRects(a).fill({10, 10, 20, 2}, 0xff000000u);
  PixelRects(b).fill({10, 10.5, 20, 2}, 0xff000000u);
  EXPECT_GT(between(a, b).largest, 100);
}

TEST(PixelRects, FollowThePainterOnAFineScreen) {
  QImage image(60, 60, QImage::Format_RGB32);
  image.setDevicePixelRatio(2);
  image.fill(Qt::white);
  PixelRects rects(image);
  QPainter painter(&image);
  painter.translate(5, 3);
  rects.setTransform(painter.deviceTransform());
  rects.fill({1, 1, 4, 2}, 0xff000000u);
  EXPECT_EQ(image.pixel(12, 8), 0xff000000u);
  EXPECT_EQ(image.pixel(19, 11), 0xff000000u);
  EXPECT_EQ(image.pixel(11, 8), 0xffffffffu);
  EXPECT_EQ(image.pixel(20, 11), 0xffffffffu);
}

class ScreenAndPage : public testing::TestWithParam<std::tuple<theme::Mode, double, ColourBy>> {};

// The quick way of the screen and the vectors of the page are one look.
TEST_P(ScreenAndPage, ShowTheSame) {
  const auto [mode, scale, colourBy] = GetParam();
  const theme::Theme theme = theme::makeTheme(mode);
  const loop::Loop loop = trial::building(4, 6);
  const network::Results results = trial::results(loop, 0.46);
  const Topology topology(loop);
  const LoopPicture picture{&loop, &results, quantity::UnitSystem::kSi, colourBy, loop.paired_runs[3].id};
  const Geometry geometry = makeGeometry(loop, topology, scale, {});
  Dresser dresser;
  const Dressing& dressing = dresser.dress(geometry, topology, picture, theme);
  const PaintOptions options;
  const auto labels = placeLabels(geometry, dressing, topology, picture, theme, options);
  const Scene scene{geometry, dressing, labels, picture, theme, options};
  const QRectF view(0, 0, 900, 600);
  const QPointF origin(60, 560);
  QImage page(900, 600, QImage::Format_RGB32), screen;
  page.fill(theme.colours.sheet);
  screen = page.copy();
  {
    QPainter painter(&page);
    ScenePainter(painter, scene, view, origin, nullptr).paint();
  }
  {
    SymbolPixmaps pixmaps;
    PixelRects rects(screen);
    ScreenAids aids{pixmaps, rects};
    QPainter painter(&screen);
    ScenePainter(painter, scene, view, origin, &aids).paint();
  }
  QImage blank(900, 600, QImage::Format_RGB32);
  blank.fill(theme.colours.sheet);
  EXPECT_GT(between(page, blank).share, 0.005) << "nothing was drawn";
  EXPECT_LT(between(page, screen).share, 0.002);
}

INSTANTIATE_TEST_SUITE_P(Looks, ScreenAndPage,
                         testing::Combine(testing::Values(theme::Mode::kLight, theme::Mode::kDark),
                                          testing::Values(2.0, 8.0, 20.0),
                                          testing::Values(ColourBy::kNone, ColourBy::kPressure)));

}  // namespace
}  // namespace ebbline::canvas
