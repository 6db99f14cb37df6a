#pragma once
// From load states and the control of the document to a Request.

#include <vector>

#include "core/network/solver.h"

namespace ebbline::network {

/// What one terminal is told, in percent of its design flow (kRequest) or of its stroke (kPosition).
struct Share {
  loop::DemandKind kind = loop::DemandKind::kRequest;
  double percent = 100;
  bool operator==(const Share&) const = default;
};

/// Sum of the terminals' design flows [m³/s].
double designFlow(const Network& network);

/// Shares of a load state of the document; nullptr: every terminal asks for its design flow.
/// REQUIRES: `network` was compiled from `loop`.
std::vector<Share> sharesOf(const loop::Loop& loop, const Network& network, const loop::LoadState* state);

/// The request that tells each terminal its share.
/// REQUIRES: one share per Network::terminals.
Request requestOf(const Network& network, const std::vector<Share>& shares, const SpeedRule& speed);

/// The request of a load state (nullptr: every terminal asks for its design flow) under the loop's control.
/// REQUIRES: `network` was compiled from `loop`.
Request requestOf(const loop::Loop& loop, const Network& network, const loop::LoadState* state);

/// Only the speed rule of the loop's control, for callers that set the terminals themselves.
SpeedRule speedRuleOf(const loop::Loop& loop, const Network& network);

}  // namespace ebbline::network
