#include "core/network/results.h"

#include <algorithm>
#include <cmath>
#include <numbers>
#include <numeric>

#include "core/network/edge_law.h"
#include "core/network/tap.h"
#include "core/quantity/quantity.h"

namespace ebbline::network {

namespace {

constexpr double kLeastShortfall = 1e-3;  // part of the request that may be missing before it is called so

int rootOf(std::vector<int>& parent, int i) {
  while (parent[i] != i) i = parent[i] = parent[parent[i]];
  return i;
}

class Reader {
 public:
  Reader(const Network& network, const Request& request, const State& state)
      : network_(network), request_(request), state_(state), laws_(network, request) {}
  Results read();

 private:
  void findParts();
  void findVelocities();
  /// A shut valve, or a terminal that holds its flow: takes up whatever pressure there is.
  bool blocks(int element) const;
  LossSlope lossOf(int element, int edge) const {
    return laws_.evaluateElement(element, state_.edge_flow_m3s[edge], state_.speed * state_.speed);
  }
  void readEdge(int edge);
  EndResult readEnd(const EndPlace& place);
  TerminalResult readTerminal(int terminal) const;
  PumpResult readPump(int pump) const;
  double strokeOf(int terminal, const TerminalResult& result) const;
  double velocityOf(int element, int edge) const;

