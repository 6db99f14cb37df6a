#pragma once
// An invented campus of any size, for samples, benchmarks and tests. Nothing in it is a real building; all numbers are
// invented (demo only) unless a mark says otherwise.

#include "core/loop/loop.h"

namespace ebbline::loop {

inline constexpr int kMostCampusTerminals = 100'000;

/// A direct-return chilled-water loop: plant at the lower right, trunk upwards at the left, one row of buildings per
/// trunk joint, in each building a riser with floors of up to ten terminals. Pipes are sized for a friction gradient,
/// valves for a pressure drop, presettings so that every terminal has its design flow when the sensor at the end of
/// the last riser reads its set-point; the pump has a tenth more head than that needs. The same number gives the same
/// loop on every machine. `terminals` is taken into 1 … kMostCampusTerminals.
Loop campus(int terminals);

}  // namespace ebbline::loop
