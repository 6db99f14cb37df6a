#include <cmath>
#include <map>
#include <set>
#include <string>

#include <gtest/gtest.h>

#include "core/catalogue/pipe.h"

namespace ebbline::catalogue {
namespace {

double boreMm(const char* series, const char* size) {
  const auto found = pipeSize(series, size);
  EXPECT_TRUE(found) << text::oneLine(found.error());
  return found ? found->bore_m * 1e3 : 0;
}

TEST(PipeSeries, AllSeriesAreThereWithTheirSizes) {
  const std::map<std::string, std::size_t> expected = {
      {"steel-en10255-medium", 13}, {"steel-en10220", 19}, {"steel-b36-sch40", 19}, {"steel-b36-std", 20},
      {"copper-b88-k", 15},         {"copper-b88-l", 15},  {"copper-en1057-x", 12}, {"copper-en1057-y", 10}};
  ASSERT_EQ(pipeSeries().size(), expected.size());
  for (const PipeSeries& series : pipeSeries()) {
    ASSERT_TRUE(expected.count(series.name)) << series.name;
    EXPECT_EQ(series.sizes.size(), expected.at(series.name)) << series.name;
  }
}

TEST(PipeSeries, BoreIsOutsideLessTwoWallsToTheLastPrintedDigit) {
  for (const PipeSeries& series : pipeSeries())
    for (const PipeSize& size : series.sizes)
      EXPECT_NEAR(size.bore_m, size.outside_m - 2 * size.wall_m, 1e-9) << series.name << " " << size.name;
}

TEST(PipeSeries, SizesRiseAndHaveTheirOwnNames) {
  for (const PipeSeries& series : pipeSeries()) {
    std::set<std::string> names;
    double last = 0;
    for (const PipeSize& size : series.sizes) {
      EXPECT_GT(size.bore_m, last) << series.name << " " << size.name;
      EXPECT_GT(size.wall_m, 0) << series.name << " " << size.name;
      last = size.bore_m;
      names.insert(size.name);
    }
    EXPECT_EQ(names.size(), series.sizes.size()) << series.name;
  }
}

TEST(PipeSeries, EverySizeSaysWhereItsNumbersComeFrom) {
  for (const PipeSeries& series : pipeSeries()) {
    EXPECT_FALSE(series.title.empty());
    EXPECT_FALSE(series.roughness_mark.empty()) << series.name;
    EXPECT_FALSE(series.roughness_source.empty()) << series.name;
    for (const PipeSize& size : series.sizes) {
      EXPECT_TRUE(size.mark.find("published") != std::string::npos || size.mark.find("memory") != std::string::npos)
          << series.name << " " << size.name;
      EXPECT_NE(size.source.find('['), std::string::npos) << series.name << " " << size.name;
    }
  }
}

TEST(PipeSeries, RoughnessIsThatOfTheMaterial) {
  EXPECT_DOUBLE_EQ(pipeSize("steel-en10220", "DN 50")->roughness_m, 45e-6);
  EXPECT_DOUBLE_EQ(pipeSize("copper-b88-k", "2 in")->roughness_m, 1.5e-6);
  EXPECT_EQ(findSeries("steel-en10220")->roughness_mark, "published");
  EXPECT_EQ(findSeries("copper-b88-k")->roughness_mark, "memory");
}

TEST(PipeSize, IsFoundAsTheTradeSaysIt) {
  EXPECT_NEAR(boreMm("steel-en10255-medium", "DN 50"), 53.1, 1e-9);
  EXPECT_NEAR(boreMm("steel-en10255-medium", "dn50"), 53.1, 1e-9);
  EXPECT_NEAR(boreMm("steel-b36-sch40", "NPS 2"), 52.5018, 1e-9);
  EXPECT_NEAR(boreMm("steel-b36-sch40", "DN 50"), 52.5018, 1e-9);
  EXPECT_NEAR(boreMm("steel-b36-sch40", "NPS 1-1/4"), 35.052, 1e-9);
  EXPECT_NEAR(boreMm("steel-b36-sch40", "NPS 8"), 202.7174, 1e-9);
  EXPECT_NEAR(boreMm("copper-b88-l", "3/4 in"), 19.939, 1e-9);
  EXPECT_NEAR(boreMm("copper-en1057-x", "22 mm"), 20.2, 1e-9);
  EXPECT_NEAR(boreMm("copper-en1057-y", "22mm"), 19.6, 1e-9);
}

TEST(PipeSize, StandardWallIsSchedule40UpToNps10AndThreeEighthsOfAnInchAbove) {
  for (const PipeSize& size : findSeries("steel-b36-std")->sizes) {
    const auto schedule_40 = pipeSize("steel-b36-sch40", size.name);
    if (size.outside_m < 0.3)
      EXPECT_DOUBLE_EQ(size.bore_m, schedule_40->bore_m) << size.name;
    else
      EXPECT_NEAR(size.wall_m, 0.375 * 0.0254, 1e-12) << size.name;
  }
}

TEST(PipeSize, UnknownNamesAreRefusedWithTheListOfKnownOnes) {
  const auto series = pipeSize("steel-en99", "DN 50");
  ASSERT_FALSE(series);
  EXPECT_EQ(series.error().code, text::Code::kCatalogueUnknownSeries);
  EXPECT_NE(text::remedy(series.error()).find("steel-en10220"), std::string::npos);
  const auto size = pipeSize("steel-en10220", "DN 55");
  ASSERT_FALSE(size);
  EXPECT_EQ(size.error().code, text::Code::kCatalogueUnknownSize);
  EXPECT_EQ(text::sentence(size.error()), "The pipe series steel-en10220 has no size \"DN 55\".");
  EXPECT_NE(text::remedy(size.error()).find("DN 50, DN 65"), std::string::npos);
  EXPECT_FALSE(pipeSize("steel-en10220", ""));
  EXPECT_FALSE(pipeSize("", "DN 50"));
  EXPECT_FALSE(pipeSize("copper-b88-k", std::string(1000, 'x')));
  EXPECT_EQ(findSeries("nothing"), nullptr);
}

TEST(Roughness, TableIsWholeAndMarked) {
  ASSERT_EQ(roughnesses().size(), 9U);
  for (const Roughness& roughness : roughnesses()) {
    EXPECT_GT(roughness.roughness_m, 0) << roughness.material;
    EXPECT_FALSE(roughness.mark.empty()) << roughness.material;
  }
}

TEST(MaximumFlow, FallsWithHoursAndRisesWithSizeAndVariableFlow) {
  double last = 0;
  for (const MaximumFlow& row : maximumFlows()) {
    for (int hours = 0; hours < 3; ++hours) EXPECT_LT(row.flow_m3s[hours][0], row.flow_m3s[hours][1]) << row.size;
    for (int variable = 0; variable < 2; ++variable) {
      EXPECT_GT(row.flow_m3s[0][variable], row.flow_m3s[1][variable]) << row.size;
      EXPECT_GT(row.flow_m3s[1][variable], row.flow_m3s[2][variable]) << row.size;
    }
    EXPECT_GT(row.flow_m3s[0][0], last);
    last = row.flow_m3s[0][0];
    EXPECT_TRUE(pipeSize("steel-b36-sch40", row.size)) << row.size;
  }
  EXPECT_NE(maximumFlowSource().find("published"), std::string::npos);
}

}  // namespace
}  // namespace ebbline::catalogue
