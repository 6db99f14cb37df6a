#pragma once
// From load states and the control of the document to a Request.

#include "core/network/solver.h"

namespace ebbline::network {

/// The request of a load state (nullptr: every terminal asks for its design flow) under the loop's control.
/// REQUIRES: `network` was compiled from `loop`.
Request requestOf(const loop::Loop& loop, const Network& network, const loop::LoadState* state);

/// Only the speed rule of the loop's control, for callers that set the terminals themselves.
SpeedRule speedRuleOf(const loop::Loop& loop, const Network& network);

}  // namespace ebbline::network
