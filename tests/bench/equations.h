#pragma once
// The network's equations in the plain form that a general-purpose solver is given: one law per edge, one balance per
// node. The same laws and the same lumped network as Ebbline's own solver; only the linear algebra differs. Positions
// and speed are given.

#include <vector>

#include "core/network/edge_law.h"
#include "core/network/solver.h"

namespace ebbline::bench {

/// Flows and node pressures: start and answer.
struct Unknowns {
  std::vector<double> node_pressure_pa;
  std::vector<double> edge_flow_m3s;
};

class Equations {
 public:
  /// `network` must outlive the object.
  Equations(const network::Network& network, const network::Request& request);
  void setRequest(const network::Request& request);
  const network::Network& network() const { return *network_; }
  network::LossSlope law(int edge, double flow_m3s) { return laws_.evaluate(edge, flow_m3s, speed_squared_); }
  bool open(int edge) const { return !laws_.shut(edge); }
  /// Largest pressure of the pumps [Pa], to scale residuals.
  double pumpPressure() const { return laws_.pumpPressure(speed_squared_); }
  /// Index of each node among the unknown pressures; −1 for the datum.
  int unknownOf(int node) const { return unknown_of_[node]; }
  int numUnknown() const { return network_->num_nodes - 1; }
  /// Start: every terminal its design flow, the tree carrying it, no pressure.
  Unknowns start() const;

 private:
  const network::Network* network_;
  network::EdgeLaws laws_;
  double speed_squared_ = 1;
  std::vector<int> unknown_of_;
};

}  // namespace ebbline::bench
