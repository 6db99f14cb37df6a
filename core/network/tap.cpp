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
  for (const std::vector<Point>* points : {&high_, &low_})
    for (const Point& point : *points) {
      nodes_.push_back(point.node);
      edges_.insert(edges_.end(), point.meeting.begin(), point.meeting.end());
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

/// The edge with the largest flow of those that meet at a tap.
int Taps::runOf(const Point& point, const std::vector<double>& edge_flow_m3s) const {
  int run = -1;
  for (int e : point.meeting)
    if (run < 0 || std::abs(edge_flow_m3s[e]) > std::abs(edge_flow_m3s[run])) run = e;
  return run;
}

double Taps::staticPressure(const Point& point, const EdgeLaws& laws, const std::vector<double>& node_pressure_pa,
                            const std::vector<double>& edge_flow_m3s, double speed_squared) const {
  double pressure = node_pressure_pa[point.node];
  if (point.edge >= 0)
    for (int i = network_->edges[point.edge].first_element; i <= point.last_element; ++i)
      pressure -= laws.evaluateElement(i, edge_flow_m3s[point.edge], speed_squared).loss_pa;
  if (point.bore_m <= 0) return pressure;
  const int run = runOf(point, edge_flow_m3s);
  const double velocity = run < 0 ? 0 : edge_flow_m3s[run] / (std::numbers::pi / 4 * point.bore_m * point.bore_m);
  return pressure - network_->density_kg_m3 * velocity * velocity / 2;
}

double Taps::reading(int index, const EdgeLaws& laws, const std::vector<double>& node_pressure_pa,
                     const std::vector<double>& edge_flow_m3s, double speed_squared) const {
  return staticPressure(high_[index], laws, node_pressure_pa, edge_flow_m3s, speed_squared) -
         staticPressure(low_[index], laws, node_pressure_pa, edge_flow_m3s, speed_squared);
}

void Taps::derivatives(const Point& point, double sign, const EdgeLaws& laws, const std::vector<double>& edge_flow_m3s,
                       double speed_squared, std::vector<TapTerm>& terms) const {
  terms.push_back({point.node, -1, sign});
  if (point.edge >= 0) {
    double slope = 0;
    for (int i = network_->edges[point.edge].first_element; i <= point.last_element; ++i)
      slope += laws.evaluateElement(i, edge_flow_m3s[point.edge], speed_squared).slope_pa_s_m3;
    terms.push_back({-1, point.edge, -sign * slope});
  }
  const int run = point.bore_m > 0 ? runOf(point, edge_flow_m3s) : -1;
  if (run < 0) return;
  const double area = std::numbers::pi / 4 * point.bore_m * point.bore_m;
  terms.push_back({-1, run, -sign * network_->density_kg_m3 * edge_flow_m3s[run] / (area * area)});
}

void Taps::derivatives(int index, const EdgeLaws& laws, const std::vector<double>& edge_flow_m3s, double speed_squared,
                       std::vector<TapTerm>& terms) const {
  derivatives(high_[index], 1, laws, edge_flow_m3s, speed_squared, terms);
  derivatives(low_[index], -1, laws, edge_flow_m3s, speed_squared, terms);
}

}  // namespace ebbline::network
