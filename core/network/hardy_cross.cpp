// Hardy Cross: flows by loop corrections (loop_flow.h) at a given speed; a pressure held is a bracketed root outside.

#include <algorithm>
#include <cmath>

#include "core/network/loop_flow.h"
#include "core/network/solver.h"
#include "core/network/tap.h"

namespace ebbline::network {
namespace {

constexpr double kLoopTolerance = 1e-11;     // of the pumps' pressure
constexpr double kReadingTolerance = 1e-11;  // of the pumps' pressure
constexpr int kMostRounds = 400;
constexpr int kMostSpeeds = 100;

// Flow at which an edge alone would lose `loss_pa`: Newton on its rising law.
double flowAtLoss(EdgeLaws& laws, int edge, double loss_pa, double flow_m3s) {
  for (int i = 0; i < 40; ++i) {
    const LossSlope law = laws.evaluate(edge, flow_m3s, 1);
    if (!(law.slope_pa_s_m3 > 0)) break;
    const double wanted = flow_m3s - (law.loss_pa - loss_pa) / law.slope_pa_s_m3;
    const double next = std::clamp(wanted, 0.1 * flow_m3s, 10 * flow_m3s);
    const bool settled = std::abs(next - flow_m3s) < 1e-3 * flow_m3s;
    flow_m3s = next;
    if (settled) break;
  }
  return flow_m3s;
}

// Own start: each terminal sees half the pumps' pressure, or has what it asks for; pumps share alike.
std::vector<double> startingFlows(const Network& network, EdgeLaws& laws, double speed_squared) {
  std::vector<double> flow(network.edges.size(), 0.0);
  double total = 0;
  for (std::size_t t = 0; t < network.terminals.size(); ++t) {
    const int e = laws.edgeOfTerminal(static_cast<int>(t));
    if (e < 0 || laws.shut(e) || laws.hasPump(e)) continue;
    const double design = std::max(network.terminals[t].design_flow_m3s, 1e-9);
    flow[e] = std::min(flowAtLoss(laws, e, 0.5 * laws.pumpPressure(speed_squared), design), laws.limit(e));
    total += flow[e];
  }
  for (std::size_t p = 0; p < network.pumps.size(); ++p) {
    const int e = laws.edgeOfPump(static_cast<int>(p));
    if (e < 0) continue;
    const double sign = network.elements[network.pumps[p].element].reversed ? -1 : 1;
    flow[e] = sign * total / static_cast<double>(network.pumps.size());
  }
  return flow;
}

// One request being solved: everything that lives only during the call.
class Attempt {
 public:
  Attempt(const Network& network, const Request& request, std::stop_token stop)
      : network_(network),
        rule_(request.speed),
        laws_(network, request),
        taps_(network, rule_.kind == SpeedRule::Kind::kHoldPressure ? rule_.taps : std::vector<TapPair>{}),
        flow_(network, laws_, startingFlows(network, laws_, square(firstSpeed()))),
        stop_(std::move(stop)) {}

  void run();
  Summary summary() const;
  void fill(State& state) const;

 private:
  static double square(double x) { return x * x; }
  double firstSpeed() const { return rule_.kind == SpeedRule::Kind::kFixed ? rule_.speed : rule_.maximum_speed; }
  double marginAt(double speed_squared);
  void holdPressure();
  double imbalance(int& node) const;

