#include "core/part/friction.h"

#include <cmath>

#include <gtest/gtest.h>

#include "core/part/pipe.h"
#include "tests/core/part/slope_check.h"

namespace ebbline::part {
namespace {

/// Root of the implicit form by halving an interval that holds it: an independent, slow and sure way.
double bracketedRoot(double reynolds, double rough) {
  const auto left = [&](double x) { return x + 2 * std::log10(rough / 3.7 + 2.51 * x / reynolds); };
  double low = 0.1;
  double high = 60;
  for (int i = 0; i < 200; ++i) {
    const double middle = 0.5 * (low + high);
    (left(middle) < 0 ? low : high) = middle;
  }
  return 1 / (low * low);
}

TEST(Friction, ColebrookToTenDigitsWhateverIsRemembered) {
  FrictionMemory memory;  // shared on purpose: each point starts from a stranger's root and logarithm
  for (const double rough : {0.0, 1e-6, 1e-4, 1e-3, 0.01, 0.05, 0.3}) {
    for (double reynolds = 4000; reynolds < 2e9; reynolds *= 1.37) {
      const double expected = bracketedRoot(reynolds, rough);
      const ColebrookRoot root = colebrookRoot(rough / 3.7, 2.51 / reynolds, memory);
      EXPECT_NEAR(1 / (root.root * root.root) / expected, 1, 1e-10) << reynolds << " " << rough;
      EXPECT_NEAR(frictionFactor(reynolds, rough).value / expected, 1, 1e-10);
    }
  }
}

TEST(Friction, WarmSmallStepsStayExact) {
  FrictionMemory memory;
  double reynolds = 5000;
  for (int i = 0; i < 3000; ++i) {
    reynolds *= i % 7 == 0 ? 0.96 : 1.01;
    const ColebrookRoot root = colebrookRoot(1e-4, 2.51 / reynolds, memory);
    ASSERT_NEAR(1 / (root.root * root.root) / bracketedRoot(reynolds, 3.7e-4), 1, 1e-10);
  }
}

TEST(Friction, LaminarIsExact) {
  for (const double reynolds : {1e-3, 1.0, 100.0, 1999.0, 2000.0})
    EXPECT_EQ(frictionFactor(reynolds, 0.01).value, 64 / reynolds);
}

TEST(Friction, SlopeIsThatOfTheFactor) {
  for (const double rough : {0.0, 1e-4, 0.02})
    for (const double reynolds : {10.0, 1500.0, 2100.0, 3000.0, 3900.0, 5000.0, 1e5, 1e7})
      expectSlope([&](double re) { return frictionFactor(re, rough); }, reynolds, 1e-6);
}

PipeConstants pipeOf(double roughness) {
  return pipeConstants(30, 0.05, roughness, 2.5, 998, 1e-3);
}

double flowAt(const PipeConstants& pipe, double reynolds) {
  return reynolds / pipe.reynolds_per_flow;
}

TEST(PipeLoss, RisesStrictlyThroughEveryRegime) {
  for (const double roughness : {0.0, 5e-6, 5e-4, 2.5e-3, 0.02}) {
    const PipeConstants pipe = pipeOf(roughness);
    FrictionMemory memory;
    double before = -1;
    for (double reynolds = 0; reynolds < 6000; reynolds += 0.5) {
      const double loss = pipeFriction(pipe, flowAt(pipe, reynolds), memory).value;
      ASSERT_GT(loss, before) << reynolds;
      before = loss;
    }
  }
}

TEST(PipeLoss, LossAndSlopeAreContinuousAtTheBorders) {
  for (const double roughness : {0.0, 5e-5, 2.5e-3})
    for (const double border : {kLaminarEnd, kTurbulentBegin}) {
      const PipeConstants pipe = pipeOf(roughness);
      FrictionMemory memory;
      const ValueSlope below = pipeLoss(pipe, flowAt(pipe, border * (1 - 1e-12)), memory);
      const ValueSlope above = pipeLoss(pipe, flowAt(pipe, border * (1 + 1e-12)), memory);
      EXPECT_NEAR(above.value / below.value, 1, 1e-9);
      EXPECT_NEAR(above.slope / below.slope, 1, 1e-9);
    }
}

TEST(PipeLoss, SlopeAgainstCentralDifferences) {
  for (const double roughness : {0.0, 5e-5, 2.5e-3}) {
    const PipeConstants pipe = pipeOf(roughness);
    FrictionMemory memory;
    for (double reynolds = 1; reynolds < 1e7; reynolds *= 1.21)
      for (const double sign : {1.0, -1.0})
        expectSlope([&](double q) { return pipeLoss(pipe, q, memory); }, sign * flowAt(pipe, reynolds), 3e-6);
  }
}

TEST(PipeLoss, ZeroFlowGivesZeroDropAndFiniteSlope) {
  FrictionMemory memory;
  const PipeConstants pipe = pipeConstants(30, 0.05, 5e-5, 2.5, 998, 1e-3);
  const ValueSlope rest = pipeLoss(pipe, 0, memory);
  EXPECT_EQ(rest.value, 0);
  EXPECT_NEAR(rest.slope, 128 * 1e-3 * 30 / (3.14159265358979 * std::pow(0.05, 4)), 1e-3);
}

TEST(PipeLoss, IsOddInFlow) {
  FrictionMemory memory;
  const PipeConstants pipe = pipeOf(5e-5);
  for (const double reynolds : {100.0, 2500.0, 3999.0, 5e4}) {
    const double q = flowAt(pipe, reynolds);
    const double forward = pipeLoss(pipe, q, memory).value;
    EXPECT_NEAR(pipeLoss(pipe, -q, memory).value, -forward, 1e-12 * forward);
  }
}

}  // namespace
}  // namespace ebbline::part
