// A branched loop solved by hand (tests/support/closed_form_loop.h). Expected numbers: [computed, closed form].

#include <cmath>
#include <map>

#include <gtest/gtest.h>

#include "core/network/demand.h"
#include "core/network/results.h"
#include "core/network/solver.h"
#include "tests/support/closed_form_loop.h"

namespace ebbline::network {
namespace {

using loop::Strategy;
using test::ClosedForm;
using test::closedFormLoop;

struct Answer {
  Network network;
  Request request;
  State state;
  Summary summary;
  Results results;
};

/// Asks for these flows [L/s] or, with a negative number, stands wide open.
Answer solved(const loop::Loop& loop, const std::vector<double>& asked) {
  Answer answer;
  Compiled compiled = compile(loop);
  EXPECT_TRUE(compiled.usable());
  if (!compiled.usable()) {
    for (const text::Remark& remark : compiled.remarks) ADD_FAILURE() << text::oneLine(remark);
    return answer;
  }
  answer.network = std::move(compiled.network);
  answer.request = requestOf(loop, answer.network, nullptr);
  for (std::size_t t = 0; t < asked.size(); ++t) {
    if (asked[t] < 0)
      answer.request.terminals[t] = {loop::DemandKind::kPosition, 0, 1};
    else
      answer.request.terminals[t] = {loop::DemandKind::kRequest, asked[t] / 1000, 1};
  }
  Solver solver(answer.network);
  answer.summary = solver.solve(answer.request, answer.state);
  EXPECT_TRUE(answer.summary.usable()) << answer.summary.why;
  EXPECT_LE(answer.summary.flow_residual, 1e-9);
  EXPECT_LE(answer.summary.pressure_residual, 1e-9);
  if (answer.summary.usable()) answer.results = resultsOf(answer.network, answer.request, answer.state);
  return answer;
}

void expectFlows(const Answer& answer, const std::vector<double>& flows_l_s) {
  ASSERT_EQ(answer.results.terminals.size(), flows_l_s.size());
  for (std::size_t t = 0; t < flows_l_s.size(); ++t)
    EXPECT_NEAR(1000 * answer.results.terminals[t].delivered_m3s, flows_l_s[t], 1e-6) << "terminal " << t + 1;
}

double pumpKpa(const Answer& answer) {
  return answer.results.pumps.at(0).pressure_pa / 1000;
}

const std::vector<double> kOpen(4, -1.0);
const std::vector<double> kOnlyFour{0, 0, 0, -1};

TEST(ClosedForm, DesignStateGivesEveryTerminalExactlyItsFlow) {
  for (const std::vector<double>& asked : {kOpen, std::vector<double>(4, 2.0)}) {
    const Answer answer = solved(closedFormLoop(), asked);
    expectFlows(answer, {2, 2, 2, 2});
    EXPECT_NEAR(pumpKpa(answer), 129, 1e-6);
    EXPECT_NEAR(answer.results.pumps.at(0).efficiency, 0.74740484, 1e-8);
    EXPECT_NEAR(answer.results.pumps.at(0).shaft_power_w, 1380.777778, 1e-4);
  }
}

TEST(ClosedForm, PresettingsOpenPumpHeld) {
  ClosedForm wanted{false, Strategy::kDpPump, 129, 150};
  const Answer answer = solved(closedFormLoop(wanted), kOpen);
  expectFlows(answer, {2.32203986, 2.15762021, 2.01084870, 1.90007343});
  EXPECT_NEAR(1000 * answer.results.pumps.at(0).flow_m3s, 8.39058221, 1e-6);
  EXPECT_NEAR(pumpKpa(answer), 129, 1e-6);
}

TEST(ClosedForm, PresettingsOpenPumpOnItsCurve) {
  const Answer answer = solved(closedFormLoop({false}), kOpen);
  expectFlows(answer, {2.29986040, 2.13701124, 1.99164165, 1.88192447});
  EXPECT_NEAR(1000 * answer.results.pumps.at(0).flow_m3s, 8.31043777, 1e-6);
  EXPECT_NEAR(pumpKpa(answer), 126.54742728, 1e-6);
}

TEST(ClosedForm, OnlyTheLastTerminalOpen) {
  expectFlows(solved(closedFormLoop({true, Strategy::kDpPump, 129, 150}), kOnlyFour), {0, 0, 0, 2.8733255994});
  expectFlows(solved(closedFormLoop(), kOnlyFour), {0, 0, 0, 3.1515241952});
  const Answer sensor = solved(closedFormLoop({true, Strategy::kFieldSensor, 50, 150}), kOnlyFour);
  expectFlows(sensor, {0, 0, 0, 2});
  EXPECT_NEAR(pumpKpa(sensor), 62.5, 1e-6);
}

TEST(ClosedForm, LastTwoOpenGetTheSame) {
  expectFlows(solved(closedFormLoop({true, Strategy::kDpPump, 129, 150}), {0, 0, -1, -1}),
              {0, 0, 2.5085220603, 2.5085220603});
}

TEST(ClosedForm, NearTerminalIsShortWhenTheLastSensorHoldsFifty) {
  const Answer answer = solved(closedFormLoop({true, Strategy::kFieldSensor, 50, 100}), {2, 0, 0, 0});
  expectFlows(answer, {std::sqrt(50 / 18.25), 0, 0, 0});
  EXPECT_TRUE(answer.results.terminals[0].under_supplied);
  EXPECT_NEAR(answer.results.terminals[0].shortfall, 0.1724, 1e-4);
  EXPECT_EQ(answer.results.terminals[0].stroke, 1);
}

TEST(ClosedForm, SetPointSeventyThreeAtTheSensorServesTheNearTerminal) {
  const Answer answer = solved(closedFormLoop({true, Strategy::kFieldSensor, 73, 100}), {2, 0, 0, 0});
  expectFlows(answer, {2, 0, 0, 0});
  EXPECT_NEAR(answer.results.tap_pressure_pa.at(0), 73000, 1e-3);
  EXPECT_NEAR(pumpKpa(answer), 76.5, 1e-6);  // enough for a demand of 2 L/s, balanced
}

TEST(ClosedForm, HeaderSetPointEightyNineServesAnyState) {
  const Answer answer = solved(closedFormLoop({true, Strategy::kDpHeaders, 89, 100}), {2, 2, 2, 2});
  expectFlows(answer, {2, 2, 2, 2});
  EXPECT_NEAR(answer.results.pumps.at(0).speed, 1, 1e-8);
}

TEST(ClosedForm, SpeedLimitOfSeventyThreeHeldAtNodeFour) {
  // 73 kPa at node 4 with 8 L/s would need 152 kPa; the top speed gives 129.
  const Answer answer = solved(closedFormLoop({true, Strategy::kFieldSensor, 73, 100}), {2, 2, 2, 2});
  EXPECT_EQ(answer.summary.bound, SpeedBound::kAtMaximum);
  expectFlows(answer, {2, 2, 2, 2});
}

TEST(ClosedForm, ThrottledValvesTakeUpWhatIsLeft) {
  // One unit each at full speed: pump 160 − 0.484375·16, plant 0.625·16, mains 0.25·16, 0.25·9, 0.5·4, 1.5·1.
  const Answer answer = solved(closedFormLoop(), {1, 1, 1, 1});
  expectFlows(answer, {1, 1, 1, 1});
  const double headers = 160 - 0.484375 * 16 - 10;
  const double node[] = {headers - 4, headers - 6.25, headers - 8.25, headers - 9.75};
  const double rest[] = {13.25, 11, 9, 7.5};
  for (int t = 0; t < 4; ++t) {
    const TerminalResult& terminal = answer.results.terminals[t];
    EXPECT_NEAR(terminal.available_pa / 1000, node[t], 1e-6);
    EXPECT_NEAR(terminal.valve_pa / 1000, node[t] - rest[t], 1e-6);
    EXPECT_NEAR(terminal.stroke, 1 + 0.5 * std::log(5 / (node[t] - rest[t])) / std::log(50.0), 1e-9);
    EXPECT_FALSE(terminal.under_supplied);
  }
}

TEST(ClosedForm, AllShutStandsStill) {
  const Answer answer = solved(closedFormLoop(), {0, 0, 0, 0});
  expectFlows(answer, {0, 0, 0, 0});
  EXPECT_NEAR(pumpKpa(answer), 160, 1e-6);
}

}  // namespace
}  // namespace ebbline::network
