#include "tests/bench/kinsol_newton.h"

#include <kinsol/kinsol.h>
#include <nvector/nvector_serial.h>
#include <sunlinsol/sunlinsol_klu.h>
#include <sunmatrix/sunmatrix_sparse.h>

#include <algorithm>
#include <cmath>
#include <stdexcept>

namespace ebbline::bench {

struct KinsolNewton::Work {
  explicit Work(Equations& e) : equations(e) {}
  Equations& equations;
  SUNContext context = nullptr;
  void* memory = nullptr;
  N_Vector unknown = nullptr, ones = nullptr;
  SUNMatrix matrix = nullptr;
  SUNLinearSolver linear = nullptr;
  double flow_scale = 1, pressure_scale = 1;
  std::vector<std::vector<std::pair<int, double>>>
      meeting;  // of each unknown node: edges and their signs in its column

  int numEdges() const { return static_cast<int>(equations.network().edges.size()); }
  static int residual(N_Vector u, N_Vector f, void* work);
  static int jacobian(N_Vector u, N_Vector f, SUNMatrix j, void* work, N_Vector, N_Vector);
};

// Rows: one law per edge, then one balance per unknown node; scaled to order one.
int KinsolNewton::Work::residual(N_Vector u, N_Vector f, void* user) {
  Work& w = *static_cast<Work*>(user);
  const double* x = N_VGetArrayPointer(u);
  double* out = N_VGetArrayPointer(f);
  const int edges = w.numEdges();
  std::fill(out, out + edges + w.equations.numUnknown(), 0.0);
  for (int e = 0; e < edges; ++e) {
    const network::Edge& edge = w.equations.network().edges[e];
    const int a = w.equations.unknownOf(edge.from);
    const int b = w.equations.unknownOf(edge.to);
    if (!w.equations.open(e)) {
      out[e] = x[e];
      continue;
    }
    const double drop = (a >= 0 ? x[edges + a] : 0) - (b >= 0 ? x[edges + b] : 0);
    out[e] = drop - w.equations.law(e, x[e] * w.flow_scale).loss_pa / w.pressure_scale;
    if (!std::isfinite(out[e])) return 1;
    if (a >= 0) out[edges + a] -= x[e];
    if (b >= 0) out[edges + b] += x[e];
  }
  return 0;
}

int KinsolNewton::Work::jacobian(N_Vector u, N_Vector, SUNMatrix j, void* user, N_Vector, N_Vector) {
  Work& w = *static_cast<Work*>(user);
  const double* x = N_VGetArrayPointer(u);
  const int edges = w.numEdges();
  sunindextype* start = SUNSparseMatrix_IndexPointers(j);
  sunindextype* row = SUNSparseMatrix_IndexValues(j);
  double* value = SUNSparseMatrix_Data(j);
  sunindextype at = 0;
  for (int e = 0; e < edges; ++e) {
    const network::Edge& edge = w.equations.network().edges[e];
    const int a = w.equations.unknownOf(edge.from);
    const int b = w.equations.unknownOf(edge.to);
    const bool open = w.equations.open(e);
    start[e] = at;
    row[at] = e;
    value[at++] = open ? -w.equations.law(e, x[e] * w.flow_scale).slope_pa_s_m3 * w.flow_scale / w.pressure_scale : 1.0;
    if (a >= 0 && open) row[at] = edges + a, value[at++] = -1;
    if (b >= 0 && open) row[at] = edges + b, value[at++] = 1;
  }
  for (int n = 0; n < w.equations.numUnknown(); ++n) {
    start[edges + n] = at;
    for (const auto& [e, sign] : w.meeting[n])
      if (w.equations.open(e)) row[at] = e, value[at++] = sign;
  }
  start[edges + w.equations.numUnknown()] = at;
  return 0;
}

KinsolNewton::KinsolNewton(Equations& equations) : work_(std::make_unique<Work>(equations)) {
  Work& w = *work_;
  const sunindextype size = w.numEdges() + equations.numUnknown();
  w.meeting.resize(equations.numUnknown());
  for (int e = 0; e < w.numEdges(); ++e) {
    const network::Edge& edge = equations.network().edges[e];
    if (equations.unknownOf(edge.from) >= 0) w.meeting[equations.unknownOf(edge.from)].push_back({e, 1.0});
    if (equations.unknownOf(edge.to) >= 0) w.meeting[equations.unknownOf(edge.to)].push_back({e, -1.0});
  }
  if (SUNContext_Create(nullptr, &w.context) != 0) throw std::runtime_error("SUNDIALS context");
  w.unknown = N_VNew_Serial(size, w.context);
  w.ones = N_VNew_Serial(size, w.context);
  N_VConst(1.0, w.ones);
  w.matrix = SUNSparseMatrix(size, size, 5 * w.numEdges(), CSC_MAT, w.context);
  w.linear = SUNLinSol_KLU(w.unknown, w.matrix, w.context);
  w.memory = KINCreate(w.context);
  bool good = KINInit(w.memory, &Work::residual, w.unknown) == KIN_SUCCESS;
  good = good && KINSetUserData(w.memory, &w) == KIN_SUCCESS;
  good = good && KINSetLinearSolver(w.memory, w.linear, w.matrix) == KIN_SUCCESS;
  good = good && KINSetJacFn(w.memory, &Work::jacobian) == KIN_SUCCESS;
  good = good && KINSetMaxSetupCalls(w.memory, 1) == KIN_SUCCESS;  // a Jacobian each round, as Newton has it
  good = good && KINSetNumMaxIters(w.memory, 100) == KIN_SUCCESS;
  if (!good) throw std::runtime_error("KINSOL set-up");
}

KinsolNewton::~KinsolNewton() {
  KINFree(&work_->memory);
  SUNLinSolFree(work_->linear);
  SUNMatDestroy(work_->matrix);
  N_VDestroy(work_->ones);
  N_VDestroy(work_->unknown);
  SUNContext_Free(&work_->context);
}

int KinsolNewton::solve(Unknowns& x, double tolerance) {
  Work& w = *work_;
  w.pressure_scale = w.equations.pumpPressure();
  w.flow_scale = 0;
  for (double q : x.edge_flow_m3s) w.flow_scale = std::max(w.flow_scale, std::abs(q));
  double* u = N_VGetArrayPointer(w.unknown);
  const int edges = w.numEdges();
  for (int e = 0; e < edges; ++e) u[e] = x.edge_flow_m3s[e] / w.flow_scale;
  for (std::size_t n = 0; n < x.node_pressure_pa.size(); ++n) {
    const int i = w.equations.unknownOf(static_cast<int>(n));
    if (i >= 0) u[edges + i] = x.node_pressure_pa[n] / w.pressure_scale;
  }
  KINSetFuncNormTol(w.memory, tolerance);
  KINSetScaledStepTol(w.memory, 1e-15);
  KINSetMaxNewtonStep(w.memory, 1e6);
  const int how = KINSol(w.memory, w.unknown, KIN_NONE, w.ones, w.ones);
  if (how < 0) return -1;
  for (int e = 0; e < edges; ++e) x.edge_flow_m3s[e] = u[e] * w.flow_scale;
  for (std::size_t n = 0; n < x.node_pressure_pa.size(); ++n) {
    const int i = w.equations.unknownOf(static_cast<int>(n));
    if (i >= 0) x.node_pressure_pa[n] = u[edges + i] * w.pressure_scale;
  }
  long rounds = 0;
  KINGetNumNonlinSolvIters(w.memory, &rounds);
  return static_cast<int>(rounds);
}

}  // namespace ebbline::bench
