#include "ui/canvas/loop_canvas.h"

#include <gtest/gtest.h>

#include <QAccessible>
#include <QPainter>
#include <QPicture>
#include <QSignalSpy>
#include <QTest>
#include <QVBoxLayout>
#include <QWheelEvent>
#include <QWindow>
#include <algorithm>
#include <ctime>

#include "tests/ui/application.h"
#include "tests/ui/canvas/trial_loop.h"

namespace ebbline::canvas {
namespace {

class Canvas : public testing::Test {
 protected:
  void SetUp() override {
    canvas.resize(1280, 800);
    canvas.setLoop(loop);
    canvas.setResults(trial::results(loop, 0.46));
    canvas.show();
    ASSERT_TRUE(QTest::qWaitForWindowExposed(&canvas));
  }
  QWindow* window() { return canvas.windowHandle(); }
  void click(loop::Point at) { QTest::mouseClick(window(), Qt::LeftButton, {}, canvas.toScreen(at).toPoint()); }
  void wheel(QPoint at, int delta) {
    QWheelEvent event(at, canvas.mapToGlobal(at), {}, {0, delta}, Qt::NoButton, Qt::NoModifier, Qt::NoScrollPhase,
                      false);
    QCoreApplication::sendEvent(&canvas, &event);
  }

