#pragma once
// An invented building for the tests of the drawing, and invented results on it: flows add up along the tree, pressures
// fall evenly. The drawing must show what results say; whether they are physics is tested elsewhere.

#include "core/loop/loop.h"
#include "core/network/results.h"

namespace ebbline::trial {

/// `floors` levels with `perFloor` terminals each, riser at the left, plant at the lower right.
loop::Loop building(int floors, int perFloor);

/// Every terminal gets `share` of its design flow, but the first is short by 17 %, the second by 8 %, and the last of
/// each even floor is shut.
network::Results results(const loop::Loop& loop, double share);

}  // namespace ebbline::trial
