#include "tests/support/campaign.h"

#include <algorithm>
#include <cmath>
#include <sstream>

#include "core/network/demand.h"
#include "core/network/solver.h"
#include "tests/support/independent_laws.h"
#include "tests/support/random_loop.h"

namespace ebbline::test {
namespace {

constexpr int kMostRounds = 25;  // right slopes: 10 at most in 10,000 loops
constexpr double kFlowLimit = 1e-9;
constexpr double kPressureLimit = 1e-9;
constexpr double kRequestLimit = 1e-9;
constexpr double kControlLimit = 1e-8;
constexpr double kAgreeLimit = 1e-6;
constexpr double kStandsStill = 1e-6;  // of the design flow: less is what a pressure within tolerance leaves
constexpr std::size_t kMostFailuresTold = 12;

void fail(Tally& tally, int& counter, int number, const RandomLoop& made, const std::string& what) {
  ++counter;
  if (tally.first_failures.size() < kMostFailuresTold)
    tally.first_failures.push_back("loop " + std::to_string(number) + " (" + made.kind + ", " +
                                   std::to_string(made.loop.terminals.size()) + " terminals): " + what);
}

std::string number(double value) {
  std::ostringstream out;
  out << value;
  return out.str();
}

void compareMethods(Tally& tally, int index, const RandomLoop& made, const network::Network& network,
                    const network::Request& request, const network::State& newton) {
  network::State second;
  network::HardyCross method(network);
  const network::Summary summary = method.solve(request, second);
  if (!summary.usable()) {
    ++tally.not_compared["Hardy Cross: " + summary.why];
    return;
  }
  double design = 0;
  double largest = 0;
  for (const network::TerminalLaw& terminal : network.terminals) design += terminal.design_flow_m3s;
  for (double q : newton.edge_flow_m3s) largest = std::max(largest, std::abs(q));
  if (largest <= kStandsStill * design) {  // rounding against rounding says nothing
    ++tally.not_compared["nothing flows"];
    return;
  }
  const double difference = network::largestDifference(newton, second).relative;
  tally.worst_difference = std::max(tally.worst_difference, difference);
  if (difference <= kAgreeLimit) {
    ++tally.agreed;
  } else if (tally.apart.size() < kMostFailuresTold) {
    tally.apart.push_back("loop " + std::to_string(index) + " (" + made.kind + ", " +
                          std::to_string(made.loop.terminals.size()) + " terminals): methods apart by " +
                          number(difference));
  }
}

void judgeState(Tally& tally, int index, const RandomLoop& made, const network::Network& network,
                const network::State& state, const network::Summary& summary) {
  const Verdict verdict = judge(made.loop, network, state);
  tally.worst_flow = std::max({tally.worst_flow, verdict.flow, summary.flow_residual});
  tally.worst_pressure = std::max({tally.worst_pressure, verdict.pressure, summary.pressure_residual});
  tally.worst_control = std::max(tally.worst_control, verdict.control);
  if (!(std::max(verdict.flow, summary.flow_residual) <= kFlowLimit))
    fail(tally, tally.flow, index, made,
         "imbalance " + number(verdict.flow) + ", told " + number(summary.flow_residual));
  if (!(std::max(verdict.pressure, summary.pressure_residual) <= kPressureLimit))
    fail(tally, tally.pressure, index, made,
         "loop sum " + number(verdict.pressure) + " at " + verdict.worst + ", told " +
             number(summary.pressure_residual));
  if (!(verdict.excess <= kRequestLimit))
    fail(tally, tally.request, index, made, "more than asked by " + number(verdict.excess));
  if (!(verdict.control <= kControlLimit))
    fail(tally, tally.control, index, made, "reading off by " + number(verdict.control) + " of pump pressure");
}

void runOne(Tally& tally, std::uint64_t seed, int index) {
  const RandomLoop made = randomLoop(seed, index);
  ++tally.loops;
  ++tally.kinds[made.kind.substr(0, made.kind.find(','))];
  const network::Compiled compiled = network::compile(made.loop);
  if (!compiled.usable()) {
    std::string words;
    for (const text::Remark& remark : compiled.remarks) words += text::oneLine(remark) + "; ";
    fail(tally, tally.refused, index, made, words);
    return;
  }
  const network::Request request = network::requestOf(made.loop, compiled.network, &made.loop.load_states.front());
  network::Solver solver(compiled.network);
  network::State state;
  const network::Summary summary = solver.solve(request, state);
  tally.most_rounds = std::max(tally.most_rounds, summary.rounds);
  if (!summary.usable()) {
    fail(tally, tally.unconverged, index, made, summary.why);
    ++tally.not_compared["Newton: " + summary.why];
    return;
  }
  if (summary.rounds > kMostRounds) fail(tally, tally.slow, index, made, std::to_string(summary.rounds) + " rounds");
  judgeState(tally, index, made, compiled.network, state, summary);
  compareMethods(tally, index, made, compiled.network, request, state);
}

}  // namespace

Tally runCampaign(std::uint64_t seed, int count) {
  Tally tally;
  for (int i = 0; i < count; ++i) runOne(tally, seed, i);
  return tally;
}

std::string Tally::print() const {
  std::ostringstream out;
  out << loops << " loops:";
  for (const auto& [kind, count] : kinds) out << " " << count << " " << kind << ";";
  out << "\n  refused " << refused << ", unconverged " << unconverged << ", slow " << slow << ", flow " << flow
      << ", pressure " << pressure << ", request " << request << ", control " << control << "; most Newton rounds "
      << most_rounds << "\n  worst imbalance " << worst_flow << ", loop sum " << worst_pressure << ", reading "
      << worst_control << "\n  Hardy Cross within 1e-6 on " << agreed << ", worst difference " << worst_difference
      << "\n";
  for (const auto& [why, count] : not_compared) out << "  not compared " << count << ": " << why << "\n";
  for (const std::string& line : apart) out << "  " << line << "\n";
  for (const std::string& line : first_failures) out << "  " << line << "\n";
  return out.str();
}

}  // namespace ebbline::test
