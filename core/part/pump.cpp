#include "core/part/pump.h"

#include <algorithm>
#include <cmath>

#include "core/part/monotone_cubic.h"
#include "core/quantity/quantity.h"

namespace ebbline::part {

namespace {

constexpr double kLeastShareOfBest = 0.05;  // see shaftPower; ours

/// Coefficients of c0 + c1 x + c2 x² through three points (Newton's divided differences).
void throughThree(const std::vector<double>& x, const std::vector<double>& y, double (&c)[3]) {
  const double d01 = (y[1] - y[0]) / (x[1] - x[0]);
  const double d12 = (y[2] - y[1]) / (x[2] - x[1]);
  c[2] = (d12 - d01) / (x[2] - x[0]);
  c[1] = d01 - c[2] * (x[0] + x[1]);
  c[0] = y[0] - x[0] * (c[1] + c[2] * x[0]);
}

ValueSlope parabola(const double (&c)[3], double x) {
  return {c[0] + x * (c[1] + c[2] * x), c[1] + 2 * c[2] * x};
}

ValueSlope cubic(const std::vector<double>& x, const std::vector<double>& y, const std::vector<double>& s, double at) {
  std::size_t i = 1;
  while (i + 1 < x.size() && x[i] < at) ++i;
  return cubicBetween(x[i - 1], y[i - 1], s[i - 1], x[i], y[i], s[i], at);
}

ValueSlope along(ValueSlope from, double distance) {
  return {from.value + from.slope * distance, from.slope};
}

}  // namespace

PumpCurve::PumpCurve(std::vector<PumpReading> readings) : readings_(std::move(readings)) {
  for (const PumpReading& reading : readings_) {
    flow_.push_back(reading.flow_m3s);
    head_.push_back(reading.head_m);
    efficiency_.push_back(reading.efficiency);
    if (reading.efficiency <= best_efficiency_) continue;
    best_efficiency_ = reading.efficiency;
    best_flow_ = reading.flow_m3s;
  }
  if (readings_.size() == 2) {
    const double squares = flow_[1] * flow_[1] - flow_[0] * flow_[0];
    head_c_[2] = (head_[1] - head_[0]) / squares;
    head_c_[0] = head_[0] - head_c_[2] * flow_[0] * flow_[0];
    efficiency_c_[1] = (efficiency_[1] - efficiency_[0]) / (flow_[1] - flow_[0]);
    efficiency_c_[0] = efficiency_[0] - efficiency_c_[1] * flow_[0];
  } else if (readings_.size() == 3) {
    throughThree(flow_, head_, head_c_);
    throughThree(flow_, efficiency_, efficiency_c_);
  } else if (readings_.size() > 3) {
    head_slope_ = monotoneSlopes(flow_, head_);
    efficiency_slope_ = monotoneSlopes(flow_, efficiency_);
  }
}

ValueSlope PumpCurve::headAtReference(double flow) const {
  if (readings_.empty()) return {};
  const bool curve = head_slope_.empty();
  const double last = flow_.back();
  if (flow > last) {
    ValueSlope end = curve ? parabola(head_c_, last) : ValueSlope{head_.back(), head_slope_.back()};
    end.slope = std::min(end.slope, 0.0);
    return along(end, flow - last);
  }
  if (curve && flow >= 0) return parabola(head_c_, flow);
  if (curve) {  // below zero: rising head, by the same quadratic term whatever its sign
    const double slope = std::min(head_c_[1], 0.0);
    const double square = std::abs(head_c_[2]);
    return {head_c_[0] + flow * (slope + square * flow), slope + 2 * square * flow};
  }
  if (flow >= flow_.front()) return cubic(flow_, head_, head_slope_, flow);
  ValueSlope begin{head_.front(), head_slope_.front()};
  begin.slope = std::min(begin.slope, 0.0);
  return along(begin, flow - flow_.front());
}

ValueSlope PumpCurve::efficiencyAtReference(double flow) const {
  if (readings_.empty()) return {};
  if (efficiency_slope_.empty()) return parabola(efficiency_c_, flow);
  if (flow < flow_.front()) return along({efficiency_.front(), efficiency_slope_.front()}, flow - flow_.front());
  if (flow > flow_.back()) return along({efficiency_.back(), efficiency_slope_.back()}, flow - flow_.back());
  return cubic(flow_, efficiency_, efficiency_slope_, flow);
}

ValueSlope PumpCurve::head(double flow_m3s, double speed) const {
  const ValueSlope reference = headAtReference(flow_m3s / speed);
  return {speed * speed * reference.value, speed * reference.slope};
}

double PumpCurve::efficiency(double flow_m3s, double speed) const {
  return std::clamp(efficiencyAtReference(flow_m3s / speed).value, 0.0, 1.0);
}

double PumpCurve::shaftPower(double flow_m3s, double speed, double density_kg_m3) const {
  if (!hasEfficiency()) return 0;
  const double flow = std::max(0.0, flow_m3s / speed);
  const double weight = density_kg_m3 * quantity::kGravity * speed * speed * speed;
  const double head = std::max(0.0, headAtReference(flow).value);
  const double small = 1e-9 * flow_.back();
  if (flow <= small) {
    // Q/η → 1/η'(0) where η(0) = 0; with an efficiency above 0 at rest the water takes no power there.
    const double at_rest = efficiencyAtReference(0).value;
    if (at_rest > 1e-9 * best_efficiency_) return weight * flow * head / at_rest;
    const double slope = efficiencyAtReference(0).slope;
    return weight * head / std::max(slope, kLeastShareOfBest * best_efficiency_ / best_flow_);
  }
  double efficiency = std::min(1.0, efficiencyAtReference(flow).value);
  // Up to the best flow not below the straight line through a twentieth of the best, past it not below the twentieth.
  efficiency = std::max(efficiency, kLeastShareOfBest * best_efficiency_ * std::min(1.0, flow / best_flow_));
  return weight * flow * head / efficiency;
}

bool PumpCurve::hasEfficiency() const {
  return best_efficiency_ > 0 && best_flow_ > 0;
}

bool PumpCurve::rises() const {
  if (readings_.size() < 2) return false;
  if (!head_slope_.empty())
    return std::adjacent_find(head_.begin(), head_.end(), [](double a, double b) { return b > a; }) != head_.end();
  // Rounding of the coefficients must not flag a curve whose slope at rest is 0.
  const double least = 1e-9 * std::abs(head_c_[0]) / flow_.back();
  return parabola(head_c_, std::max(0.0, flow_.front())).slope > least || parabola(head_c_, flow_.back()).slope > least;
}

double PumpCurve::lastFlow() const {
  return flow_.empty() ? 0 : flow_.back();
}

double PumpCurve::shutOffHead() const {
  return headAtReference(0).value;
}

}  // namespace ebbline::part
