#include "tests/bench/equations.h"

#include "core/network/fundamental_loops.h"

namespace ebbline::bench {

Equations::Equations(const network::Network& network, const network::Request& request)
    : network_(&network), laws_(network, request), unknown_of_(network.num_nodes, -1) {
  speed_squared_ = request.speed.speed * request.speed.speed;
  int next = 0;
  for (int node = 0; node < network.num_nodes; ++node)
    if (node != network.datum_node) unknown_of_[node] = next++;
}

void Equations::setRequest(const network::Request& request) {
  laws_.setRequest(request);
  speed_squared_ = request.speed.speed * request.speed.speed;
}

Unknowns Equations::start() const {
  Unknowns x;
  x.node_pressure_pa.assign(network_->num_nodes, 0.0);
  x.edge_flow_m3s.assign(network_->edges.size(), 0.0);
  for (std::size_t t = 0; t < network_->terminals.size(); ++t)
    x.edge_flow_m3s[laws_.edgeOfTerminal(static_cast<int>(t))] = network_->terminals[t].design_flow_m3s;
  network::FundamentalLoops(*network_).setTreeFlows(x.edge_flow_m3s);
  return x;
}

}  // namespace ebbline::bench
