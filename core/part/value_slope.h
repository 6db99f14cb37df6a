#pragma once
// What every law gives: a value and its first derivative.

namespace ebbline::part {

/// Value and first derivative.
struct ValueSlope {
  double value = 0;
  double slope = 0;
};

}  // namespace ebbline::part
