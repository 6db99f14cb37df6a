#pragma once
// Every random test takes its seed from here, prints it, and can be run again with --seed=N.

#include <cstdint>

namespace ebbline::test {

/// The seed of this run: fixed unless --seed=N was given.
std::uint64_t seed();

}  // namespace ebbline::test