  const Network& network_;
  const Request& request_;
  const State& state_;
  EdgeLaws laws_;
  Results results_;
  std::vector<double> drop_;  // of each element in its edge's direction
  std::vector<char> node_determined_;
  std::vector<double> node_velocity_;  // in the run with the largest flow that meets there
  std::vector<int> edge_of_element_;
};

bool Reader::blocks(int index) const {
  const Element& element = network_.elements[index];
  if (element.shut) return true;
  if (element.terminal < 0) return false;
  if (!std::isfinite(laws_.valveResistance(element.terminal))) return true;
  const TerminalDemand& demand = request_.terminals[element.terminal];
  return demand.kind == loop::DemandKind::kRequest && (demand.flow_m3s == 0 || state_.throttled[element.terminal] != 0);
}

void Reader::findParts() {
  std::vector<int> parent(network_.num_nodes);
  std::iota(parent.begin(), parent.end(), 0);
  for (const Edge& edge : network_.edges) {
    bool open = true;
    for (int i = edge.first_element; i < edge.first_element + edge.num_elements; ++i) open = open && !blocks(i);
    if (open) parent[rootOf(parent, edge.from)] = rootOf(parent, edge.to);
  }
  const int datum = rootOf(parent, network_.datum_node);
  node_determined_.resize(network_.num_nodes);
  for (int node = 0; node < network_.num_nodes; ++node) node_determined_[node] = rootOf(parent, node) == datum;
}

double Reader::velocityOf(int element, int edge) const {
  const double bore = network_.elements[element].bore_m;
  return bore > 0 ? std::abs(state_.edge_flow_m3s[edge]) / (std::numbers::pi / 4 * bore * bore) : 0;
}

void Reader::findVelocities() {
  node_velocity_.assign(network_.num_nodes, 0.0);
  std::vector<double> largest(network_.num_nodes, 0.0);
  const auto look = [&](int node, int element, int edge) {
    const double flow = std::abs(state_.edge_flow_m3s[edge]);
    if (network_.elements[element].bore_m <= 0 || flow <= largest[node]) return;
    largest[node] = flow;
    node_velocity_[node] = velocityOf(element, edge);
  };
  for (int e = 0; e < static_cast<int>(network_.edges.size()); ++e) {
    const Edge& edge = network_.edges[e];
    if (edge.num_elements == 0) continue;
    look(edge.from, edge.first_element, e);
    look(edge.to, edge.first_element + edge.num_elements - 1, e);
  }
}

/// Drops of an edge's elements; what a blocking element takes up is what the others leave.
void Reader::readEdge(int e) {
  const Edge& edge = network_.edges[e];
  const double flow = state_.edge_flow_m3s[e];
  double left = state_.node_pressure_pa[edge.from] - state_.node_pressure_pa[edge.to];
  int blocker = -1;
  for (int i = edge.first_element; i < edge.first_element + edge.num_elements; ++i) {
    edge_of_element_[i] = e;
    drop_[i] = blocks(i) ? 0 : lossOf(i, e).loss_pa;
    if (blocks(i)) blocker = i;
    left -= drop_[i];
  }
  if (blocker >= 0) drop_[blocker] = left;
  for (int i = edge.first_element; i < edge.first_element + edge.num_elements; ++i) {
    const Element& element = network_.elements[i];
    PartResult& part = results_.parts[i];
    const double sign = element.reversed ? -1 : 1;
    part.kind = element.kind;
    part.id = element.id;
    part.side = element.side;
    part.flow_m3s = sign * flow;
    part.loss_pa = sign * drop_[i];
    part.velocity_ms = velocityOf(i, e);
    if (element.kind != Element::Kind::kPipe || element.num_pipes == 0) continue;
    const PipeLaw& pipe = network_.pipes[element.first_pipe];
    part::FrictionMemory fresh;
    const part::PipeConstants metre =
        part::pipeConstants(1, pipe.bore_m, pipe.roughness_m, 0, network_.density_kg_m3, network_.viscosity_pa_s);
    part.gradient_pa_m = part::pipeFriction(metre, std::abs(flow), fresh).value;
  }
}

EndResult Reader::readEnd(const EndPlace& place) {
  EndResult end;
  end.end = place.end;
  end.elevation_m = place.elevation_m;
  double velocity = 0;
  if (place.node >= 0) {
    end.pressure_pa = state_.node_pressure_pa[place.node];
    end.determined = node_determined_[place.node] != 0;
    velocity = node_velocity_[place.node];
  } else {
    const Edge& edge = network_.edges[place.edge];
    const int last = edge.first_element + edge.num_elements - 1;
    bool blocked_before = false;
    bool blocked_behind = false;
    for (int i = edge.first_element; i <= last; ++i)
      (i <= place.element ? blocked_before : blocked_behind) |= blocks(i);
    const bool from_behind = blocked_before;
    end.determined = !(blocked_before && blocked_behind) && node_determined_[from_behind ? edge.to : edge.from] != 0;
    end.pressure_pa = state_.node_pressure_pa[from_behind ? edge.to : edge.from];
    if (from_behind)
      for (int i = last; i > place.element; --i) end.pressure_pa += drop_[i];
    else
      for (int i = edge.first_element; i <= place.element; ++i) end.pressure_pa -= drop_[i];
    velocity = std::max(velocityOf(place.element, place.edge), velocityOf(place.element + 1, place.edge));
  }
  if (!end.determined) end.pressure_pa = 0;
  if (!network_.datum_known || !end.determined) return end;
  // A gauge reads static pressure, at the vessel as well.
  const double density = network_.density_kg_m3;
  const double datum_velocity = node_velocity_[network_.datum_node];
  end.gauge_pa = network_.datum_gauge_pa + end.pressure_pa -
                 density / 2 * (velocity * velocity - datum_velocity * datum_velocity) -
                 density * quantity::kGravity * (place.elevation_m - network_.datum_elevation_m);
  return end;
}

double Reader::strokeOf(int t, const TerminalResult& result) const {
  const TerminalDemand& demand = request_.terminals[t];
  if (demand.kind == loop::DemandKind::kPosition) return std::min(1.0, demand.stroke);
  if (demand.flow_m3s == 0) return 0;
  if (!state_.throttled[t] || result.valve_pa <= 0 || result.delivered_m3s <= 0) return 1;
  const double resistance = result.valve_pa / (result.delivered_m3s * result.delivered_m3s);
  const double kv = part::kvOfResistance(resistance, network_.density_kg_m3);
  return laws_.characteristic(t).strokeFor(kv / network_.terminals[t].valve_kvs_m3h);
}

TerminalResult Reader::readTerminal(int t) const {
  const TerminalLaw& terminal = network_.terminals[t];
  const TerminalDemand& demand = request_.terminals[t];
  TerminalResult result;
  result.id = terminal.id;
  result.tag = terminal.tag;
  const bool asks = demand.kind == loop::DemandKind::kRequest;
  result.requested_m3s = asks ? demand.flow_m3s : terminal.design_flow_m3s;
  const int e = edge_of_element_[terminal.element];
  result.delivered_m3s = state_.edge_flow_m3s[e];
  result.available_pa = drop_[terminal.element];
  double valve = laws_.valveResistance(t);
  if (!std::isfinite(valve)) valve = 0;
  const double q = result.delivered_m3s;
  result.valve_pa = result.available_pa - (lossOf(terminal.element, e).loss_pa - valve * q * std::abs(q));
  if (!blocks(terminal.element)) result.valve_pa = valve * q * std::abs(q);
  result.stroke = strokeOf(t, result);
  if (asks && demand.flow_m3s > 0) {
    result.shortfall = std::max(0.0, (demand.flow_m3s - q) / demand.flow_m3s);
    result.under_supplied = result.shortfall > kLeastShortfall;
  }
  return result;
}

PumpResult Reader::readPump(int p) const {
  const PumpLaw& pump = network_.pumps[p];
  PumpResult result;
  result.id = pump.id;
  result.tag = pump.tag;
  result.speed = state_.speed;
  const int e = edge_of_element_[pump.element];
  result.flow_m3s = state_.edge_flow_m3s[e] * (network_.elements[pump.element].reversed ? -1 : 1);
  result.head_m = pump.curve.head(result.flow_m3s, state_.speed).value;
  result.pressure_pa = result.head_m * network_.density_kg_m3 * quantity::kGravity;
  result.shaft_power_w = pump.curve.shaftPower(result.flow_m3s, state_.speed, network_.density_kg_m3);
  result.efficiency = pump.curve.hasEfficiency() ? pump.curve.efficiency(result.flow_m3s, state_.speed) : 0;
  const double at_reference = result.flow_m3s / state_.speed;
  result.beyond_data =
      at_reference > pump.curve.lastFlow() * (1 + 1e-9) || at_reference < -1e-9 * pump.curve.lastFlow();
  return result;
}

Results Reader::read() {
  findParts();
  findVelocities();
  results_.parts.resize(network_.elements.size());
  drop_.assign(network_.elements.size(), 0.0);
  edge_of_element_.assign(network_.elements.size(), 0);
  for (int e = 0; e < static_cast<int>(network_.edges.size()); ++e) readEdge(e);
  for (std::size_t i = 0; i < network_.elements.size(); ++i) results_.parts[i].tag = network_.elements[i].tag;
  for (const EndPlace& place : network_.ends) results_.ends.push_back(readEnd(place));
  for (int t = 0; t < static_cast<int>(network_.terminals.size()); ++t) results_.terminals.push_back(readTerminal(t));
  for (int p = 0; p < static_cast<int>(network_.pumps.size()); ++p) results_.pumps.push_back(readPump(p));
  if (request_.speed.kind == SpeedRule::Kind::kHoldPressure) {
    const Taps taps(network_, request_.speed.taps);
    for (int i = 0; i < taps.count(); ++i)
      results_.tap_pressure_pa.push_back(
          taps.reading(i, laws_, state_.node_pressure_pa, state_.edge_flow_m3s, state_.speed * state_.speed));
  }
  return std::move(results_);
}

}  // namespace

Results resultsOf(const Network& network, const Request& request, const State& state) {
  return Reader(network, request, state).read();
}

}  // namespace ebbline::network
