#include "ui/canvas/geometry.h"

#include <gtest/gtest.h>

#include <cmath>

#include "tests/ui/canvas/trial_loop.h"
#include "ui/canvas/crossings.h"
#include "ui/canvas/dressing.h"
#include "ui/canvas/hit_test.h"
#include "ui/canvas/painting.h"

namespace ebbline::canvas {
namespace {

struct Drawn {
  explicit Drawn(double scale, loop::Loop drawn = trial::building(4, 6))
      : loop(std::move(drawn)), topology(loop), geometry(makeGeometry(loop, topology, scale, {})) {}
  loop::Loop loop;
  Topology topology;
  Geometry geometry;
};

bool cross(const Piece& p, const Piece& q) {
  const auto side = [](QPointF a, QPointF b, QPointF c) {
    return (b.x() - a.x()) * (c.y() - a.y()) - (b.y() - a.y()) * (c.x() - a.x());
  };
  return side(p.a, p.b, q.a) * side(p.a, p.b, q.b) < -1e-6 && side(q.a, q.b, p.a) * side(q.a, q.b, p.b) < -1e-6;
}

int crossingsOf(const std::vector<Piece>& pieces) {
  int out = 0;
  for (size_t i = 0; i < pieces.size(); ++i)
    for (size_t k = i + 1; k < pieces.size(); ++k) out += cross(pieces[i], pieces[k]) ? 1 : 0;
  return out;
}

class Zooms : public testing::TestWithParam<double> {};
INSTANTIATE_TEST_SUITE_P(PxPerMetre, Zooms, testing::Values(2.0, 7.5, 11.3, 40.0));

TEST_P(Zooms, AReturnRunsNinePixelsUpLeftOfItsSupply) {
  const Drawn drawn(GetParam());
  int checked = 0;
  for (const Piece& supply : drawn.geometry.pieces) {
    const Strand& s = drawn.geometry.strands[static_cast<size_t>(supply.strand)];
    if (s.kind != PartKind::kPairedRun || s.isReturn) continue;
    const bool level = std::abs(supply.a.y() - supply.b.y()) < 1e-9;
    for (const Piece& back : drawn.geometry.pieces) {
      const Strand& r = drawn.geometry.strands[static_cast<size_t>(back.strand)];
      if (r.id != s.id || !r.isReturn) continue;
      EXPECT_NEAR(level ? back.a.y() - supply.a.y() : back.a.x() - supply.a.x(), -9, 1e-9);
      EXPECT_NEAR(level ? back.b.y() - supply.b.y() : back.b.x() - supply.b.x(), -9, 1e-9);
      ++checked;
    }
  }
  EXPECT_GE(checked, 28);
}

TEST_P(Zooms, LinesStandOnHalfPixels) {
  const Drawn drawn(GetParam());
  for (const Piece& piece : drawn.geometry.pieces) {
    const Strand& strand = drawn.geometry.strands[static_cast<size_t>(piece.strand)];
    if (strand.kind != PartKind::kPairedRun) continue;
    const double across = std::abs(piece.a.y() - piece.b.y()) < 1e-9 ? piece.a.y() : piece.a.x();
    EXPECT_NEAR(across - std::floor(across), 0.5, 1e-9);
  }
}

TEST(Crossings, AreCutWhereLinesPassOverEachOther) {
  const Drawn drawn(10);
  EXPECT_EQ(crossingsOf(drawn.geometry.pieces), 0);
}

TEST(Crossings, TheCheckSeesACrossingThatWasNotCut) {
  // Seeded fault: the same two lines without a gap.
  const std::vector<Line> lines{{{{0, 0}, {100, 0}}, 0, false, false}, {{{50, -50}, {50, 50}}, 1, true, false}};
  EXPECT_EQ(crossingsOf(cutAtCrossings(lines, 0)), 1);
  const std::vector<Piece> cut = cutAtCrossings(lines, 1);
  EXPECT_EQ(crossingsOf(cut), 0);
  ASSERT_EQ(cut.size(), 3u);
  EXPECT_EQ(cut[0].strand, 0) << "the line that does not go over is the one that is cut";
  EXPECT_NEAR(cut[1].a.x() - cut[0].b.x(), 11, 1e-9);
}

TEST(Crossings, ATeeIsNoCrossing) {
  const std::vector<Line> lines{{{{0, 0}, {100, 0}}, 0, false, false}, {{{50, 0}, {50, 50}}, 1, true, false}};
  EXPECT_EQ(cutAtCrossings(lines, 1).size(), 2u);
}

TEST(Topology, KnowsTheReturnThroughPumpAndVessel) {
  const Drawn drawn(10);
  const loop::Pump& pump = drawn.loop.pumps.front();
  EXPECT_TRUE(drawn.topology.isReturn(pump.from));
  EXPECT_TRUE(drawn.topology.isReturn(pump.to));
  EXPECT_FALSE(drawn.topology.isReturn(drawn.loop.plants.front().to));
  EXPECT_TRUE(drawn.topology.isReturn(drawn.loop.plants.front().from));
}

TEST(Topology, ARunThatJustStopsGetsAnOpenEnd) {
  loop::Loop loop = trial::building(1, 3);
  EXPECT_TRUE(Drawn(10, loop).geometry.openEnds.empty());
  loop.terminals.pop_back();
  EXPECT_EQ(Drawn(10, loop).geometry.openEnds.size(), 2u) << "supply and return of the joint the terminal hung on";
}

TEST(Weights, FollowTheRootOfFlow) {
  const theme::Stroke stroke = theme::makeTheme(theme::Mode::kLight).stroke;
  EXPECT_DOUBLE_EQ(weightOf(0, 10, stroke), 1.25);
  EXPECT_DOUBLE_EQ(weightOf(10, 10, stroke), 4.5);
  EXPECT_DOUBLE_EQ(weightOf(-2.5, 10, stroke), 1.25 + 3.25 * 0.5);
  EXPECT_DOUBLE_EQ(weightOf(40, 10, stroke), 4.5);
  EXPECT_DOUBLE_EQ(weightOf(1, 0, stroke), 1.25) << "a loop without design flow";
}

TEST(Weights, AShutBranchIsThinAndGreyAndTheRestIsNot) {
  const Drawn drawn(10);
  const network::Results results = trial::results(drawn.loop, 0.46);
  const theme::Theme theme = theme::makeTheme(theme::Mode::kLight);
  LoopPicture picture;
  picture.loop = &drawn.loop;
  picture.results = &results;
  Dresser dresser;
  const Dressing& dressing = dresser.dress(drawn.geometry, drawn.topology, picture, theme);
  for (size_t i = 0; i < dressing.strands.size(); ++i) {
    const auto part = std::find_if(results.parts.begin(), results.parts.end(), [&](const network::PartResult& r) {
      return r.id == drawn.geometry.strands[i].id &&
             (r.side == loop::Side::kSingle || r.side == drawn.geometry.strands[i].side);
    });
    ASSERT_NE(part, results.parts.end());
    EXPECT_EQ(dressing.strands[i].idle, part->flow_m3s == 0);
    EXPECT_EQ(dressing.strands[i].colour, (part->flow_m3s == 0 ? theme.colours.pipeIdle : theme.colours.pipe).rgba());
  }
  EXPECT_TRUE(dressing.terminals[0].under);
  EXPECT_FALSE(dressing.terminals[2].under);
  EXPECT_TRUE(dressing.terminals[11].idle);
}

TEST(Weights, ResultsInAnotherOrderLandOnTheSameLines) {
  const Drawn drawn(10);
  network::Results results = trial::results(drawn.loop, 0.46);
  const theme::Theme theme = theme::makeTheme(theme::Mode::kLight);
  LoopPicture picture;
  picture.loop = &drawn.loop;
  picture.results = &results;
  Dresser dresser;
  const Dressing before = dresser.dress(drawn.geometry, drawn.topology, picture, theme);
  std::reverse(results.parts.begin(), results.parts.end());
  std::reverse(results.ends.begin(), results.ends.end());
  std::reverse(results.terminals.begin(), results.terminals.end());
  const Dressing& after = dresser.dress(drawn.geometry, drawn.topology, picture, theme);
  for (size_t i = 0; i < before.strands.size(); ++i) EXPECT_EQ(before.strands[i].width, after.strands[i].width);
  for (size_t i = 0; i < before.terminals.size(); ++i)
    EXPECT_EQ(before.terminals[i].shortfall, after.terminals[i].shortfall);
}

TEST(RoundScale, HasThreeToSixStepsOnRoundNumbersAroundTheRange) {
  for (const auto& [low, high] :
       {std::pair{0.0, 62.0}, {-3.2, 57.8}, {0.0, 187.0}, {101.2, 101.9}, {0.0, 1e-5}, {5.0, 5.0}}) {
    const Scale scale = roundScale(low, high);
    ASSERT_TRUE(scale.valid);
    EXPECT_LE(scale.low, low + 1e-9);
    EXPECT_GE(scale.high, high - 1e-9);
    const double steps = (scale.high - scale.low) / scale.step;
    EXPECT_GE(steps, 0.99);
    EXPECT_LE(steps, 6.01);
  }
  EXPECT_FALSE(roundScale(0, std::nan("")).valid);
}

TEST(RoundScale, OpensNoEmptyStepForAFewBelowZero) {
  const Scale scale = roundScale(-3, 115);
  EXPECT_EQ(scale.low, -25);
  EXPECT_EQ(scale.high, 125);
  EXPECT_EQ(scale.step, 25);
  const Scale small = roundScale(-0.03, 1.15);
  EXPECT_EQ(small.decimals, 2);
  EXPECT_NEAR(small.step, 0.25, 1e-12);
}

TEST(Key, ShowsAtMostFourRoundFlowsUpToDesign) {
  EXPECT_EQ(keyFlows(10.74), (std::vector<double>{0.5, 2, 5, 10}));
  EXPECT_TRUE(keyFlows(0).empty());
  EXPECT_LE(keyFlows(0.03).back(), 0.03);
}

TEST(Hit, EverySymbolIsFoundAtItsCentreAndEveryRunOnItsLine) {
  const Drawn drawn(12);
  const HitTest hits(drawn.geometry);
  for (const Mark& mark : drawn.geometry.marks) EXPECT_EQ(hits.at(mark.centre), mark.id);
  for (const Piece& piece : drawn.geometry.pieces) {
    const Strand& strand = drawn.geometry.strands[static_cast<size_t>(piece.strand)];
    if (strand.leg || std::hypot(piece.b.x() - piece.a.x(), piece.b.y() - piece.a.y()) < 40) continue;
    EXPECT_EQ(hits.at((piece.a + piece.b) / 2), strand.id);
  }
  EXPECT_EQ(hits.at({-500, -500}), 0u);
  EXPECT_EQ(HitTest().at({0, 0}), 0u);
}

}  // namespace
}  // namespace ebbline::canvas
