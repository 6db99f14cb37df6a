#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "core/network/newton.h"

namespace ebbline::network {

namespace {

std::vector<int> treeRanks(const Network& network, const EdgeLaws& laws) {
  std::vector<int> rank = terminalsLast(network);
  for (std::size_t e = 0; e < rank.size(); ++e)
    if (laws.alwaysShut(static_cast<int>(e))) rank[e] = kLeftOut;
  return rank;
}

}  // namespace

Newton::Newton(const Network& network, Tolerance tolerance)
    : network_(network),
      tolerance_(tolerance),
      laws_(network),
      loops_(network, treeRanks(network, laws_)),
      system_(network),
      rows_(network.edges.size()),
      held_loss_(network.terminals.size(), 0.0),
      limit_(network.terminals.size(), 0.0),
      resistance_(network.terminals.size(), 0.0),
      by_speed_(network.edges.size(), 0.0),
      pressure_(system_.size() + 1, 0.0),
      right_(system_.size() + 1, 0.0),
      change_(system_.size() + 1, 0.0),
      by_border_(system_.size() + 1, 0.0),
      draw_(system_.size() + 1, 0.0) {
  for (int e = 0; e < static_cast<int>(rows_.size()); ++e) {
    rows_[e].from = system_.step(network.edges[e].from);
    rows_[e].to = system_.step(network.edges[e].to);
    rows_[e].terminal = laws_.terminal(e);
    if (laws_.hasPump(e)) pump_edges_.push_back(e);
  }
  for (const Draw& draw : network.draws) {
    draw_[system_.step(draw.node)] += draw.flow_m3s;
    reference_flow_ += 0.5 * std::abs(draw.flow_m3s);
  }
  for (const TerminalLaw& terminal : network.terminals) reference_flow_ += terminal.design_flow_m3s;
  if (!(reference_flow_ > 0)) reference_flow_ = 1e-3;  // nothing is asked for: any scale will do
  always_connected_ = alwaysConnected();
}

std::optional<text::Remark> Newton::unusable(const Request& request) const {
  using text::Code;
  if (request.terminals.size() != network_.terminals.size())
    return text::Remark{Code::kSolveTerminalCount,
                        {},
                        {std::to_string(request.terminals.size()), std::to_string(network_.terminals.size())}};
  for (std::size_t t = 0; t < request.terminals.size(); ++t) {
    const TerminalDemand& demand = request.terminals[t];
    const bool position = demand.kind == loop::DemandKind::kPosition;
    const double value = position ? demand.stroke : demand.flow_m3s;
    if (std::isfinite(value) && value >= 0) continue;
    return text::Remark{Code::kSolveRequestNotFinite, {{}, 0, network_.terminals[t].id, network_.terminals[t].tag}, {}};
  }
  const SpeedRule& rule = request.speed;
  const bool fixed = rule.kind == SpeedRule::Kind::kFixed;
  for (const double speed : {fixed ? rule.speed : rule.minimum_speed, fixed ? rule.speed : rule.maximum_speed})
    if (!(speed > 0) || !std::isfinite(speed))
      return text::Remark{Code::kSolveSpeedNotPositive, {}, {fmt::format("{:g} %", 100 * speed)}};
  if (fixed) return {};
  if (rule.taps.empty()) return text::Remark{Code::kSolveNoSensor, {}, {}};
  const int count = static_cast<int>(network_.ends.size());
  for (const TapPair& tap : rule.taps)
    if (tap.high < 0 || tap.low < 0 || tap.high >= count || tap.low >= count || !std::isfinite(tap.set_point_pa))
      return text::Remark{Code::kSolveTapInside, {}, {}};
  return {};
}

/// Flow that a pressure would drive through an edge, roughly: two steps of q = √(Δp q²/loss).
double Newton::freeFlow(int e, double pressure_pa) {
  double flow = std::min(laws_.limit(e), reference_flow_);
  for (int i = 0; i < 2; ++i) {
    const double loss = laws_.evaluate(e, flow, speed_squared_).loss_pa;
    if (!(loss > 0)) break;
    flow *= std::sqrt(pressure_pa / loss);
  }
  return flow;
}

void Newton::setFlow(int e, double flow, bool held) {
  Row& row = rows_[e];
  if (row.terminal >= 0) limit_[row.terminal] = laws_.limit(e);
  if (laws_.shut(e)) {
    row.standing = Standing::kShut;
    row.flow = row.surplus = row.conductance = 0;
  } else if (held || flow > laws_.limit(e)) {
    holdEdge(e);
  } else {
    openEdge(e, flow);
  }
}

/// Terminals take what they ask for, or what half the pump's pressure would drive through them; the tree carries it.
void Newton::coldStart() {
  laws_.forget();
  std::fill(pressure_.begin(), pressure_.end(), 0.0);
  const double pumps = laws_.pumpPressure(speed_squared_);
  const double drive = pumps > 0 ? 0.5 * pumps : 1e4;
  edge_flow_.assign(rows_.size(), 0.0);
  const int count = static_cast<int>(rows_.size());
  for (int e = 0; e < count; ++e)
    if (laws_.terminal(e) >= 0 && !laws_.shut(e)) edge_flow_[e] = std::min(laws_.limit(e), freeFlow(e, drive));
  std::vector<double> tree = edge_flow_;
  loops_.setTreeFlows(tree);
  // A law without slope at rest must not be linearised there.
  const double least = 1e-3 * reference_flow_;
  for (int e = 0; e < count; ++e) {
    const bool terminal = laws_.terminal(e) >= 0;
    double flow = terminal ? edge_flow_[e] : tree[e];
    if (!terminal && std::abs(flow) < least) flow = std::copysign(least, flow);
    if (rows_[e].from == rows_[e].to) flow = 0;  // both ends at one node: nothing drives it
    setFlow(e, flow, terminal && flow >= laws_.limit(e));
  }
}

/// True if the rows still hold this very state, as they do when solve follows solve.
bool Newton::isOwn(const State& state) const {
  constexpr double kRounding = 1e-14;  // of a square root and its square
  if (std::abs(speed_squared_ - row_speed_squared_) > kRounding * speed_squared_) return false;
  for (int node = 0; node < network_.num_nodes; ++node)
    if (pressure_[system_.step(node)] != state.node_pressure_pa[node]) return false;
  for (std::size_t e = 0; e < rows_.size(); ++e)
    if (rows_[e].flow != state.edge_flow_m3s[e]) return false;
  return true;
}

/// Moves an own row after its valve without asking the laws: what the valve adds is known, and near the old flow a
/// loss goes with a power of the flow. The next round asks the laws anyway. False where that is too far.
bool Newton::followValve(int e) {
  constexpr double kNear = 0.1;
  Row& row = rows_[e];
  const double more = laws_.valveResistance(row.terminal) - resistance_[row.terminal];
  if (row.standing != Standing::kOpen || laws_.shut(e) || std::isfinite(laws_.limit(e)) || !(row.flow > 0))
    return false;
  if (laws_.hasPump(e) || !std::isfinite(more)) return false;
  const double drop = pressure_[row.from] - pressure_[row.to];
  const double loss = drop - row.surplus + more * row.flow * row.flow;
  const double slope = 1 / row.conductance + 2 * more * row.flow;
  const double exponent = slope * row.flow / loss;
  if (!(drop > 0) || !(loss > 0) || !(slope > 0) || !(exponent < 3)) return false;
  const double change = std::sqrt(drop / loss) - 1;
  if (!(std::abs(change) < kNear)) return false;
  limit_[row.terminal] = laws_.limit(e);
  row.surplus = drop - loss * (1 + exponent * change * (1 + 0.5 * (exponent - 1) * change));
  row.conductance = 1 / std::max(slope * (1 + (exponent - 1) * change), least_slope_);
  row.flow *= 1 + change;
  return true;
}

/// The flows of the state before; where a valve has moved they are rescaled by √(K_old/K_new), K_old being what the
/// old pressures and flows show.
void Newton::warmStart(const State& state) {
  const bool own = isOwn(state);
  for (int node = 0; node < network_.num_nodes; ++node) pressure_[system_.step(node)] = state.node_pressure_pa[node];
  const double ratio = speed_squared_ / (state.speed * state.speed);
  if (ratio != 1)
    for (double& pressure : pressure_) pressure *= ratio;
  const double level = pressure_.back();
  for (double& pressure : pressure_) pressure -= level;
  const double by_speed = std::sqrt(ratio);
  for (int e = 0; e < static_cast<int>(rows_.size()); ++e) {
    const int terminal = laws_.terminal(e);
    if (own && terminal < 0 && !laws_.hasPump(e)) continue;
    const double flow = by_speed * state.edge_flow_m3s[e];
    const bool held = terminal >= 0 && state.throttled[terminal] != 0 && std::isfinite(laws_.limit(e));
    if (own && terminal >= 0 && followValve(e)) continue;
    setFlow(e, flow, held);
    if (terminal < 0 || rows_[e].standing != Standing::kOpen) continue;
    const double drop = pressure_[rows_[e].from] - pressure_[rows_[e].to];
    const double loss = drop - rows_[e].surplus;
    if (flow > 0 && drop > 0 && std::abs(loss - drop) > 1e-6 * drop)
      setFlow(e, flow * std::sqrt(drop / loss), false);
    else if (flow <= 0 && drop > 0)
      setFlow(e, freeFlow(e, drop), false);
  }
}

void Newton::start(const Request& request, const State& state) {
  laws_.setRequest(request);
  border_.setRule(network_, request.speed);
  responses_.assign(request.speed.taps.size(), {});
  pinned_.clear();
  const bool warm = state.warm && state.speed > 0 && std::isfinite(state.speed) &&
                    state.edge_flow_m3s.size() == rows_.size() &&
                    static_cast<int>(state.node_pressure_pa.size()) == network_.num_nodes &&
                    state.throttled.size() == network_.terminals.size();
  const double speed = border_.active() ? (warm ? state.speed : request.speed.maximum_speed) : request.speed.speed;
  speed_squared_ = speed * speed;
  if (border_.active())
    speed_squared_ = std::clamp(speed_squared_, border_.least(), std::max(border_.least(), border_.most()));
  const double pumps = laws_.pumpPressure(speed_squared_);
  constexpr double kFlat = 1e-8;  // a slope this small against the whole loop's counts as none
  least_slope_ = kFlat * (pumps > 0 ? pumps : 1e4) / reference_flow_;
  warm ? warmStart(state) : coldStart();
  for (std::size_t t = 0; t < resistance_.size(); ++t) resistance_[t] = laws_.valveResistance(static_cast<int>(t));
}

void Newton::leave(const Request& request, State& state) {
  gather();
  state.node_pressure_pa = node_pressure_;
  state.edge_flow_m3s = edge_flow_;
  state.speed = std::sqrt(speed_squared_);
  if (summary_.bound == SpeedBound::kAtMinimum) state.speed = request.speed.minimum_speed;  // to the last bit
  if (summary_.bound == SpeedBound::kAtMaximum) state.speed = request.speed.maximum_speed;
  if (!border_.active()) state.speed = request.speed.speed;
  state.throttled.assign(network_.terminals.size(), 0);
  for (std::size_t t = 0; t < network_.terminals.size(); ++t) {
    const int e = laws_.edgeOfTerminal(static_cast<int>(t));
    if (e >= 0 && std::isfinite(limit_[t])) state.throttled[t] = rows_[e].standing != Standing::kOpen;
  }
  state.warm = summary_.ended == Ended::kConverged;
  row_speed_squared_ = speed_squared_;
}

Summary Newton::solve(const Request& request, State& state, const std::stop_token& stop) {
  summary_ = {};
  if (auto remark = unusable(request)) {
    refuse(std::move(*remark));
    return summary_;
  }
  start(request, state);
  rounds(stop);
  if (summary_.ended != Ended::kRefused) leave(request, state);
  return summary_;
}

}  // namespace ebbline::network
