// Curves of the head–flow plane against numbers got without the module: the closed-form loop (every loss quadratic, so
// its curve is r Q² with r put together from the strokes by hand), the affinity laws, and direct solves of the samples.

#include "core/network/system_curve.h"

#include <gtest/gtest.h>

#include <chrono>
#include <cmath>
#include <functional>
#include <thread>

#include "core/network/part_load.h"
#include "tests/support/closed_form_loop.h"
#include "tests/support/solved_loop.h"

namespace ebbline::network {
namespace {

using loop::DemandKind;
using loop::Strategy;
using test::closedFormLoop;
using test::drawnAt;
using test::networkOf;
using test::solvedFor;
using test::SolvedState;

constexpr double kPa = 1000;
constexpr double kLs = 1e-3;

/// Largest distance of a curve's points from a law [kPa of L/s], in parts of `head_kpa`.
double departure(const HeadFlowCurve& curve, double head_kpa, const std::function<double(double)>& law) {
  double worst = 0;
  for (const HeadFlowPoint& point : curve.points) {
    const double apart = std::abs(point.pressure_pa / kPa - law(point.flow_m3s / kLs)) / head_kpa;
    if (std::isnan(apart)) return apart;
    worst = std::max(worst, apart);
  }
  return worst;
}

HeadFlowCurve shifted(HeadFlowCurve curve, double factor) {
  for (HeadFlowPoint& point : curve.points) point.pressure_pa *= factor;
  return curve;
}

void expectDrawable(const HeadFlowCurve& curve) {
  for (std::size_t i = 0; i < curve.points.size(); ++i) {
    EXPECT_TRUE(std::isfinite(curve.points[i].flow_m3s) && std::isfinite(curve.points[i].pressure_pa));
    if (i > 0) {
      EXPECT_GE(curve.points[i].flow_m3s, curve.points[i - 1].flow_m3s);
    }
  }
}

/// r of the closed-form loop in kPa and L/s: branches joined from the far end, 1/√r adding up where they lie side by
/// side. Valves equal percentage, R = 50, so r = 5 · 50^(2 − 2h); shut below any opening.
double loopResistance(const std::vector<double>& strokes) {
  constexpr double kPresetting[] = {5.75, 3.5, 1.5, 0};
  constexpr double kSegment[] = {0.25, 0.25, 0.5, 1.5};
  double conductance = 0;
  for (int i = 3; i >= 0; --i) {
    const double stroke = strokes[static_cast<std::size_t>(i)];
    if (stroke > 0) conductance += 1 / std::sqrt(7.5 + 5 * std::pow(50.0, 2 - 2 * stroke) + kPresetting[i]);
    if (conductance > 0) conductance = 1 / std::sqrt(kSegment[i] + 1 / (conductance * conductance));
  }
  return 0.625 + 1 / (conductance * conductance);
}

Request standing(const loop::Loop& loop, const Network& network, const std::vector<double>& strokes) {
  Request request = requestOf(loop, network, nullptr);
  for (std::size_t t = 0; t < strokes.size(); ++t) request.terminals[t] = {DemandKind::kPosition, 0, strokes[t]};
  return request;
}

Request asking(const loop::Loop& loop, const Network& network, const std::vector<double>& flows_l_s) {
  Request request = requestOf(loop, network, nullptr);
  for (std::size_t t = 0; t < flows_l_s.size(); ++t)
    request.terminals[t] = {DemandKind::kRequest, flows_l_s[t] * kLs, 1};
  return request;
}

Traced traced(const Network& network, const SolvedState& solved, double top_pa, int num_solves = 5) {
  Solver solver(network);
  return systemCurve(solver, network, solved.request, solved.state, solved.results, top_pa, 0, num_solves);
}

const std::vector<std::vector<double>> kStrokes{
    {1, 1, 1, 1}, {0.8, 0.6, 0.9, 0.5}, {1, 0.3, 0, 0.7}, {0, 0, 0, 1}, {0.15, 0.1, 0.2, 0.12}};

TEST(SystemCurve, QuadraticLoopGivesExactlyItsParabola) {
  EXPECT_NEAR(loopResistance({1, 1, 1, 1}) * 64, 129, 1e-12);  // the sum done by hand, against the design point
  const loop::Loop loop = closedFormLoop();
  const Network network = networkOf(loop);
  for (const std::vector<double>& strokes : kStrokes) {
    const double r = loopResistance(strokes);
    const SolvedState solved = solvedFor(network, standing(loop, network, strokes));
    const Traced curve = traced(network, solved, 170 * kPa);
    ASSERT_TRUE(curve.usable()) << curve.summary.why;
    expectDrawable(curve.curve);
    EXPECT_LE(departure(curve.curve, 170, [r](double q) { return r * q * q; }), 1e-8) << r;
    EXPECT_EQ(curve.curve.points.front(), HeadFlowPoint{});
    EXPECT_NEAR(curve.curve.points.back().pressure_pa, 170 * kPa, 1);
  }
}

TEST(SystemCurve, SeededFaultOfOnePercentIsSeen) {
  const loop::Loop loop = closedFormLoop();
  const Network network = networkOf(loop);
  const SolvedState solved = solvedFor(network, standing(loop, network, kStrokes[1]));
  const double r = loopResistance(kStrokes[1]);
  const auto law = [r](double q) { return r * q * q; };
  const HeadFlowCurve right = traced(network, solved, 170 * kPa).curve;
  EXPECT_LE(departure(right, 170, law), 1e-8);
  EXPECT_GT(departure(shifted(right, 1.01), 170, law), 0.005);
  EXPECT_GT(departure(shifted(right, 0.99), 170, law), 0.005);
  HeadFlowCurve holed = right;
  holed.points[7].pressure_pa = std::nan("");
  EXPECT_FALSE(departure(holed, 170, law) <= 1e-8);
  const double at = right.points.back().flow_m3s * 0.77;
  EXPECT_LE(std::abs(drawnAt(right, at) / kPa - law(at / kLs)), 0.002 * 170);
  EXPECT_GT(std::abs(drawnAt(shifted(right, 1.01), at) / kPa - law(at / kLs)), 0.002 * 170);
}

TEST(SystemCurve, ThrottledValvesStayWhereTheyStand) {
  // 1 L/s each at full speed: 160 − 0.484375 · 16 = 152.25 kPa at 4 L/s, and the valves no longer move.
  const loop::Loop loop = closedFormLoop();
  const Network network = networkOf(loop);
  const SolvedState solved = solvedFor(network, asking(loop, network, {1, 1, 1, 1}));
  const HeadFlowCurve curve = traced(network, solved, 170 * kPa).curve;
  ASSERT_FALSE(curve.empty());
  EXPECT_LE(departure(curve, 170, [](double q) { return 152.25 / 16 * q * q; }), 1e-8);
}

TEST(SystemCurve, GoesThroughTheOperatingPoint) {
  const loop::Loop loop = closedFormLoop();
  const Network network = networkOf(loop);
  const SolvedState solved = solvedFor(network, standing(loop, network, {1, 1, 1, 1}));
  const HeadFlowCurve curve = traced(network, solved, 170 * kPa, 4).curve;
  const auto at = std::find_if(curve.points.begin(), curve.points.end(),
                               [](const HeadFlowPoint& p) { return std::abs(p.flow_m3s - 8 * kLs) < 1e-12; });
  ASSERT_NE(at, curve.points.end());
  EXPECT_NEAR(at->pressure_pa, 129 * kPa, 1e-3);
}

TEST(SystemCurve, BetweenSolvedPointsWithinTwoPerMilleOfHeadOnEverySample) {
  double worst = 0;
  for (const test::SampleLoop& sample : test::sampleLoops()) {
    const Network network = networkOf(sample.loop);
    for (const loop::LoadState* load : test::loadStates(sample.loop)) {
      const SolvedState solved = solvedFor(network, requestOf(sample.loop, network, load));
      const PumpResult& now = solved.results.pumps.at(0);
      const HeadFlowCurve curve = traced(network, solved, 1.3 * now.pressure_pa, 4).curve;
      ASSERT_FALSE(curve.empty()) << sample.name;
      expectDrawable(curve);
      Request direct = frozenAt(solved.request, solved.results);
      direct.speed = {};
      for (const double part : {0.08, 0.15, 0.2, 0.37, 0.46, 0.63, 0.71, 0.88, 0.93, 1.06}) {
        direct.speed.speed = part * now.speed;
        const SolvedState there = solvedFor(network, direct);
        const PumpResult& pump = there.results.pumps.at(0);
        const double apart = std::abs(drawnAt(curve, pump.flow_m3s) - pump.pressure_pa);
        EXPECT_LE(apart, 0.002 * now.pressure_pa) << sample.name << ", " << test::nameOf(load) << ", speed " << part;
        worst = std::max(worst, apart / now.pressure_pa);
      }
    }
  }
  std::cout << "largest distance from a direct solve: " << 100 * worst << " % of the operating head\n";
}

TEST(SystemCurve, AllValvesShutGiveNoCurveAndSayWhy) {
  const loop::Loop loop = closedFormLoop();
  const Network network = networkOf(loop);
  for (const Request& request : {asking(loop, network, {0, 0, 0, 0}), standing(loop, network, {0, 0, 0, 0})}) {
    const Traced none = traced(network, solvedFor(network, request), 170 * kPa);
    EXPECT_FALSE(none.usable());
    EXPECT_TRUE(none.curve.empty());
    EXPECT_NE(none.summary.why.find("no flow"), std::string::npos) << none.summary.why;
  }
}

TEST(SystemCurve, StoppedOrFailedTracingReturnsNothingRatherThanAPart) {
  const loop::Loop loop = test::sampleLoops().back().loop;
  const Network network = networkOf(loop);
  const SolvedState solved = solvedFor(network, requestOf(loop, network, nullptr));
  const SpeedRule rule = solved.request.speed;
  const double top = 1.3 * solved.results.pumps.at(0).pressure_pa;
  int stopped = 0;
  const auto expectNothing = [&stopped](int wait_us, const auto& trace) {
    std::stop_source source;
    if (wait_us == 0) source.request_stop();
    std::jthread stopper([&] {
      std::this_thread::sleep_for(std::chrono::microseconds(wait_us));
      source.request_stop();
    });
    const Traced one = trace(source.get_token());
    if (one.summary.ended != Ended::kCancelled) return;
    ++stopped;
    EXPECT_FALSE(one.usable());
    EXPECT_TRUE(one.curve.empty()) << "stopped after " << wait_us << " µs";
  };
  for (const int wait_us : {0, 50, 200, 800, 3000, 6000}) {  // so many solves that the stop falls between two of them
    Solver solver(network);
    expectNothing(wait_us, [&](std::stop_token stop) {
      return systemCurve(solver, network, solved.request, solved.state, solved.results, top, 0, 5000, stop);
    });
    expectNothing(wait_us, [&](std::stop_token stop) { return controlPath(solver, network, rule, 0, 5000, stop); });
  }
  EXPECT_GE(stopped, 2);
  Tolerance hasty;
  hasty.most_rounds = 0;
  Solver solver(network, hasty);
  const Traced failed = systemCurve(solver, network, solved.request, solved.state, solved.results, top);
  EXPECT_FALSE(failed.usable());
  EXPECT_TRUE(failed.curve.empty());
  EXPECT_FALSE(failed.summary.why.empty());
}

TEST(ControlPath, FieldSensorFollowsItsQuadraticWithOffset) {
  const loop::Loop loop = closedFormLoop({true, Strategy::kFieldSensor, 50, 150});
  const Network network = networkOf(loop);
  Solver solver(network);
  const Traced path = controlPath(solver, network, speedRuleOf(loop, network));
  ASSERT_TRUE(path.usable()) << path.summary.why;
  ASSERT_EQ(path.curve.points.size(), 14U);
  for (std::size_t i = 0; i < 14; ++i)
    EXPECT_NEAR(path.curve.points[i].flow_m3s / kLs, 8.0 * static_cast<double>(i + 1) / 14, 1e-9);
  const auto law = [](double q) { return 50 + 1.234375 * q * q; };
  EXPECT_LE(departure(path.curve, 129, law), 1e-8);
  EXPECT_GT(departure(shifted(path.curve, 1.01), 129, law), 0.005);
}

TEST(ControlPath, PressureHeldAtThePumpIsLevel) {
  const loop::Loop loop = closedFormLoop({true, Strategy::kDpPump, 129, 150});
  const Network network = networkOf(loop);
  Solver solver(network);
  const Traced path = controlPath(solver, network, speedRuleOf(loop, network));
  ASSERT_TRUE(path.usable());
  EXPECT_LE(departure(path.curve, 129, [](double) { return 129.0; }), 1e-8);
}

TEST(PumpCurves, FollowTheAffinityLaws) {
  const Network network = networkOf(closedFormLoop());
  for (const double n : {0.1, 0.37, 0.5, 0.85, 1.0}) {
    const HeadFlowCurve curve = pumpCurve(network.pumps[0], 1000, n);
    EXPECT_EQ(curve.speed, n);
    EXPECT_EQ(curve.points.size(), 32U);
    EXPECT_EQ(curve.points.front().flow_m3s, 0);
    EXPECT_NEAR(curve.points.back().flow_m3s / kLs, 10 * n, 1e-12);  // data end at 10 L/s
    const auto law = [n](double q) { return 160 * n * n - 0.484375 * q * q; };
    EXPECT_LE(departure(curve, 160, law), 1e-12);
    EXPECT_GT(departure(shifted(curve, 1.01), 160 * n * n, law), 0.005);
  }
}

TEST(PumpCurves, EndWhereTheHeadIsUsedUp) {
  Network network = networkOf(closedFormLoop());
  // 160 − 0.484375 Q² read to 20 L/s is used up at √(160/0.484375).
  network.pumps[0].curve = part::PumpCurve(
      {{0, 160 / 9.80665, 0}, {0.01, (160 - 48.4375) / 9.80665, 0}, {0.02, (160 - 193.75) / 9.80665, 0}});
  const HeadFlowCurve curve = pumpCurve(network.pumps[0], 1000, 0.5);
  EXPECT_NEAR(curve.points.back().flow_m3s / kLs, 0.5 * std::sqrt(160 / 0.484375), 1e-9);
  for (const HeadFlowPoint& point : curve.points) EXPECT_GE(point.pressure_pa, 0);
  EXPECT_NEAR(curve.points.back().pressure_pa, 0, 1e-6);
}

TEST(PumpCurves, FamilyRunsFromTopSpeedDownByTenths) {
  for (const double top : {100.0, 150.0, 87.0}) {
    loop::Loop loop = closedFormLoop({true, Strategy::kConstantSpeed, 129, top});
    loop.control.speed_percent = 80;
    const std::vector<HeadFlowCurve> family = pumpFamily(networkOf(loop).pumps[0], 1000);
    ASSERT_GE(family.size(), 2U);
    EXPECT_DOUBLE_EQ(family.front().speed, top / 100);
    EXPECT_NEAR(family.back().speed, 0.1, 1e-12);
    double before = std::ceil(top / 10);
    for (std::size_t i = 1; i < family.size(); ++i, before -= 1) EXPECT_NEAR(family[i].speed * 10, before - 1, 1e-12);
  }
}

/// Flow share x of η = 0.75 (2x − x²), on the rising side (−1) or past the peak (+1).
double shareOf(double efficiency, int side) {
  return 1 + side * std::sqrt(1 - efficiency / 0.75);
}

void expectLine(const EfficiencyLine& line, int side, double lowest, double highest) {
  const double at_reference = 8.5 * shareOf(line.efficiency, side);
  const auto& points = line.curve.points;
  ASSERT_GE(points.size(), 2U);
  for (std::size_t k = 0; k < points.size(); ++k) {
    const double n = lowest + (highest - lowest) * static_cast<double>(k) / static_cast<double>(points.size() - 1);
    // The crossing is read between 400 steps: within h²/8 · η''/η' = 5e-5 L/s of the parabola's.
    EXPECT_NEAR(points[k].flow_m3s / kLs, at_reference * n, 1e-4) << line.efficiency;
    EXPECT_NEAR(points[k].pressure_pa / kPa, n * n * (160 - 0.484375 * at_reference * at_reference), 1e-3);
  }
}

TEST(EfficiencyLines, KeepFlowByTheSpeedAndHeadByItsSquare) {
  const Network network = networkOf(closedFormLoop());
  const std::vector<EfficiencyLine> lines = efficiencyLines(network.pumps[0], 1000);
  const std::vector<double> levels{0.40, 0.50, 0.60, 0.68, 0.70, 0.72};  // 72 % comes again at 10.2 L/s, past the data
  ASSERT_EQ(lines.size(), levels.size());
  for (std::size_t i = 0; i < levels.size(); ++i) {
    EXPECT_DOUBLE_EQ(lines[i].efficiency, levels[i]);
    expectLine(lines[i], -1, 0.1, 1);
  }
}

TEST(EfficiencyLines, StandOnBothSidesOfThePeakAndNeverMoreThanAsked) {
  Network network = networkOf(closedFormLoop());
  std::vector<part::PumpReading> readings;
  for (const double q : {0.0, 6.0, 12.0})
    readings.push_back({q * kLs, (160 - 0.484375 * q * q) / 9.80665, 0.75 * (2 * q / 8.5 - q * q / 72.25)});
  network.pumps[0].curve = part::PumpCurve(readings);
  const std::vector<EfficiencyLine> lines = efficiencyLines(network.pumps[0], 1000, 20);
  ASSERT_EQ(lines.size(), 9U);  // six rising; 72, 70 and 68 % past the peak
  for (std::size_t i = 0; i < lines.size(); ++i) expectLine(lines[i], i < 6 ? -1 : 1, 0.1, 1);
  for (const int most : {0, 1, 4, 8}) EXPECT_LE(efficiencyLines(network.pumps[0], 1000, most).size(), most);
  readings = {{0, 16, 0}, {1e-6, 15.9, 0.8}, {0.01, 10, 0.7}, {0.02, 5, 0.3}};  // invented: all levels in one step
  network.pumps[0].curve = part::PumpCurve(readings);
  for (const int most : {1, 3, 8}) EXPECT_LE(efficiencyLines(network.pumps[0], 1000, most).size(), most);
}

TEST(EfficiencyLines, UnknownEfficiencyGivesNone) {
  Network network = networkOf(closedFormLoop());
  network.pumps[0].curve = part::PumpCurve({{0, 16, 0}, {0.01, 10, 0}});
  EXPECT_TRUE(efficiencyLines(network.pumps[0], 1000).empty());
}

TEST(FrozenAt, KeepsFlowsAtTheSameSpeedAndShutTerminalsShutAtEverySpeed) {
  const loop::Loop loop = closedFormLoop();
  const Network network = networkOf(loop);
  Request request = asking(loop, network, {1.5, 0, 0, 0});
  request.terminals[2] = {DemandKind::kPosition, 0, 0.6};
  request.terminals[3] = {DemandKind::kPosition, 0, 0};
  const SolvedState solved = solvedFor(network, request);
  Request frozen = frozenAt(request, solved.results);
  EXPECT_EQ(frozen.terminals[0].kind, DemandKind::kPosition);
  EXPECT_EQ(frozen.terminals[1].kind, DemandKind::kRequest);
  EXPECT_EQ(frozen.terminals[1].flow_m3s, 0);
  EXPECT_EQ(frozen.terminals[2].stroke, 0.6);
  EXPECT_LE(largestDifference(solvedFor(network, frozen).state, solved.state).relative, 1e-9);
  for (const double speed : {0.3, 1.3}) {
    frozen.speed = {};
    frozen.speed.speed = speed;
    const Results results = solvedFor(network, frozen).results;
    EXPECT_NEAR(results.terminals[0].delivered_m3s / kLs, 1.5 * speed, 1e-8);  // quadratic loop: flow goes with speed
    EXPECT_EQ(results.terminals[1].delivered_m3s, 0);
    EXPECT_EQ(results.terminals[3].delivered_m3s, 0);
  }
}

TEST(PlaneLimits, HoldEveryCurveAndTheDesignPoint) {
  for (const test::SampleLoop& sample : test::sampleLoops()) {
    const auto network = std::make_shared<const Network>(networkOf(sample.loop));
    const PartLoadGround ground = PartLoadSolver(network).ground(speedRuleOf(sample.loop, *network));
    ASSERT_TRUE(ground.usable) << ground.why;
    std::vector<HeadFlowCurve> all = ground.pump_family;
    for (const EfficiencyLine& line : ground.efficiency) all.push_back(line.curve);
    all.push_back(ground.control);
    all.push_back(ground.design_load);
    all.push_back({0, {ground.design_point}});
    for (const HeadFlowCurve& curve : all) {
      ASSERT_FALSE(curve.empty()) << sample.name;
      expectDrawable(curve);
      for (const HeadFlowPoint& point : curve.points) {
        EXPECT_LE(point.flow_m3s, ground.limits.flow_m3s) << sample.name;
        EXPECT_LE(point.pressure_pa, ground.limits.pressure_pa) << sample.name;
      }
    }
  }
  const Network network = networkOf(closedFormLoop());
  const HeadFlowPoint beyond = planeLimits(network.pumps[0], 1000, {0.02, 300e3});  // far outside its data
  EXPECT_GT(beyond.flow_m3s, 0.02);
  EXPECT_GT(beyond.pressure_pa, 300e3);
}

TEST(HeadMetres, TenMetresOfWater) {
  EXPECT_NEAR(headMetres(98066.5, 1000), 10, 1e-12);
}

}  // namespace
}  // namespace ebbline::network
