// Pipe and fitting tables against values printed elsewhere than in the tables themselves.

#include <cmath>
#include <string>

#include <gtest/gtest.h>

#include "core/catalogue/fitting.h"
#include "core/catalogue/machine.h"
#include "core/catalogue/pipe.h"
#include "core/quantity/quantity.h"
#include "resources/data_table.h"
#include "tests/support/printed.h"
#include "tests/support/table_file.h"

namespace ebbline {
namespace {

// [published: Rishel, HVAC Pump Handbook 2nd ed., McGraw-Hill 2006, Table 3.5] Inside diameters of the friction table.
TEST(PublishedPipes, BoresOfTheHandbookFrictionTable) {
  const quantity::CsvTable table = test::tableFile("pipe_friction_handbook");
  ASSERT_EQ(table.numRows(), 26);
  for (int row = 0; row < table.numRows(); ++row) {
    const auto size = catalogue::pipeSize("steel-b36-sch40", "NPS " + table.text(row, "NPS_in"));
    ASSERT_TRUE(size);
    EXPECT_NEAR(size->bore_m / 0.0254, table.number(row, "ID_in"), test::halfLastDigit(table.text(row, "ID_in")));
  }
}

// The same table prints the velocity at each flow: conversions of gpm, inches and ft/s in one.
TEST(PublishedPipes, VelocitiesOfTheHandbookFrictionTable) {
  const quantity::CsvTable table = test::tableFile("pipe_friction_handbook");
  for (int row = 0; row < table.numRows(); ++row) {
    const double flow = *quantity::parse(table.text(row, "flow_gpm") + " gpm", quantity::Quantity::kFlow);
    const double bore = catalogue::pipeSize("steel-b36-sch40", "NPS " + table.text(row, "NPS_in"))->bore_m;
    const double velocity = flow / (std::acos(-1.0) / 4 * bore * bore);
    const double shown = quantity::toShown(velocity, quantity::Quantity::kVelocity, quantity::UnitSystem::kIp);
    // Printed with two decimals; trailing zeros are missing in the file.
    EXPECT_NEAR(shown, table.number(row, "V_ft_s_pub"), 0.005) << row;
  }
}

// Millimetre columns of the inch tables: the converted bores to the printed digits.
TEST(PublishedPipes, MillimetresOfTheInchTables) {
  const quantity::CsvTable steel(resources::dataTable("pipe_steel_b36"));
  for (int row = 0; row < steel.numRows(); ++row) {
    const bool standard = steel.text(row, "schedule") == "STD";
    const auto size =
        catalogue::pipeSize(standard ? "steel-b36-std" : "steel-b36-sch40", "NPS " + steel.text(row, "NPS_in"));
    ASSERT_TRUE(size);
    EXPECT_NEAR(size->bore_m * 1e3, steel.number(row, "ID_mm"), test::halfLastDigit(steel.text(row, "ID_mm")));
  }
  const quantity::CsvTable copper(resources::dataTable("pipe_copper_b88"));
  for (int row = 0; row < copper.numRows(); ++row) {
    const bool type_k = copper.text(row, "type") == "K";
    const auto size =
        catalogue::pipeSize(type_k ? "copper-b88-k" : "copper-b88-l", copper.text(row, "nominal_in") + " in");
    ASSERT_TRUE(size);
    EXPECT_NEAR(size->bore_m * 1e3, copper.number(row, "ID_mm"), test::halfLastDigit(copper.text(row, "ID_mm")));
  }
}

// [computed: 1/√f = 2 log10(3.7 D/ε), ε = 0.0018 in] five decimals; and within 5 % of fT [from memory: Crane Technical
// Paper 410, A-26].
TEST(PublishedFittings, TurbulentFactorOfTheRoughPipeLaw) {
  const quantity::CsvTable table(resources::dataTable("fittings_ft"));
  ASSERT_EQ(table.numRows(), 19);
  for (int row = 0; row < table.numRows(); ++row) {
    const double factor = catalogue::turbulentFactor(table.number(row, "ID_in") * 0.0254);
    EXPECT_NEAR(factor, table.number(row, "f_rough_computed"), 0.5e-5 * 1.001) << table.text(row, "NPS_in");
    EXPECT_NEAR(factor / table.number(row, "fT"), 1, 0.05) << table.text(row, "NPS_in");
  }
}

// [published: Rishel, HVAC Pump Handbook 2nd ed., McGraw-Hill 2006, Table 3.8]
TEST(PublishedFittings, ElbowsBySize) {
  struct Row {
    const char* size;
    const char* kind;
    double k;
  };
  for (const Row& row :
       {Row{"NPS 1/2", "elbow 90 regular screwed", 2.1}, Row{"NPS 1", "elbow 90 long radius screwed", 0.76},
        Row{"NPS 4", "elbow 90 regular flanged", 0.32}, Row{"NPS 10", "elbow 90 long radius flanged", 0.14}}) {
    const double bore = catalogue::pipeSize("steel-b36-sch40", row.size)->bore_m;
    EXPECT_NEAR(catalogue::fittingK(row.kind, bore).value_or(0), row.k, 1e-12) << row.kind;
  }
}

// [published: Washington Administrative Code 51-11C-40337, Table C403.3.7] NPS 4, more than 4400 h, variable: 320 gpm
// = 20.19 L/s.
TEST(PublishedPipes, LargestDesignFlowOfNps4) {
  for (const catalogue::MaximumFlow& row : catalogue::maximumFlows())
    if (row.size == "NPS 4") {
      EXPECT_NEAR(row.flow_m3s[2][1] * 1e3, 20.19, 0.005);
      EXPECT_EQ(quantity::format(row.flow_m3s[2][1], quantity::Quantity::kFlow, quantity::UnitSystem::kIp), "320.0");
      return;
    }
  FAIL() << "no row NPS 4";
}

}  // namespace
}  // namespace ebbline
