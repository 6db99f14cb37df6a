#pragma once
// Round numbers for axes.

#include <vector>

namespace ebbline::plot {

/// Distance between ticks from 1, 2, 4 or 5 times a power of ten, so that 4 to 8 of them lie within the span.
/// A span that is not a positive finite number gives 1.
double tickStep(double span);

/// Multiples of `step` within [low, high].
std::vector<double> ticksWithin(double low, double high, double step);

/// Smallest multiple of its own tick step that is at or above `value`; 1 for a value that is not positive.
double roundLimit(double value);

/// Decimals needed to write multiples of `step`.
int decimalsOf(double step);

}  // namespace ebbline::plot
