// The same campaign on a solver built with one deliberate fault: it must not pass. Compiled once per fault
// (EBBLINE_FAULT_NAME), linked with a copy of the network module that has it; the product's own library never has.

#include <gtest/gtest.h>

#include <iostream>

#include "tests/support/campaign.h"
#include "tests/support/seed.h"

namespace ebbline::test {
namespace {

TEST(SeededFault, IsCaughtByTheCampaign) {
  const Tally tally = runCampaign(seed(), 60);
  std::cout << "fault in the " EBBLINE_FAULT_NAME ":\n" << tally.print();
  // Not one loop by luck: a good part of them must speak.
  EXPECT_GT(tally.failures(), tally.loops / 5);
}

}  // namespace
}  // namespace ebbline::test
