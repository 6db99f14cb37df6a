#pragma once
// Cubic pieces through readings that never overshoot: slopes by Fritsch & Carlson, SIAM J. Numer. Anal. 17 (1980), in
// the harmonic-mean form of Fritsch & Butland 1984 [both from memory].

#include <vector>

#include "core/part/value_slope.h"

namespace ebbline::part {

/// Slopes at the readings so that the cubic pieces rise or fall only where the readings do.
/// REQUIRES: as many y as x, at least 2, x strictly rising.
std::vector<double> monotoneSlopes(const std::vector<double>& x, const std::vector<double>& y);

/// Cubic from (x0, y0) with slope s0 to (x1, y1) with slope s1, at x. REQUIRES: x1 > x0.
ValueSlope cubicBetween(double x0, double y0, double s0, double x1, double y1, double s1, double x);

}  // namespace ebbline::part
