// Corners of the loop corrections that the campaign seldom meets.

#include <gtest/gtest.h>

#include <cmath>
#include <stop_token>

#include "core/loop/campus.h"
#include "core/network/demand.h"
#include "core/network/edge_law.h"
#include "core/network/solver.h"

namespace ebbline::network {
namespace {

// Pump 0 → 1 of 100 kPa shut-off; between 1 and 0 two branches. Branch one: terminals A and B side by side (1 → 2),
// then terminal C (2 → 0). Branch two: terminal D (1 → 0). The tree has to hold one terminal of A, B, C.
struct SeriesOfTerminals {
  Network network;
  Request request;

  SeriesOfTerminals() {
    network.num_nodes = 3;
    network.node_elevation_m.assign(3, 0.0);
    const int ends[][2] = {{0, 1}, {1, 2}, {1, 2}, {2, 0}, {1, 0}};
    for (const auto& [from, to] : ends) {
      network.edges.push_back({from, to, static_cast<int>(network.elements.size()), 1});
      Element element;
      element.id = static_cast<loop::Id>(network.elements.size() + 1);
      network.elements.push_back(element);
    }
    network.elements[0].kind = Element::Kind::kPump;
    network.elements[0].pump = 0;
    PumpLaw pump;
    pump.curve = part::PumpCurve({{0, 10.0, 0}, {0.01, 8.0, 0}});
    network.pumps.push_back(pump);
    for (int t = 0; t < 4; ++t) {
      Element& element = network.elements[t + 1];
      element.kind = Element::Kind::kTerminal;
      element.terminal = t;
      TerminalLaw law;
      law.element = t + 1;
      law.design_flow_m3s = 0.001;
      law.valve_kvs_m3h = 4;
      network.terminals.push_back(law);
    }
    request.terminals.assign(4, {loop::DemandKind::kRequest, 0.001, 1});
  }
};

void expectMethodsAgree(const Network& network, const Request& request) {
  State newton;
  State cross;
  ASSERT_TRUE(Solver(network).solve(request, newton).usable());
  const Summary summary = HardyCross(network).solve(request, cross);
  ASSERT_TRUE(summary.usable()) << summary.why;
  EXPECT_LE(largestDifference(newton, cross).relative, 1e-6);
  EXPECT_NEAR(newton.speed, cross.speed, 1e-6);
}

TEST(HardyCross, TerminalInTheTreeHoldsItsFlowToo) {
  SeriesOfTerminals s;
  s.request.terminals[2].flow_m3s = 0.0004;  // C holds A and B back
  State state;
  const Summary summary = HardyCross(s.network).solve(s.request, state);
  ASSERT_TRUE(summary.usable()) << summary.why;
  EXPECT_NEAR(state.edge_flow_m3s[3], 0.0004, 1e-12);
  EXPECT_NEAR(state.edge_flow_m3s[1], 0.0002, 1e-9);  // A and B are equal
  EXPECT_NEAR(state.edge_flow_m3s[2], 0.0002, 1e-9);
  EXPECT_TRUE(state.throttled[2]);
  EXPECT_FALSE(state.throttled[0]);
}

TEST(HardyCross, EachTerminalOfASeriesMayBeTheOneThatHolds) {
  for (int holding = 0; holding < 4; ++holding) {
    SeriesOfTerminals s;
    s.request.terminals[holding].flow_m3s = 0.0003;
    expectMethodsAgree(s.network, s.request);
  }
}

TEST(HardyCross, NobodyAsksNothingFlows) {
  SeriesOfTerminals s;
  for (TerminalDemand& demand : s.request.terminals) demand.flow_m3s = 0;
  State state;
  ASSERT_TRUE(HardyCross(s.network).solve(s.request, state).usable());
  for (double q : state.edge_flow_m3s) EXPECT_EQ(q, 0);
}

TEST(HardyCross, SpeedStaysWithinItsBounds) {
  const loop::Loop campus = loop::campus(12);
  const Network network = compile(campus).network;
  Request request = requestOf(campus, network, nullptr);
  ASSERT_EQ(request.speed.kind, SpeedRule::Kind::kHoldPressure);
  State state;
  HardyCross method(network);
  request.speed.taps.front().set_point_pa = 1e9;
  Summary summary = method.solve(request, state);
  ASSERT_TRUE(summary.usable());
  EXPECT_EQ(summary.bound, SpeedBound::kAtMaximum);
  EXPECT_DOUBLE_EQ(state.speed, request.speed.maximum_speed);
  request.speed.taps.front().set_point_pa = 0.001;
  summary = method.solve(request, state);
  ASSERT_TRUE(summary.usable());
  EXPECT_EQ(summary.bound, SpeedBound::kAtMinimum);
  EXPECT_DOUBLE_EQ(state.speed, request.speed.minimum_speed);
}

TEST(HardyCross, StopsWhenAsked) {
  SeriesOfTerminals s;
  std::stop_source stop;
  stop.request_stop();
  State state;
  EXPECT_EQ(HardyCross(s.network).solve(s.request, state, stop.get_token()).ended, Ended::kCancelled);
}

TEST(HardyCross, DrawsThatDoNotAddUpAreNeverCalledAnAnswer) {
  SeriesOfTerminals s;
  s.network.draws = {{2, 0.0001}};
  State state;
  EXPECT_FALSE(HardyCross(s.network).solve(s.request, state).usable());
}

}  // namespace
}  // namespace ebbline::network
