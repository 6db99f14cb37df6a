#include "core/network/edge_law.h"

#include <algorithm>

#include "core/quantity/quantity.h"

namespace ebbline::network {

namespace {

constexpr double kInfinity = std::numeric_limits<double>::infinity();

part::Characteristic characteristicOf(const loop::ControlValve& valve) {
  constexpr double kPercent = 0.01;
  std::vector<part::CharacteristicReading> table;
  for (const loop::CharacteristicPoint& point : valve.table)
    table.push_back({point.stroke_percent * kPercent, point.kv_percent * kPercent});
  using loop::Characteristic;
  using part::CharacteristicKind;
  const CharacteristicKind kind = valve.characteristic == Characteristic::kLinear ? CharacteristicKind::kLinear
                                  : valve.characteristic == Characteristic::kTable
                                      ? CharacteristicKind::kTable
                                      : CharacteristicKind::kEqualPercentage;
  return {kind, valve.rangeability, valve.leakage_percent * kPercent, std::move(table)};
}

}  // namespace

EdgeLaws::EdgeLaws(const Network& network)
    : network_(&network),
      rows_(network.edges.size()),
      fixed_quadratic_(network.edges.size(), 0.0),
      edge_of_terminal_(network.terminals.size(), -1),
      edge_of_pump_(network.pumps.size(), -1),
      valve_resistance_(network.terminals.size(), kInfinity),
      pressure_per_head_(network.density_kg_m3 * quantity::kGravity) {
  pipes_.reserve(network.pipes.size());
  for (int e = 0; e < numEdges(); ++e) addEdge(e);
  findBlocks();
  for (const TerminalLaw& terminal : network.terminals) characteristics_.push_back(characteristicOf(terminal.valve));
  Request open;
  open.terminals.assign(network.terminals.size(), {loop::DemandKind::kPosition, 0, 1});
  setRequest(open);
}

void EdgeLaws::addEdge(int e) {
  Row& row = rows_[e];
  const Edge& edge = network_->edges[e];
  row.first_pipe = pipes_.size();
  first_power_.push_back(static_cast<int>(powers_.size()));
  first_pump_.push_back(static_cast<int>(pumps_.size()));
  for (int i = edge.first_element; i < edge.first_element + edge.num_elements; ++i) {
    const Element& element = network_->elements[i];
    fixed_quadratic_[e] += element.quadratic_pa_s2_m6;
    if (element.shut) row.always_shut = 1;
    if (element.terminal >= 0) edge_of_terminal_[row.terminal = element.terminal] = e;
    if (element.pump >= 0) {
      edge_of_pump_[element.pump] = e;
      pumps_.push_back({&network_->pumps[element.pump].curve, element.reversed ? -1.0 : 1.0});
    }
    for (int p = element.first_pipe; p < element.first_pipe + element.num_pipes; ++p) {
      const part::PipeConstants pipe = constantsOf(network_->pipes[p]);
      fixed_quadratic_[e] += pipe.quadratic;
      if (pipe.friction == 0) continue;
      pipes_.add(pipe);
    }
    for (int p = element.first_power; p < element.first_power + element.num_powers; ++p) {
      if (network_->powers[p].exponent == 2)
        fixed_quadratic_[e] += network_->powers[p].coefficient;
      else
        powers_.push_back(network_->powers[p]);
    }
  }
  row.num_pipes = static_cast<std::uint16_t>(pipes_.size() - row.first_pipe);
  row.num_powers = static_cast<std::uint8_t>(static_cast<int>(powers_.size()) - first_power_.back());
  row.num_pumps = static_cast<std::uint8_t>(static_cast<int>(pumps_.size()) - first_pump_.back());
  row.quadratic = fixed_quadratic_[e];
}

/// Blocks small enough for what is worked out of them to stay near the processor.
void EdgeLaws::findBlocks() {
  constexpr int kMostPipes = 256;
  constexpr int kMostEdges = 256;
  std::size_t most_pipes = 0;
  for (int e = 0; e < numEdges(); ++e) {
    const Row& row = rows_[e];
    const bool full = !blocks_.empty() && (blocks_.back().num_pipes + row.num_pipes > kMostPipes ||
                                           e - blocks_.back().first_edge >= kMostEdges);
    if (blocks_.empty() || full) blocks_.push_back({e, e, row.first_pipe, 0});
    blocks_.back().last_edge = e + 1;
    blocks_.back().num_pipes += row.num_pipes;
    most_pipes = std::max<std::size_t>(most_pipes, blocks_.back().num_pipes);
  }
  for (auto* column : {&block_flow_, &block_loss_, &block_slope_}) column->assign(most_pipes, 0.0);
}

part::PipeConstants EdgeLaws::constantsOf(const PipeLaw& pipe) const {
#ifdef EBBLINE_SEEDED_FAULT_LAW  // only in the copy that a test must catch: one per mille of every pipe's length
  return part::pipeConstants(1.001 * pipe.length_m, pipe.bore_m, pipe.roughness_m, pipe.loss_k, network_->density_kg_m3,
                             network_->viscosity_pa_s);
#else
  return part::pipeConstants(pipe.length_m, pipe.bore_m, pipe.roughness_m, pipe.loss_k, network_->density_kg_m3,
                             network_->viscosity_pa_s);
#endif
}

void EdgeLaws::setRequest(const Request& request) {
  for (std::size_t t = 0; t < network_->terminals.size(); ++t) {
    if (edge_of_terminal_[t] < 0) continue;
    Row& row = rows_[edge_of_terminal_[t]];
    const TerminalDemand& demand = request.terminals[t];
    const bool position = demand.kind == loop::DemandKind::kPosition;
    const double opening = position && demand.stroke < 1 ? characteristics_[t].opening(demand.stroke).value : 1.0;
    const double kv = network_->terminals[t].valve_kvs_m3h * opening;
    valve_resistance_[t] = kv > 0 ? part::kvResistance(kv, network_->density_kg_m3) : kInfinity;
    row.limit = position ? (kv > 0 ? kInfinity : 0.0) : demand.flow_m3s;
    row.quadratic = fixed_quadratic_[edge_of_terminal_[t]] + (kv > 0 ? valve_resistance_[t] : 0);
  }
}

void EdgeLaws::forget() {
  pipes_.forget();
}

LossSlope EdgeLaws::pumpLoss(const PumpRow& pump, double flow_m3s, double speed_squared) const {
  const double speed = std::sqrt(speed_squared);
  const part::ValueSlope head = pump.curve->head(pump.sign * flow_m3s, speed);
  // H = x h(q/√x): dH/dx = h − q h'/(2 √x) = (H − q H'/2)/x.
  const double by_x = (head.value - 0.5 * pump.sign * flow_m3s * head.slope) / speed_squared;
  return {-pump.sign * pressure_per_head_ * head.value, -pressure_per_head_ * head.slope,
          -pump.sign * pressure_per_head_ * by_x};
}

LossSlope EdgeLaws::evaluateElement(int index, double flow_m3s, double speed_squared) const {
  const Element& element = network_->elements[index];
  double quadratic = element.quadratic_pa_s2_m6;
  if (element.terminal >= 0 && std::isfinite(valve_resistance_[element.terminal]))
    quadratic += valve_resistance_[element.terminal];
  const double q = std::abs(flow_m3s);
  LossSlope sum{quadratic * q * flow_m3s, 2 * quadratic * q, 0};
  const auto add = [&sum](part::ValueSlope loss) {
    sum.loss_pa += loss.value;
    sum.slope_pa_s_m3 += loss.slope;
  };
  for (int p = element.first_pipe; p < element.first_pipe + element.num_pipes; ++p) {
    part::FrictionMemory fresh;
    add(part::pipeLoss(constantsOf(network_->pipes[p]), flow_m3s, fresh));
  }
  for (int p = element.first_power; p < element.first_power + element.num_powers; ++p)
    add(part::powerLoss(network_->powers[p].coefficient, network_->powers[p].exponent, flow_m3s));
  if (element.pump < 0) return sum;
  const PumpRow pump{&network_->pumps[element.pump].curve, element.reversed ? -1.0 : 1.0};
  const LossSlope head = pumpLoss(pump, flow_m3s, speed_squared);
  return {sum.loss_pa + head.loss_pa, sum.slope_pa_s_m3 + head.slope_pa_s_m3, head.by_speed_squared};
}

double EdgeLaws::pumpPressure(double speed_squared) const {
  double largest = 0;
  for (const PumpLaw& pump : network_->pumps)
    largest = std::max(largest, pressure_per_head_ * speed_squared * pump.curve.shutOffHead());
  return largest;
}

}  // namespace ebbline::network
