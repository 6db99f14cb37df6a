#pragma once
// What differential-pressure taps read: static pressure, so the velocity head at each tap is taken off.

#include <vector>

#include "core/network/edge_law.h"

namespace ebbline::network {

/// One way in which a reading changes: by the pressure of a node, or by the flow of an edge.
struct TapTerm {
  int node = -1;
  int edge = -1;
  double factor = 0;  ///< ±1 for a node, [Pa/(m³/s)] for an edge.
};

/// The tap pairs of one speed rule, looked up once. Newton, Hardy Cross and results read through it.
class Taps {
 public:
  Taps(const Network& network, const std::vector<TapPair>& pairs);

  int count() const { return static_cast<int>(pairs_.size()); }
  const TapPair& pair(int index) const { return pairs_[index]; }
  /// The nodes and edges that readings and derivatives look at; some may come twice.
  const std::vector<int>& nodes() const { return nodes_; }
  const std::vector<int>& edges() const { return edges_; }
  /// Static pressure at `high` minus static pressure at `low` [Pa]: total pressures less ρ v²/2 each. The flow at a
  /// tap is the largest of the edges that meet there (the run it is mounted on, before or behind a branch).
  double reading(int index, const EdgeLaws& laws, const std::vector<double>& node_pressure_pa,
                 const std::vector<double>& edge_flow_m3s, double speed_squared) const;
  /// Derivatives of that reading to node pressures and edge flows, added to `terms`.
  void derivatives(int index, const EdgeLaws& laws, const std::vector<double>& edge_flow_m3s, double speed_squared,
                   std::vector<TapTerm>& terms) const;

 private:
  struct Point {
    int node = -1;  // total pressure is that of this node …
    int edge = -1;  // … less the losses of these elements of this edge
    int last_element = -1;
    double bore_m = 0;
    std::vector<int> meeting;  // edges whose flow passes the tap
  };
  Point pointOf(int end, double bore_m) const;
  double staticPressure(const Point& point, const EdgeLaws& laws, const std::vector<double>& node_pressure_pa,
                        const std::vector<double>& edge_flow_m3s, double speed_squared) const;
  int runOf(const Point& point, const std::vector<double>& edge_flow_m3s) const;
  void derivatives(const Point& point, double sign, const EdgeLaws& laws, const std::vector<double>& edge_flow_m3s,
                   double speed_squared, std::vector<TapTerm>& terms) const;

  const Network* network_;
  std::vector<TapPair> pairs_;
  std::vector<Point> high_;
  std::vector<Point> low_;
  std::vector<int> nodes_;
  std::vector<int> edges_;
};

}  // namespace ebbline::network
