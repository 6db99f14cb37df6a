#include <cstdlib>
#include <iostream>
#include <string_view>

#include <gtest/gtest.h>

#include "tests/support/seed.h"

namespace ebbline::test {
namespace {
std::uint64_t run_seed = 20240229;
}
std::uint64_t seed() { return run_seed; }
}  // namespace ebbline::test

int main(int argc, char** argv) {
  testing::InitGoogleTest(&argc, argv);
  for (int i = 1; i < argc; ++i) {
    const std::string_view argument = argv[i];
    if (argument.starts_with("--seed=")) ebbline::test::run_seed = std::strtoull(argv[i] + 7, nullptr, 10);
  }
  std::cout << "seed " << ebbline::test::run_seed << " (repeat with --seed=N)\n";
  return RUN_ALL_TESTS();
}
