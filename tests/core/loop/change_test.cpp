#include "core/loop/change.h"

#include <gtest/gtest.h>

#include "core/loop/file.h"
#include "tests/core/loop/random_loop.h"
#include "tests/support/seed.h"

namespace ebbline::loop {
namespace {

TEST(Change, InverseTakesBackExactlyOrderIncluded) {
  std::mt19937_64 random(ebbline::test::seed());
  int changed = 0;
  for (int i = 0; i < 1500; ++i) {
    const Loop before = test::randomLoop(random);
    const Change change = test::randomChange(before, random);
    Loop loop = before;
    const auto inverse = apply(loop, change);
    ASSERT_TRUE(inverse.has_value());
    const Loop after = loop;
    changed += !(after == before);
    const auto again = apply(loop, *inverse);
    ASSERT_TRUE(again.has_value());
    ASSERT_TRUE(loop == before);
    ASSERT_EQ(writeLoop(loop), writeLoop(before));
    ASSERT_TRUE(apply(loop, *again).has_value());
    ASSERT_TRUE(loop == after);  // redo
  }
  EXPECT_GT(changed, 1000);
}

TEST(Change, SeededFaultOfAForgottenPlaceInTheListIsSeen) {
  // An inverse that puts a removed thing at the end of its list must not pass for the original.
  const Loop before = test::fullLoop();
  Loop loop = before;
  auto inverse = apply(loop, {"Delete", {Remove{before.terminals[0].id}}});
  ASSERT_TRUE(inverse.has_value());
  std::get<Put>(inverse->steps[0]).index = static_cast<std::size_t>(-1);
  ASSERT_TRUE(apply(loop, *inverse).has_value());
  EXPECT_FALSE(loop == before);
}

TEST(Change, FailureInALaterStepLeavesTheLoopUntouched) {
  const Loop before = test::fullLoop();
  const Note note{before.joints[0].id, "an id that a joint has", {}};
  const Note zero{0, "no id", {}};
  const std::vector<Step> ways_to_fail = {Remove{987654}, Put{note}, Put{zero}};
  for (const Step& failing : ways_to_fail) {
    Loop loop = before;
    Terminal moved = before.terminals[1];
    moved.at.x_m += 1;
    const auto result = apply(loop, {"Move", {Remove{before.terminals[0].id}, Put{moved}, PutFluid{}, failing}});
    ASSERT_FALSE(result.has_value());
    EXPECT_EQ(text::severityOf(result.error().code), text::Severity::kFault);
    EXPECT_TRUE(loop == before);
  }
}

TEST(Change, RefusalNamesTheId) {
  Loop loop = test::fullLoop();
  const auto result = apply(loop, {"Delete", {Remove{987654}}});
  ASSERT_FALSE(result.has_value());
  EXPECT_EQ(result.error().code, text::Code::kChangeIdMissing);
  EXPECT_EQ(result.error().place.id, 987654U);
  EXPECT_NE(text::sentence(result.error()).find("987654"), std::string::npos);
}

TEST(Change, PutInsertsAtItsPositionAndReplacesInPlace) {
  Loop loop;
  ASSERT_TRUE(apply(loop, {"", {Put{Note{1, "a", {}}}, Put{Note{2, "b", {}}}, Put{Note{3, "c", {}}, 1}}}).has_value());
  ASSERT_EQ(loop.notes.size(), 3U);
  EXPECT_EQ(loop.notes[1].text, "c");
  ASSERT_TRUE(apply(loop, {"", {Put{Note{3, "d", {}}, 0}}}).has_value());
  EXPECT_EQ(loop.notes[1].text, "d");
}

TEST(Change, ChangesNothingIsTrueOnlyForWhatLeavesTheLoopAsItIs) {
  const Loop loop = test::fullLoop();
  EXPECT_TRUE(changesNothing(loop, {}));
  EXPECT_TRUE(changesNothing(loop, {"", {Put{loop.pumps[0]}}}));
  Pump other = loop.pumps[0];
  other.tag += "x";
  EXPECT_FALSE(changesNothing(loop, {"", {Put{other}}}));
  EXPECT_FALSE(changesNothing(loop, {"", {Remove{987654}}}));
}

TEST(Change, NextFreeIdIsAboveAllInUse) {
  EXPECT_EQ(nextFreeId({}), 1U);
  Loop loop;
  loop.notes.push_back({41, "", {}});
  EXPECT_EQ(nextFreeId(loop), 42U);
}

}  // namespace
}  // namespace ebbline::loop
