#include "ui/plot/ticks.h"

#include <cmath>
#include <limits>
#include <random>

#include <gtest/gtest.h>

#include "tests/support/seed.h"

namespace ebbline::plot {
namespace {

TEST(AxisTicks, AreOneTwoFourOrFiveTimesAPowerOfTen) {
  std::mt19937_64 random(test::seed());
  std::uniform_real_distribution<double> exponent(-6, 9);
  for (int i = 0; i < 2000; ++i) {
    const double step = tickStep(std::pow(10.0, exponent(random)));
    const double leading = step / std::pow(10.0, std::floor(std::log10(step) + 1e-9));
    EXPECT_TRUE(std::abs(leading - 1) < 1e-6 || std::abs(leading - 2) < 1e-6 || std::abs(leading - 4) < 1e-6 ||
                std::abs(leading - 5) < 1e-6)
        << step;
  }
}

TEST(AxisTicks, ThereAreFourToEightOnALimitMadeRound) {
  std::mt19937_64 random(test::seed());
  std::uniform_real_distribution<double> exponent(-6, 9);
  for (int i = 0; i < 2000; ++i) {
    const double wanted = std::pow(10.0, exponent(random));
    const double limit = roundLimit(wanted);
    EXPECT_GE(limit, wanted * (1 - 1e-9));
    const auto ticks = ticksWithin(0, limit, tickStep(limit));
    EXPECT_GE(ticks.size(), 4U) << limit;
    EXPECT_LE(ticks.size(), 9U) << limit;
  }
}

TEST(AxisTicks, NothingUsefulGivesAUsableAxisAllTheSame) {
  for (const double bad :
       {0.0, -3.0, std::numeric_limits<double>::quiet_NaN(), std::numeric_limits<double>::infinity()}) {
    EXPECT_EQ(tickStep(bad), 1);
    EXPECT_EQ(roundLimit(bad), 1);
  }
}

TEST(AxisTicks, DecimalsAreThoseTheStepNeeds) {
  EXPECT_EQ(decimalsOf(20), 0);
  EXPECT_EQ(decimalsOf(1), 0);
  EXPECT_EQ(decimalsOf(0.5), 1);
  EXPECT_EQ(decimalsOf(0.04), 2);
}

}  // namespace
}  // namespace ebbline::plot
