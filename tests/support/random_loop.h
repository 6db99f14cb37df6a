#pragma once
// Random loops that are sound by construction: whatever the numbers, a flow exists and is unique. All data invented.

#include <cstdint>
#include <string>

#include "core/loop/loop.h"

namespace ebbline::test {

/// One document with one load state, and what kind it is, for printing.
struct RandomLoop {
  loop::Loop loop;   ///< load_states has exactly one entry.
  std::string kind;  ///< "tree", "ring" or "reverse return", with what is special about it.
};

/// The loop of `number` under `seed`: the same arguments give the same loop. 2 to 120 terminals; trees, rings and
/// reverse return; known-loss and sized pipes; requests, positions and mixed; shut valves; one or two pumps; fixed
/// speed or pressure held at the pump, the headers or one or two field sensors.
RandomLoop randomLoop(std::uint64_t seed, int number);

}  // namespace ebbline::test
