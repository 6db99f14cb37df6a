#include "ui/canvas/labels.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <map>
#include <set>

#include "core/loop/file.h"
#include "tests/ui/canvas/trial_loop.h"
#include "ui/canvas/view.h"

namespace ebbline::canvas {
namespace {

struct Labelled {
  Labelled(loop::Loop drawn, double scale, bool solved) : loop(std::move(drawn)), topology(loop) {
    if (solved) results = trial::results(loop, 0.46);
    picture.loop = &loop;
    picture.results = solved ? &results : nullptr;
    geometry = makeGeometry(loop, topology, scale, {});
    labels =
        placeLabels(geometry, dresser.dress(geometry, topology, picture, theme), topology, picture, theme, options);
  }
  loop::Loop loop;
  Topology topology;
  theme::Theme theme = theme::makeTheme(theme::Mode::kLight);
  network::Results results;
  LoopPicture picture;
  PaintOptions options;
  Geometry geometry;
  Dresser dresser;
  std::vector<Label> labels;
};

int overlaps(const std::vector<Label>& labels) {
  int out = 0;
  for (size_t i = 0; i < labels.size(); ++i)
    for (size_t k = i + 1; k < labels.size(); ++k) out += labels[i].box.intersects(labels[k].box) ? 1 : 0;
  return out;
}

loop::Loop office() {
  const loop::Reading reading = loop::readLoopFile(EBBLINE_SOURCE_DIR "/samples/office.ebbline");
  EXPECT_TRUE(reading.usable());
  return reading.loop;
}

double fitted(const loop::Loop& loop, QSizeF size) {
  return fitView(loop, Topology(loop), QRectF(QPointF(), size), theme::makeTheme(theme::Mode::kLight), {},
                 ColourBy::kNone)
      .scale;
}

TEST(Labels, OfTheOfficeNeverOverlapAtAnyZoom) {
  const loop::Loop loop = office();
  for (const double zoom : {0.3, 0.6, 1.0, 1.7, 4.0}) {
    const Labelled drawn(loop, zoom * fitted(loop, {1280, 800}), false);
    EXPECT_EQ(overlaps(drawn.labels), 0) << "at zoom " << zoom;
  }
}

TEST(Labels, TheCheckSeesTwoThatOverlap) {
  Label a, b;  // seeded fault
  a.box = {0, 0, 30, 10};
  b.box = {25, 5, 30, 10};
  EXPECT_EQ(overlaps({a, b}), 1);
}

TEST(Labels, EveryTerminalOfTheOfficeIsNamedInTheFittedView) {
  const loop::Loop loop = office();
  ASSERT_EQ(loop.terminals.size(), 24u);
  for (const QSizeF size : {QSizeF(568, 700), QSizeF(1280, 800), QSizeF(1920, 1080)}) {
    const Labelled drawn(loop, fitted(loop, size), false);
    std::set<loop::Id> named;
    for (const Label& label : drawn.labels) named.insert(label.id);
    for (const loop::Terminal& terminal : loop.terminals) EXPECT_TRUE(named.count(terminal.id)) << terminal.tag;
  }
}

TEST(Labels, ShortfallsAreWrittenBesideTheirTerminal) {
  const Labelled drawn(trial::building(4, 6), 10, true);
  std::map<QString, loop::Id> found;
  for (const Label& label : drawn.labels)
    if (label.ink == LabelInk::kUnder) found[label.text] = label.id;
  EXPECT_EQ(found[QString::fromUtf8("−17\u00a0%")], drawn.loop.terminals[0].id);
  EXPECT_EQ(found[QString::fromUtf8("−8\u00a0%")], drawn.loop.terminals[1].id);
  EXPECT_EQ(overlaps(drawn.labels), 0);
}

TEST(Labels, ShortfallsAreWrittenEvenWhereTerminalsStandClose) {
  for (const double scale : {5.0, 6.0, 7.0, 8.0, 12.0}) {
    const Labelled drawn(trial::building(4, 6), scale, true);
    if (drawn.labels.empty()) continue;  // all text is below 6 px
    const auto told = std::count_if(drawn.labels.begin(), drawn.labels.end(), [](const Label& label) {
      return label.text.endsWith('%') && label.ink == LabelInk::kUnder;
    });
    EXPECT_EQ(told, 2) << "at " << scale << " px per metre";
  }
}

// Every terminal short, as when a set-point is far too low: figures keep off each other, off symbols and off pipes.
TEST(Labels, ShortfallsOfAWholeBuildingAreAllToldAndStandOnNoPipe) {
  for (const double scale : {6.0, 8.0, 10.0, 14.0}) {
    Labelled drawn(trial::building(4, 6), scale, true);
    for (network::TerminalResult& terminal : drawn.results.terminals) {
      terminal.under_supplied = true;
      terminal.shortfall = 0.45;
    }
    const Dressing& dressing = drawn.dresser.dress(drawn.geometry, drawn.topology, drawn.picture, drawn.theme);
    drawn.labels = placeLabels(drawn.geometry, dressing, drawn.topology, drawn.picture, drawn.theme, drawn.options);
    int told = 0;
    for (const Label& label : drawn.labels) {
      if (!label.text.endsWith('%') || label.ink != LabelInk::kUnder) continue;
      ++told;
      for (const Piece& piece : drawn.geometry.pieces)
        EXPECT_FALSE(label.box.intersects(QRectF(piece.a, piece.b).normalized().adjusted(-1, -1, 1, 1)))
            << "at " << scale << " px per metre";
    }
    EXPECT_EQ(told, 24) << "at " << scale << " px per metre";
    EXPECT_EQ(overlaps(drawn.labels), 0) << "at " << scale << " px per metre";
  }
}

TEST(Labels, NoneIsSmallerThanSixPixels) {
  for (const double scale : {0.5, 1.0, 2.0, 3.0, 4.0, 6.0, 10.0}) {
    const Labelled drawn(trial::building(4, 6), scale, true);
    for (const Label& label : drawn.labels) EXPECT_GE(label.px, kSmallestText);
    EXPECT_TRUE(drawn.geometry.symbolScale >= 0.3 || drawn.labels.empty());
  }
  EXPECT_TRUE(Labelled(trial::building(4, 6), 1.0, true).labels.empty());
  EXPECT_FALSE(Labelled(trial::building(4, 6), 8.0, true).labels.empty());
}

}  // namespace
}  // namespace ebbline::canvas
