#pragma once
// Friction of many pipes at once, for rounds in which each pipe's flow is near that of the round before: one or two
// steps of friction.h from each remembered root, without a branch, so that the compiler works on several pipes at a
// time.

#include <vector>

#include "core/part/pipe.h"

namespace ebbline::part {

/// Pipes and what they remember, a column for each quantity (those of PipeFriction and FrictionMemory).
class FrictionColumns {
 public:
  void reserve(std::size_t count);
  void add(const PipeConstants& pipe);
  int size() const { return static_cast<int>(root_.size()); }
  /// Forgets all roots and logarithms.
  void forget();

  /// One pipe by itself, as pipeFriction() has it; any flow.
  ValueSlope one(int pipe, double flow_m3s) {
    FrictionMemory memory{root_[pipe], at_[pipe], log_at_[pipe]};
    const PipeFriction law{reynolds_per_flow_[pipe], rough_[pipe], friction_[pipe]};
    const ValueSlope loss = pipeFriction(law, turbulent_begin_[pipe], flow_m3s, memory);
    root_[pipe] = memory.root;
    at_[pipe] = memory.at;
    log_at_[pipe] = memory.log_at;
    return loss;
  }

  /// Pipes first … first + count − 1 at the flows given [m³/s]: losses [Pa] and slopes [Pa s/m³] of friction alone, as
  /// one() gives them, losses to 1e-12 relative and slopes to 1e-6. A slope of kNotNear instead says that the pipe is
  /// not turbulent, or not near what it remembers: one() must do it, the loss given is no number to use. Equal bits on
  /// every processor.
  void nearby(int first, int count, const double* flow_m3s, double* loss_pa, double* slope_pa_s_m3);
  static constexpr double kNotNear = -1;

 private:
  std::vector<double> smooth_;  // 2.51 / reynolds_per_flow: b q of Colebrook's b
  std::vector<double> rough_;
  std::vector<double> friction_;
  std::vector<double> root_;
  std::vector<double> at_;
  std::vector<double> log_at_;
  std::vector<double> reynolds_per_flow_;  // for one() alone, as the next
  std::vector<TurbulentBegin> turbulent_begin_;
};

}  // namespace ebbline::part
