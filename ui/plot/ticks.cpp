#include "ui/plot/ticks.h"

#include <algorithm>
#include <cmath>

namespace ebbline::plot {

namespace {
constexpr double kMostTicks = 8;
}

double tickStep(double span) {
  if (!(span > 0) || !std::isfinite(span)) return 1;
  const double power = std::pow(10.0, std::floor(std::log10(span / kMostTicks)));
  for (const double round : {1.0, 2.0, 4.0, 5.0, 10.0, 20.0})
    if (span / (round * power) <= kMostTicks - 1 + 1e-9) return round * power;
  return 40 * power;
}

std::vector<double> ticksWithin(double low, double high, double step) {
  std::vector<double> ticks;
  const double slack = 1e-9 * step;
  for (double k = std::ceil((low - slack) / step); k * step <= high + slack; k += 1) ticks.push_back(k * step);
  return ticks;
}

double roundLimit(double value) {
  if (!(value > 0) || !std::isfinite(value)) return 1;
  const double step = tickStep(value);
  return std::ceil(value / step - 1e-9) * step;
}

int decimalsOf(double step) {
  int decimals = 0;
  while (decimals < 6 && std::abs(step - std::round(step)) > 1e-6 * std::abs(step)) {
    step *= 10;
    ++decimals;
  }
  return decimals;
}

}  // namespace ebbline::plot