  const Network& network_;
  const SpeedRule& rule_;
  EdgeLaws laws_;
  Taps taps_;
  LoopFlow flow_;
  std::stop_token stop_;
  double speed_squared_ = 1;
  int rounds_ = 0;
  bool converged_ = false;
  LoopSum worst_;
  SpeedBound bound_ = SpeedBound::kNone;
  int governing_ = -1;
};

// Flows at a speed, and the lowest reading − set-point there [Pa].
double Attempt::marginAt(double speed_squared) {
  speed_squared_ = speed_squared;
  const LoopFlow::End end = flow_.run(speed_squared, kLoopTolerance, kMostRounds, stop_);
  rounds_ += end.rounds;
  converged_ = end.converged;
  worst_ = end.worst;
  std::vector<double> pressure;
  flow_.loops().nodePressures(flow_.losses().loss_pa, pressure);
  double least = std::numeric_limits<double>::infinity();
  for (int i = 0; i < taps_.count(); ++i) {
    const double margin = taps_.reading(i, laws_, pressure, flow_.flows(), speed_squared) - taps_.pair(i).set_point_pa;
    if (margin < least) least = margin, governing_ = i;
  }
  return least;
}

void Attempt::run() {
  if (rule_.kind == SpeedRule::Kind::kHoldPressure && taps_.count() > 0) {
    holdPressure();
  } else {
    marginAt(square(firstSpeed()));
  }
}

// Margins rise with n², nearly in a straight line: false position with halving (Illinois; Dowell & Jarratt 1971, from
// memory) between the bounds.
void Attempt::holdPressure() {
  double high = square(rule_.maximum_speed);
  double high_margin = marginAt(high);
  if (!converged_) return;
  if (high_margin <= 0) {
    bound_ = high_margin < 0 ? SpeedBound::kAtMaximum : SpeedBound::kNone;
    return;
  }
  double low = square(rule_.minimum_speed);
  double low_margin = marginAt(low);
  if (!converged_) return;
  if (low_margin >= 0) {
    bound_ = low_margin > 0 ? SpeedBound::kAtMinimum : SpeedBound::kNone;
    return;
  }
  int last_side = 0;
  double low_weight = low_margin;
  double high_weight = high_margin;
  for (int i = 0; i < kMostSpeeds; ++i) {
    const double middle = (low * high_weight - high * low_weight) / (high_weight - low_weight);
    const double margin = marginAt(middle);
    if (!converged_ || stop_.stop_requested()) return;
    if (std::abs(margin) <= kReadingTolerance * laws_.pumpPressure(middle) || high - low < 1e-15 * high) return;
    const int side = margin < 0 ? -1 : 1;
    if (side < 0) {
      low = middle, low_weight = margin;
      if (last_side == side) high_weight /= 2;
    } else {
      high = middle, high_weight = margin;
      if (last_side == side) low_weight /= 2;
    }
    last_side = side;
  }
  converged_ = false;
}

double Attempt::imbalance(int& node) const {
  std::vector<double> balance(network_.num_nodes, 0.0);
  double largest_flow = 0;
  for (std::size_t e = 0; e < network_.edges.size(); ++e) {
    balance[network_.edges[e].from] -= flow_.flows()[e];
    balance[network_.edges[e].to] += flow_.flows()[e];
    largest_flow = std::max(largest_flow, std::abs(flow_.flows()[e]));
  }
  for (const Draw& draw : network_.draws) balance[draw.node] -= draw.flow_m3s;
  double largest = 0;
  for (int n = 0; n < network_.num_nodes; ++n)
    if (std::abs(balance[n]) > largest) largest = std::abs(balance[n]), node = n;
  return largest_flow > 0 ? largest / largest_flow : largest;
}

Summary Attempt::summary() const {
  Summary summary;
  summary.rounds = rounds_;
  summary.flow_residual = imbalance(summary.flow_residual_node);
  const double pumps = laws_.pumpPressure(speed_squared_);
  double scale = pumps;
  if (!(scale > 0))
    for (double loss : flow_.losses().loss_pa) scale = std::max(scale, std::abs(loss));
  summary.pressure_residual = scale > 0 ? worst_.largest_pa / scale : 0;
  summary.pressure_residual_edge = worst_.edge;
  summary.bound = bound_;
  summary.governing_tap = governing_;
  if (stop_.stop_requested()) {
    summary.ended = Ended::kCancelled;
    summary.why = "stopped before the end";
  } else if (converged_ && summary.flow_residual <= 1e-9) {
    summary.ended = Ended::kConverged;
    summary.why = "every loop sum is within tolerance";
  } else {
    summary.ended = Ended::kNotConverged;
    summary.why = converged_ ? "the draws of one part do not add up" : "loop corrections did not settle";
    summary.remark = text::Remark{
        text::Code::kSolveNotConverged, {}, {std::to_string(rounds_), std::to_string(summary.pressure_residual)}};
  }
  return summary;
}

void Attempt::fill(State& state) const {
  state.edge_flow_m3s = flow_.flows();
  flow_.loops().nodePressures(flow_.losses().loss_pa, state.node_pressure_pa);
  state.speed = std::sqrt(speed_squared_);
  state.throttled.assign(network_.terminals.size(), 0);
  const std::vector<Hold> hold = flow_.holds();
  for (std::size_t t = 0; t < network_.terminals.size(); ++t) {
    const int e = laws_.edgeOfTerminal(static_cast<int>(t));
    state.throttled[t] = e >= 0 && hold[e] == Hold::kAlong;
  }
  state.warm = false;
}

}  // namespace

struct HardyCross::Work {
  const Network* network;
};

HardyCross::HardyCross(const Network& network) : work_(std::make_unique<Work>(Work{&network})) {}
HardyCross::~HardyCross() = default;

Summary HardyCross::solve(const Request& request, State& state, std::stop_token stop) {
  Attempt attempt(*work_->network, request, std::move(stop));
  attempt.run();
  attempt.fill(state);
  return attempt.summary();
}

}  // namespace ebbline::network
