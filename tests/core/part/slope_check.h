#pragma once
// Derivatives held against central differences.

#include <algorithm>
#include <cmath>

#include <gtest/gtest.h>

#include "core/part/value_slope.h"

namespace ebbline::part {

/// The law's slope at x against (law(x + h) − law(x − h))/(2h), relative to the larger of the two.
template <class Law>
void expectSlope(const Law& law, double x, double relative, double step = 1e-5) {
  const double h = step * std::max(std::abs(x), 1e-9);
  const double difference = (law(x + h).value - law(x - h).value) / (2 * h);
  const double slope = law(x).slope;
  EXPECT_NEAR(slope, difference, relative * std::max(std::abs(slope), std::abs(difference))) << "at " << x;
}

}  // namespace ebbline::part
