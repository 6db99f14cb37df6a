#include "core/part/valve.h"

#include <cmath>

#include <gtest/gtest.h>

#include "core/quantity/quantity.h"
#include "tests/core/part/slope_check.h"
#include "tests/support/table_file.h"

namespace ebbline::part {
namespace {

double lossKpa(double kv, double flow_m3h, double density = 1000) {
  const double q = flow_m3h / 3600;
  return kvResistance(kv, density) * q * q / 1000;
}

// [published worked example, and computed from the definition in IEC 60534-2-1]
TEST(ValveLoss, WorkedExamples) {
  EXPECT_NEAR(lossKpa(10, 20), 400, 1e-9);
  EXPECT_NEAR(lossKpa(6.3, 2.5), 15.747040, 1e-6);
  EXPECT_NEAR(lossKpa(25, 11.180340), 20, 1e-5);
  EXPECT_NEAR(lossKpa(25, 10.973518, 1038.05), 20, 1e-5);
  EXPECT_NEAR(kvResistance(25, 1000) / 1e9, 2.0736, 1e-9);  // kPa/(L/s)²
  EXPECT_NEAR(10 / quantity::kKvPerCv, 11.56, 0.005);
  EXPECT_NEAR(kvOfResistance(kvResistance(6.3, 998), 998), 6.3, 1e-12);
}

TEST(PowerLoss, SlopeAndSign) {
  for (const double exponent : {1.0, 1.75, 1.9, 2.0, 2.2})
    for (const double q : {-2e-3, -1e-6, 1e-5, 4e-3}) {
      expectSlope([&](double x) { return powerLoss(3e9, exponent, x); }, q, 1e-7);
      EXPECT_EQ(powerLoss(3e9, exponent, q).value, -powerLoss(3e9, exponent, -q).value);
    }
  EXPECT_EQ(powerLoss(3e9, 1.8, 0).value, 0);
  EXPECT_NEAR(powerLoss(powerCoefficient(20e3, 2e-3, 1.8), 1.8, 2e-3).value, 20e3, 1e-8);
}

TEST(Characteristic, PublishedShapesAndInstalledFlow) {
  const quantity::CsvTable table = test::tableFile("valve_characteristic");
  int checked = 0;
  for (int row = 0; row < table.numRows(); ++row) {
    const bool linear = table.text(row, "characteristic") == "linear";
    const double stroke = table.number(row, "stroke");
    if (!linear && stroke < Characteristic::kRunToSeat) continue;  // the table has no run to the seat
    const Characteristic valve(linear ? CharacteristicKind::kLinear : CharacteristicKind::kEqualPercentage,
                               linear ? 50 : table.number(row, "R"), 0);
    const double phi = valve.opening(stroke).value;
    EXPECT_NEAR(phi, table.number(row, "phi"), 1e-8);
    const double authority = table.number(row, "N");
    const double installed = phi > 0 ? 1 / std::sqrt(1 - authority + authority / (phi * phi)) : 0;
    EXPECT_NEAR(installed, table.number(row, "q_rel"), 1e-8);
    ++checked;
  }
  EXPECT_GE(checked, 100);
}

std::vector<Characteristic> allKinds() {
  const std::vector<CharacteristicReading> table{{0, 0}, {0.2, 0.01}, {0.5, 0.1}, {0.7, 0.1}, {0.9, 0.8}, {1, 1}};
  return {{CharacteristicKind::kEqualPercentage, 50, 0},     {CharacteristicKind::kEqualPercentage, 30, 0.001},
          {CharacteristicKind::kEqualPercentage, 100, 0.05}, {CharacteristicKind::kLinear, 50, 0},
          {CharacteristicKind::kLinear, 50, 0.01},           {CharacteristicKind::kTable, 50, 0, table},
          {CharacteristicKind::kTable, 50, 0.005, table}};
}

TEST(Characteristic, NeverFallsAndSlopeIsItsOwn) {
  for (const Characteristic& valve : allKinds()) {
    double before = -1;
    for (int i = 0; i <= 1000; ++i) {
      const double phi = valve.opening(i / 1000.0).value;
      EXPECT_GE(phi, before);
      before = phi;
    }
    EXPECT_EQ(valve.opening(1).value, 1);
    for (const double stroke : {0.01, 0.03, 0.1, 0.37, 0.61, 0.85, 0.97})
      expectSlope([&](double h) { return valve.opening(h); }, stroke, 1e-5);
  }
}

TEST(Characteristic, RunToTheSeatMeetsTheCurveInValueAndSlope) {
  const Characteristic valve(CharacteristicKind::kEqualPercentage, 50, 0.0005);
  const double end = Characteristic::kRunToSeat;
  EXPECT_EQ(valve.opening(0).value, 0.0005);
  EXPECT_NEAR(valve.opening(end - 1e-12).value, valve.opening(end + 1e-12).value, 1e-12);
  EXPECT_NEAR(valve.opening(end - 1e-12).slope, valve.opening(end + 1e-12).slope, 1e-9);
  EXPECT_NEAR(valve.opening(end).value, std::pow(50, end - 1), 1e-15);
}

TEST(Characteristic, StrokeForGivesTheOpeningBack) {
  for (const Characteristic& valve : allKinds()) {
    for (int i = 1; i <= 50; ++i) {
      const double wanted = i / 50.0;
      if (wanted <= valve.opening(0).value) continue;
      EXPECT_NEAR(valve.opening(valve.strokeFor(wanted)).value, wanted, 1e-12);
    }
    EXPECT_EQ(valve.strokeFor(2), 1);
    EXPECT_EQ(valve.strokeFor(0), 0);
  }
}

TEST(Characteristic, EqualPercentageExamples) {
  EXPECT_NEAR(Characteristic(CharacteristicKind::kEqualPercentage, 50, 0).opening(0.5).value, 0.14142136, 5e-9);
  EXPECT_NEAR(Characteristic(CharacteristicKind::kEqualPercentage, 30, 0).opening(0.5).value, 0.18257419, 5e-9);
}

}  // namespace
}  // namespace ebbline::part
