#include <clocale>
#include <cmath>
#include <limits>

#include <gtest/gtest.h>

#include "core/quantity/quantity.h"

namespace ebbline::quantity {
namespace {

constexpr UnitSystem kSi = UnitSystem::kSi;
constexpr UnitSystem kIp = UnitSystem::kIp;

TEST(Format, GivesTheUsualDecimalsWithTheUnit) {
  EXPECT_EQ(formatWithUnit(0.0025, Quantity::kFlow, kSi), "2.50 L/s");
  EXPECT_EQ(formatWithUnit(0.0025, Quantity::kFlow, kIp), "39.6 gpm");
  EXPECT_EQ(formatWithUnit(30000, Quantity::kPressure, kSi), "30.0 kPa");
  EXPECT_EQ(formatWithUnit(30000, Quantity::kPressure, kIp), "4.35 psi");
  EXPECT_EQ(formatWithUnit(0.0525018, Quantity::kBore, kIp), "2.067 in");
  EXPECT_EQ(formatWithUnit(250, Quantity::kGradient, kSi), "250 Pa/m");
  EXPECT_EQ(formatWithUnit(6, Quantity::kTemperature, kIp), "42.8 °F");
  EXPECT_EQ(formatWithUnit(6, Quantity::kTemperatureDifference, kIp), "10.8 °F");
}

TEST(Format, NegativeNumbersCarryTheTrueMinusForPeopleAndTheHyphenForFiles) {
  EXPECT_EQ(format(-1500, Quantity::kPressure, kSi), "\u22121.5");
  EXPECT_EQ(format(-1500, Quantity::kPressure, kSi, Minus::kHyphen), "-1.5");
}

TEST(Format, WhatRoundsToZeroHasNoSign) {
  EXPECT_EQ(format(-0.0, Quantity::kFlow, kSi), "0.00");
  EXPECT_EQ(format(-1e-9, Quantity::kFlow, kSi), "0.00");
}

TEST(Format, WhatIsNotFiniteIsADash) {
  EXPECT_EQ(format(std::numeric_limits<double>::quiet_NaN(), Quantity::kFlow, kSi), "–");
  EXPECT_EQ(format(std::numeric_limits<double>::infinity(), Quantity::kFlow, kSi), "–");
  EXPECT_EQ(formatForEditing(std::nan(""), Quantity::kFlow, kSi), "–");
}

TEST(Format, HugeNumbersStayShort) {
  EXPECT_LT(format(1e300, Quantity::kFlow, kSi).size(), 15U);
}

TEST(Format, EditingShowsNoTrailingZerosAndReadsBack) {
  EXPECT_EQ(formatForEditing(0.0025, Quantity::kFlow, kSi), "2.5");
  EXPECT_EQ(formatForEditing(-2, Quantity::kLength, kSi), "-2");
  EXPECT_EQ(formatForEditing(1234567, Quantity::kLength, kSi), "1234567");
  for (const double value : {0.000123456, 1.5, 99.9999, 123456.0, 1e20})
    EXPECT_NEAR(*parse(formatForEditing(value, Quantity::kLength, kSi), Quantity::kLength), value, 1e-5 * value);
}

TEST(Format, WhatIsShownCanBeTypedBack) {
  for (const double value : {-3.5, 0.25, 12345.0})
    for (const UnitSystem system : {kSi, kIp}) {
      const auto again = parse(formatWithUnit(value, Quantity::kTemperature, system), Quantity::kTemperature);
      ASSERT_TRUE(again);
      EXPECT_NEAR(*again, value, 0.06);
    }
}

TEST(Format, IgnoresTheLocale) {
  // Where the locale is not installed setlocale refuses it and the check still holds for the one in force.
  const char* german = std::setlocale(LC_ALL, "de_DE.UTF-8");
  EXPECT_EQ(format(0.0025, Quantity::kFlow, kSi), "2.50");
  EXPECT_DOUBLE_EQ(*parse("2.5", Quantity::kLength), 2.5);
  if (german) std::setlocale(LC_ALL, "C");
}

}  // namespace
}  // namespace ebbline::quantity
