#include <atomic>
#include <stdexcept>
#include <vector>

#include <gtest/gtest.h>

#include "core/parallel/each_index.h"

namespace ebbline::parallel {
namespace {

TEST(EachIndex, CallsEveryIndexOnce) {
  std::vector<int> calls(10'000, 0);
  eachIndex(calls.size(), [&](std::size_t i) { ++calls[i]; });
  for (const int count : calls) ASSERT_EQ(count, 1);
}

TEST(EachIndex, NothingToDoReturnsAtOnce) {
  eachIndex(0, [](std::size_t) { FAIL() << "called for an empty range"; });
}

TEST(EachIndex, ExceptionOfABodyReachesTheCaller) {
  EXPECT_THROW(eachIndex(1000, [](std::size_t i) { if (i == 500) throw std::runtime_error("body"); }),
               std::runtime_error);
}

TEST(EachIndex, SlotsSummedInOrderAreBitIdenticalEachTime) {
  const auto sum = [] {
    std::vector<double> slots(5000);
    eachIndex(slots.size(), [&](std::size_t i) { slots[i] = 1.0 / (1.0 + static_cast<double>(i)); });
    double total = 0;
    for (const double slot : slots) total += slot;
    return total;
  };
  const double first = sum();
  for (int round = 0; round < 20; ++round) ASSERT_EQ(sum(), first);
}

}  // namespace
}  // namespace ebbline::parallel
