// Fluid properties against the verification tables of the releases and the collected tables in tests/data.

#include <cmath>

#include <gtest/gtest.h>

#include "core/fluid/fluid.h"
#include "core/fluid/glycol.h"
#include "core/fluid/iapws.h"
#include "tests/support/printed.h"
#include "tests/support/table_file.h"

namespace ebbline {
namespace {

using fluid::Kind;
using quantity::CsvTable;
using test::halfDigit;
using test::halfLastDigit;

fluid::FluidProperties propertiesAt(const fluid::FluidState& state) {
  const auto properties = fluid::propertiesOf(state);
  EXPECT_TRUE(properties) << text::oneLine(properties.error());
  return properties.value_or(fluid::FluidProperties{});
}

// [published: IAPWS R7-97(2012), table 5] nine significant digits.
TEST(PublishedWater, Region1VerificationTable) {
  struct Row {
    double t_k, p_mpa, volume, enthalpy, heat_capacity;
  };
  for (const Row& row : {Row{300, 3, 0.100215168e-2, 0.115331273e3, 0.417301218e1},
                         Row{300, 80, 0.971180894e-3, 0.184142828e3, 0.401008987e1},
                         Row{500, 3, 0.120241800e-2, 0.975542239e3, 0.465580682e1}}) {
    const fluid::WaterRegion1 water = fluid::waterRegion1(row.t_k, row.p_mpa);
    EXPECT_NEAR(water.volume_m3_kg, row.volume, halfDigit(row.volume, 9));
    EXPECT_NEAR(water.enthalpy_kj_kg, row.enthalpy, halfDigit(row.enthalpy, 9));
    EXPECT_NEAR(water.heat_capacity_kj_kgk, row.heat_capacity, halfDigit(row.heat_capacity, 9));
  }
}

// [published: IAPWS R7-97(2012), table 35]
TEST(PublishedWater, SaturationVerificationTable) {
  EXPECT_NEAR(fluid::saturationPressure(300), 0.353658941e-2, halfDigit(0.353658941e-2, 9));
  EXPECT_NEAR(fluid::saturationPressure(500), 0.263889776e1, halfDigit(0.263889776e1, 9));
  EXPECT_NEAR(fluid::saturationPressure(600), 0.123443146e2, halfDigit(0.123443146e2, 9));
}

// [published: IAPWS R12-08, table 4 (critical enhancement left out)] μPa·s, six decimals.
TEST(PublishedWater, ViscosityVerificationTable) {
  struct Row {
    double t_k, density, viscosity;
  };
  for (const Row& row : {Row{298.15, 998, 889.735100}, Row{298.15, 1200, 1437.649467}, Row{373.15, 1000, 307.883622},
                         Row{433.15, 1, 14.538324}, Row{433.15, 1000, 217.685358}, Row{873.15, 1, 32.619287},
                         Row{873.15, 100, 35.802262}, Row{873.15, 600, 77.430195}, Row{1173.15, 1, 44.217245},
                         Row{1173.15, 100, 47.640433}, Row{1173.15, 400, 64.154608}})
    EXPECT_NEAR(fluid::waterViscosity(row.t_k, row.density) * 1e6, row.viscosity, 0.5e-6 * (1 + 1e-3))
        << row.t_k << " K, " << row.density << " kg/m³";
}

// [computed with an independent implementation of IF97; see the file] six significant digits.
TEST(PublishedWater, TableAtAtmosphericPressureToTheLastDigit) {
  const CsvTable table = test::tableFile("water_properties");
  ASSERT_EQ(table.numRows(), 19);
  for (int row = 0; row < table.numRows(); ++row) {
    const auto water = propertiesAt({Kind::kWater, table.number(row, "T_C"), 0});
    const auto expect = [&](double value, const char* column) {
      EXPECT_NEAR(value, table.number(row, column), halfDigit(table.number(row, column), 6))
          << column << " at " << table.text(row, "T_C") << " °C";
    };
    expect(water.density_kg_m3, "rho97_kg_m3");
    expect(water.viscosity_pa_s * 1e3, "mu97_mPa_s");
    expect(water.heat_capacity_j_kgk * 1e-3, "cp97_kJ_kgK");
    expect(water.vapour_pressure_pa * 1e-3, "pv97_kPa");
  }
}

// IAPWS-95 is the scientific formulation; agreement as its users expect of the industrial one.
TEST(PublishedWater, AgreesWithTheScientificFormulation) {
  const CsvTable table = test::tableFile("water_properties");
  for (int row = 0; row < table.numRows(); ++row) {
    const auto water = propertiesAt({Kind::kWater, table.number(row, "T_C"), 0});
    const double density = table.number(row, "rho95_kg_m3");
    EXPECT_NEAR(water.density_kg_m3, density, 2e-4 * density);
    EXPECT_NEAR(water.viscosity_pa_s * 1e3 / table.number(row, "mu95_mPa_s"), 1, 5e-3);
    EXPECT_NEAR(water.heat_capacity_j_kgk * 1e-3 / table.number(row, "cp95_kJ_kgK"), 1, 1e-3);
    EXPECT_NEAR(water.vapour_pressure_pa * 1e-3 / table.number(row, "pv95_kPa"), 1, 5e-3);
  }
}

TEST(PublishedWater, AgreesAtSystemPressures) {
  const CsvTable table = test::tableFile("water_properties_pressure");
  ASSERT_EQ(table.numRows(), 30);
  for (int row = 0; row < table.numRows(); ++row) {
    const auto water = propertiesAt({Kind::kWater, table.number(row, "T_C"), 0, table.number(row, "p_kPa_abs") * 1e3});
    EXPECT_NEAR(water.density_kg_m3 / table.number(row, "rho_kg_m3"), 1, 2e-4);
    EXPECT_NEAR(water.viscosity_pa_s * 1e3 / table.number(row, "mu_mPa_s"), 1, 5e-3);
    EXPECT_NEAR(water.heat_capacity_j_kgk * 1e-3 / table.number(row, "cp_kJ_kgK"), 1, 1e-3);
  }
}

// [published coefficients: Melinder 2010; table computed from them] to the last printed digit.
TEST(PublishedGlycol, TableToTheLastDigit) {
  const CsvTable table = test::tableFile("glycol_water");
  ASSERT_EQ(table.numRows(), 54);
  for (int row = 0; row < table.numRows(); ++row) {
    const Kind kind = table.text(row, "fluid") == "EG" ? Kind::kEthyleneGlycol : Kind::kPropyleneGlycol;
    const auto mixture = propertiesAt({kind, table.number(row, "T_C"), table.number(row, "x_mass")});
    const auto expect = [&](double value, const char* column) {
      EXPECT_NEAR(value, table.number(row, column), halfLastDigit(table.text(row, column)))
          << column << ", " << table.text(row, "fluid") << " " << table.text(row, "x_mass") << " at "
          << table.text(row, "T_C") << " °C";
    };
    expect(mixture.density_kg_m3, "rho_kg_m3");
    expect(mixture.viscosity_pa_s * 1e3, "mu_mPa_s");
    expect(mixture.heat_capacity_j_kgk * 1e-3, "cp_kJ_kgK");
    expect(mixture.freezing_c, "freeze_C");
  }
}

// [computed from the coefficients] at x = 0 and 20 °C, before the fade to pure water.
TEST(PublishedGlycol, PolynomialsAtZeroGlycol) {
  const fluid::GlycolValues ethylene = fluid::melinder(fluid::Glycol::kEthylene, 20, 0);
  EXPECT_NEAR(ethylene.density_kg_m3, 997.35, 0.005);
  EXPECT_NEAR(ethylene.viscosity_pa_s * 1e3, 1.0078, 0.00005);
  EXPECT_NEAR(ethylene.heat_capacity_j_kgk * 1e-3, 4.1862, 0.00005);
  const fluid::GlycolValues propylene = fluid::melinder(fluid::Glycol::kPropylene, 20, 0);
  EXPECT_NEAR(propylene.density_kg_m3, 998.52, 0.005);
  EXPECT_NEAR(propylene.viscosity_pa_s * 1e3, 1.0072, 0.00005);
  EXPECT_NEAR(propylene.heat_capacity_j_kgk * 1e-3, 4.1866, 0.00005);
  EXPECT_NEAR(fluid::melinderFreezing(fluid::Glycol::kEthylene, 0), 0.000, 0.0005);
  EXPECT_NEAR(fluid::melinderFreezing(fluid::Glycol::kPropylene, 0), -0.025, 0.0005);
}

// [published: ASHRAE Handbook Fundamentals, as reproduced; see the file] Densities of inhibited fluids by volume lie
// 0.4 to 0.9 per cent above those of the pure mixture.
TEST(PublishedGlycol, DensityByVolumeLiesALittleAboveThePureMixture) {
  const CsvTable table = test::tableFile("glycol_eg_density_by_volume");
  ASSERT_EQ(table.numRows(), 16);
  for (int row = 0; row < table.numRows(); ++row) {
    const auto mixture =
        propertiesAt({Kind::kEthyleneGlycol, table.number(row, "T_C"), table.number(row, "x_mass_est")});
    // The share is printed with four decimals, worth 0.01 kg/m³.
    EXPECT_NEAR(mixture.density_kg_m3, table.number(row, "rho_melinder_kg_m3"), 0.05 + 0.01);
    const double above = table.number(row, "rho_kg_m3") / mixture.density_kg_m3 - 1;
    EXPECT_GT(above, 0.0035);
    EXPECT_LT(above, 0.0095);
  }
}

}  // namespace
}  // namespace ebbline
