#include "core/part/monotone_cubic.h"

#include <algorithm>
#include <cmath>

namespace ebbline::part {

namespace {

/// Slope at an end by the parabola through the three nearest readings, kept from overshooting.
double endSlope(double h0, double h1, double d0, double d1) {
  const double slope = ((2 * h0 + h1) * d0 - h0 * d1) / (h0 + h1);
  if (slope * d0 <= 0) return 0;
  if (d0 * d1 <= 0 && std::abs(slope) > 3 * std::abs(d0)) return 3 * d0;
  return std::abs(slope) > 3 * std::abs(d0) ? 3 * d0 : slope;
}

}  // namespace

std::vector<double> monotoneSlopes(const std::vector<double>& x, const std::vector<double>& y) {
  const std::size_t n = x.size();
  std::vector<double> h(n - 1);
  std::vector<double> d(n - 1);
  for (std::size_t i = 0; i + 1 < n; ++i) {
    h[i] = x[i + 1] - x[i];
    d[i] = (y[i + 1] - y[i]) / h[i];
  }
  if (n == 2) return {d[0], d[0]};
  std::vector<double> slope(n, 0.0);
  for (std::size_t i = 1; i + 1 < n; ++i) {
    if (d[i - 1] * d[i] <= 0) continue;
    const double w0 = 2 * h[i] + h[i - 1];
    const double w1 = h[i] + 2 * h[i - 1];
    slope[i] = (w0 + w1) / (w0 / d[i - 1] + w1 / d[i]);
  }
  slope.front() = endSlope(h[0], h[1], d[0], d[1]);
  slope.back() = endSlope(h[n - 2], h[n - 3], d[n - 2], d[n - 3]);
  return slope;
}

ValueSlope cubicBetween(double x0, double y0, double s0, double x1, double y1, double s1, double x) {
  const double width = x1 - x0;
  const double t = (x - x0) / width;
  const double rise = y1 - y0;
  const double a = s0 * width;
  const double b = s1 * width;
  const double c2 = 3 * rise - 2 * a - b;
  const double c3 = a + b - 2 * rise;
  return {y0 + t * (a + t * (c2 + t * c3)), (a + t * (2 * c2 + 3 * t * c3)) / width};
}

}  // namespace ebbline::part
