#pragma once
// Comparison: Newton on node pressures written by hand on KLU, symbolic analysis and pivots kept between calls.

#include <memory>

#include "tests/bench/equations.h"

namespace ebbline::bench {

class KluNewton {
 public:
  explicit KluNewton(Equations& equations);
  ~KluNewton();
  /// Rounds used, or −1 when the tolerance was not reached in 60. `x` is start and answer.
  int solve(Unknowns& x, double tolerance = 1e-10);

 private:
  struct Work;
  std::unique_ptr<Work> work_;
};

}  // namespace ebbline::bench
