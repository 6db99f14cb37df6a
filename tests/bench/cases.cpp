#include "tests/bench/cases.h"

#include <cmath>
#include <stdexcept>

#include "core/loop/campus.h"
#include "core/network/demand.h"

namespace ebbline::bench {
namespace {

constexpr double kStroke = 0.7;
constexpr double kSpread = 0.05;
constexpr double kRequestShare = 0.9;  // of the flow at that stroke, so that valves have something to throttle

void must(bool good, const char* what) {
  if (!good) throw std::runtime_error(what);
}

}  // namespace

Case::Case(int terminals) {
  const loop::Loop loop = loop::campus(terminals);
  network::Compiled compiled = network::compile(loop);
  must(compiled.usable(), "the campus does not compile");
  network_ = std::move(compiled.network);
  positions_.terminals.assign(network_.terminals.size(), {loop::DemandKind::kPosition, 0, kStroke});
  held_ = positions_;
  held_.speed = network::speedRuleOf(loop, network_);
  solver_ = std::make_unique<network::Solver>(network_);
  held_solver_ = std::make_unique<network::Solver>(network_);
  request_solver_ = std::make_unique<network::Solver>(network_);
  solve(positions_, warm_);
  requests_ = positions_;
  const network::EdgeLaws laws(network_);
  for (std::size_t t = 0; t < network_.terminals.size(); ++t)
    reference_flow_.push_back(std::abs(warm_.edge_flow_m3s[laws.edgeOfTerminal(static_cast<int>(t))]));
  equations_ = std::make_unique<Equations>(network_, positions_);
  klu_ = std::make_unique<KluNewton>(*equations_);
  kinsol_ = std::make_unique<KinsolNewton>(*equations_);
  klu_x_ = equations_->start();
  must(klu_->solve(klu_x_) >= 0, "Newton on KLU did not converge");
  kinsol_x_ = klu_x_;
  buildMatrix();
  move(Move::kAll);
  stepWarmHeld();
  stepWarmRequests();
}

void Case::move(Move which) {
  const auto stroke = [&] {
    const double share = static_cast<double>(dice_() >> 11) * 0x1.0p-53;
    return kStroke * (1 + kSpread * (2 * share - 1));
  };
  const auto set = [&](std::size_t t) {
    const double s = stroke();
    positions_.terminals[t].stroke = s;
    held_.terminals[t].stroke = s;
    requests_.terminals[t] = {loop::DemandKind::kRequest, kRequestShare * reference_flow_[t] * s / kStroke, 1};
  };
  if (which == Move::kOne) {
    next_valve_ = (next_valve_ + 17) % positions_.terminals.size();
    set(next_valve_);
  } else {
    for (std::size_t t = 0; t < positions_.terminals.size(); ++t) set(t);
  }
  equations_->setRequest(positions_);
}

void Case::solve(const network::Request& request, network::State& state) {
  const network::Summary summary = solver_->solve(request, state);
  must(summary.usable(), summary.why.c_str());
}

void Case::buildMatrix() {
  std::vector<Eigen::Triplet<double>> entries;
  for (std::size_t e = 0; e < network_.edges.size(); ++e) {
    const int a = equations_->unknownOf(network_.edges[e].from);
    const int b = equations_->unknownOf(network_.edges[e].to);
    const double slope = equations_->law(static_cast<int>(e), klu_x_.edge_flow_m3s[e]).slope_pa_s_m3;
    const double conductance = 1 / std::max(slope, 1e-3);
    if (a >= 0) entries.emplace_back(a, a, conductance);
    if (b >= 0) entries.emplace_back(b, b, conductance);
    if (a < 0 || b < 0) continue;
    entries.emplace_back(a, b, -conductance);
    entries.emplace_back(b, a, -conductance);
  }
  matrix_.resize(equations_->numUnknown(), equations_->numUnknown());
  matrix_.setFromTriplets(entries.begin(), entries.end());
  factor_.analyzePattern(matrix_);
}

void Case::stepFactor() {
  factor_.factorize(matrix_);
  must(factor_.info() == Eigen::Success, "the node matrix could not be factorised");
}

void Case::stepCold() {
  network::State cold;
  solve(positions_, cold);
}

void Case::stepWarm() {
  const network::Summary summary = solver_->solve(positions_, warm_);
  must(summary.usable(), summary.why.c_str());
  warm_rounds_ = summary.rounds;
}

void Case::stepWarmHeld() {
  const network::Summary summary = held_solver_->solve(held_, held_state_);
  must(summary.usable(), summary.why.c_str());
}

void Case::stepWarmRequests() {
  const network::Summary summary = request_solver_->solve(requests_, request_state_);
  must(summary.usable(), summary.why.c_str());
}

void Case::stepKluCold() {
  Unknowns cold = equations_->start();
  must(klu_->solve(cold) >= 0, "Newton on KLU did not converge");
}

void Case::stepKluWarm() {
  must(klu_->solve(klu_x_) >= 0, "Newton on KLU did not converge");
}

void Case::stepKinsolWarm() {
  must(kinsol_->solve(kinsol_x_) >= 0, "KINSOL did not converge");
}

double Case::disagreement() const {
  double largest = 0;
  double apart = 0;
  for (std::size_t e = 0; e < network_.edges.size(); ++e) {
    largest = std::max(largest, std::abs(warm_.edge_flow_m3s[e]));
    apart = std::max({apart, std::abs(warm_.edge_flow_m3s[e] - klu_x_.edge_flow_m3s[e]),
                      std::abs(warm_.edge_flow_m3s[e] - kinsol_x_.edge_flow_m3s[e])});
  }
  return apart / largest;
}

}  // namespace ebbline::bench
