#include "core/network/loop_flow.h"

#include <algorithm>
#include <cmath>
#include <limits>

namespace ebbline::network {
namespace {

constexpr double kUnlimited = std::numeric_limits<double>::infinity();

double largestMagnitude(const std::vector<double>& values) {
  double largest = 0;
  for (double value : values) largest = std::max(largest, std::abs(value));
  return largest;
}

}  // namespace

double loopCorrection(const LoopPath& loop, const EdgeLosses& losses) {
  double sum = 0;
  double slope = 0;
  for (const LoopStep& step : loop) {
    sum += step.sign * losses.loss_pa[step.edge];
    slope += losses.slope_pa_s_m3[step.edge];
  }
  return -sum / slope;
}

std::vector<double> roundTogether(const std::vector<LoopPath>& loops, const EdgeLosses& losses,
                                  std::vector<double>& edge_flow_m3s) {
  std::vector<double> corrections;
  for (const LoopPath& loop : loops) corrections.push_back(loopCorrection(loop, losses));
  for (std::size_t l = 0; l < loops.size(); ++l)
    for (const LoopStep& step : loops[l]) edge_flow_m3s[step.edge] += step.sign * corrections[l];
  return corrections;
}

LoopFlow::LoopFlow(const Network& network, EdgeLaws& laws, std::vector<double> start_m3s)
    : network_(&network),
      laws_(&laws),
      late_(network.edges.size(), 0),
      loops_(network, ranks(network, laws, late_)),
      flow_(std::move(start_m3s)) {
  for (int e = 0; e < laws.numEdges(); ++e) flow_[e] = laws.shut(e) ? 0 : std::min(flow_[e], laws.limit(e));
  losses_.loss_pa.assign(network.edges.size(), 0);
  losses_.slope_pa_s_m3.assign(network.edges.size(), 0);
  findPaths();
  unbalanced_m3s_ = loops_.setTreeFlows(flow_);
}

// Terminals that may be held close loops rather than carry others' flow; shut edges take no part.
std::vector<int> LoopFlow::ranks(const Network& network, const EdgeLaws& laws, const std::vector<char>& late) {
  std::vector<int> rank = terminalsLast(network);
  for (int e = 0; e < laws.numEdges(); ++e) {
    if (laws.shut(e)) {
      rank[e] = kLeftOut;
    } else if (laws.limit(e) < kUnlimited) {
      rank[e] = late[e] ? 3 : 2;
    }
  }
  return rank;
}

void LoopFlow::findPaths() {
  paths_.clear();
  for (std::size_t l = 0; l < loops_.chords().size(); ++l) paths_.push_back(loops_.loop(static_cast<int>(l)));
}

void LoopFlow::takeLoss(int edge) {
  const LossSlope law = laws_->evaluate(edge, flow_[edge], speed_squared_);
  losses_.loss_pa[edge] = law.loss_pa;
  losses_.slope_pa_s_m3[edge] = law.slope_pa_s_m3;
}

void LoopFlow::takeLosses() {
  for (int e = 0; e < laws_->numEdges(); ++e)
    if (!laws_->shut(e)) takeLoss(e);
}

// The correction cut back so that no terminal of the loop gets more than it asks for.
double LoopFlow::withinLimits(const LoopPath& path, double correction, const std::vector<double>& flow) const {
  for (const LoopStep& step : path) {
    if (!limited(step.edge)) continue;
    const double room = std::max(0.0, laws_->limit(step.edge) - flow[step.edge]);
    correction = step.sign > 0 ? std::min(correction, room) : std::max(correction, -room);
  }
  return correction;
}

// A loop that stands still has no slope under quadratic laws: then a step of a tenth of the largest flow starts it.
double LoopFlow::correctionOf(double sum, double slope) const {
  if (sum == 0) return 0;
  if (slope * largest_flow_ <= std::abs(sum)) return std::copysign(0.1 * largest_flow_, -sum);
  return -sum / slope;
}

// As Cross did it by hand: each loop in turn, with the losses of the flows just corrected.
void LoopFlow::roundOneByOne() {
  for (const LoopPath& path : paths_) {
    double sum = 0;
    double slope = 0;
    for (const LoopStep& step : path) {
      sum += step.sign * losses_.loss_pa[step.edge];
      slope += losses_.slope_pa_s_m3[step.edge];
    }
    const double correction = withinLimits(path, correctionOf(sum, slope), flow_);
    if (correction == 0) continue;
    for (const LoopStep& step : path) {
      flow_[step.edge] += step.sign * correction;
      takeLoss(step.edge);
    }
  }
}

// The same corrections, repeated on the tangents of the laws before the laws are asked again: loops that share mains
// settle among each other without a law evaluated for each step.
void LoopFlow::roundOnTangents() {
  constexpr int kMostSweeps = 200;
  constexpr double kSettled = 1e-4;  // of the first sweep's largest correction
  std::vector<double> moved(flow_);
  std::vector<double> slope(paths_.size(), 0.0);
  for (std::size_t l = 0; l < paths_.size(); ++l)
    for (const LoopStep& step : paths_[l]) slope[l] += losses_.slope_pa_s_m3[step.edge];
  std::vector<double> loss(losses_.loss_pa);
  double first = 0;
  for (int sweep = 0; sweep < kMostSweeps; ++sweep) {
    double largest = 0;
    for (std::size_t l = 0; l < paths_.size(); ++l) {
      double sum = 0;
      for (const LoopStep& step : paths_[l]) sum += step.sign * loss[step.edge];
      const double correction = withinLimits(paths_[l], correctionOf(sum, slope[l]), moved);
      if (correction == 0) continue;
      largest = std::max(largest, std::abs(correction));
      for (const LoopStep& step : paths_[l]) {
        moved[step.edge] += step.sign * correction;
        loss[step.edge] += step.sign * correction * losses_.slope_pa_s_m3[step.edge];
      }
    }
    if (sweep == 0) first = largest;
    if (largest <= kSettled * first) break;
  }
  flow_ = moved;
}

// A terminal that reached its limit inside the tree would block every loop through it: one that has not takes its
// place, where there is one.
void LoopFlow::moveBlockedToChords() {
  std::vector<char> at_limit(flow_.size(), 0);
  bool blocked = false;
  for (int e = 0; e < laws_->numEdges(); ++e) {
    at_limit[e] = limited(e) && !laws_->shut(e) && flow_[e] >= laws_->limit(e);
    blocked = blocked || (at_limit[e] && loops_.inTree(e));
  }
  if (!blocked || at_limit == late_) return;
  late_ = std::move(at_limit);
  loops_ = FundamentalLoops(*network_, ranks(*network_, *laws_, late_));
  findPaths();
}

std::vector<Hold> LoopFlow::holds() const {
  std::vector<Hold> hold(flow_.size(), Hold::kFree);
  for (int e = 0; e < laws_->numEdges(); ++e) {
    if (laws_->shut(e)) {
      hold[e] = Hold::kShut;
    } else if (flow_[e] >= laws_->limit(e)) {
      hold[e] = Hold::kAlong;
    }
  }
  return hold;
}

LoopFlow::End LoopFlow::run(double speed_squared, double relative_tolerance, int most_rounds,
                            const std::stop_token& stop) {
  constexpr int kRoundsByHand = 2;
  constexpr double kFairProgress = 0.5;
  End end;
  bool by_hand = true;
  double before = kUnlimited;
  speed_squared_ = speed_squared;
  takeLosses();
  for (end.rounds = 0; end.rounds < most_rounds && !stop.stop_requested(); ++end.rounds) {
    moveBlockedToChords();
    largest_flow_ = std::max(largestMagnitude(flow_), 1e-9);
    const double pumps = laws_->pumpPressure(speed_squared);
    const double scale = pumps > 0 ? pumps : largestMagnitude(losses_.loss_pa);
    end.worst = loops_.largestSum(losses_.loss_pa, holds());
    end.converged = end.worst.edge < 0 || end.worst.largest_pa <= relative_tolerance * scale;
    if (end.converged) return end;
    if (end.rounds >= kRoundsByHand) by_hand = end.worst.largest_pa > kFairProgress * before && !by_hand;
    before = end.worst.largest_pa;
    by_hand ? roundOneByOne() : roundOnTangents();
    for (int e = 0; e < laws_->numEdges(); ++e)  // a step cut back to the limit may miss it by its last bit
      if (flow_[e] > (1 - 1e-14) * laws_->limit(e)) flow_[e] = laws_->limit(e);
    loops_.setTreeFlows(flow_);
    takeLosses();
  }
  return end;
}

}  // namespace ebbline::network
