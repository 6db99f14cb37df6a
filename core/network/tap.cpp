#include "core/network/tap.h"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace ebbline::network {

Taps::Taps(const Network& network, const std::vector<TapPair>& pairs) : network_(&network), pairs_(pairs) {
  for (const TapPair& pair : pairs_) {
    high_.push_back(pointOf(pair.high, pair.high_bore_m));
    low_.push_back(pointOf(pair.low, pair.low_bore_m));
  }
}

Taps::Point Taps::pointOf(int end, double bore_m) const {
  const EndPlace& place = network_->ends[end];
  Point point;
  point.bore_m = bore_m;
  if (place.node < 0) {
    point.edge = place.edge;
    point.last_element = place.element;
    point.node = network_->edges[place.edge].from;
    point.meeting.push_back(place.edge);
    return point;
  }
  point.node = place.node;
  for (int e = 0; e < static_cast<int>(network_->edges.size()); ++e)
    if (network_->edges[e].from == place.node || network_->edges[e].to == place.node) point.meeting.push_back(e);
  return point;
}

double Taps::staticPressure(const Point& point, const EdgeLaws& laws, const std::vector<double>& node_pressure_pa,
                            const std::vector<double>& edge_flow_m3s, double speed_squared) const {
  double pressure = node_pressure_pa[point.node];
  if (point.edge >= 0)
    for (int i = network_->edges[point.edge].first_element; i <= point.last_element; ++i)
      pressure -= laws.evaluateElement(i, edge_flow_m3s[point.edge], speed_squared).loss_pa;
  if (point.bore_m <= 0) return pressure;
  double flow = 0;
  for (int e : point.meeting) flow = std::max(flow, std::abs(edge_flow_m3s[e]));
  const double velocity = flow / (std::numbers::pi / 4 * point.bore_m * point.bore_m);
  return pressure - network_->density_kg_m3 * velocity * velocity / 2;
}

double Taps::reading(int index, const EdgeLaws& laws, const std::vector<double>& node_pressure_pa,
                     const std::vector<double>& edge_flow_m3s, double speed_squared) const {
  return staticPressure(high_[index], laws, node_pressure_pa, edge_flow_m3s, speed_squared) -
         staticPressure(low_[index], laws, node_pressure_pa, edge_flow_m3s, speed_squared);
}

}  // namespace ebbline::network
