#pragma once
// Tolerances come from the digits of the source: half a unit of the last one printed.

#include <cmath>
#include <string_view>

namespace ebbline::test {

/// Half a unit of the last printed digit of a number written with decimals ("0.0211" gives 0.00005), widened by
/// 1e-6 of itself so that a value exactly between two prints is not lost to rounding.
inline double halfLastDigit(std::string_view printed) {
  const std::size_t point = printed.find('.');
  const std::size_t places = point == std::string_view::npos ? 0 : printed.size() - point - 1;
  return 0.5 * std::pow(10.0, -static_cast<double>(places)) * (1 + 1e-6);
}

/// The same for a number printed with so many significant digits (trailing zeros may be missing in print).
inline double halfDigit(double value, int significant) {
  return 0.5 * std::pow(10.0, std::floor(std::log10(std::abs(value))) - (significant - 1)) * (1 + 1e-6);
}

}  // namespace ebbline::test
