#include "core/part/pump.h"

#include <cmath>

#include <gtest/gtest.h>

#include "tests/core/part/slope_check.h"

namespace ebbline::part {
namespace {

constexpr double kGravity = 9.80665;

/// Δp = 160 n² − 0.484375 Q² in kPa and L/s, efficiency 0.75 (2x − x²), x = (Q/n)/8.5. [computed]
PumpCurve closedForm() {
  std::vector<PumpReading> readings;
  for (const double q : {0.0, 5.0, 10.0}) {
    const double x = q / 8.5;
    readings.push_back({q / 1000, (160 - 0.484375 * q * q) / kGravity, 0.75 * (2 * x - x * x)});
  }
  return PumpCurve(readings);
}

PumpCurve cubic() {
  return PumpCurve({{0, 20, 0}, {0.002, 19.5, 0.45}, {0.005, 18, 0.7}, {0.008, 14, 0.72}, {0.01, 9, 0.6}});
}

double kpa(const PumpCurve& pump, double flow_l_s, double speed) {
  return pump.head(flow_l_s / 1000, speed).value * kGravity;
}

TEST(PumpCurve, AffinityExamples) {
  const PumpCurve pump = closedForm();
  EXPECT_NEAR(kpa(pump, 8, 1), 129, 1e-9);
  EXPECT_NEAR(kpa(pump, 4, 0.5), 32.25, 1e-9);
  EXPECT_NEAR(kpa(pump, 4, std::sqrt((69.75 + 0.484375 * 16) / 160)), 69.75, 1e-9);
  EXPECT_NEAR(std::sqrt((69.75 + 0.484375 * 16) / 160), 0.69597055, 5e-9);
}

TEST(PumpCurve, HydraulicPowerAndItsCube) {
  const PumpCurve pump = closedForm();
  EXPECT_NEAR(pump.efficiency(0.008, 1), 0.74740484, 5e-9);
  EXPECT_NEAR(pump.shaftPower(0.008, 1, 1000), 1380.777778, 1e-6);
  EXPECT_NEAR(pump.shaftPower(0.0064, 0.8, 1000) / pump.shaftPower(0.008, 1, 1000), 0.512, 1e-12);
}

TEST(PumpCurve, PassesThroughItsReadings) {
  for (const PumpCurve& pump : {closedForm(), cubic(), PumpCurve({{0, 10, 0}, {0.01, 4, 0}})})
    for (const PumpReading& reading : pump.readings()) {
      EXPECT_NEAR(pump.head(reading.flow_m3s, 1).value, reading.head_m, 1e-12);
      EXPECT_NEAR(pump.efficiency(reading.flow_m3s, 1), reading.efficiency, 1e-12);
    }
}

TEST(PumpCurve, SlopeAgainstCentralDifferences) {
  for (const PumpCurve& pump : {closedForm(), cubic(), PumpCurve({{0, 10, 0}, {0.01, 4, 0}})})
    for (const double speed : {0.3, 1.0, 1.2})
      for (const double flow : {-0.004, -1e-4, 0.0005, 0.0031, 0.0077, 0.0095, 0.02})
        expectSlope([&](double q) { return pump.head(q, speed); }, flow, 1e-6);
}

TEST(PumpCurve, NeverRisesOutsideItsData) {
  const PumpCurve humped({{0, 10, 0}, {0.004, 11, 0}, {0.01, 6, 0}});
  EXPECT_TRUE(humped.rises());
  for (const PumpCurve& pump : {closedForm(), cubic(), humped}) {
    for (double q = -0.02; q < 0; q += 1e-4) EXPECT_LE(pump.head(q, 1).slope, 0);
    for (double q = 0.0101; q < 0.05; q += 1e-4) EXPECT_LE(pump.head(q, 1).slope, 0);
    EXPECT_NEAR(pump.head(-1e-12, 1).value, pump.head(1e-12, 1).value, 1e-8);
  }
}

TEST(PumpCurve, CubicFallsWhereItsReadingsFall) {
  const PumpCurve pump = cubic();
  double before = 1e9;
  for (double q = 0; q <= 0.01; q += 1e-5) {
    const double head = pump.head(q, 1).value;
    EXPECT_LT(head, before);
    before = head;
  }
  EXPECT_FALSE(pump.rises());
  EXPECT_FALSE(closedForm().rises());
  EXPECT_TRUE(PumpCurve({{0, 10, 0}, {0.002, 11, 0}, {0.005, 9, 0}, {0.008, 5, 0}}).rises());
}

TEST(PumpCurve, ShaftPowerIsFiniteAndContinuousAtRest) {
  for (const PumpCurve& pump : {closedForm(), cubic()}) {
    const double rest = pump.shaftPower(0, 1, 1000);
    EXPECT_GT(rest, 0);
    EXPECT_NEAR(pump.shaftPower(1e-8, 1, 1000) / rest, 1, 1e-3);
    for (double q = 0; q < 0.05; q += 1e-4) EXPECT_TRUE(std::isfinite(pump.shaftPower(q, 1, 1000)));
  }
  // Q/η → 1/η'(0): ρ g H0/η'(0), η'(0) = 0.75·2/8.5 per L/s. [computed]
  EXPECT_NEAR(closedForm().shaftPower(0, 1, 1000), 160e3 / (0.75 * 2 / 8.5e-3), 1e-6);
  EXPECT_EQ(PumpCurve({{0, 10, 0}, {0.01, 4, 0}}).shaftPower(0.005, 1, 1000), 0);
}

}  // namespace
}  // namespace ebbline::part
