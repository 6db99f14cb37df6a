#include "core/part/friction_batch.h"

#include <algorithm>
#include <cstdint>

// Compiled twice, for processors with 256-bit vectors and for all others, where the compiler and the loader can choose
// between them; sanitizers start too late for that choice.
#if defined(__x86_64__) && defined(__GNUC__) && !defined(__clang__) && !defined(__SANITIZE_ADDRESS__) && \
    !defined(__SANITIZE_THREAD__)
#define EBBLINE_FOR_EACH_PROCESSOR __attribute__((target_clones("avx2", "default")))
#else
#define EBBLINE_FOR_EACH_PROCESSOR
#endif

namespace ebbline::part {

namespace {

/// Columns of the pipes in work; root is written as well.
struct Columns {
  const double* smooth;
  const double* rough;
  const double* friction;
  const double* at;
  const double* log_at;
  double* root;
};

/// Colebrook times q: with y = q (a + b x) no division by Re is needed. All quotients come of one division. The step
/// is that of colebrookRoot(); it is good while s · change is small, since what it leaves is below
/// (s · change)³/(3 c² (1 + s)), here 2e-12 of a root that is 3 or more. Returns how many pipes a second step would
/// make good: those that moved further, yet not so far that the first step leaves more than the second makes up for.
EBBLINE_FOR_EACH_PROCESSOR
std::int64_t stepFromRoots(const Columns& columns, int count, const double* __restrict__ flow,
                           double* __restrict__ loss, double* __restrict__ slope) {
  constexpr double kSmallStep = 1.5e-4;
  constexpr double kFarStep = 0.03;
  constexpr double kSmallLean = 0.0036;  // of logNear()
  constexpr double c = kTwoOverLn10;
  const double* __restrict__ smooth = columns.smooth;
  const double* __restrict__ rough = columns.rough;
  const double* __restrict__ friction = columns.friction;
  const double* __restrict__ at = columns.at;
  const double* __restrict__ log_at = columns.log_at;
  double* __restrict__ root = columns.root;
  std::int64_t once_more = 0;
  for (int i = 0; i < count; ++i) {
    const double q = std::abs(flow[i]);
    const double x = root[i];
    const double y = rough[i] * q + smooth[i] * x;
    const double before = at[i] * q;
    const double sum = y + before;
    const double more = c * smooth[i];
    const double whole = y + more;
    const double inverse = 1 / (y * sum * whole);
    const double lean = (y - before) * (y * whole) * inverse;
    const double share = more * (sum * whole) * inverse;
    const double steepness = y * (y * sum) * inverse;
    const double lean2 = lean * lean;
    const double log =
        log_at[i] + 2 * lean * (1 + lean2 * (1.0 / 3 + lean2 * (1.0 / 5 + lean2 * (1.0 / 7 + lean2 * (1.0 / 9)))));
    const double newton = -(x + c * log) * steepness;
    const double bend = share * share * steepness * (1 / c);
    const double change = newton * (1 + 0.5 * newton * bend);
    const double next = x + change;
    const double per_flow = friction[i] * q / (next * next);
    const double step = std::abs(share * change);
    const bool near = (kTurbulentBegin * smooth[i] <= kSmoothConstant * q) & (lean2 < kSmallLean) & (step < kFarStep) &
                      (x > 0) & (next > 0);
    const bool good = near & (step < kSmallStep);
    root[i] = near ? next : x;
    loss[i] = per_flow * flow[i];
    slope[i] = good ? 2 * per_flow * (steepness * (1 + bend * change)) : FrictionColumns::kNotNear;
    once_more += (near & !good) ? 1 : 0;
  }
  return once_more;
}

}  // namespace

void FrictionColumns::reserve(std::size_t count) {
  for (auto* column : {&smooth_, &rough_, &friction_, &root_, &at_, &log_at_, &reynolds_per_flow_})
    column->reserve(count);
  turbulent_begin_.reserve(count);
}

void FrictionColumns::add(const PipeConstants& pipe) {
  smooth_.push_back(kSmoothConstant / pipe.reynolds_per_flow);
  rough_.push_back(pipe.rough);
  friction_.push_back(pipe.friction);
  root_.push_back(0);
  at_.push_back(0);
  log_at_.push_back(0);
  reynolds_per_flow_.push_back(pipe.reynolds_per_flow);
  turbulent_begin_.push_back(pipe.turbulent_begin);
}

void FrictionColumns::forget() {
  for (auto* column : {&root_, &at_, &log_at_}) std::fill(column->begin(), column->end(), 0.0);
}

void FrictionColumns::nearby(int first, int count, const double* flow_m3s, double* loss_pa, double* slope_pa_s_m3) {
  const Columns columns{smooth_.data() + first, rough_.data() + first,  friction_.data() + first,
                        at_.data() + first,     log_at_.data() + first, root_.data() + first};
  if (stepFromRoots(columns, count, flow_m3s, loss_pa, slope_pa_s_m3) > 0)
    stepFromRoots(columns, count, flow_m3s, loss_pa, slope_pa_s_m3);
}

}  // namespace ebbline::part
