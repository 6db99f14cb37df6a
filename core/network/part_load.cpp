#include "core/network/part_load.h"

#include <algorithm>
#include <chrono>

namespace ebbline::network {

namespace {

/// Share of the plot's height at which the loop's curves end, so that they end inside it.
constexpr double kTopOfCurves = 0.96;  // our choice of picture, no physics

const TerminalLaw& terminalAt(const Network& network, int index) {
  return network.terminals[static_cast<std::size_t>(index)];
}

void tellTerminals(PartLoadPicture& picture) {
  double largest = 0;
  for (std::size_t i = 0; i < picture.results.terminals.size(); ++i) {
    const TerminalResult& terminal = picture.results.terminals[i];
    picture.delivered_m3s += terminal.delivered_m3s;
    if (!terminal.under_supplied) continue;
    ++picture.under_supplied;
    if (terminal.shortfall <= largest) continue;
    largest = terminal.shortfall;
    picture.first_under_supplied = static_cast<int>(i);
  }
}

}  // namespace

double meanPercent(const Network& network, const std::vector<Share>& shares, const std::vector<int>& members) {
  double weight = 0;
  double sum = 0;
  double lowest = 100;
  double highest = 0;
  for (const int member : members) {
    const double design = terminalAt(network, member).design_flow_m3s;
    const double percent = shares[static_cast<std::size_t>(member)].percent;
    weight += design;
    sum += design * percent;
    lowest = std::min(lowest, percent);
    highest = std::max(highest, percent);
  }
  return weight > 0 ? std::min(std::max(sum / weight, lowest), highest) : 0;  // rounding makes no mean of 100 less
}

std::vector<Share> movedTo(const Network& network, const std::vector<Share>& base, const std::vector<int>& members,
                           double percent) {
  const double target = std::clamp(percent, 0.0, 100.0);
  const double mean = meanPercent(network, base, members);
  std::vector<Share> moved = base;
  for (const int member : members) {
    double& share = moved[static_cast<std::size_t>(member)].percent;
    if (target <= mean)
      share *= mean > 0 ? target / mean : 0;  // the ratio first: it is never above 1, so rounding leaves no bound
    else
      share = 100 - (100 - share) * ((100 - target) / (100 - mean));
  }
  return moved;
}

std::vector<Share> asPositions(const std::vector<Share>& shares, const Results& results) {
  std::vector<Share> positions = shares;
  for (std::size_t i = 0; i < positions.size(); ++i) {
    const bool shut = shares[i].kind == loop::DemandKind::kRequest && shares[i].percent <= 0;
    positions[i] = {loop::DemandKind::kPosition, shut ? 0 : 100 * results.terminals[i].stroke};
  }
  return positions;
}

std::vector<Share> asLoads(const Network& network, const Results& results) {
  std::vector<Share> loads;
  loads.reserve(results.terminals.size());
  for (std::size_t i = 0; i < results.terminals.size(); ++i) {
    const double design = network.terminals[i].design_flow_m3s;
    const double part = design > 0 ? results.terminals[i].delivered_m3s / design : 0;
    loads.push_back({loop::DemandKind::kRequest, 100 * std::clamp(part, 0.0, 1.0)});
  }
  return loads;
}

PartLoadSolver::PartLoadSolver(std::shared_ptr<const Network> network)
    : network_(std::move(network)), solver_(*network_), tracer_(*network_) {}

PartLoadGround PartLoadSolver::ground(const SpeedRule& rule, std::stop_token stop) {
  const PumpLaw& pump = network_->pumps.front();
  const double density = network_->density_kg_m3;
  PartLoadGround ground;
  ground.rule = rule;
  ground.density_kg_m3 = density;
  ground.design_flow_m3s = designFlow(*network_);
  ground.pump_family = pumpFamily(pump, density);
  ground.efficiency = efficiencyLines(pump, density);
  const Request design = requestOf(*network_, std::vector<Share>(network_->terminals.size()), rule);
  State state;
  const Summary summary = solver_.solve(design, state, stop);
  ground.usable = summary.usable();
  ground.why = summary.why;
  if (!ground.usable) {
    ground.limits = planeLimits(pump, density, {});
    return ground;
  }
  const Results results = resultsOf(*network_, design, state);
  ground.design_point = {results.pumps.front().flow_m3s, results.pumps.front().pressure_pa};
  ground.limits = planeLimits(pump, density, ground.design_point);
  const double top = kTopOfCurves * ground.limits.pressure_pa;
  ground.design_load = systemCurve(tracer_, *network_, design, state, results, top, 0, 5, stop).curve;
  const Traced path = rule.kind == SpeedRule::Kind::kFixed ? Traced{pumpCurve(pump, density, rule.speed), summary}
                                                           : controlPath(tracer_, *network_, rule, 0, 14, stop);
  ground.control = path.curve;
  if (!path.usable()) ground.control_why = path.summary.why;
  return ground;
}

PartLoadPicture PartLoadSolver::picture(const Request& request, const PartLoadGround& ground, std::stop_token stop) {
  PartLoadPicture picture;
  picture.request = request;
  const auto start = std::chrono::steady_clock::now();
  picture.summary = solver_.solve(request, warm_, stop);
  if (picture.summary.ended == Ended::kNotConverged) {
    warm_ = {};
    picture.summary = solver_.solve(request, warm_, stop);
  }
  picture.solve_ms = std::chrono::duration<double, std::milli>(std::chrono::steady_clock::now() - start).count();
  picture.state = warm_;
  if (!picture.summary.usable()) {
    warm_ = {};
    return picture;
  }
  picture.results = resultsOf(*network_, request, warm_);
  tellTerminals(picture);
  if (ground.design_flow_m3s > 0) picture.delivered_share = picture.delivered_m3s / ground.design_flow_m3s;
  const PumpResult& pump = picture.results.pumps.front();
  picture.operating = {pump.flow_m3s, pump.pressure_pa};
  picture.pump_now = pumpCurve(network_->pumps.front(), network_->density_kg_m3, pump.speed);
  picture.loop_now = systemCurve(tracer_, *network_, request, warm_, picture.results,
                                 kTopOfCurves * ground.limits.pressure_pa, 0, 4, stop)
                         .curve;
  return picture;
}

SecondOpinion secondOpinion(const Network& network, const Request& request, std::stop_token stop) {
  SecondOpinion opinion;
  State first;
  State second;
  Solver newton(network);
  opinion.first = newton.solve(request, first, stop);
  HardyCross cross(network);
  opinion.second = cross.solve(request, second, stop);
  if (opinion.usable()) opinion.difference = largestDifference(first, second);
  return opinion;
}

}  // namespace ebbline::network