  loop::Loop loop = trial::building(4, 6);
  theme::ThemeHolder holder{theme::Mode::kLight};
  LoopCanvas canvas{holder};
};

TEST_F(Canvas, AClickOnEachTerminalPicksThatTerminal) {
  QSignalSpy picked(&canvas, &LoopCanvas::picked);
  for (const loop::Terminal& terminal : loop.terminals) {
    click(terminal.at);
    EXPECT_EQ(canvas.selected(), terminal.id) << terminal.tag;
  }
  EXPECT_EQ(picked.count(), 24);
  QTest::mouseClick(window(), Qt::LeftButton, {}, {1270, 300});
  EXPECT_EQ(canvas.selected(), 0u) << "the ground chooses nothing";
}

TEST_F(Canvas, AClickStillFindsItAfterZoomAndPan) {
  const loop::Terminal& terminal = loop.terminals[7];
  wheel(canvas.toScreen(terminal.at).toPoint(), 360);
  canvas.panBy({-31, 17});
  click(terminal.at);
  EXPECT_EQ(canvas.selected(), terminal.id);
  EXPECT_EQ(canvas.hit(canvas.toScreen(terminal.at) + QPointF(0, 30)), 0u) << "a miss is a miss";
}

TEST_F(Canvas, TheWheelKeepsThePlaceUnderThePointer) {
  const loop::Point at = loop.terminals[4].at;
  const QPointF before = canvas.toScreen(at);
  const double scale = canvas.pxPerMetre();
  wheel(before.toPoint(), 240);
  EXPECT_GT(canvas.pxPerMetre(), 1.3 * scale);
  EXPECT_NEAR(canvas.toScreen(at).x(), before.x(), 1.5);
  EXPECT_NEAR(canvas.toScreen(at).y(), before.y(), 1.5);
}

TEST_F(Canvas, DraggingTheMiddleButtonPansAndChoosesNothing) {
  const QPointF before = canvas.toScreen({0, 0});
  QTest::mousePress(window(), Qt::MiddleButton, {}, {300, 300});
  QTest::mouseMove(window(), {360, 340});
  QTest::mouseRelease(window(), Qt::MiddleButton, {}, {360, 340});
  EXPECT_EQ(canvas.toScreen({0, 0}) - before, QPointF(60, 40));
  EXPECT_EQ(canvas.selected(), 0u);
}

TEST_F(Canvas, SpaceAndLeftButtonPanToo) {
  canvas.setFocus();
  const QPointF before = canvas.toScreen({0, 0});
  QTest::keyPress(window(), Qt::Key_Space);
  QTest::mousePress(window(), Qt::LeftButton, {}, canvas.toScreen(loop.terminals[0].at).toPoint());
  QTest::mouseMove(window(), canvas.toScreen(loop.terminals[0].at).toPoint() + QPoint(25, 0));
  QTest::mouseRelease(window(), Qt::LeftButton, {}, canvas.toScreen(loop.terminals[0].at).toPoint());
  QTest::keyRelease(window(), Qt::Key_Space);
  EXPECT_NEAR((canvas.toScreen({0, 0}) - before).x(), 25, 1);
  EXPECT_EQ(canvas.selected(), 0u);
}

TEST_F(Canvas, KeysZoomFitAndPan) {
  canvas.setFocus();
  const double fitted = canvas.pxPerMetre();
  const QPointF origin = canvas.toScreen({0, 0});
  QTest::keyClick(window(), Qt::Key_Plus);
  EXPECT_NEAR(canvas.pxPerMetre(), 1.25 * fitted, 1e-9);
  QTest::keyClick(window(), Qt::Key_Left);
  QTest::keyClick(window(), Qt::Key_0);
  EXPECT_NEAR(canvas.pxPerMetre(), fitted, 1e-9);
  EXPECT_EQ(canvas.toScreen({0, 0}), origin);
}

TEST_F(Canvas, TabWalksTheTerminalsInOrderAndThenLeaves) {
  QWidget page;
  auto* layout = new QVBoxLayout(&page);
  auto* inside = new LoopCanvas(holder, &page);
  auto* after = new QWidget(&page);
  after->setFocusPolicy(Qt::StrongFocus);
  layout->addWidget(inside);
  layout->addWidget(after);
  inside->setLoop(trial::building(1, 3));
  page.resize(600, 500);
  page.show();
  page.activateWindow();
  ASSERT_TRUE(QTest::qWaitForWindowActive(&page));
  inside->setFocus();
  for (const loop::Terminal& terminal : inside->loop().terminals) {
    QTest::keyClick(page.windowHandle(), Qt::Key_Tab);
    EXPECT_EQ(inside->selected(), terminal.id);
  }
  QTest::keyClick(page.windowHandle(), Qt::Key_Tab);
  EXPECT_TRUE(after->hasFocus());
}

TEST_F(Canvas, TellsAScreenReaderWhatIsChosen) {
  canvas.select(loop.terminals[0].id);
  const QString words = canvas.accessibleDescription();
  EXPECT_TRUE(words.contains("T1-1")) << words.toStdString();
  EXPECT_TRUE(words.contains(QString::fromUtf8("−17"))) << words.toStdString();
  EXPECT_TRUE(words.contains("L/s"));
  canvas.setUnits(quantity::UnitSystem::kIp);
  EXPECT_TRUE(canvas.accessibleDescription().contains("gpm"));
}

TEST_F(Canvas, TakesOnTheThemeWhileItIsShown) {
  EXPECT_EQ(canvas.grab().toImage().pixelColor(2, 2), theme::makeTheme(theme::Mode::kLight).colours.sheet);
  holder.setMode(theme::Mode::kDark);
  EXPECT_EQ(canvas.grab().toImage().pixelColor(2, 2), theme::makeTheme(theme::Mode::kDark).colours.sheet);
}

TEST_F(Canvas, RunsCarryTheScaleColourOfTheirPressure) {
  // The first riser: supply from 60 kPa to 58.6 kPa on a scale from 0 to 80 (invented results).
  canvas.setColourBy(ColourBy::kPressure);
  const loop::Joint& foot = loop.joints.front();
  const QPointF at = canvas.toScreen({foot.at.x_m, foot.at.y_m + 1.5});
  const QImage picture = canvas.grab().toImage();
  const QColor wanted = holder.theme().cividis.at(59.3 / 80);
  int best = 1000;
  for (int dx = -3; dx <= 3; ++dx) {
    const QColor got = picture.pixelColor(at.toPoint() + QPoint(dx, 0));
    best = std::min(best, std::abs(got.red() - wanted.red()) + std::abs(got.green() - wanted.green()) +
                              std::abs(got.blue() - wanted.blue()));
  }
  EXPECT_LE(best, 6);
}

TEST_F(Canvas, AnEmptyLoopSaysSoAndDoesNotFail) {
  canvas.setLoop({});
  canvas.grab();
  EXPECT_EQ(canvas.hit({100, 100}), 0u);
  canvas.zoomBy(2, {3, 3});
  canvas.fit();
}

TEST_F(Canvas, ReferencesToNothingAreDrawnAsNothing) {
  loop::Loop broken = loop;
  broken.paired_runs[2].to = 999999;
  broken.terminals[3].from.joint = 888888;
  broken.pumps[0].to.joint = 777777;
  broken.plants[0].from.joint = 666666;
  broken.vessels[0].at_end.joint = 555555;
  canvas.setLoop(broken);
  canvas.grab();
  SUCCEED();
}

TEST(PaintLoop, GivesLettersAndLinesToAPageWithoutAnyPixelPicture) {
  const loop::Loop loop = trial::building(4, 6);
  const network::Results results = trial::results(loop, 0.46);
  LoopPicture picture;
  picture.loop = &loop;
  picture.results = &results;
  QPicture record;
  QPainter painter(&record);
  paintLoop(painter, {0, 0, 800, 500}, picture, theme::printTheme());
  painter.end();
  EXPECT_GT(record.size(), 20000u);
  EXPECT_LT(record.size(), 2000000u) << "a picture of 24 terminals weighs little unless something was made of pixels";
  EXPECT_TRUE(QRect(0, 0, 800, 500).contains(record.boundingRect().adjusted(12, 12, -12, -12)));
}

double median(std::vector<double> times) {
  std::sort(times.begin(), times.end());
  return times[times.size() / 2];
}

// No absolute limit: machines differ. A frame must cost like the number of things seen, not like something worse.
TEST(Frames, OfFiveThousandPartsCostLikeTheirNumber) {
  theme::ThemeHolder holder(theme::Mode::kLight);
  const auto frame = [&](int floors, int perFloor, const char* name) {
    const loop::Loop loop = trial::building(floors, perFloor);
    LoopCanvas canvas(holder);
    canvas.resize(1280, 800);
    canvas.setLoop(loop);
    canvas.setResults(trial::results(loop, 0.5));
    canvas.setColourBy(ColourBy::kPressure);
    canvas.show();
    QImage image(1280, 800, QImage::Format_ARGB32_Premultiplied);
    const auto time = [&](auto&& step) {
      std::vector<double> times;
      for (int i = 0; i < 15; ++i) {
        const std::clock_t start = std::clock();  // processor time: other work on the machine does not count
        step(i);
        canvas.render(&image);
        times.push_back(1e3 * static_cast<double>(std::clock() - start) / CLOCKS_PER_SEC);
      }
      return median(times);
    };
    const network::Results one = trial::results(loop, 0.5), two = trial::results(loop, 0.3);
    const double pan = time([&](int i) { canvas.panBy({i % 2 ? 7.0 : -7.0, 3}); });
    const double recolour = time([&](int i) { canvas.setResults(i % 2 ? one : two); });
    const double zoom = time([&](int i) { canvas.zoomBy(i % 2 ? 1.02 : 0.99, {640, 400}); });
    const double deep = (canvas.zoomBy(12, {640, 400}), time([&](int i) { canvas.panBy({i % 2 ? 7.0 : -7.0, 3}); }));
    const size_t parts = loop.terminals.size() + loop.paired_runs.size() + loop.pipe_runs.size() + loop.joints.size();
    std::printf("%s: %zu parts; pan %.1f ms, recolour %.1f ms, zoom %.1f ms, pan close up %.1f ms\n", name, parts, pan,
                recolour, zoom, deep);
    return recolour;
  };
  const double small = frame(8, 52, "quarter"), large = frame(16, 104, "whole");
  EXPECT_LT(large / small, 10) << "four times the parts";
}

}  // namespace
}  // namespace ebbline::canvas
