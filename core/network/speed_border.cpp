#include "core/network/speed_border.h"

#include <algorithm>
#include <cmath>
#include <limits>

namespace ebbline::network {

namespace {

bool same(const TapPair& a, const TapPair& b) {
  return a.high == b.high && a.low == b.low && a.set_point_pa == b.set_point_pa && a.high_bore_m == b.high_bore_m &&
         a.low_bore_m == b.low_bore_m;
}

bool samePairs(const std::optional<Taps>& taps, const std::vector<TapPair>& pairs) {
  if (!taps || taps->count() != static_cast<int>(pairs.size())) return false;
  for (int i = 0; i < taps->count(); ++i)
    if (!same(taps->pair(i), pairs[i])) return false;
  return true;
}

}  // namespace

void SpeedBorder::setRule(const Network& network, const SpeedRule& rule) {
  active_ = rule.kind == SpeedRule::Kind::kHoldPressure;
  if (!active_) return;
  least_ = rule.minimum_speed * rule.minimum_speed;
  most_ = rule.maximum_speed * rule.maximum_speed;
  if (!samePairs(taps_, rule.taps)) taps_.emplace(network, rule.taps);
}

SpeedStep SpeedBorder::step(double speed_squared, const std::vector<TapResponse>& taps) const {
  constexpr double kFactor = 4;  // largest change of n² in one round
  SpeedStep step{-std::numeric_limits<double>::infinity(), -1};
  for (int i = 0; i < static_cast<int>(taps.size()); ++i) {
    const double lacking = setPoint(i) - taps[i].reading_pa - taps[i].by_step_pa;
    // A tap that the speed does not reach cannot be helped: it asks for all there is, or for nothing.
    double wanted = lacking > 0 ? most_ - speed_squared : least_ - speed_squared;
    if (taps[i].by_speed_squared * most_ > 1e-9 * std::max(std::abs(lacking), std::abs(setPoint(i))))
      wanted = lacking / taps[i].by_speed_squared;
    if (step.governing < 0 || wanted > step.change) step = {wanted, i};
  }
  const double low = std::max(least_, speed_squared / kFactor);
  const double high = std::min(most_, speed_squared * kFactor);
  step.change = std::clamp(speed_squared + step.change, std::min(low, high), high) - speed_squared;
  return step;
}

}  // namespace ebbline::network
