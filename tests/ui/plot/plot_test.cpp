#include "ui/plot/plot.h"

#include <cmath>

#include <QFile>
#include <QImage>
#include <QTemporaryDir>

#include <gtest/gtest.h>

#include "tests/ui/ui_support.h"
#include "ui/plot/head_flow_plot.h"

namespace ebbline::plot {
namespace {

class PlotTest : public testing::Test {
 protected:
  void SetUp() override {
    test::application();
    holder_ = std::make_unique<theme::ThemeHolder>(theme::Mode::kLight);
    plot_ = std::make_unique<Plot>(*holder_);
    plot_->resize(640, 420);
    plot_->setAxes({"flow, L/s", 0, 14}, {"head, kPa", 0, 200});
    plot_->setLine({"a",
                    "pump now",
                    "now",
                    LabelAt::kRightEnd,
                    1,
                    QPen(Qt::black, 2),
                    Qt::black,
                    600,
                    true,
                    {{0, 180}, {5, 160}, {10, 100}}});
    plot_->setMarks({{"o",
                      "operating point",
                      Mark::Shape::kOperating,
                      {5, 160},
                      Qt::red,
                      theme::Marker::kCircle,
                      {{"speed", "77 %"}}}});
    plot_->setState(PlotState::kIdle);
    plot_->show();
    ASSERT_TRUE(QTest::qWaitForWindowExposed(plot_.get()));
  }
  std::unique_ptr<theme::ThemeHolder> holder_;
  std::unique_ptr<Plot> plot_;
};

TEST_F(PlotTest, PointerNearAMarkShowsACardWithNameAndUnits) {
  test::moveTo(plot_->viewport(), plot_->toPixels({5, 160}).toPoint() + QPoint(4, 4));
  EXPECT_EQ(plot_->cardText(), "operating point; flow 5.00 L/s; head 160 kPa; speed 77 %");
  EXPECT_EQ(plot_->accessibleDescription(), plot_->cardText());
}

TEST_F(PlotTest, PointerNearALineNamesTheLineAndFarFromAllShowsNothing) {
  test::moveTo(plot_->viewport(), plot_->toPixels({10, 100}).toPoint() + QPoint(-3, 2));
  EXPECT_TRUE(plot_->cardText().startsWith("pump now")) << plot_->cardText().toStdString();
  test::moveTo(plot_->viewport(), plot_->toPixels({2, 20}).toPoint());
  EXPECT_EQ(plot_->cardText(), "");
}

TEST_F(PlotTest, ArrowKeysReachTheCardAndEscapeLeavesIt) {
  plot_->activateWindow();
  plot_->setFocus();
  test::key(plot_.get(), Qt::Key_Right);
  EXPECT_TRUE(plot_->cardText().startsWith("operating point")) << plot_->cardText().toStdString();
  test::key(plot_.get(), Qt::Key_Escape);
  EXPECT_EQ(plot_->cardText(), "");
}

TEST_F(PlotTest, TheTrailKeepsTheNewestTwentyFourPoints) {
  for (int i = 0; i < 60; ++i) plot_->addTrailPoint({i * 0.1, 100});
  ASSERT_EQ(plot_->trail().size(), 24U);
  EXPECT_DOUBLE_EQ(plot_->trail().back().x(), 5.9);
}

TEST_F(PlotTest, DataAsCsvHoldsEveryPointWithAPointForTheDecimal) {
  const QString csv = plot_->csv();
  EXPECT_TRUE(csv.startsWith("line,\"flow, L/s\",\"head, kPa\"\n"));
  EXPECT_TRUE(csv.contains("\"pump now\",10,100\n"));
  EXPECT_EQ(csv.count('\n'), 1 + 3 + 1);
}

TEST_F(PlotTest, PicturesAreWrittenInEveryFormatAndAreNotBlank) {
  QTemporaryDir folder;
  for (const char* suffix : {"png", "svg", "pdf"}) {
    const QString path = folder.filePath(QString("plot.") + suffix);
    EXPECT_TRUE(plot_->savePicture(path)) << suffix;
    EXPECT_GT(QFile(path).size(), 1000) << suffix;
  }
  const QImage picture(folder.filePath("plot.png"));
  int dark = 0;
  for (int y = 0; y < picture.height(); ++y)
    for (int x = 0; x < picture.width(); ++x) dark += qGray(picture.pixel(x, y)) < 80;
  EXPECT_GT(dark, 500);
  EXPECT_FALSE(plot_->savePicture("/no such folder/plot.png"));
}

/// Dark pixels within the plot's ground.
int inkOf(Plot& plot) {
  const QImage image = plot.grab().toImage();
  const QRect area(plot.toPixels({0.5, 190}).toPoint(), plot.toPixels({13.5, 10}).toPoint());
  int dark = 0;
  for (int y = area.top(); y < area.bottom(); ++y)
    for (int x = area.left(); x < area.right(); ++x) dark += qGray(image.pixel(x, y)) < 60;
  return dark;
}

TEST_F(PlotTest, AWithheldPictureShowsTheReasonAndNoLine) {
  const int drawn = inkOf(*plot_);
  plot_->setState(PlotState::kWithheld, {});
  EXPECT_GT(drawn, 300);
  EXPECT_EQ(inkOf(*plot_), 0);
}

TEST_F(PlotTest, TheGridStandsAtTheTicksAfterANewSize) {
  for (const QSize size : {QSize(820, 560), QSize(500, 380), QSize(760, 430)}) {
    plot_->resize(size);
    const QImage image = plot_->grab().toImage();
    const auto at = [&](double x, double y) {
      const QPointF pixel = plot_->toPixels({x, y});
      return image.pixelColor(static_cast<int>(std::round(pixel.x())), static_cast<int>(std::round(pixel.y())));
    };
    for (const double tick : {4.0, 8.0, 12.0}) EXPECT_EQ(at(tick, 30), holder_->theme().colours.grid) << tick;
    for (const double between : {3.0, 5.0, 9.0, 11.0})
      EXPECT_EQ(at(between + 0.5, 30), holder_->theme().colours.sheet) << between;
  }
}

TEST_F(PlotTest, LimitsStayWhileLinesMove) {
  const QPointF before = plot_->toPixels({5, 160});
  plot_->setLine({"a",
                  "pump now",
                  "now",
                  LabelAt::kRightEnd,
                  1,
                  QPen(Qt::black, 2),
                  Qt::black,
                  600,
                  true,
                  {{0, 1800}, {50, 1600}}});
  EXPECT_EQ(plot_->toPixels({5, 160}), before);
}

network::PartLoadGround groundOfPump() {
  network::PumpLaw pump;
  pump.curve = part::PumpCurve({{0, 17, 0}, {0.006, 15, 0.7}, {0.012, 9, 0.6}});
  network::PartLoadGround ground;
  ground.usable = true;
  ground.pump_family = network::pumpFamily(pump, 1000);
  ground.efficiency = network::efficiencyLines(pump, 1000);
  ground.limits = network::planeLimits(pump, 1000, {0.01, 1.1e5});
  ground.design_point = {0.01, 1.1e5};
  return ground;
}

TEST(HeadFlowPlotTest, AnAnswerThatMayNotBeUsedWithholdsThePictureAndSaysWhy) {
  test::application();
  theme::ThemeHolder holder(theme::Mode::kLight);
  HeadFlowPlot plot(holder);
  plot.setGround(groundOfPump(), "constant_speed", "strategy: constant speed, 100 %", "constant speed");
  network::PartLoadPicture picture;
  picture.summary.ended = network::Ended::kConverged;
  picture.operating = {0.006, 1.5e5};
  picture.pump_now =
      network::pumpCurve(network::PumpLaw{0, "P1", 0, part::PumpCurve({{0, 17, 0}, {0.012, 9, 0}}), 0.2, 1.0}, 1000, 1);
  plot.setPicture(picture);
  EXPECT_EQ(plot.state(), PlotState::kIdle);
  EXPECT_EQ(plot.marks().size(), 2U);
  picture.summary.ended = network::Ended::kNotConverged;  // the seeded fault
  picture.summary.why = "limit of rounds";
  plot.setPicture(picture);
  EXPECT_EQ(plot.state(), PlotState::kWithheld);
}

TEST(HeadFlowPlotTest, InchPoundUnitsShowGallonsAndFeetOfHead) {
  test::application();
  theme::ThemeHolder holder(theme::Mode::kLight);
  HeadFlowPlot plot(holder);
  plot.setGround(groundOfPump(), "constant_speed", {}, "constant speed");
  plot.setUnits(quantity::UnitSystem::kIp);
  const Line& fastest = plot.lines().at(groundOfPump().efficiency.size());
  // 17 m = 55.77 ft, 12 L/s = 190.2 US gpm (exact definitions of foot and gallon).
  EXPECT_NEAR(fastest.points.front().y(), 17 / 0.3048, 0.01);
  EXPECT_NEAR(fastest.points.back().x(), 0.012 / 0.003785411784 * 60, 0.01);
}

}  // namespace
}  // namespace ebbline::plot
