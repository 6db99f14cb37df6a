// Friction factors and handbook pressure drops. Sources stand in the first lines of the tables in tests/data.

#include <cmath>
#include <map>
#include <numbers>

#include <gtest/gtest.h>

#include "core/part/pipe.h"
#include "tests/support/printed.h"
#include "tests/support/table_file.h"

namespace ebbline {
namespace {

TEST(PublishedFriction, LaminarAndColebrookPoints) {
  const quantity::CsvTable table = test::tableFile("friction_factor");
  ASSERT_GE(table.numRows(), 30);
  for (int row = 0; row < table.numRows(); ++row) {
    const double reynolds = table.number(row, "Re");
    const double rough = table.number(row, "eps_over_D");
    EXPECT_NEAR(part::frictionFactor(reynolds, rough).value, table.number(row, "f"), 1e-9) << reynolds << " " << rough;
  }
}

TEST(PublishedFriction, PrintedTable) {
  const quantity::CsvTable table = test::tableFile("friction_factor_published_table");
  ASSERT_GE(table.numRows(), 20);
  for (int row = 0; row < table.numRows(); ++row)
    EXPECT_NEAR(part::frictionFactor(table.number(row, "Re"), table.number(row, "eps_over_D")).value,
                table.number(row, "f_published"), 1e-6);
}

TEST(PublishedFriction, FullyRoughLimit) {
  // 1/√f = 2 log10(3700) at ε/D = 0.001.
  EXPECT_NEAR(part::frictionFactor(1e14, 0.001).value, 0.019635466, 1e-9);
}

/// Head loss in ft per 100 ft, and velocity in ft/s, of 60 °F water in steel of this bore.
struct Handbook {
  double velocity = 0;
  double gradient = 0;
};
Handbook handbook(double bore_in, double flow_gpm) {
  constexpr double kInch = 0.0254;                    // exact
  constexpr double kGallonPerMinute = 6.30901964e-5;  // m³/s, exact
  constexpr double kFoot = 0.3048;                    // exact
  constexpr double kGravity = 9.80665;
  constexpr double kDensity = 999.017;  // 60 °F water, as the table's head tells
  constexpr double kViscosity = 1.12103e-3;
  const double bore = bore_in * kInch;
  const double flow = flow_gpm * kGallonPerMinute;
  part::FrictionMemory memory;
  const part::PipeConstants pipe = part::pipeConstants(100, bore, 0.00015 * kFoot, 0, kDensity, kViscosity);
  const double area = std::numbers::pi / 4 * bore * bore;
  return {flow / area / kFoot, part::pipeLoss(pipe, flow, memory).value / (kDensity * kGravity)};
}

TEST(PublishedFriction, HandbookPressureDrops) {
  const quantity::CsvTable table = test::tableFile("pipe_friction_handbook");
  int agreed = 0;
  for (int row = 0; row < table.numRows(); ++row) {
    const Handbook own = handbook(table.number(row, "ID_in"), table.number(row, "flow_gpm"));
    EXPECT_NEAR(own.gradient, table.number(row, "hf_calc"), test::halfLastDigit(table.text(row, "hf_calc")));
    // The print of NPS 20 at 1000 gpm does not fit its own table: from 1000 to 1800 gpm its loss rises with the power
    // 1.97 of flow, where other neighbours have 1.7 to 1.9. It lies 8 % below; all others must agree.
    const bool misprint = table.text(row, "NPS_in") == "20" && table.number(row, "flow_gpm") == 1000;
    if (misprint) continue;
    const double printed = table.number(row, "hf_ft_per_100ft_pub");
    const double within = 0.01 * printed + test::halfLastDigit(table.text(row, "hf_ft_per_100ft_pub"));
    EXPECT_NEAR(own.gradient, printed, within) << "row " << row + 1;
    ++agreed;
    EXPECT_NEAR(own.velocity, table.number(row, "V_ft_s_pub"),
                std::max(0.002 * own.velocity, test::halfLastDigit(table.text(row, "V_ft_s_pub"))));
  }
  EXPECT_EQ(agreed, table.numRows() - 1);
}

TEST(PublishedFriction, HandbookWorkedExamples) {
  // [published: the same handbook] NPS 4, 100 gpm; NPS 2-1/2, 50 gpm; NPS 16, 2000 gpm; NPS 24, 3000 gpm.
  struct Row {
    double bore_in, flow_gpm, velocity, gradient, digit;
  };
  for (const Row& row : {Row{4.026, 100, 2.52, 0.62, 0.005}, Row{2.469, 50, 3.35, 1.94, 0.005},
                         Row{15.0, 2000, 3.63, 0.248, 0.0005}, Row{22.624, 3000, 2.39, 0.070, 0.0005}}) {
    const Handbook own = handbook(row.bore_in, row.flow_gpm);
    EXPECT_NEAR(own.velocity, row.velocity, 0.0051);
    EXPECT_NEAR(own.gradient, row.gradient, std::max(row.digit, 0.01 * row.gradient)) << row.flow_gpm;
  }
}

}  // namespace
}  // namespace ebbline
