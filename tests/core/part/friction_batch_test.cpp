#include "core/part/friction_batch.h"

#include <cmath>
#include <limits>
#include <random>
#include <vector>

#include <gtest/gtest.h>

#include "tests/support/seed.h"

namespace ebbline::part {
namespace {

constexpr int kPipes = 1003;  // no multiple of any vector

/// Pipes from smooth to rough with turbulent flows, Re = 5e3 … 1e7.
struct Many {
  FrictionColumns columns;
  std::vector<double> flow;
};

Many many(std::mt19937_64& dice) {
  std::uniform_real_distribution<double> unit(0, 1);
  Many made;
  for (int i = 0; i < kPipes; ++i) {
    const double bore = 0.01 + 0.5 * unit(dice);
    const double rough = i % 5 == 0 ? 0 : bore * std::pow(10.0, -6 + 4 * unit(dice));
    const PipeConstants pipe = pipeConstants(1 + 50 * unit(dice), bore, rough, 0, 998, 1e-3);
    made.columns.add(pipe);
    const double reynolds = 5e3 * std::pow(2e3, unit(dice));
    made.flow.push_back((i % 2 == 0 ? 1 : -1) * reynolds / pipe.reynolds_per_flow);
  }
  return made;
}

/// What one() gives once its root is settled: nothing of the first step is left in it.
ValueSlope settled(FrictionColumns columns, int pipe, double flow) {
  columns.one(pipe, flow);
  columns.one(pipe, flow);
  return columns.one(pipe, flow);
}

TEST(FrictionBatch, GivesTheLossOfEachPipeByItself) {
  std::mt19937_64 dice(test::seed());
  std::uniform_real_distribution<double> unit(-1, 1);
  Many pipes = many(dice);
  for (int i = 0; i < kPipes; ++i) pipes.columns.one(i, pipes.flow[i]);
  std::vector<double> loss(kPipes);
  std::vector<double> slope(kPipes);
  for (const double reach : {0.05, 0.02, 1e-3, 1e-6, 0.0}) {
    for (double& flow : pipes.flow) flow *= 1 + reach * unit(dice);
    const int first = 7;
    pipes.columns.nearby(first, kPipes - first, pipes.flow.data() + first, loss.data(), slope.data());
    int done = 0;
    for (int i = first; i < kPipes; ++i) {
      const double q = pipes.flow[i];
      const ValueSlope expected = settled(pipes.columns, i, q);
      if (slope[i - first] == FrictionColumns::kNotNear) {
        pipes.columns.one(i, q);
        continue;
      }
      ++done;
      ASSERT_NEAR(loss[i - first] / expected.value, 1, 1e-12) << "pipe " << i << ", reach " << reach;
      ASSERT_NEAR(slope[i - first] / expected.slope, 1, 1e-6) << "pipe " << i << ", reach " << reach;
    }
    EXPECT_GT(done, (kPipes - first) * 8 / 10) << "reach " << reach;  // else nothing is gained, or nothing was tested
  }
}

TEST(FrictionBatch, LeavesTheOtherPipesAlone) {
  std::mt19937_64 dice(test::seed());
  Many pipes = many(dice);
  std::vector<double> loss(1);
  std::vector<double> slope(1);
  const auto isNear = [&](int pipe, double flow) {
    pipes.columns.nearby(pipe, 1, &flow, loss.data(), slope.data());
    return slope[0] != FrictionColumns::kNotNear;
  };
  for (int i = 0; i < kPipes; ++i) {
    const double q = pipes.flow[i];
    EXPECT_FALSE(isNear(i, q)) << "nothing is remembered yet";
    pipes.columns.one(i, q);
    EXPECT_TRUE(isNear(i, 1.001 * q));
    const ValueSlope before = pipes.columns.one(i, q);
    for (const double other :
         {0.0, 1e-12 * q, std::numeric_limits<double>::infinity(), std::numeric_limits<double>::quiet_NaN()})
      EXPECT_FALSE(isNear(i, other)) << "pipe " << i << ", flow " << other << " after " << q;
    EXPECT_NEAR(pipes.columns.one(i, q).value / before.value, 1, 1e-12) << "what was remembered is spoilt";
  }
  pipes.columns.forget();
  EXPECT_FALSE(isNear(0, pipes.flow[0]));
}

TEST(FrictionBatch, BlendAndLaminarFlowAreNotTakenForTurbulent) {
  FrictionColumns columns;
  const PipeConstants pipe = pipeConstants(10, 0.05, 1e-4, 0, 998, 1e-3);
  columns.add(pipe);
  double loss = 0;
  double slope = 0;
  for (const double reynolds : {100.0, 1999.0, 2500.0, 3999.0}) {
    const double flow = reynolds / pipe.reynolds_per_flow;
    columns.one(0, 4100 / pipe.reynolds_per_flow);
    columns.nearby(0, 1, &flow, &loss, &slope);
    EXPECT_EQ(slope, FrictionColumns::kNotNear) << reynolds;
  }
}

}  // namespace
}  // namespace ebbline::part
