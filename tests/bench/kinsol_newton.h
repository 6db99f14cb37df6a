#pragma once
// Comparison: the same equations given to SUNDIALS KINSOL (Newton, KLU) as one system in flows and pressures. Memory,
// matrix and solver are kept between calls; what KINSOL sets up again in each call is part of its price.

#include <memory>

#include "tests/bench/equations.h"

namespace ebbline::bench {

class KinsolNewton {
 public:
  explicit KinsolNewton(Equations& equations);
  ~KinsolNewton();
  /// Rounds used, or −1 when KINSOL did not reach the tolerance.
  int solve(Unknowns& x, double tolerance = 1e-10);

 private:
  struct Work;
  std::unique_ptr<Work> work_;
};

}  // namespace ebbline::bench
