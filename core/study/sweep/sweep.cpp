#include "core/study/sweep/sweep.h"

#include <algorithm>
#include <functional>
#include <map>
#include <numeric>
#include <queue>
#include <utility>

#include "core/network/demand.h"
#include "core/parallel/each_index.h"
#include "core/quantity/quantity.h"

namespace ebbline::study {
namespace {

using network::Edge;
using network::Element;
using network::Network;
using network::Request;
using network::TerminalDemand;

constexpr double kUnreached = 1e300;

std::map<loop::Id, double> drawnLengths(const loop::Loop& loop) {
  std::map<loop::Id, double> lengths;
  for (const loop::PairedRun& run : loop.paired_runs) lengths[run.id] = run.pipe.length_m;
  for (const loop::PipeRun& run : loop.pipe_runs) lengths[run.id] = run.pipe.length_m;
  return lengths;
}

bool holds(const Network& network, const Edge& edge, Element::Kind kind) {
  for (int e = edge.first_element; e < edge.first_element + edge.num_elements; ++e)
    if (network.elements[static_cast<std::size_t>(e)].kind == kind) return true;
  return false;
}

// Length of the drawn pipes of an edge up to its terminal, from its `from` end or from its other end.
double lengthToTerminal(const Network& network, const Edge& edge, const std::map<loop::Id, double>& lengths,
                        bool from_start) {
  double sum = 0;
  for (int i = 0; i < edge.num_elements; ++i) {
    const int e = from_start ? edge.first_element + i : edge.first_element + edge.num_elements - 1 - i;
    const Element& element = network.elements[static_cast<std::size_t>(e)];
    if (element.kind == Element::Kind::kTerminal) break;
    const auto found = lengths.find(element.id);
    if (found != lengths.end()) sum += found->second;
  }
  return sum;
}

// Nodes on the discharge side of the pumps, each with the pipe length from the nearest discharge. An edge that holds a
// terminal or a pump is not passed, so the return side is never reached.
std::vector<double> supplyDistances(const Network& network, const std::map<loop::Id, double>& lengths) {
  std::vector<std::vector<std::pair<int, double>>> neighbours(static_cast<std::size_t>(network.num_nodes));
  std::vector<double> distance(static_cast<std::size_t>(network.num_nodes), kUnreached);
  using Entry = std::pair<double, int>;
  std::priority_queue<Entry, std::vector<Entry>, std::greater<>> queue;
  for (const Edge& edge : network.edges) {
    if (holds(network, edge, Element::Kind::kPump)) {
      for (int e = edge.first_element; e < edge.first_element + edge.num_elements; ++e) {
        const Element& element = network.elements[static_cast<std::size_t>(e)];
        if (element.kind == Element::Kind::kPump) queue.emplace(0.0, element.reversed ? edge.from : edge.to);
      }
    } else if (!holds(network, edge, Element::Kind::kTerminal)) {
      const double length = lengthToTerminal(network, edge, lengths, true);
      neighbours[static_cast<std::size_t>(edge.from)].emplace_back(edge.to, length);
      neighbours[static_cast<std::size_t>(edge.to)].emplace_back(edge.from, length);
    }
  }
  while (!queue.empty()) {
    const auto [reached, node] = queue.top();
    queue.pop();
    double& known = distance[static_cast<std::size_t>(node)];
    if (reached >= known) continue;
    known = reached;
    for (const auto& [next, length] : neighbours[static_cast<std::size_t>(node)]) queue.emplace(reached + length, next);
  }
  return distance;
}

const Edge* edgeOf(const Network& network, int element) {
  for (const Edge& edge : network.edges)
    if (element >= edge.first_element && element < edge.first_element + edge.num_elements) return &edge;
  return nullptr;
}

void addPumps(const Network& network, const network::Results& results, SweepRow& row) {
  double hydraulic = 0;
  for (const network::PumpResult& pump : results.pumps) {
    row.flow_m3s += pump.flow_m3s;
    row.shaft_power_w += pump.shaft_power_w;
    row.beyond_data = row.beyond_data || pump.beyond_data;
    hydraulic += pump.flow_m3s * pump.pressure_pa;
  }
  if (!results.pumps.empty()) {
    row.speed = results.pumps.front().speed;
    row.pressure_pa = results.pumps.front().pressure_pa;
  }
  if (results.pumps.size() > 1 && row.flow_m3s > 0) row.pressure_pa = hydraulic / row.flow_m3s;
  row.head_m = row.pressure_pa / (network.density_kg_m3 * quantity::kGravity);
  if (row.shaft_power_w > 0) row.efficiency = hydraulic / row.shaft_power_w;
}

void addTerminals(const Network& network, const network::Results& results, SweepRow& row) {
  for (std::size_t t = 0; t < results.terminals.size(); ++t) {
    const network::TerminalResult& terminal = results.terminals[t];
    row.requested_m3s += terminal.requested_m3s;
    row.delivered_m3s += terminal.delivered_m3s;
    if (!terminal.under_supplied) continue;
    ++row.num_under_supplied;
    row.essential_short = row.essential_short || network.terminals[t].essential;
    if (terminal.shortfall > row.worst_shortfall) {
      row.worst_shortfall = terminal.shortfall;
      row.worst_terminal = terminal.tag;
    }
  }
}

std::vector<std::pair<std::string, Request>> requestsOf(const loop::Loop& loop, const Network& network,
                                                        const SweepOptions& options) {
  std::vector<std::pair<std::string, Request>> requests;
  if (options.named_states) {
    for (const loop::LoadState& state : loop.load_states)
      requests.emplace_back(state.name, network::requestOf(loop, network, &state));
    return requests;
  }
  const std::vector<int> nearest_first = nearestFirst(loop, network);
  for (const double load : options.loads_percent) {
    Request request;
    request.speed = network::speedRuleOf(loop, network);
    request.terminals = demandsAt(network, load, options.order, nearest_first);
    requests.emplace_back("", std::move(request));
  }
  return requests;
}

}  // namespace

std::vector<int> nearestFirst(const loop::Loop& loop, const Network& network) {
  const std::map<loop::Id, double> lengths = drawnLengths(loop);
  const std::vector<double> distance = supplyDistances(network, lengths);
  std::vector<double> of_terminal(network.terminals.size(), kUnreached);
  for (std::size_t t = 0; t < of_terminal.size(); ++t) {
    const Edge* edge = edgeOf(network, network.terminals[t].element);
    if (edge == nullptr) continue;
    const double from =
        distance[static_cast<std::size_t>(edge->from)] + lengthToTerminal(network, *edge, lengths, true);
    const double to = distance[static_cast<std::size_t>(edge->to)] + lengthToTerminal(network, *edge, lengths, false);
    of_terminal[t] = std::min(from, to);
  }
  std::vector<int> order(of_terminal.size());
  std::iota(order.begin(), order.end(), 0);
  std::stable_sort(order.begin(), order.end(), [&](int a, int b) {
    return of_terminal[static_cast<std::size_t>(a)] < of_terminal[static_cast<std::size_t>(b)];
  });
  return order;
}

std::vector<TerminalDemand> demandsAt(const Network& network, double load_percent, ClosingOrder order,
                                      const std::vector<int>& nearest_first) {
  std::vector<TerminalDemand> demands(network.terminals.size());
  const double share = load_percent / 100;
  if (order == ClosingOrder::kTogether) {
    for (std::size_t t = 0; t < demands.size(); ++t) demands[t].flow_m3s = share * network.terminals[t].design_flow_m3s;
    return demands;
  }
  // Those that close last are served first, until the flow asked for is used up; one terminal is left part open.
  std::vector<int> served = nearest_first;
  if (order == ClosingOrder::kNearFirst) std::reverse(served.begin(), served.end());
  double left = share * network::designFlow(network);
  for (const int t : served) {
    const double design = network.terminals[static_cast<std::size_t>(t)].design_flow_m3s;
    const double flow = std::min(design, left);
    demands[static_cast<std::size_t>(t)].flow_m3s = flow;
    left -= flow;
  }
  return demands;
}

SweepRow solveRow(const Network& network, const Request& request, bool second_method, const std::stop_token& stop) {
  SweepRow row;
  network::Solver solver(network);
  network::State state;
  row.summary = solver.solve(request, state, stop);
  if (!row.summary.usable()) return row;
  const network::Results results = network::resultsOf(network, request, state);
  addPumps(network, results, row);
  addTerminals(network, results, row);
  const double design = network::designFlow(network);
  if (design > 0) row.load_percent = 100 * row.requested_m3s / design;
  if (second_method) {
    network::HardyCross other(network);
    network::State other_state;
    if (other.solve(request, other_state, stop).usable())
      row.method_difference = network::largestDifference(state, other_state).relative;
  }
  return row;
}

std::vector<SweepRow> sweep(const loop::Loop& loop, const Network& network, const SweepOptions& options,
                            const std::stop_token& stop) {
  const auto requests = requestsOf(loop, network, options);
  std::vector<SweepRow> rows(requests.size());
  parallel::eachIndex(requests.size(), [&](std::size_t i) {
    rows[i] = solveRow(network, requests[i].second, options.second_method, stop);
    rows[i].name = requests[i].first;
    if (!options.named_states) rows[i].load_percent = options.loads_percent[i];
  });
  return rows;
}

}  // namespace ebbline::study
