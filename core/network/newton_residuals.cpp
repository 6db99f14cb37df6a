#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "core/network/newton.h"

namespace ebbline::network {

/// Pressures and flows in the order of nodes and edges.
void Newton::gather() {
  node_pressure_.resize(network_.num_nodes);
  for (int node = 0; node < network_.num_nodes; ++node) node_pressure_[node] = pressure_[system_.step(node)];
  edge_flow_.resize(rows_.size());
  for (std::size_t e = 0; e < rows_.size(); ++e) edge_flow_[e] = rows_[e].flow;
}

/// The same, of nodes and edges that the taps look at alone.
void Newton::gatherForTaps() {
  node_pressure_.resize(network_.num_nodes);
  edge_flow_.resize(rows_.size());
  for (const int node : border_.taps().nodes()) node_pressure_[node] = pressure_[system_.step(node)];
  for (const int e : border_.taps().edges()) edge_flow_[e] = rows_[e].flow;
}

/// Largest imbalance at a node but the datum, which takes what the draws leave.
void Newton::flowResidual() {
  for (std::size_t k = 0; k < draw_.size(); ++k) change_[k] = draw_[k];
  double largest_flow = 0;
  for (const Row& row : rows_) {
    change_[row.from] += row.flow;
    change_[row.to] -= row.flow;
    largest_flow = std::max(largest_flow, std::abs(row.flow));
  }
  double largest = 0;
  int at = -1;
  const int datum = static_cast<int>(change_.size()) - 1;
  for (int k = 0; k <= datum; ++k) {
    if (k == datum && !network_.draws.empty()) continue;
    if (!(std::abs(change_[k]) > largest)) continue;
    largest = std::abs(change_[k]);
    at = k;
  }
  // A loop that stands still has no largest flow; rounding is then measured against what it is built for.
  constexpr double kStandsStill = 1e-9;
  largest_flow = std::max(largest_flow, kStandsStill * reference_flow_);
  summary_.flow_residual = largest / largest_flow;
  summary_.flow_residual_node = -1;
  for (int node = 0; at >= 0 && node < network_.num_nodes; ++node)
    if (system_.step(node) == at) summary_.flow_residual_node = node;
}

/// Largest sum round a fundamental loop. Losses are those of the laws at the flows found. A terminal that holds its
/// flow counts only where it lacks pressure; in the tree it takes up exactly what there is.
void Newton::pressureResidual() {
  edge_loss_.resize(rows_.size());
  hold_.assign(rows_.size(), Hold::kFree);
  double lacking = 0;
  int lacking_edge = -1;
  for (int e = 0; e < static_cast<int>(rows_.size()); ++e) {
    const Row& row = rows_[e];
    const double drop = pressure_[row.from] - pressure_[row.to];
    edge_loss_[e] = drop - row.surplus;
    if (row.standing == Standing::kOpen) continue;
    if (row.standing == Standing::kHeld && held_loss_[row.terminal] - drop > lacking) {
      lacking = held_loss_[row.terminal] - drop;
      lacking_edge = e;
    }
    edge_loss_[e] = drop;
    if (loops_.inTree(e)) continue;
    if (row.standing == Standing::kHeld) edge_loss_[e] = held_loss_[row.terminal];
    hold_[e] = row.standing == Standing::kHeld ? Hold::kAlong : Hold::kShut;
  }
  LoopSum sum = loops_.largestSum(edge_loss_, hold_);
  if (lacking > sum.largest_pa) sum = {lacking, lacking_edge};
  const double scale = pressureScale();
  summary_.pressure_residual = scale > 0 ? sum.largest_pa / scale : 0;
  summary_.pressure_residual_edge = sum.edge;
}

bool Newton::confirm() {
  flowResidual();
  pressureResidual();
  if (!(summary_.flow_residual <= tolerance_.flow) || !(summary_.pressure_residual <= tolerance_.pressure))
    return false;
  summary_.ended = Ended::kConverged;
  summary_.why = summary_.bound == SpeedBound::kAtMaximum   ? "converged; the pump is at its highest speed"
                 : summary_.bound == SpeedBound::kAtMinimum ? "converged; the pump is at its lowest speed"
                                                            : "converged";
  return true;
}

void Newton::refuse(text::Remark remark) {
  summary_.ended = Ended::kRefused;
  summary_.why = text::sentence(remark);
  summary_.remark = std::move(remark);
}

namespace {

/// The first element of an edge stands for it.
text::Place placeOf(const Network& network, int edge) {
  text::Place place;
  if (edge < 0 || network.edges[edge].num_elements == 0) return place;
  const Element& element = network.elements[network.edges[edge].first_element];
  place.id = element.id;
  place.tag = element.tag;
  return place;
}

}  // namespace

/// Not converged: says by how much and where.
void Newton::giveUp() {
  flowResidual();
  pressureResidual();
  summary_.ended = Ended::kNotConverged;
  const double worst = std::max(summary_.flow_residual, summary_.pressure_residual);
  text::Remark remark{text::Code::kSolveNotConverged, placeOf(network_, worst_edge_), {}};
  if (!std::isfinite(worst) || !std::isfinite(worst_surplus_))
    remark.code = text::Code::kSolveNoAnswer;
  else
    remark.arguments = {std::to_string(summary_.rounds), fmt::format("{:.1e}", worst)};
  summary_.why = text::sentence(remark);
  summary_.remark = std::move(remark);
}

}  // namespace ebbline::network
