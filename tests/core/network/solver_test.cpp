// What the solver promises beyond right numbers: bounds, starts, ends, parts that nothing feeds.

#include "core/network/solver.h"

#include <cmath>

#include <gtest/gtest.h>

#include "core/network/demand.h"
#include "core/network/linear_system.h"
#include "core/network/results.h"
#include "tests/support/closed_form_loop.h"

namespace ebbline::network {
namespace {

using loop::DemandKind;
using loop::Loop;
using loop::Side;
using loop::Strategy;
using test::closedFormLoop;

Network networkOf(const Loop& loop) {
  Compiled compiled = compile(loop);
  for (const text::Remark& remark : compiled.remarks)
    if (text::severityOf(remark.code) == text::Severity::kFault) ADD_FAILURE() << text::oneLine(remark);
  return std::move(compiled.network);
}

Request asking(const Loop& loop, const Network& network, const std::vector<double>& flows_l_s) {
  Request request = requestOf(loop, network, nullptr);
  for (std::size_t t = 0; t < flows_l_s.size(); ++t)
    request.terminals[t] = {DemandKind::kRequest, flows_l_s[t] / 1000, 1};
  return request;
}

State mustSolve(const Network& network, const Request& request) {
  State state;
  const Summary summary = Solver(network).solve(request, state);
  EXPECT_TRUE(summary.usable()) << summary.why;
  return state;
}

TEST(Solver, WarmAgreesWithColdThroughAWalk) {
  const Loop loop = closedFormLoop({true, Strategy::kFieldSensor, 60, 100});
  const Network network = networkOf(loop);
  Solver solver(network);
  State warm;
  for (int i = 0; i < 60; ++i) {
    Request request = asking(loop, network, {});
    for (int t = 0; t < 4; ++t) {
      const double share = 0.5 + 0.5 * std::sin(0.7 * i + 1.3 * t);
      if ((i + t) % 3 == 0)
        request.terminals[t] = {DemandKind::kPosition, 0, share};
      else
        request.terminals[t] = {DemandKind::kRequest, share < 0.1 ? 0 : 0.002 * share, 1};
    }
    ASSERT_TRUE(solver.solve(request, warm).usable()) << i;
    EXPECT_LE(largestDifference(warm, mustSolve(network, request)).relative, 1e-9) << i;
  }
}

TEST(Solver, ColdSolvesAreBitIdenticalWhateverCameBefore) {
  const Loop loop = closedFormLoop({false, Strategy::kDpPump, 100, 100});
  const Network network = networkOf(loop);
  const Request request = asking(loop, network, {0.5, 2, 1.1, 0});
  const State first = mustSolve(network, request);
  Solver used(network);
  State other;
  used.solve(asking(loop, network, {2, 0, 0.3, 1}), other);
  State second;
  used.solve(request, second);
  EXPECT_EQ(first.edge_flow_m3s, second.edge_flow_m3s);
  EXPECT_EQ(first.node_pressure_pa, second.node_pressure_pa);
  EXPECT_EQ(first.speed, second.speed);
}

TEST(Solver, LowestSpeedIsKeptAndSaid) {
  Loop loop = closedFormLoop({true, Strategy::kFieldSensor, 5, 100});
  loop.pumps[0].minimum_speed_percent = 60;
  const Network network = networkOf(loop);
  State state;
  const Summary summary = Solver(network).solve(asking(loop, network, {1, 1, 1, 1}), state);
  ASSERT_TRUE(summary.usable());
  EXPECT_EQ(summary.bound, SpeedBound::kAtMinimum);
  EXPECT_EQ(state.speed, 0.6);
}

TEST(Solver, SeveralSensorsAreAllSatisfiedAndOneGoverns) {
  Loop loop = closedFormLoop({true, Strategy::kFieldSensor, 50, 100});
  loop::Sensor second = loop.sensors[0];
  second.id = 602;
  second.high.joint = second.low.joint = test::kClosedFormNode[0];
  second.set_point_kpa = 73;
  loop.sensors.push_back(second);
  loop.control.sensors = {601, 602};
  const Network network = networkOf(loop);
  for (const std::vector<double>& flows : {std::vector<double>{1, 0, 0, 0}, {0, 0, 0, 2}, {2, 2, 2, 1.5}}) {
    const Request request = asking(loop, network, flows);
    State state;
    const Summary summary = Solver(network).solve(request, state);
    ASSERT_TRUE(summary.usable());
    const Results results = resultsOf(network, request, state);
    EXPECT_GE(results.tap_pressure_pa[0], 50e3 - 1e-3);
    EXPECT_GE(results.tap_pressure_pa[1], 73e3 - 1e-3);
    ASSERT_GE(summary.governing_tap, 0);
    EXPECT_NEAR(results.tap_pressure_pa[summary.governing_tap], summary.governing_tap == 0 ? 50e3 : 73e3, 1e-3);
  }
}

TEST(Solver, TapsReadStaticPressure) {
  // A bore of 30 mm at the high tap alone: the set-point is met by total pressure less ρ v²/2 there.
  Loop loop = closedFormLoop({true, Strategy::kFieldSensor, 50, 100});
  loop.sensors[0].high_bore_mm = 30;
  const Network network = networkOf(loop);
  const Request request = asking(loop, network, {0, 0, 0, 1.5});
  const State state = mustSolve(network, request);
  const double velocity = 0.0015 / (3.14159265358979 / 4 * 0.03 * 0.03);
  double high = 0;
  double low = 0;
  for (const EndPlace& place : network.ends) {
    if (place.end.joint != test::kClosedFormNode[3]) continue;
    (place.end.side == Side::kSupply ? high : low) = state.node_pressure_pa[place.node];
  }
  EXPECT_NEAR(high - low - 1000 * velocity * velocity / 2, 50e3, 1e-3);
}

/// Terminals 3 and 4 in series instead of side by side: 4 hangs behind 3.
Loop seriesLoop() {
  Loop loop = closedFormLoop();
  loop.paired_runs.pop_back();
  loop::Joint between;
  between.id = 110;
  between.paired = false;
  loop.joints.push_back(between);
  loop.terminals[2].to = {110, Side::kSingle};
  loop.terminals[3].from = {110, Side::kSingle};
  loop.terminals[3].to = {test::kClosedFormNode[2], Side::kReturn};
  loop.sensors.clear();
  return loop;
}

TEST(Solver, TwoTerminalsInSeriesTakeTheSmallerRequest) {
  const Loop loop = seriesLoop();
  const Network network = networkOf(loop);
  for (const auto& [third, fourth] : std::vector<std::pair<double, double>>{{2, 1}, {1, 2}, {1, 1}, {0, 1}, {1, 0}}) {
    const Request request = asking(loop, network, {1, 1, third, fourth});
    const State state = mustSolve(network, request);
    const Results results = resultsOf(network, request, state);
    for (const int t : {2, 3})
      EXPECT_NEAR(1000 * results.terminals[t].delivered_m3s, std::min(third, fourth), 1e-9) << third << " " << fourth;
  }
}

TEST(Solver, PressureBehindTwoShutPartsIsNotTold) {
  const Loop loop = seriesLoop();
  const Network network = networkOf(loop);
  const Request request = asking(loop, network, {1, 1, 0, 0});
  const Results results = resultsOf(network, request, mustSolve(network, request));
  for (std::size_t i = 0; i < network.ends.size(); ++i)
    EXPECT_EQ(results.ends[i].determined, network.ends[i].end.joint != 110) << network.ends[i].end.joint;
}

TEST(Solver, DrawWhereNothingComesIsRefused) {
  const Loop loop = seriesLoop();
  Network network = networkOf(loop);
  for (const EndPlace& place : network.ends)
    if (place.end.joint == 110) network.draws.push_back({place.node, 0.001});
  ASSERT_EQ(network.draws.size(), 1U);
  State state;
  const Summary summary = Solver(network).solve(asking(loop, network, {1, 1, 0, 0}), state);
  EXPECT_EQ(summary.ended, Ended::kRefused);
  ASSERT_TRUE(summary.remark);
  EXPECT_EQ(summary.remark->code, text::Code::kSolveDrawUnbalanced);
  EXPECT_EQ(summary.remark->place.id, 110U);
}

TEST(Solver, UnusableRequestsAreRefusedInWords) {
  const Loop loop = closedFormLoop();
  const Network network = networkOf(loop);
  const Request sound = asking(loop, network, {1, 1, 1, 1});
  const auto refused = [&](auto change) {
    Request request = sound;
    change(request);
    State state;
    const Summary summary = Solver(network).solve(request, state);
    return summary.ended == Ended::kRefused && summary.remark && !summary.why.empty();
  };
  EXPECT_FALSE(refused([](Request&) {}));
  EXPECT_TRUE(refused([](Request& r) { r.terminals.pop_back(); }));
  EXPECT_TRUE(refused([](Request& r) { r.terminals[1].flow_m3s = -1; }));
  EXPECT_TRUE(refused([](Request& r) { r.terminals[1].flow_m3s = std::nan(""); }));
  EXPECT_TRUE(refused([](Request& r) { r.speed.speed = 0; }));
  EXPECT_TRUE(refused([](Request& r) { r.speed.kind = SpeedRule::Kind::kHoldPressure; }));
  EXPECT_TRUE(refused([](Request& r) {
    r.speed.kind = SpeedRule::Kind::kHoldPressure;
    r.speed.taps.push_back({-1, 0, 5e4, 0, 0});
  }));
}

TEST(Solver, StopIsObeyed) {
  const Loop loop = closedFormLoop();
  const Network network = networkOf(loop);
  std::stop_source source;
  source.request_stop();
  State state;
  EXPECT_EQ(Solver(network).solve(asking(loop, network, {1, 1, 1, 1}), state, source.get_token()).ended,
            Ended::kCancelled);
  EXPECT_FALSE(state.warm);
}

TEST(Solver, FewerRoundsThanNeededIsNotCalledAnAnswer) {
  const Loop loop = closedFormLoop({false});
  const Network network = networkOf(loop);
  State state;
  Tolerance hasty;
  hasty.most_rounds = 1;
  const Summary summary = Solver(network, hasty).solve(asking(loop, network, {2, 0.1, 0.7, 3}), state);
  EXPECT_EQ(summary.ended, Ended::kNotConverged);
  ASSERT_TRUE(summary.remark);
  EXPECT_EQ(summary.remark->code, text::Code::kSolveNotConverged);
  EXPECT_GT(std::max(summary.flow_residual, summary.pressure_residual), 1e-9);
}

TEST(Solver, PumpWithoutAnyResistanceEndsSomehow) {
  Loop loop = closedFormLoop();
  for (loop::PairedRun& run : loop.paired_runs) run.pipe.known_loss = loop::KnownLoss{1, 0, 2};
  loop.plants[0].loss.loss_kpa = 0;
  const Network network = networkOf(loop);
  const Request request = asking(loop, network, {1, 1, 1, 1});
  const Results results = resultsOf(network, request, mustSolve(network, request));
  for (const TerminalResult& terminal : results.terminals) {
    EXPECT_NEAR(terminal.delivered_m3s, 0.001, 1e-12);
    EXPECT_NEAR(terminal.available_pa, 160e3 - 484.375 * 16, 1e-3);
  }
}

TEST(Results, GaugePressureFollowsHeightAndTheVessel) {
  Loop loop = closedFormLoop();
  loop.joints[5].above_level_m = 12;
  const Network network = networkOf(loop);
  const Request request = asking(loop, network, {2, 2, 2, 2});
  const Results results = resultsOf(network, request, mustSolve(network, request));
  for (const EndResult& end : results.ends) {
    ASSERT_TRUE(end.gauge_pa);
    const double height = end.end.joint == test::kClosedFormNode[3] ? 12 : 0;
    EXPECT_NEAR(*end.gauge_pa, 100e3 + end.pressure_pa - 1000 * 9.80665 * height, 1e-6);
    if (end.end == loop::End{test::kClosedFormHeader, Side::kReturn}) {
      EXPECT_NEAR(*end.gauge_pa, 100e3, 1e-6);
    }
    if (end.end == loop::End{test::kClosedFormHeader, Side::kSupply}) {
      EXPECT_NEAR(end.pressure_pa, 89e3, 1e-4);
    }
  }
}

TEST(Demand, OwnLineWinsOverZoneOverRest) {
  Loop loop = closedFormLoop();
  loop.zones.push_back({});
  loop.zones[0].id = 50;
  loop.terminals[0].zone = loop.terminals[1].zone = 50;
  loop::LoadState state;
  state.rest_percent = 30;
  state.demands = {{test::kClosedFormTerminal[0], DemandKind::kPosition, 40}, {50, DemandKind::kRequest, 60}};
  const Network network = networkOf(loop);
  const Request request = requestOf(loop, network, &state);
  EXPECT_EQ(request.terminals[0].kind, DemandKind::kPosition);
  EXPECT_DOUBLE_EQ(request.terminals[0].stroke, 0.4);
  EXPECT_DOUBLE_EQ(request.terminals[1].flow_m3s, 0.0012);
  EXPECT_DOUBLE_EQ(request.terminals[2].flow_m3s, 0.0006);
}

TEST(LinearSystem, SolvesAMeshExactly) {
  // Grid of nodes with invented conductances; the solution put in must come out.
  Network network;
  constexpr int kSide = 17;
  network.num_nodes = kSide * kSide;
  network.datum_node = 40;
  for (int i = 0; i < network.num_nodes; ++i) {
    if ((i + 1) % kSide != 0) network.edges.push_back({i, i + 1, 0, 0});
    if (i + kSide < network.num_nodes) network.edges.push_back({i, i + kSide, 0, 0});
  }
  LinearSystem system(network);
  std::vector<double> wanted(network.num_nodes, 0.0);
  for (int i = 0; i < network.num_nodes; ++i)
    if (i != network.datum_node) wanted[system.step(i)] = std::sin(i);
  std::vector<double> right(network.num_nodes, 0.0);
  wanted[system.size()] = 0;
  system.clear();
  for (std::size_t e = 0; e < network.edges.size(); ++e) {
    const double g = 0.1 + static_cast<double>(e % 7);
    system.add(static_cast<int>(e), g);
    const int a = system.step(network.edges[e].from);
    const int b = system.step(network.edges[e].to);
    right[a] += g * (wanted[a] - wanted[b]);
    right[b] += g * (wanted[b] - wanted[a]);
  }
  ASSERT_TRUE(system.factorise());
  system.solve(right);
  for (int k = 0; k < system.size(); ++k) EXPECT_NEAR(right[k], wanted[k], 1e-11);
}

}  // namespace
}  // namespace ebbline::network
