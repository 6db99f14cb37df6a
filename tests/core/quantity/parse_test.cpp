#include <cmath>
#include <random>
#include <string>

#include <gtest/gtest.h>

#include "core/quantity/quantity.h"
#include "tests/support/seed.h"

namespace ebbline::quantity {
namespace {

using text::Code;

struct Good {
  const char* typed;
  Quantity quantity;
  UnitSystem bare;
  double base;
};

constexpr UnitSystem kSi = UnitSystem::kSi;
constexpr UnitSystem kIp = UnitSystem::kIp;

constexpr Good kGood[] = {
    {"12 m", Quantity::kLength, kSi, 12},
    {"12m", Quantity::kLength, kIp, 12},
    {"12", Quantity::kLength, kSi, 12},
    {"10", Quantity::kLength, kIp, 3.048},
    {"40 ft", Quantity::kLength, kSi, 12.192},
    {"40'", Quantity::kLength, kSi, 12.192},
    {"40'6\"", Quantity::kLength, kSi, 12.3444},
    {"40' 6\"", Quantity::kLength, kSi, 12.3444},
    {"40'-6\"", Quantity::kLength, kSi, 12.3444},
    {"40\u2032 6\u2033", Quantity::kLength, kSi, 12.3444},
    {"40 ft 6 in", Quantity::kLength, kSi, 12.3444},
    {"40'6", Quantity::kLength, kSi, 12.3444},
    {"40'-6 1/2\"", Quantity::kLength, kSi, 12.3571},
    {"-2'6\"", Quantity::kLength, kSi, -0.762},
    {"\u22123.5 m", Quantity::kLength, kSi, -3.5},
    {"- 3.5 m", Quantity::kLength, kSi, -3.5},
    {"+3.5 m", Quantity::kLength, kSi, 3.5},
    {".5 m", Quantity::kLength, kSi, 0.5},
    {"5. m", Quantity::kLength, kSi, 5},
    {"250 cm", Quantity::kLength, kSi, 2.5},
    {"12 M", Quantity::kLength, kSi, 12},
    {"7 Feet", Quantity::kLength, kSi, 2.1336},
    {"1-1/4 in", Quantity::kBore, kSi, 0.03175},
    {"1 1/4 in", Quantity::kBore, kSi, 0.03175},
    {"1-1/4\"", Quantity::kBore, kSi, 0.03175},
    {"3/4 in", Quantity::kBore, kSi, 0.01905},
    {"3/4", Quantity::kBore, kIp, 0.01905},
    {"52.5", Quantity::kBore, kSi, 0.0525},
    {"52,5 mm", Quantity::kBore, kSi, 0.0525},
    {"0,045 mm", Quantity::kBore, kSi, 4.5e-5},
    {"45 \u03BCm", Quantity::kBore, kSi, 4.5e-5},
    {"2.5 L/s", Quantity::kFlow, kSi, 0.0025},
    {"2.5 l/s", Quantity::kFlow, kIp, 0.0025},
    {"  2.5\u00A0L/s  ", Quantity::kFlow, kSi, 0.0025},
    {"9 m³/h", Quantity::kFlow, kSi, 0.0025},
    {"9 m3/h", Quantity::kFlow, kSi, 0.0025},
    {"150 L/min", Quantity::kFlow, kSi, 0.0025},
    {"10 gpm", Quantity::kFlow, kSi, 6.30901964e-4},
    {"10 GPM", Quantity::kFlow, kSi, 6.30901964e-4},
    {"2.5e-3 m³/s", Quantity::kFlow, kSi, 0.0025},
    {"1,250.5 gpm", Quantity::kFlow, kSi, 0.0788942905982},
    {"30 kPa", Quantity::kPressure, kSi, 30000},
    {"30 KPA", Quantity::kPressure, kSi, 30000},
    {"30 kpa", Quantity::kPressure, kSi, 30000},
    {"0.3 bar", Quantity::kPressure, kSi, 30000},
    {"10 ft H2O", Quantity::kPressure, kSi, 29890.6692},
    {"10 ft", Quantity::kPressure, kSi, 29890.6692},
    {"1e2 mbar", Quantity::kPressure, kSi, 10000},
    {"1,250,000 Pa", Quantity::kPressure, kSi, 1250000},
    {"40'", Quantity::kHead, kSi, 12.192},
    {"2.5 ft/100 ft", Quantity::kGradient, kSi, 245.16625},
    {"2.5 ft per 100 ft", Quantity::kGradient, kSi, 245.16625},
    {"2.5", Quantity::kGradient, kIp, 245.16625},
    {"25", Quantity::kValveCoefficient, kSi, 25},
    {"25 m³/h", Quantity::kValveCoefficient, kSi, 25},
    {"Kv 25", Quantity::kValveCoefficient, kIp, 25},
    {"Kvs=25", Quantity::kValveCoefficient, kIp, 25},
    {"Cv 10", Quantity::kValveCoefficient, kSi, 8.649776554423018},
    {"10", Quantity::kValveCoefficient, kIp, 8.649776554423018},
    {"50 %", Quantity::kPercent, kSi, 50},
    {"50%", Quantity::kPercent, kSi, 50},
    {"6 °C", Quantity::kTemperature, kIp, 6},
    {"0 °F", Quantity::kTemperature, kSi, -17.777777777777779},
    {"20 MW", Quantity::kThermalLoad, kSi, 20e6},
    {"1.3 mPa·s", Quantity::kViscosity, kSi, 1.3e-3},
};

TEST(Parse, ReadsWhatPeopleWrite) {
  for (const Good& good : kGood) {
    const auto value = parse(good.typed, good.quantity, good.bare);
    ASSERT_TRUE(value) << good.typed << ": " << text::oneLine(value.error());
    EXPECT_NEAR(*value, good.base, 1e-14 * std::abs(good.base)) << good.typed;
  }
}

struct Bad {
  const char* typed;
  Quantity quantity;
  Code code;
};

constexpr Bad kBad[] = {
    {"", Quantity::kLength, Code::kQuantityNotANumber},
    {"   ", Quantity::kLength, Code::kQuantityNotANumber},
    {"m", Quantity::kLength, Code::kQuantityNotANumber},
    {"abc", Quantity::kFlow, Code::kQuantityNotANumber},
    {"nan", Quantity::kFlow, Code::kQuantityNotANumber},
    {"inf", Quantity::kFlow, Code::kQuantityNotANumber},
    {"0x10", Quantity::kFlow, Code::kQuantityUnknownUnit},
    {"--3 m", Quantity::kLength, Code::kQuantityNotANumber},
    {"1.2.3 m", Quantity::kLength, Code::kQuantityNotANumber},
    {"12 34 m", Quantity::kLength, Code::kQuantityNotANumber},
    {"12 m 3", Quantity::kLength, Code::kQuantityUnknownUnit},
    {"1/0 in", Quantity::kBore, Code::kQuantityNotANumber},
    {"1-5/4 in", Quantity::kBore, Code::kQuantityNotANumber},
    {"1.5-1/4 in", Quantity::kBore, Code::kQuantityNotANumber},
    {"40'13\"", Quantity::kLength, Code::kQuantityNotANumber},
    {"40'6 m", Quantity::kLength, Code::kQuantityNotANumber},
    {"1e999 m", Quantity::kLength, Code::kQuantityTooLarge},
    {"1e308 km", Quantity::kLength, Code::kQuantityTooLarge},
    {"1,250 kPa", Quantity::kPressure, Code::kQuantityAmbiguousComma},
    {"12,345", Quantity::kFlow, Code::kQuantityAmbiguousComma},
    {"1,2,3", Quantity::kFlow, Code::kQuantityNotANumber},
    {"1.250,5", Quantity::kFlow, Code::kQuantityNotANumber},
    {"12,50.5", Quantity::kFlow, Code::kQuantityNotANumber},
    {"0,125,000", Quantity::kFlow, Code::kQuantityNotANumber},
    {",", Quantity::kFlow, Code::kQuantityNotANumber},
    {".", Quantity::kFlow, Code::kQuantityNotANumber},
    {"12 ft", Quantity::kFlow, Code::kQuantityUnknownUnit},
    {"12 kPa", Quantity::kHead, Code::kQuantityUnknownUnit},
    {"12 mPa", Quantity::kPressure, Code::kQuantityUnknownUnit},
    {"12 mw", Quantity::kPower, Code::kQuantityUnknownUnit},
    {"40'6\"", Quantity::kPressure, Code::kQuantityUnknownUnit},
    {"Kv", Quantity::kValveCoefficient, Code::kQuantityNotANumber},
    {"Kv 25 Cv", Quantity::kValveCoefficient, Code::kQuantityNotANumber},
    {"50 % %", Quantity::kPercent, Code::kQuantityUnknownUnit},
};

TEST(Parse, RefusesWhatCannotBeReadWithTheRightRemark) {
  for (const Bad& bad : kBad) {
    const auto value = parse(bad.typed, bad.quantity);
    ASSERT_FALSE(value) << bad.typed << " was read as " << *value;
    EXPECT_STREQ(text::codeName(value.error().code), text::codeName(bad.code)) << bad.typed;
    EXPECT_EQ(text::sentence(value.error()).find('{'), std::string::npos) << bad.typed;
    EXPECT_EQ(text::remedy(value.error()).find('{'), std::string::npos) << bad.typed;
  }
}

TEST(Parse, RemarksSayWhatIsAccepted) {
  const auto unit = parse("12 psi", Quantity::kFlow);
  EXPECT_EQ(text::sentence(unit.error()), "\"psi\" is not a unit of flow.");
  EXPECT_NE(text::remedy(unit.error()).find("L/s, gpm"), std::string::npos);
  const auto comma = parse("1,250 kPa", Quantity::kPressure);
  EXPECT_EQ(text::remedy(comma.error()), "Write 1.250 or 1250.");
  const auto number = parse("twelve", Quantity::kLength);
  EXPECT_EQ(text::oneLine(number.error()),
            "\"twelve\" cannot be read as a length. Write a number and a unit, for example 12 m or 40 ft.");
}

TEST(Parse, ANumberInTheFileUnitIsNotRounded) {
  for (const double value : {0.1, 2.3, 2.675, 17.9, 1234.567}) {
    const std::string digits = std::to_string(value);
    EXPECT_EQ(*parseToFileUnit(digits + " L/s", Quantity::kFlow), std::stod(digits));
    EXPECT_EQ(*parseToFileUnit(digits + " kPa", Quantity::kPressure), std::stod(digits));
    EXPECT_EQ(*parseToFileUnit(digits, Quantity::kBore), std::stod(digits));
  }
  EXPECT_DOUBLE_EQ(*parseToFileUnit("9 m3/h", Quantity::kFlow), 2.5);
  EXPECT_DOUBLE_EQ(*parseToFileUnit("2 in", Quantity::kBore), 50.8);
  EXPECT_DOUBLE_EQ(*parseToFileUnit("50 °F", Quantity::kTemperature), 10);
}

TEST(Parse, LongOrBrokenTextIsShownShortAndWhole) {
  const auto remark = parse(std::string(100, 'x'), Quantity::kFlow).error();
  EXPECT_EQ(text::sentence(remark), "\"" + std::string(40, 'x') + "…\" cannot be read as a flow.");
  EXPECT_FALSE(parse(std::string(1000000, '9'), Quantity::kFlow));
  const std::string many_bytes = std::string(39, 'x') + "é" + std::string(20, 'x');
  EXPECT_EQ(text::sentence(parse(many_bytes, Quantity::kFlow).error()),
            "\"" + std::string(39, 'x') + "…\" cannot be read as a flow.");
  EXPECT_EQ(text::sentence(parse(std::string_view("x\0\n", 3), Quantity::kFlow).error()),
            "\"x??\" cannot be read as a flow.");
}

TEST(Parse, RandomBytesGiveAFiniteNumberOrARemark) {
  std::mt19937_64 random(test::seed());
  const std::string alphabet = "0123456789.,-+eE/'\" mkPaLsftgpinKvC%\xC2\xB0\xE2\x88\x92\x01";
  int num_read = 0;
  for (int round = 0; round < 50000; ++round) {
    std::string typed;
    for (std::size_t n = random() % 12; n > 0; --n) typed += alphabet[random() % alphabet.size()];
    for (const Quantity quantity : {Quantity::kLength, Quantity::kFlow, Quantity::kValveCoefficient}) {
      const auto value = parse(typed, quantity);
      if (value) {
        ASSERT_TRUE(std::isfinite(*value)) << typed;
        ++num_read;
      } else {
        ASSERT_FALSE(text::oneLine(value.error()).empty());
      }
    }
  }
  EXPECT_GT(num_read, 100);
}

}  // namespace
}  // namespace ebbline::quantity
