#include <cmath>
#include <limits>

#include <gtest/gtest.h>

#include "core/fluid/fluid.h"
#include "core/fluid/glycol.h"
#include "core/fluid/iapws.h"

namespace ebbline::fluid {
namespace {

using text::Code;

FluidProperties at(Kind kind, double temperature_c, double fraction, double pressure_pa = 101325) {
  const auto properties = propertiesOf({kind, temperature_c, fraction, pressure_pa});
  EXPECT_TRUE(properties) << text::oneLine(properties.error());
  return properties.value_or(FluidProperties{});
}

void expectCode(const FluidState& state, Code code) {
  const auto properties = propertiesOf(state);
  ASSERT_FALSE(properties) << text::codeName(code);
  EXPECT_STREQ(text::codeName(properties.error().code), text::codeName(code));
  EXPECT_EQ(text::oneLine(properties.error()).find('{'), std::string::npos);
}

TEST(WaterRegion1, HeatCapacityIsTheSlopeOfEnthalpy) {
  for (const double t : {275.0, 300.0, 350.0, 450.0}) {
    const double dt = 1e-3;
    const double slope = (waterRegion1(t + dt, 2).enthalpy_kj_kg - waterRegion1(t - dt, 2).enthalpy_kj_kg) / (2 * dt);
    EXPECT_NEAR(waterRegion1(t, 2).heat_capacity_kj_kgk, slope, 1e-6);
  }
}

TEST(FluidProperties, GlycolOfZeroShareIsExactlyWater) {
  for (const Kind kind : {Kind::kEthyleneGlycol, Kind::kPropyleneGlycol})
    for (const double t : {0.5, 6.0, 20.0, 60.0, 95.0})
      for (const double p : {101325.0, 6e5}) {
        const FluidProperties water = at(Kind::kWater, t, 0, p);
        const FluidProperties glycol = at(kind, t, 0, p);
        EXPECT_NEAR(glycol.density_kg_m3, water.density_kg_m3, 1e-9);
        EXPECT_NEAR(glycol.viscosity_pa_s, water.viscosity_pa_s, 1e-15);
        EXPECT_NEAR(glycol.heat_capacity_j_kgk, water.heat_capacity_j_kgk, 1e-8);
        EXPECT_DOUBLE_EQ(glycol.vapour_pressure_pa, water.vapour_pressure_pa);
        EXPECT_NEAR(glycol.freezing_c, water.freezing_c, 1e-12);
      }
}

TEST(FluidProperties, ThePolynomialsMissPureWaterByNoMoreThanTheHeaderSays) {
  for (const Glycol glycol : {Glycol::kEthylene, Glycol::kPropylene})
    for (double t = 0.5; t < 99.5; t += 0.5) {
      const FluidProperties water = at(Kind::kWater, t, 0);
      const GlycolValues zero = melinder(glycol, t, 0);
      EXPECT_NEAR(zero.density_kg_m3 / water.density_kg_m3, 1, 0.001) << t;
      EXPECT_NEAR(zero.viscosity_pa_s / water.viscosity_pa_s, 1, 0.018) << t;
      EXPECT_NEAR(zero.heat_capacity_j_kgk / water.heat_capacity_j_kgk, 1, 0.0025) << t;
    }
}

TEST(FluidProperties, NothingJumpsWhileGlycolIsAdded) {
  constexpr double kStep = 1e-4;
  for (const Kind kind : {Kind::kEthyleneGlycol, Kind::kPropyleneGlycol})
    for (const double t : {2.0, 20.0, 80.0}) {
      FluidProperties before = at(kind, t, 0);
      for (int i = 1; i <= 2000; ++i) {
        const FluidProperties now = at(kind, t, i * kStep);
        // Per 1e-4 of glycol: density ≤ 0.02 %, viscosity between 0.01 and 0.1 %, heat capacity ≤ 0.02 %.
        ASSERT_NEAR(now.density_kg_m3 / before.density_kg_m3, 1, 2e-4) << t << " " << i;
        ASSERT_GT(now.viscosity_pa_s / before.viscosity_pa_s, 1) << t << " " << i;
        ASSERT_LT(now.viscosity_pa_s / before.viscosity_pa_s, 1.001) << t << " " << i;
        ASSERT_NEAR(now.heat_capacity_j_kgk / before.heat_capacity_j_kgk, 1, 2e-4) << t << " " << i;
        ASSERT_LT(now.freezing_c, before.freezing_c) << t << " " << i;
        before = now;
      }
    }
}

TEST(FluidProperties, FromTenPercentOnThePolynomialsStandAlone) {
  const GlycolValues values = melinder(Glycol::kEthylene, 20, 0.1);
  const FluidProperties properties = at(Kind::kEthyleneGlycol, 20, 0.1);
  EXPECT_DOUBLE_EQ(properties.density_kg_m3, values.density_kg_m3);
  EXPECT_DOUBLE_EQ(properties.viscosity_pa_s, values.viscosity_pa_s);
  EXPECT_DOUBLE_EQ(properties.heat_capacity_j_kgk, values.heat_capacity_j_kgk);
}

TEST(FluidProperties, VapourPressureBelowZeroIsThatOfWaterAtZeroWhichErrsSafe) {
  EXPECT_NEAR(at(Kind::kEthyleneGlycol, -10, 0.4).vapour_pressure_pa, saturationPressure(273.15) * 1e6, 1e-9);
}

TEST(FluidProperties, RefusesAFrozenFluid) {
  expectCode({Kind::kWater, 0, 0}, Code::kFluidFrozen);
  expectCode({Kind::kWater, -5, 0}, Code::kFluidFrozen);
  expectCode({Kind::kEthyleneGlycol, -14.6, 0.3}, Code::kFluidFrozen);
  expectCode({Kind::kEthyleneGlycol, -1e300, 0.3}, Code::kFluidFrozen);
  EXPECT_GT(at(Kind::kEthyleneGlycol, -14.5, 0.3).viscosity_pa_s, 6.5e-3);
  EXPECT_EQ(text::oneLine(propertiesOf({Kind::kEthyleneGlycol, -20, 0.3}).error()),
            "At \u221220.0 °C the ethylene glycol in water freezes; its freezing point is \u221214.6 °C. "
            "Raise the temperature or the share of glycol.");
}

TEST(FluidProperties, RefusesABoilingFluid) {
  expectCode({Kind::kWater, 100, 0}, Code::kFluidBoils);
  expectCode({Kind::kWater, 60, 0, 15000}, Code::kFluidBoils);
  EXPECT_NEAR(at(Kind::kWater, 120, 0, 4e5).density_kg_m3, 943.2, 0.3);
}

TEST(FluidProperties, RefusesWhatTheTablesDoNotHold) {
  expectCode({Kind::kWater, 201, 0, 5e6}, Code::kFluidTemperatureRange);
  expectCode({Kind::kPropyleneGlycol, 101, 0.3, 5e5}, Code::kFluidTemperatureRange);
  expectCode({Kind::kPropyleneGlycol, 20, 0.61}, Code::kFluidGlycolRange);
  expectCode({Kind::kPropyleneGlycol, 20, -0.01}, Code::kFluidGlycolRange);
  expectCode({Kind::kWater, 20, 0, 0}, Code::kFluidPressureRange);
  expectCode({Kind::kWater, 20, 0, -5}, Code::kFluidPressureRange);
  expectCode({Kind::kWater, 20, 0, 1e9}, Code::kFluidPressureRange);
}

TEST(FluidProperties, RefusesNumbersThatAreNone) {
  const double nan = std::numeric_limits<double>::quiet_NaN();
  const double infinite = std::numeric_limits<double>::infinity();
  expectCode({Kind::kWater, nan, 0}, Code::kFluidNotFinite);
  expectCode({Kind::kWater, infinite, 0}, Code::kFluidNotFinite);
  expectCode({Kind::kEthyleneGlycol, 20, nan}, Code::kFluidNotFinite);
  expectCode({Kind::kWater, 20, 0, nan}, Code::kFluidNotFinite);
}

TEST(FluidProperties, TheShareOfGlycolDoesNotMatterForWater) {
  EXPECT_DOUBLE_EQ(at(Kind::kWater, 20, 0.9).density_kg_m3, at(Kind::kWater, 20, 0).density_kg_m3);
}

TEST(FluidProperties, EverythingIsPositiveAndFiniteOverTheWholeRange) {
  for (const Kind kind : {Kind::kWater, Kind::kEthyleneGlycol, Kind::kPropyleneGlycol})
    for (double x = 0; x <= 0.6; x += 0.05)
      for (double t = std::ceil(freezingPoint(kind, x)) + 1; t <= 99; t += 1) {
        const FluidProperties p = at(kind, t, x);
        ASSERT_TRUE(p.density_kg_m3 > 900 && p.density_kg_m3 < 1120) << t << " " << x;
        // 60 % propylene glycol one degree above its freezing point (−50 °C) is as thick as syrup: 3.4 Pa·s.
        ASSERT_TRUE(p.viscosity_pa_s > 2e-4 && p.viscosity_pa_s < 4) << t << " " << x;
        ASSERT_TRUE(p.heat_capacity_j_kgk > 2500 && p.heat_capacity_j_kgk < 4500) << t << " " << x;
      }
}

}  // namespace
}  // namespace ebbline::fluid
