#include <cmath>
#include <string>

#include <gtest/gtest.h>

#include "core/quantity/quantity.h"
#include "tests/support/printed.h"

namespace ebbline::quantity {
namespace {

constexpr Quantity kAll[] = {
    Quantity::kLength,   Quantity::kBore,        Quantity::kFlow,        Quantity::kValveCoefficient,
    Quantity::kPressure, Quantity::kHead,        Quantity::kVelocity,    Quantity::kGradient,
    Quantity::kPower,    Quantity::kThermalLoad, Quantity::kTemperature, Quantity::kTemperatureDifference,
    Quantity::kPercent,  Quantity::kDensity,     Quantity::kViscosity,   Quantity::kHeatCapacity};

struct PrintedFactor {
  Quantity quantity;
  const char* one;  ///< One unit as typed.
  double printed;   ///< In the base unit, seven significant digits.
};

// [from memory: NIST Special Publication 811 (2008), appendix B.8, seven printed digits each]
constexpr PrintedFactor kPrinted[] = {
    {Quantity::kLength, "1 ft", 0.3048000},         {Quantity::kLength, "1 in", 0.02540000},
    {Quantity::kFlow, "1 gpm", 6.309020e-5},        {Quantity::kPressure, "1 psi", 6894.757},
    {Quantity::kPressure, "1 ftH2O", 2989.067},     {Quantity::kPressure, "1 inH2O", 249.0889},
    {Quantity::kPressure, "1 mmH2O", 9.806650},     {Quantity::kPressure, "1 bar", 100000.0},
    {Quantity::kVelocity, "1 ft/s", 0.3048000},     {Quantity::kVelocity, "1 ft/min", 0.005080000},
    {Quantity::kPower, "1 hp", 745.6999},           {Quantity::kThermalLoad, "1 Btu/h", 0.2930711},
    {Quantity::kThermalLoad, "1 ton", 3516.853},    {Quantity::kDensity, "1 lb/ft3", 16.01846},
    {Quantity::kHeatCapacity, "1 Btu/lbF", 4186.8}, {Quantity::kTemperatureDifference, "9 °F", 5.000000},
};

TEST(Units, FactorsAgreeWithThePrintedTableToItsLastDigit) {
  for (const PrintedFactor& factor : kPrinted) {
    const auto value = parse(factor.one, factor.quantity);
    ASSERT_TRUE(value) << factor.one << ": " << text::oneLine(value.error());
    EXPECT_NEAR(*value, factor.printed, test::halfDigit(factor.printed, 7)) << factor.one;
  }
}

TEST(Units, KvOfACvIsTheProductOfItsDefinitions) {
  // [computed] printed with ten digits; the published rounded values are 0.865 and 1.156.
  EXPECT_NEAR(*parse("1 Cv", Quantity::kValveCoefficient), 0.8649776554, 0.5e-10);
  EXPECT_NEAR(1 / kKvPerCv, 1.1560992284, 0.5e-10);
  const double cubic_metres_an_hour_per_gpm = *parse("1 gpm", Quantity::kFlow) * 3600;
  EXPECT_NEAR(cubic_metres_an_hour_per_gpm, 0.22712470704, 1e-15);
  const double psi = *parse("1 psi", Quantity::kPressure);
  EXPECT_NEAR(kKvPerCv, cubic_metres_an_hour_per_gpm * std::sqrt(1e5 / psi), 1e-15);
}

TEST(Units, WorkedValveExampleGivesCv11Point56) {
  // [published: worked example of valve-coefficient pages] 20 m³/h at 4 bar: Kv 10, Cv 11.56.
  EXPECT_EQ(format(10, Quantity::kValveCoefficient, UnitSystem::kIp), "11.56");
}

TEST(Units, SizingHabitOfOneToFourFeetPer100FeetIsAbout98To392PaPerMetre) {
  // [computed with 60 °F water of 999.017 kg/m³: 98.0–391.9]; ours is for the conventional 1000 kg/m³.
  EXPECT_NEAR(*parse("1 ft/100 ft", Quantity::kGradient), 98.0665, 1e-9);
  EXPECT_NEAR(*parse("4 ft/100 ft", Quantity::kGradient) * 0.999017, 391.9, 0.05);
}

TEST(Units, TemperaturesMeetAtTheirFixedPoints) {
  EXPECT_NEAR(*parse("32 °F", Quantity::kTemperature), 0, 1e-13);
  EXPECT_NEAR(*parse("212 F", Quantity::kTemperature), 100, 1e-13);
  EXPECT_NEAR(*parse("-40 °F", Quantity::kTemperature), -40, 1e-13);
  EXPECT_NEAR(*parse("273.15 K", Quantity::kTemperature), 0, 1e-13);
}

TEST(Units, ShownValueComesBackToTheSameBaseValueInBothSystems) {
  for (const Quantity quantity : kAll)
    for (const UnitSystem system : {UnitSystem::kSi, UnitSystem::kIp})
      for (const double value : {-17.3, 0.0, 1e-4, 12.75, 98765.4})
        EXPECT_NEAR(fromShown(toShown(value, quantity, system), quantity, system), value,
                    1e-14 * std::max(20.0, std::abs(value)))
            << nameOf(quantity);
}

TEST(Units, FileUnitIsThatOfTheDocument) {
  EXPECT_DOUBLE_EQ(fileToBase(2.5, Quantity::kFlow), 0.0025);
  EXPECT_DOUBLE_EQ(fileToBase(30, Quantity::kPressure), 30000);
  EXPECT_DOUBLE_EQ(fileToBase(52.5, Quantity::kBore), 0.0525);
  EXPECT_DOUBLE_EQ(fileToBase(12, Quantity::kLength), 12);
  EXPECT_DOUBLE_EQ(fileToBase(20, Quantity::kThermalLoad), 20000);
  EXPECT_DOUBLE_EQ(fileToBase(50, Quantity::kPercent), 50);
  EXPECT_DOUBLE_EQ(baseToFile(4190, Quantity::kHeatCapacity), 4.19);
  EXPECT_DOUBLE_EQ(baseToFile(0.0013, Quantity::kViscosity), 1.3);
}

TEST(Units, EveryAcceptedUnitCanBeTyped) {
  for (const Quantity quantity : kAll) {
    EXPECT_GE(acceptedUnits(quantity).size(), 2U) << nameOf(quantity);
    for (const std::string_view unit : acceptedUnits(quantity))
      EXPECT_TRUE(parse("1 " + std::string(unit), quantity)) << nameOf(quantity) << " " << unit;
  }
}

TEST(Units, ShownUnitsAreThoseOfTheTwoSystems) {
  EXPECT_EQ(unitLabel(Quantity::kFlow, UnitSystem::kSi), "L/s");
  EXPECT_EQ(unitLabel(Quantity::kFlow, UnitSystem::kIp), "gpm");
  EXPECT_EQ(unitLabel(Quantity::kGradient, UnitSystem::kIp), "ft/100 ft");
  EXPECT_EQ(unitLabel(Quantity::kThermalLoad, UnitSystem::kIp), "kBtu/h");
}

}  // namespace
}  // namespace ebbline::quantity
