#include "core/loop/campus.h"

#include <algorithm>
#include <ctime>
#include <map>
#include <set>

#include <gtest/gtest.h>

#include "core/catalogue/pipe.h"
#include "core/loop/check.h"
#include "core/loop/file.h"

namespace ebbline::loop {
namespace {

const int kSizes[] = {1, 2, 6, 7, 24, 59, 60, 61, 250, 1000, 1001, 3333};

TEST(Campus, HasTheTerminalsAskedForAndNothingToRemark) {
  for (const int terminals : kSizes) {
    const Loop loop = campus(terminals);
    EXPECT_EQ(loop.terminals.size(), static_cast<std::size_t>(terminals));
    for (const text::Remark& remark : checkContent(loop)) ADD_FAILURE() << terminals << ": " << text::oneLine(remark);
  }
  EXPECT_EQ(campus(-5).terminals.size(), 1U);
}

TEST(Campus, IsTheSameEveryTimeAndSurvivesTheFile) {
  for (const int terminals : kSizes) {
    const Loop loop = campus(terminals);
    EXPECT_TRUE(campus(terminals) == loop);
    const std::string text = writeLoop(loop);
    const Reading reading = readLoop(text);
    EXPECT_TRUE(reading.remarks.empty());
    EXPECT_TRUE(reading.loop == loop);
    EXPECT_EQ(writeLoop(reading.loop), text);
  }
}

TEST(Campus, PairedRunsFormATreeFromTheFoot) {
  const Loop loop = campus(777);
  std::map<Id, Id> parent;
  for (const PairedRun& run : loop.paired_runs) EXPECT_TRUE(parent.emplace(run.to, run.from).second);
  const Id foot = loop.pipe_runs.front().to.joint;
  for (const Terminal& terminal : loop.terminals) {
    EXPECT_EQ(terminal.from.joint, terminal.to.joint);
    Id at = terminal.from.joint;
    int steps = 0;
    while (at != foot && steps++ < 1000) at = parent.at(at);
    EXPECT_EQ(at, foot);
  }
}

TEST(Campus, NothingIsDrawnUponAnotherThing) {
  for (const int terminals : {7, 250, 1001}) {
    const Loop loop = campus(terminals);
    std::set<std::pair<double, double>> places;
    for (const Joint& joint : loop.joints) EXPECT_TRUE(places.insert({joint.at.x_m, joint.at.y_m}).second);
    for (const Terminal& terminal : loop.terminals)
      EXPECT_TRUE(places.insert({terminal.at.x_m, terminal.at.y_m}).second);
    for (const Plant& plant : loop.plants) EXPECT_TRUE(places.insert({plant.at.x_m, plant.at.y_m}).second);
  }
}

TEST(Campus, EverySizeStandsInTheCatalogueOrIsTyped) {
  const Loop loop = campus(20000);
  bool beyond_tables = false;
  for (const PairedRun& run : loop.paired_runs) {
    beyond_tables |= run.pipe.bore_mm.has_value();
    if (!run.pipe.bore_mm) {
      EXPECT_TRUE(catalogue::pipeSize(run.pipe.series, run.pipe.size).has_value());
    }
  }
  EXPECT_TRUE(beyond_tables);
}

TEST(Campus, PumpHasTheFlowOfAllTerminals) {
  const Loop loop = campus(250);
  double sum = 0;
  for (const Terminal& terminal : loop.terminals) sum += terminal.design_flow_l_s;
  EXPECT_NEAR(loop.pumps[0].curve[3].flow_l_s, sum, 0.006);
  EXPECT_EQ(loop.control.sensors, std::vector<Id>{loop.sensors[0].id});
}

TEST(Campus, TenThousandTerminalsOpenAndSaveInASecond) {
  const Loop loop = campus(10000);
  // Processor time, so that what else the machine does has no say.
  const std::clock_t start = std::clock();
  const std::string text = writeLoop(loop);
  const std::clock_t written = std::clock();
  const Reading reading = readLoop(text);
  const std::clock_t read = std::clock();
  const auto seconds = [](std::clock_t from, std::clock_t to) {
    return static_cast<double>(to - from) / CLOCKS_PER_SEC;
  };
  std::printf("10,000 terminals, %.1f MB: save %.3f s, open %.3f s\n", static_cast<double>(text.size()) / 1e6,
              seconds(start, written), seconds(written, read));
  EXPECT_TRUE(reading.loop == loop);
#if defined(__SANITIZE_ADDRESS__) || defined(__SANITIZE_THREAD__)
  GTEST_SKIP() << "times under a sanitizer mean nothing";
#endif
  EXPECT_LT(seconds(start, written), 1.0);
  EXPECT_LT(seconds(written, read), 1.0);
}

TEST(Campus, LargestIsWithinTheSizeThatIsRead) {
  const Loop loop = campus(kMostCampusTerminals);
  const std::string text = writeLoop(loop);
  EXPECT_LT(text.size(), kMostFileBytes);
  EXPECT_TRUE(readLoop(text).loop == loop);
}

}  // namespace
}  // namespace ebbline::loop
