#include "core/network/solver.h"

#include <algorithm>
#include <cmath>

#include "core/network/newton.h"

namespace ebbline::network {

struct Solver::Work {
  Newton newton;
};

Solver::Solver(const Network& network, Tolerance tolerance)
    : work_(std::make_unique<Work>(Work{Newton(network, tolerance)})) {}
Solver::~Solver() = default;
Solver::Solver(Solver&&) noexcept = default;
Solver& Solver::operator=(Solver&&) noexcept = default;

Summary Solver::solve(const Request& request, State& state, std::stop_token stop) {
  return work_->newton.solve(request, state, stop);
}

Difference largestDifference(const State& a, const State& b) {
  double largest_flow = 0;
  for (const double flow : a.edge_flow_m3s) largest_flow = std::max(largest_flow, std::abs(flow));
  for (const double flow : b.edge_flow_m3s) largest_flow = std::max(largest_flow, std::abs(flow));
  Difference difference;
  if (!(largest_flow > 0)) return difference;
  const std::size_t count = std::min(a.edge_flow_m3s.size(), b.edge_flow_m3s.size());
  for (std::size_t e = 0; e < count; ++e) {
    const double relative = std::abs(a.edge_flow_m3s[e] - b.edge_flow_m3s[e]) / largest_flow;
    if (relative > difference.relative) difference = {relative, static_cast<int>(e)};
  }
  return difference;
}

}  // namespace ebbline::network
