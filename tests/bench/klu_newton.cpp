#include "tests/bench/klu_newton.h"

#include <suitesparse/klu.h>

#include <algorithm>
#include <array>
#include <cmath>

namespace ebbline::bench {

struct KluNewton::Work {
  explicit Work(Equations& e) : equations(e) {}
  Equations& equations;
  klu_common common{};
  klu_symbolic* symbolic = nullptr;
  klu_numeric* numeric = nullptr;
  std::vector<int> column_start, row;
  std::vector<double> value, right, loss, conductance;
  std::vector<std::array<int, 4>> slots;  // of each edge: (from,from) (to,to) (from,to) (to,from); -1 = datum

  void findPattern();
  void evaluate(const Unknowns& x);
  void assemble();
  double residuals(const Unknowns& x, double& flow_residual);
};

// Compressed columns of the node matrix, and where each edge adds into it.
void KluNewton::Work::findPattern() {
  const int n = equations.numUnknown();
  const auto& edges = equations.network().edges;
  std::vector<std::vector<int>> rows(n);
  for (int i = 0; i < n; ++i) rows[i].push_back(i);
  for (const network::Edge& edge : edges) {
    const int a = equations.unknownOf(edge.from);
    const int b = equations.unknownOf(edge.to);
    if (a < 0 || b < 0 || a == b) continue;
    rows[a].push_back(b);
    rows[b].push_back(a);
  }
  column_start.assign(1, 0);
  for (auto& list : rows) {
    std::sort(list.begin(), list.end());
    list.erase(std::unique(list.begin(), list.end()), list.end());
    row.insert(row.end(), list.begin(), list.end());
    column_start.push_back(static_cast<int>(row.size()));
  }
  const auto slot = [&](int r, int c) {
    if (r < 0 || c < 0) return -1;
    const auto first = row.begin() + column_start[c];
    return static_cast<int>(std::lower_bound(first, row.begin() + column_start[c + 1], r) - row.begin());
  };
  for (const network::Edge& edge : edges) {
    const int a = equations.unknownOf(edge.from);
    const int b = equations.unknownOf(edge.to);
    slots.push_back(a == b ? std::array<int, 4>{-1, -1, -1, -1}
                           : std::array<int, 4>{slot(a, a), slot(b, b), slot(a, b), slot(b, a)});
  }
  value.resize(row.size());
}

void KluNewton::Work::evaluate(const Unknowns& x) {
  const int edges = static_cast<int>(x.edge_flow_m3s.size());
  for (int e = 0; e < edges; ++e) {
    if (!equations.open(e)) {
      loss[e] = 0;
      conductance[e] = 0;
      continue;
    }
    const network::LossSlope law = equations.law(e, x.edge_flow_m3s[e]);
    loss[e] = law.loss_pa;
    conductance[e] = 1 / std::max(law.slope_pa_s_m3, 1e-3);
  }
}

void KluNewton::Work::assemble() {
  std::fill(value.begin(), value.end(), 0.0);
  for (std::size_t e = 0; e < slots.size(); ++e)
    for (int i = 0; i < 4; ++i)
      if (slots[e][i] >= 0) value[slots[e][i]] += i < 2 ? conductance[e] : -conductance[e];
}

// Right side: imbalance of nodes if each edge took its tangent step. Returns the largest law residual [Pa].
double KluNewton::Work::residuals(const Unknowns& x, double& flow_residual) {
  const auto& edges = equations.network().edges;
  std::fill(right.begin(), right.end(), 0.0);
  std::vector<double> balance(right.size(), 0.0);
  double law_residual = 0;
  for (std::size_t e = 0; e < edges.size(); ++e) {
    const int a = equations.unknownOf(edges[e].from);
    const int b = equations.unknownOf(edges[e].to);
    const double lacking = x.node_pressure_pa[edges[e].from] - x.node_pressure_pa[edges[e].to] - loss[e];
    if (conductance[e] > 0) law_residual = std::max(law_residual, std::abs(lacking));
    const double flow = x.edge_flow_m3s[e] + conductance[e] * lacking;
    if (a >= 0) right[a] -= flow, balance[a] -= x.edge_flow_m3s[e];
    if (b >= 0) right[b] += flow, balance[b] += x.edge_flow_m3s[e];
  }
  flow_residual = 0;
  for (double b : balance) flow_residual = std::max(flow_residual, std::abs(b));
  return law_residual;
}

KluNewton::KluNewton(Equations& equations) : work_(std::make_unique<Work>(equations)) {
  Work& w = *work_;
  klu_defaults(&w.common);
  w.findPattern();
  w.right.resize(equations.numUnknown());
  w.loss.resize(equations.network().edges.size());
  w.conductance.resize(equations.network().edges.size());
  w.symbolic = klu_analyze(equations.numUnknown(), w.column_start.data(), w.row.data(), &w.common);
}

KluNewton::~KluNewton() {
  klu_free_numeric(&work_->numeric, &work_->common);
  klu_free_symbolic(&work_->symbolic, &work_->common);
}

int KluNewton::solve(Unknowns& x, double tolerance) {
  Work& w = *work_;
  const auto& edges = w.equations.network().edges;
  const double pump = w.equations.pumpPressure();
  for (int round = 0; round <= 60; ++round) {
    w.evaluate(x);
    double flow_residual = 0;
    const double law_residual = w.residuals(x, flow_residual);
    double largest = 0;
    for (double q : x.edge_flow_m3s) largest = std::max(largest, std::abs(q));
    if (law_residual <= tolerance * pump && flow_residual <= tolerance * largest) return round;
    w.assemble();
    if (!w.numeric) {
      w.numeric = klu_factor(w.column_start.data(), w.row.data(), w.value.data(), w.symbolic, &w.common);
    } else {
      klu_refactor(w.column_start.data(), w.row.data(), w.value.data(), w.symbolic, w.numeric, &w.common);
    }
    if (!w.numeric || w.common.status != KLU_OK) return -1;
    klu_solve(w.symbolic, w.numeric, w.equations.numUnknown(), 1, w.right.data(), &w.common);
    for (int node = 0; node < w.equations.network().num_nodes; ++node)
      if (w.equations.unknownOf(node) >= 0) x.node_pressure_pa[node] += w.right[w.equations.unknownOf(node)];
    for (std::size_t e = 0; e < edges.size(); ++e)
      x.edge_flow_m3s[e] +=
          w.conductance[e] * (x.node_pressure_pa[edges[e].from] - x.node_pressure_pa[edges[e].to] - w.loss[e]);
  }
  return -1;
}

}  // namespace ebbline::bench
