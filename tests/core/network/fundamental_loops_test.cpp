#include "core/network/fundamental_loops.h"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

namespace ebbline::network {
namespace {

// Nodes 0…3 in a square with one diagonal, and a node 4 apart from them joined to 5; edge 3 holds a terminal.
Network square() {
  Network network;
  network.num_nodes = 6;
  network.datum_node = 1;
  const int ends[][2] = {{0, 1}, {1, 2}, {2, 3}, {3, 0}, {0, 2}, {4, 5}};
  for (const auto& [from, to] : ends) {
    network.edges.push_back({from, to, static_cast<int>(network.elements.size()), 1});
    network.elements.emplace_back();
  }
  network.elements[3].terminal = 0;
  return network;
}

// A closed walk: each step begins where the one before ended.
void expectCloses(const Network& network, const LoopPath& loop) {
  const auto begin = [&](LoopStep s) { return s.sign > 0 ? network.edges[s.edge].from : network.edges[s.edge].to; };
  const auto end = [&](LoopStep s) { return s.sign > 0 ? network.edges[s.edge].to : network.edges[s.edge].from; };
  for (std::size_t i = 0; i < loop.size(); ++i) EXPECT_EQ(end(loop[i]), begin(loop[(i + 1) % loop.size()]));
}

TEST(FundamentalLoops, OneLoopForEachEdgeBeyondTheTrees) {
  const Network network = square();
  const FundamentalLoops loops(network);
  EXPECT_EQ(loops.numParts(), 2);
  EXPECT_NE(loops.partOf(0), loops.partOf(4));
  ASSERT_EQ(loops.chords().size(), 2U);  // 6 edges − 6 nodes + 2 parts
  for (int l = 0; l < 2; ++l) {
    const LoopPath path = loops.loop(l);
    EXPECT_EQ(path.front().edge, loops.chords()[l]);
    EXPECT_EQ(path.front().sign, 1);
    expectCloses(network, path);
  }
}

TEST(FundamentalLoops, TerminalIsAChordWhereTheTreeAllowsIt) {
  const Network network = square();
  const FundamentalLoops loops(network);
  EXPECT_FALSE(loops.inTree(3));
}

TEST(FundamentalLoops, LeftOutEdgeIsNeitherTreeNorChord) {
  const Network network = square();
  std::vector<int> rank = terminalsLast(network);
  rank[5] = kLeftOut;
  const FundamentalLoops loops(network, rank);
  EXPECT_EQ(loops.numParts(), 3);
  EXPECT_FALSE(loops.inTree(5));
  for (int chord : loops.chords()) EXPECT_NE(chord, 5);
}

TEST(FundamentalLoops, TreeFlowsKeepFlowAtEveryNode) {
  Network network = square();
  network.draws = {{0, -3}, {2, 1}, {3, 2}};
  const FundamentalLoops loops(network);
  std::vector<double> flow(6, 0.0);
  for (int chord : loops.chords()) flow[chord] = 0.25 * (chord + 1);
  EXPECT_NEAR(loops.setTreeFlows(flow), 0, 1e-15);
  std::vector<double> balance(6, 0.0);
  for (int e = 0; e < 6; ++e) balance[network.edges[e].from] -= flow[e], balance[network.edges[e].to] += flow[e];
  for (const Draw& draw : network.draws) balance[draw.node] -= draw.flow_m3s;
  for (double left : balance) EXPECT_NEAR(left, 0, 1e-15);
}

TEST(FundamentalLoops, DrawsThatDoNotAddUpAreTold) {
  Network network = square();
  network.draws = {{0, -3}, {2, 1}};
  std::vector<double> flow(6, 0.0);
  EXPECT_NEAR(FundamentalLoops(network).setTreeFlows(flow), 2, 1e-15);
}

TEST(FundamentalLoops, SumIsZeroForPressuresOfNodesAndNamesTheChordOtherwise) {
  const Network network = square();
  const FundamentalLoops loops(network);
  const double pressure[] = {7, 0, -2, 5, 1, 1};
  std::vector<double> loss(6);
  for (int e = 0; e < 6; ++e) loss[e] = pressure[network.edges[e].from] - pressure[network.edges[e].to];
  EXPECT_NEAR(loops.largestSum(loss, {}).largest_pa, 0, 1e-15);
  std::vector<double> found;
  loops.nodePressures(loss, found);
  for (int node = 0; node < 4; ++node) EXPECT_NEAR(found[node], pressure[node], 1e-15);  // datum 1 stands at 0
  loss[3] += 0.5;
  EXPECT_NEAR(loops.largestSum(loss, {}).largest_pa, 0.5, 1e-12);
  EXPECT_EQ(loops.largestSum(loss, {}).edge, 3);
}

TEST(FundamentalLoops, HeldTerminalCountsOnlyWherePressureLacks) {
  const Network network = square();
  const FundamentalLoops loops(network);
  std::vector<double> loss(6, 0.0);
  std::vector<Hold> hold(6, Hold::kFree);
  loss[3] = -0.5;  // less loss than there is: the valve takes the rest
  hold[3] = Hold::kAlong;
  EXPECT_EQ(loops.largestSum(loss, hold).largest_pa, 0);
  hold[3] = Hold::kAgainst;
  EXPECT_EQ(loops.largestSum(loss, hold).largest_pa, 0.5);
  hold[3] = Hold::kShut;
  EXPECT_EQ(loops.largestSum(loss, hold).largest_pa, 0);
  loss[3] = 0.5;
  hold[3] = Hold::kAlong;
  EXPECT_EQ(loops.largestSum(loss, hold).largest_pa, 0.5);
}

TEST(FundamentalLoops, SumThatIsNoNumberIsNotHidden) {
  std::vector<double> loss(6, 0.0);
  loss[3] = std::numeric_limits<double>::quiet_NaN();
  const Network network = square();
  EXPECT_TRUE(std::isnan(FundamentalLoops(network).largestSum(loss, {}).largest_pa));
}

}  // namespace
}  // namespace ebbline::network
