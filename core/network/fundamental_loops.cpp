#include "core/network/fundamental_loops.h"

#include <algorithm>
#include <cmath>
#include <deque>

namespace ebbline::network {
namespace {

// Edges at each node, packed.
struct Incidence {
  std::vector<int> first;
  std::vector<int> edge;
};

Incidence incidenceOf(const Network& network) {
  Incidence incidence;
  incidence.first.assign(network.num_nodes + 1, 0);
  for (const Edge& edge : network.edges) {
    ++incidence.first[edge.from + 1];
    if (edge.to != edge.from) ++incidence.first[edge.to + 1];
  }
  for (int node = 0; node < network.num_nodes; ++node) incidence.first[node + 1] += incidence.first[node];
  incidence.edge.resize(incidence.first.back());
  std::vector<int> next(incidence.first.begin(), incidence.first.end() - 1);
  for (int e = 0; e < static_cast<int>(network.edges.size()); ++e) {
    const Edge& edge = network.edges[e];
    incidence.edge[next[edge.from]++] = e;
    if (edge.to != edge.from) incidence.edge[next[edge.to]++] = e;
  }
  return incidence;
}

// Roots: the datum first, so that its part has node pressures relative to it.
std::vector<int> rootOrder(const Network& network) {
  std::vector<int> order;
  order.reserve(network.num_nodes);
  if (network.num_nodes > 0) order.push_back(network.datum_node);
  for (int node = 0; node < network.num_nodes; ++node)
    if (node != network.datum_node) order.push_back(node);
  return order;
}

// Part of a loop's sum that no valve takes up; what is no number stays none.
double unmet(double lacking_pa, Hold hold) {
  switch (hold) {
    case Hold::kFree: return std::abs(lacking_pa);
    case Hold::kAlong: return lacking_pa <= 0 ? 0 : lacking_pa;
    case Hold::kAgainst: return lacking_pa >= 0 ? 0 : -lacking_pa;
    case Hold::kShut: return 0;
  }
  return 0;
}

}  // namespace

std::vector<int> terminalsLast(const Network& network) {
  std::vector<int> rank(network.edges.size(), 0);
  for (std::size_t e = 0; e < rank.size(); ++e) {
    const Edge& edge = network.edges[e];
    for (int i = edge.first_element; i < edge.first_element + edge.num_elements; ++i)
      if (network.elements[i].terminal >= 0) rank[e] = 1;
  }
  return rank;
}

FundamentalLoops::FundamentalLoops(const Network& network, const std::vector<int>& rank)
    : network_(&network),
      link_of_node_(network.num_nodes, -1),
      depth_(network.num_nodes, 0),
      part_(network.num_nodes, -1),
      in_tree_(network.edges.size(), 0) {
  grow(rank);
  for (int e = 0; e < static_cast<int>(network.edges.size()); ++e)
    if (rank[e] != kLeftOut && !in_tree_[e]) chords_.push_back(e);
}

// Prim's tree with first-in-first-out among equals: lowest ranks inside, short loops outside.
void FundamentalLoops::grow(const std::vector<int>& rank) {
  const Incidence incidence = incidenceOf(*network_);
  const int most_rank = rank.empty() ? 0 : std::max(0, *std::max_element(rank.begin(), rank.end()));
  std::vector<std::deque<Link>> waiting(most_rank + 1);
  const auto visit = [&](int node) {
    part_[node] = num_parts_;
    for (int i = incidence.first[node]; i < incidence.first[node + 1]; ++i) {
      const int e = incidence.edge[i];
      if (rank[e] == kLeftOut) continue;
      const bool forward = network_->edges[e].from == node;
      const int other = forward ? network_->edges[e].to : network_->edges[e].from;
      if (part_[other] < 0) waiting[rank[e]].push_back({other, node, e, forward ? 1 : -1});
    }
  };
  for (int root : rootOrder(*network_)) {
    if (part_[root] >= 0) continue;
    visit(root);
    while (true) {
      const auto queue = std::find_if(waiting.begin(), waiting.end(), [](const auto& q) { return !q.empty(); });
      if (queue == waiting.end()) break;
      const Link link = queue->front();
      queue->pop_front();
      if (part_[link.node] >= 0) continue;
      link_of_node_[link.node] = static_cast<int>(links_.size());
      depth_[link.node] = depth_[link.parent] + 1;
      in_tree_[link.edge] = 1;
      links_.push_back(link);
      visit(link.node);
    }
    ++num_parts_;
  }
}

LoopPath FundamentalLoops::loop(int chord) const {
  const Edge& edge = network_->edges[chords_[chord]];
  LoopPath path{{chords_[chord], 1}};
  LoopPath down;  // from the meeting point to the chord's beginning, collected backwards
  int high = edge.to;
  int low = edge.from;
  while (high != low) {
    if (depth_[high] >= depth_[low]) {
      const Link& link = links_[link_of_node_[high]];
      path.push_back({link.edge, -link.sign});
      high = link.parent;
    } else {
      const Link& link = links_[link_of_node_[low]];
      down.push_back({link.edge, link.sign});
      low = link.parent;
    }
  }
  path.insert(path.end(), down.rbegin(), down.rend());
  return path;
}

double FundamentalLoops::setTreeFlows(std::vector<double>& edge_flow_m3s) const {
  std::vector<double> into(network_->num_nodes, 0.0);  // surplus of inflow over outflow without tree edges
  for (std::size_t e = 0; e < network_->edges.size(); ++e) {
    if (in_tree_[e]) continue;
    into[network_->edges[e].to] += edge_flow_m3s[e];
    into[network_->edges[e].from] -= edge_flow_m3s[e];
  }
  for (const Draw& draw : network_->draws) into[draw.node] -= draw.flow_m3s;
  for (auto link = links_.rbegin(); link != links_.rend(); ++link) {
    edge_flow_m3s[link->edge] = -link->sign * into[link->node];
    into[link->parent] += into[link->node];
    into[link->node] = 0;
  }
  double left = 0;
  for (double surplus : into) left = std::max(left, std::abs(surplus));
  return left;
}

void FundamentalLoops::nodePressures(const std::vector<double>& edge_loss_pa,
                                     std::vector<double>& node_pressure_pa) const {
  node_pressure_pa.assign(network_->num_nodes, 0.0);
  for (const Link& link : links_)
    node_pressure_pa[link.node] = node_pressure_pa[link.parent] - link.sign * edge_loss_pa[link.edge];
}

LoopSum FundamentalLoops::largestSum(const std::vector<double>& edge_loss_pa, const std::vector<Hold>& hold) const {
  std::vector<double> pressure;
  nodePressures(edge_loss_pa, pressure);
  LoopSum sum;
  for (int e : chords_) {
    const Edge& edge = network_->edges[e];
    const double lacking = edge_loss_pa[e] - (pressure[edge.from] - pressure[edge.to]);
    const double amount = unmet(lacking, hold.empty() ? Hold::kFree : hold[e]);
    if (std::isnan(amount)) return {amount, e};
    if (sum.edge < 0 || amount > sum.largest_pa) sum = {amount, e};
  }
  return sum;
}

}  // namespace ebbline::network
