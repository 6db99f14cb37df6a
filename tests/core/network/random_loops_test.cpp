// The campaign: random loops, sound by construction, must all be solved. --loops=N or EBBLINE_LOOPS=N for a long run.

#include <gtest/gtest.h>

#include <cstdlib>
#include <fstream>
#include <iostream>
#include <string>

#include "tests/support/campaign.h"
#include "tests/support/seed.h"

namespace ebbline::test {
namespace {

// Number of loops: from the command line (read back from the system, as test_main knows only the seed), else the
// environment, else 2,000.
int numLoops() {
  std::ifstream line("/proc/self/cmdline");
  for (std::string word; std::getline(line, word, '\0');)
    if (word.rfind("--loops=", 0) == 0) return std::atoi(word.c_str() + 8);
  const char* set = std::getenv("EBBLINE_LOOPS");
  return set ? std::atoi(set) : 2000;
}

TEST(RandomLoops, AllSolvedBalancedAndConfirmedByHardyCross) {
  const int loops = numLoops();
  const Tally tally = runCampaign(seed(), loops);
  std::cout << tally.print();
  EXPECT_EQ(tally.loops, loops);
  EXPECT_EQ(tally.refused, 0);
  EXPECT_EQ(tally.unconverged, 0);
  EXPECT_EQ(tally.slow, 0);
  EXPECT_EQ(tally.flow, 0);
  EXPECT_EQ(tally.pressure, 0);
  EXPECT_EQ(tally.request, 0);
  EXPECT_EQ(tally.control, 0);
  EXPECT_GE(tally.agreed, loops * 95 / 100);
  int skipped = 0;
  for (const auto& [why, count] : tally.not_compared) skipped += count;
  EXPECT_LE(skipped, loops / 100) << "too many loops without a comparison of the methods";
  EXPECT_GE(tally.kinds.size(), 3U) << "trees, rings and reverse return must all be drawn";
}

}  // namespace
}  // namespace ebbline::test
