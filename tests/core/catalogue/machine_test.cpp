#include <cmath>
#include <limits>

#include <gtest/gtest.h>

#include "core/catalogue/machine.h"

namespace ebbline::catalogue {
namespace {

constexpr double kHp = 745.69987158227022;

TEST(Motor, ListedRatingsGiveTheListedEfficiency) {
  // [published: IEC 60034-30:2008 extract; 10 CFR 431.25, see the tables]
  EXPECT_NEAR(*motorEfficiency("IE3", 7500), 0.904, 1e-12);
  EXPECT_NEAR(*motorEfficiency("IE1", 750), 0.721, 1e-12);
  EXPECT_NEAR(*motorEfficiency("IE4", 200e3), 0.967, 1e-12);
  EXPECT_NEAR(*motorEfficiency("open premium", 20 * kHp), 0.930, 1e-12);
  EXPECT_NEAR(*motorEfficiency("enclosed premium", 7.5 * kHp), 0.917, 1e-12);
  EXPECT_NEAR(*motorEfficiency("open 1997", 1 * kHp), 0.825, 1e-12);
  EXPECT_NEAR(*motorEfficiency("enclosed 1997", 200 * kHp), 0.950, 1e-12);
}

TEST(Motor, BetweenRatingsTheEfficiencyLiesBetween) {
  const double between = *motorEfficiency("IE3", 5500);
  EXPECT_GT(between, 0.886);
  EXPECT_LT(between, 0.904);
  // Half way on the logarithm is half way in efficiency.
  EXPECT_NEAR(*motorEfficiency("IE3", std::sqrt(4000.0 * 7500.0)), (0.886 + 0.904) / 2, 1e-12);
}

TEST(Motor, EmptyCellsAreLeftOut) {
  EXPECT_FALSE(motorEfficiency("IE1", 11e3));
  EXPECT_EQ(findMotorClass("IE1")->ratings_w.size(), 6U);
  EXPECT_EQ(findMotorClass("IE3")->ratings_w.size(), 17U);
}

TEST(Motor, EveryRatingIsMarkedAndEfficienciesNeverFallWithSize) {
  EXPECT_EQ(motorClasses().size(), 8U);
  for (const MotorClass& one : motorClasses()) {
    ASSERT_EQ(one.ratings_w.size(), one.efficiencies.size());
    ASSERT_EQ(one.ratings_w.size(), one.marks.size());
    EXPECT_FALSE(one.source.empty());
    for (std::size_t i = 0; i < one.ratings_w.size(); ++i) {
      EXPECT_FALSE(one.marks[i].empty());
      EXPECT_GT(one.efficiencies[i], 0.7);
      EXPECT_LT(one.efficiencies[i], 0.98);
      if (i == 0) continue;
      EXPECT_GT(one.ratings_w[i], one.ratings_w[i - 1]);
      EXPECT_GE(one.efficiencies[i], one.efficiencies[i - 1]) << one.name << " " << one.ratings_w[i];
    }
  }
}

TEST(Motor, RefusesUnknownClassesAndRatingsOutsideTheTable) {
  EXPECT_EQ(motorEfficiency("IE9", 5500).error().code, text::Code::kCatalogueUnknownMotor);
  EXPECT_EQ(motorEfficiency("IE3", 100).error().code, text::Code::kCatalogueMotorSize);
  EXPECT_EQ(motorEfficiency("IE3", 1e6).error().code, text::Code::kCatalogueMotorSize);
  EXPECT_EQ(motorEfficiency("IE3", std::nan("")).error().code, text::Code::kCatalogueMotorSize);
  EXPECT_EQ(text::oneLine(motorEfficiency("IE3", 100).error()).find('{'), std::string::npos);
}

TEST(Drive, TableIsMetAndTheEndsAreHeld) {
  EXPECT_NEAR(driveEfficiency(3 * kHp, 0.5), 0.92, 1e-12);
  EXPECT_NEAR(driveEfficiency(200 * kHp, 0.016), 0.61, 1e-12);
  EXPECT_NEAR(driveEfficiency(20 * kHp, 0.42), 0.94, 1e-12);
  EXPECT_NEAR(driveEfficiency(1 * kHp, 1.0), 0.95, 1e-12);
  EXPECT_NEAR(driveEfficiency(500 * kHp, 1.0), 0.97, 1e-12);
  EXPECT_NEAR(driveEfficiency(20 * kHp, 1.3), 0.97, 1e-12);
  EXPECT_DOUBLE_EQ(driveEfficiency(20 * kHp, 0), 0);
  EXPECT_NE(driveSource().find("memory"), std::string::npos);
}

TEST(PreferredKvs, GoesInStepsOfFiveADecade) {
  EXPECT_EQ(preferredKvs().size(), 21U);
  for (std::size_t i = 5; i < preferredKvs().size(); ++i)
    EXPECT_NEAR(preferredKvs()[i], 10 * preferredKvs()[i - 5], 1e-12);
  // R5: each number is the fifth root of ten above the last, rounded as printed (1.58 → 1.6, 3.98 → 4).
  for (std::size_t i = 1; i < preferredKvs().size(); ++i)
    EXPECT_NEAR(preferredKvs()[i] / preferredKvs()[i - 1], std::pow(10, 0.2), 0.03);
}

TEST(PreferredKvs, NeighboursAreFound) {
  EXPECT_DOUBLE_EQ(*kvsAtMost(7), 6.3);
  EXPECT_DOUBLE_EQ(*kvsAtLeast(7), 10);
  EXPECT_DOUBLE_EQ(*kvsAtMost(6.3), 6.3);
  EXPECT_DOUBLE_EQ(*kvsAtLeast(6.3), 6.3);
  EXPECT_FALSE(kvsAtMost(0.05));
  EXPECT_FALSE(kvsAtLeast(2000));
  EXPECT_FALSE(kvsAtMost(std::nan("")));
  EXPECT_FALSE(kvsAtLeast(std::nan("")));
}

}  // namespace
}  // namespace ebbline::catalogue
