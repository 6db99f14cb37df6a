#include "core/network/newton.h"

#include <algorithm>
#include <cmath>
#include <limits>

namespace ebbline::network {

double Newton::pressureScale() const {
  const double pumps = laws_.pumpPressure(speed_squared_);
  if (pumps > 0) return pumps;
  double largest = 0;
  for (const Row& row : rows_)
    if (row.standing == Standing::kOpen) largest = std::max(largest, std::abs(pressure_[row.from] - pressure_[row.to]));
  return largest;
}

/// Continuity at every node with the flows of the linearised laws: A · change = −imbalance.
void Newton::assembleEdge(int e) {
  const Row& row = rows_[e];
  const double flow = row.flow + row.conductance * row.surplus;
  right_[row.from] -= flow;
  right_[row.to] += flow;
  if (row.conductance > 0) system_.add(e, row.conductance);
}

void Newton::assemble() {
  system_.clear();
  for (std::size_t k = 0; k < draw_.size(); ++k) right_[k] = -draw_[k];
  const int count = static_cast<int>(rows_.size());
  for (int e = 0; e < count; ++e) assembleEdge(e);
}

bool Newton::solveRound() {
  for (const int step : pinned_) system_.pin(step);
  if (!system_.factorise()) return false;
  change_.swap(right_);
  system_.solve(change_);
  change_.back() = 0;  // the datum
  speed_change_ = 0;
  if (border_.active()) chooseSpeed();
  return true;
}

/// The bordered system: pressures answer to x = n² by one more back-substitution, and x is what the taps ask for.
void Newton::chooseSpeed() {
  std::fill(by_border_.begin(), by_border_.end(), 0.0);
  for (const int e : pump_edges_) {
    const double flow = rows_[e].conductance * by_speed_[e];
    by_border_[rows_[e].from] += flow;
    by_border_[rows_[e].to] -= flow;
  }
  system_.solve(by_border_);
  by_border_.back() = 0;
  for (int t = 0; t < border_.taps().count(); ++t) {
    TapResponse& response = responses_[t];
    response.by_step_pa = response.by_speed_squared = 0;
    terms_.clear();
    border_.taps().derivatives(t, laws_, edge_flow_, speed_squared_, terms_);
    for (const TapTerm& term : terms_) {
      if (term.node >= 0) {
        response.by_step_pa += term.factor * change_[system_.step(term.node)];
        response.by_speed_squared += term.factor * by_border_[system_.step(term.node)];
        continue;
      }
      const Row& row = rows_[term.edge];
      const double scale = term.factor * row.conductance;
      response.by_step_pa += scale * (row.surplus + change_[row.from] - change_[row.to]);
      response.by_speed_squared += scale * (by_border_[row.from] - by_border_[row.to] - by_speed_[term.edge]);
    }
  }
  speed_change_ = border_.step(speed_squared_, responses_).change;
  for (std::size_t k = 0; k < change_.size(); ++k) change_[k] += speed_change_ * by_border_[k];
  for (const int e : pump_edges_) rows_[e].surplus -= by_speed_[e] * speed_change_;
}

/// An open edge at its present flow.
void Newton::followLaw(int e, const LossSlope& law) {
  Row& row = rows_[e];
  row.surplus = pressure_[row.from] - pressure_[row.to] - law.loss_pa;
  row.conductance = 1 / std::max(law.slope_pa_s_m3, least_slope_);
  if (law.by_speed_squared != 0) by_speed_[e] = law.by_speed_squared;
}

void Newton::openEdge(int e, double flow) {
  rows_[e].standing = Standing::kOpen;
  rows_[e].flow = flow;
  followLaw(e, laws_.evaluate(e, flow, speed_squared_));
}

void Newton::holdEdge(int e) {
  Row& row = rows_[e];
  row.standing = Standing::kHeld;
  row.flow = limit_[row.terminal];
  held_loss_[row.terminal] = laws_.evaluate(e, row.flow, speed_squared_).loss_pa;
  row.conductance = row.surplus = 0;
}

/// Moves the flow of one edge with the step; false if it changed its standing. A requesting terminal takes the branch
/// of its law that the step points to. What an open edge loses at the new flow is left to its block.
bool Newton::moveEdge(int e, double slack) {
  Row& row = rows_[e];
  if (row.standing == Standing::kShut) return true;
  if (row.standing == Standing::kHeld) {
    if (pressure_[row.from] - pressure_[row.to] >= held_loss_[row.terminal] - slack) return true;
    row.standing = Standing::kOpen;
    row.flow = limit_[row.terminal];
    return false;
  }
  const double moved = row.flow + share_ * row.conductance * (row.surplus + change_[row.from] - change_[row.to]);
  if (row.terminal >= 0 && moved > limit_[row.terminal]) {
    holdEdge(e);
    return false;
  }
  row.flow = moved;
  return true;
}

void Newton::noteEdge(int e) {
  const Row& row = rows_[e];
  largest_flow_ = std::max(largest_flow_, std::abs(row.flow));
  worst_shift_ = std::max(worst_shift_, std::abs(row.surplus * row.conductance));
  if (std::abs(row.surplus) <= worst_surplus_) return;
  worst_surplus_ = std::abs(row.surplus);
  worst_edge_ = e;
}

/// Moves pressures and flows, and puts the next round together on the way.
void Newton::takeStep() {
  speed_squared_ += share_ * speed_change_;
  for (std::size_t k = 0; k < pressure_.size(); ++k) pressure_[k] += share_ * change_[k];
  const double slack = 0.01 * tolerance_.pressure * pressureScale();
  flips_ = 0;
  worst_surplus_ = worst_shift_ = largest_flow_ = 0;
  worst_edge_ = -1;
  system_.clear();
  for (std::size_t k = 0; k < draw_.size(); ++k) right_[k] = -draw_[k];
  for (const EdgeLaws::Block& block : laws_.blocks()) {
    for (int e = block.first_edge; e < block.last_edge; ++e) {
      if (!moveEdge(e, slack)) ++flips_;
      laws_.setFlow(block, e, rows_[e].flow);
    }
    laws_.evaluateBlock(block);
    for (int e = block.first_edge; e < block.last_edge; ++e) {
      const Row& row = rows_[e];
      if (row.standing == Standing::kShut) continue;
      if (row.standing == Standing::kOpen) followLaw(e, laws_.evaluated(block, e, row.flow, speed_squared_));
      assembleEdge(e);
      noteEdge(e);
    }
  }
}

/// Full steps suffice nearly always. When the worst surplus stops falling, steps are halved until it falls again.
void Newton::watchProgress() {
  constexpr int kPatience = 6;
  constexpr double kLeastShare = 0.125;
  const double measure = worst_surplus_;
  if (measure <= tolerance_.pressure * pressureScale()) {  // only rounding is left, and it need not fall
    share_ = 1;
    return;
  }
  if (summary_.rounds <= 1 || measure < 0.9 * best_) {
    best_ = summary_.rounds <= 1 ? std::max(measure, best_) : measure;
    rounds_without_gain_ = 0;
    share_ = std::min(1.0, 2 * share_);
    return;
  }
  if (++rounds_without_gain_ < kPatience) return;
  rounds_without_gain_ = 0;
  share_ = std::max(kLeastShare, 0.5 * share_);
}

bool Newton::tapsSettled() {
  gatherForTaps();
  const double tolerance = tolerance_.pressure * pressureScale();
  double least_margin = 0;
  summary_.governing_tap = -1;
  for (int t = 0; t < border_.taps().count(); ++t) {
    TapResponse& response = responses_[t];
    response.reading_pa = border_.taps().reading(t, laws_, node_pressure_, edge_flow_, speed_squared_);
    const double margin = response.reading_pa - border_.setPoint(t);
    if (summary_.governing_tap >= 0 && margin >= least_margin) continue;
    least_margin = margin;
    summary_.governing_tap = t;
  }
  summary_.bound = SpeedBound::kNone;
  if (std::abs(least_margin) <= tolerance) return true;
  const bool short_of_it = least_margin < 0;
  const double bound = short_of_it ? border_.most() : border_.least();
  if (speed_squared_ != bound) return false;
  summary_.bound = short_of_it ? SpeedBound::kAtMaximum : SpeedBound::kAtMinimum;
  return true;
}

/// A purely quadratic law has no slope at rest: where almost nothing flows, a surplus within tolerance may still stand
/// for a flow that matters. Rounds then go on until the flow is settled too, or rounding keeps it from settling.
bool Newton::flowsSettled() {
  constexpr double kRelative = 1e-9;
  constexpr double kStandsStill = 1e-3;  // of the flow asked for by design: below it flows need not be relative
  constexpr double kStalled = 0.7;       // such a flow halves in every round until rounding stops it
  if (worst_shift_ <= kRelative * std::max(largest_flow_, kStandsStill * reference_flow_)) return true;
  const bool stalled = worst_shift_ > kStalled * last_shift_;
  last_shift_ = worst_shift_;
  return stalled;
}

bool Newton::settled() {
  const bool taps = !border_.active() || tapsSettled();
  return taps && flips_ == 0 && share_ == 1 && worst_surplus_ <= tolerance_.pressure * pressureScale() &&
         flowsSettled();
}

void Newton::rounds(const std::stop_token& stop) {
  best_ = 0;
  rounds_without_gain_ = 0;
  share_ = 1;
  last_shift_ = std::numeric_limits<double>::infinity();
  if (border_.active()) tapsSettled();
  assemble();
  for (; summary_.rounds < tolerance_.most_rounds;) {
    if (stop.stop_requested()) {
      summary_.ended = Ended::kCancelled;
      summary_.why = "stopped before the end";
      return;
    }
    if (!always_connected_ && (summary_.rounds == 0 || flips_ > 0)) {
      if (!findParts()) return;
      assemble();
    }
    if (!solveRound()) break;
    ++summary_.rounds;
    takeStep();
    if (!std::isfinite(worst_surplus_) || !std::isfinite(pressure_[0])) break;
    if (settled() && confirm()) return;
    watchProgress();
  }
  giveUp();
}

}  // namespace ebbline::network
