#include "core/network/demand.h"

#include <algorithm>
#include <unordered_map>

namespace ebbline::network {

namespace {

constexpr double kPaPerKpa = 1000;
constexpr double kMetresPerMillimetre = 1e-3;

TerminalDemand demandOf(const Share& share, double design_flow_m3s) {
  if (share.kind == loop::DemandKind::kPosition) return {share.kind, 0, share.percent / 100};
  return {share.kind, share.percent / 100 * design_flow_m3s, 1};
}

/// Index in Network::ends; −1 when the end is not connected.
int indexOf(const Network& network, const loop::End& end) {
  const auto before = [](const EndPlace& place, const loop::End& key) {
    return place.end.joint != key.joint ? place.end.joint < key.joint : place.end.side < key.side;
  };
  const auto found = std::lower_bound(network.ends.begin(), network.ends.end(), end, before);
  if (found == network.ends.end() || !(found->end == end)) return -1;
  return static_cast<int>(found - network.ends.begin());
}

/// Bore of the run a tap is mounted on: the largest of the pipes that meet there; 0 when none has a bore.
double boreAt(const Network& network, int index) {
  if (index < 0) return 0;
  const EndPlace& place = network.ends[index];
  double bore = 0;
  if (place.node < 0) {
    const Edge& edge = network.edges[place.edge];
    bore = network.elements[place.element].bore_m;
    if (place.element + 1 < edge.first_element + edge.num_elements)
      bore = std::max(bore, network.elements[place.element + 1].bore_m);
    return bore;
  }
  for (const Edge& edge : network.edges) {
    if (edge.num_elements == 0) continue;
    if (edge.from == place.node) bore = std::max(bore, network.elements[edge.first_element].bore_m);
    if (edge.to == place.node)
      bore = std::max(bore, network.elements[edge.first_element + edge.num_elements - 1].bore_m);
  }
  return bore;
}

TapPair tapsBetween(const Network& network, const loop::End& high, const loop::End& low, double set_point_kpa) {
  TapPair taps;
  taps.high = indexOf(network, high);
  taps.low = indexOf(network, low);
  taps.set_point_pa = set_point_kpa * kPaPerKpa;
  taps.high_bore_m = boreAt(network, taps.high);
  taps.low_bore_m = boreAt(network, taps.low);
  return taps;
}

void addSensors(const loop::Loop& loop, const Network& network, SpeedRule& rule) {
  for (const loop::Id id : loop.control.sensors)
    for (const loop::Sensor& sensor : loop.sensors) {
      if (sensor.id != id) continue;
      TapPair taps = tapsBetween(network, sensor.high, sensor.low, sensor.set_point_kpa.value_or(0));
      if (sensor.high_bore_mm) taps.high_bore_m = *sensor.high_bore_mm * kMetresPerMillimetre;
      if (sensor.low_bore_mm) taps.low_bore_m = *sensor.low_bore_mm * kMetresPerMillimetre;
      rule.taps.push_back(taps);
    }
}

}  // namespace

SpeedRule speedRuleOf(const loop::Loop& loop, const Network& network) {
  const loop::Control& control = loop.control;
  SpeedRule rule;
  rule.speed = control.speed_percent / 100;
  if (!network.pumps.empty()) {  // all pumps run at one speed: within the bounds of each
    rule.minimum_speed = 0;
    rule.maximum_speed = network.pumps.front().maximum_speed;
    for (const PumpLaw& pump : network.pumps) {
      rule.minimum_speed = std::max(rule.minimum_speed, pump.minimum_speed);
      rule.maximum_speed = std::min(rule.maximum_speed, pump.maximum_speed);
    }
    rule.minimum_speed = std::min(rule.minimum_speed, rule.maximum_speed);
  }
  if (control.strategy == loop::Strategy::kConstantSpeed) return rule;
  rule.kind = SpeedRule::Kind::kHoldPressure;
  const double set_point = control.set_point_kpa.value_or(0);
  if (control.strategy == loop::Strategy::kFieldSensor) {
    addSensors(loop, network, rule);
  } else if (control.strategy == loop::Strategy::kDpHeaders) {
    const loop::End none;
    rule.taps.push_back(
        tapsBetween(network, control.header_supply.value_or(none), control.header_return.value_or(none), set_point));
  } else {
    for (const loop::Pump& pump : loop.pumps) rule.taps.push_back(tapsBetween(network, pump.to, pump.from, set_point));
  }
  return rule;
}

double designFlow(const Network& network) {
  double sum = 0;
  for (const TerminalLaw& terminal : network.terminals) sum += terminal.design_flow_m3s;
  return sum;
}

std::vector<Share> sharesOf(const loop::Loop& loop, const Network& network, const loop::LoadState* state) {
  std::unordered_map<loop::Id, Share> told;
  Share rest;
  if (state) {
    rest = {state->rest_kind, state->rest_percent};
    for (const loop::Demand& demand : state->demands) told[demand.of] = {demand.kind, demand.percent};
  }
  std::vector<Share> shares;
  shares.reserve(network.terminals.size());
  for (const TerminalLaw& terminal : network.terminals) {
    Share share = rest;
    if (terminal.zone >= 0) {
      const auto zone = told.find(loop.zones[terminal.zone].id);
      if (zone != told.end()) share = zone->second;
    }
    const auto own = told.find(terminal.id);
    if (own != told.end()) share = own->second;
    shares.push_back(share);
  }
  return shares;
}

Request requestOf(const Network& network, const std::vector<Share>& shares, const SpeedRule& speed) {
  Request request;
  request.speed = speed;
  request.terminals.reserve(shares.size());
  for (std::size_t t = 0; t < shares.size(); ++t)
    request.terminals.push_back(demandOf(shares[t], network.terminals[t].design_flow_m3s));
  return request;
}

Request requestOf(const loop::Loop& loop, const Network& network, const loop::LoadState* state) {
  return requestOf(network, sharesOf(loop, network, state), speedRuleOf(loop, network));
}

}  // namespace ebbline::network
