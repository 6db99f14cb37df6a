#pragma once
// The speed as one more unknown of Newton's rounds: x = n² is chosen so that the governing tap reads its set-point.
// Internal to core/network.

#include <optional>
#include <vector>

#include "core/network/edge_law.h"
#include "core/network/tap.h"

namespace ebbline::network {

/// Step of x and which tap asked for it.
struct SpeedStep {
  double change = 0;
  int governing = -1;
};

/// One tap in a round: its reading, and how the reading moves with the plain step and with x.
struct TapResponse {
  double reading_pa = 0;
  double by_step_pa = 0;
  double by_speed_squared = 0;
};

/// Bounds and choice of the step; holds no state of the rounds.
class SpeedBorder {
 public:
  /// Looks the taps up. Keeps them when the rule is the same as before.
  void setRule(const Network& network, const SpeedRule& rule);
  bool active() const { return active_; }
  const Taps& taps() const { return *taps_; }
  double least() const { return least_; }
  double most() const { return most_; }
  double setPoint(int tap) const { return taps_->pair(tap).set_point_pa; }

  /// The largest step that some tap asks for (the lowest speed that satisfies all), within a factor of 4 and the
  /// bounds.
  SpeedStep step(double speed_squared, const std::vector<TapResponse>& taps) const;

 private:
  bool active_ = false;
  double least_ = 0;
  double most_ = 1;
  std::optional<Taps> taps_;
};

}  // namespace ebbline::network
