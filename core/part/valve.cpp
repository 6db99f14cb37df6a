#include "core/part/valve.h"

#include <algorithm>
#include <cmath>

#include "core/part/monotone_cubic.h"

namespace ebbline::part {

namespace {

constexpr double kSecondsPerHour = 3600;
constexpr double kBarPa = 1e5;
constexpr double kReferenceDensity = 1000;  // kg/m³, the convention of valve.h

}  // namespace

double kvResistance(double kv_m3h, double density_kg_m3) {
  const double flow_at_one_bar = kv_m3h / kSecondsPerHour;
  return density_kg_m3 / kReferenceDensity * kBarPa / (flow_at_one_bar * flow_at_one_bar);
}

double kvOfResistance(double resistance_pa_s2_m6, double density_kg_m3) {
  return kSecondsPerHour * std::sqrt(density_kg_m3 / kReferenceDensity * kBarPa / resistance_pa_s2_m6);
}

ValueSlope powerLoss(double coefficient, double exponent, double flow_m3s) {
  const double q = std::abs(flow_m3s);
  if (exponent == 2) return {coefficient * q * flow_m3s, 2 * coefficient * q};
  if (exponent == 1) return {coefficient * flow_m3s, coefficient};
  const double per_flow = q > 0 ? coefficient * std::pow(q, exponent - 1) : 0;
  return {per_flow * flow_m3s, exponent * per_flow};
}

double powerCoefficient(double loss_pa, double flow_m3s, double exponent) {
  return loss_pa / std::pow(flow_m3s, exponent);
}

Characteristic::Characteristic(CharacteristicKind kind, double rangeability, double leakage,
                               std::vector<CharacteristicReading> table)
    : kind_(kind), log_rangeability_(std::log(rangeability)), leakage_(leakage), table_(std::move(table)) {
  if (kind_ != CharacteristicKind::kTable) return;
  std::vector<double> x;
  std::vector<double> y;
  for (const CharacteristicReading& reading : table_) {
    x.push_back(reading.stroke);
    y.push_back(reading.opening);
  }
  table_slope_ = monotoneSlopes(x, y);
}

/// Equal percentage below the controllable range.
ValueSlope Characteristic::run(double stroke) const {
  const double end = std::exp(log_rangeability_ * (kRunToSeat - 1));
  if (end <= leakage_) return {leakage_, 0};
  const double mean_slope = (end - leakage_) / kRunToSeat;
  return cubicBetween(0, leakage_, mean_slope, kRunToSeat, end, end * log_rangeability_, stroke);
}

ValueSlope Characteristic::fromTable(double stroke) const {
  if (stroke <= table_.front().stroke) return {table_.front().opening, 0};
  if (stroke >= table_.back().stroke) return {table_.back().opening, 0};
  std::size_t i = 1;
  while (table_[i].stroke < stroke) ++i;
  return cubicBetween(table_[i - 1].stroke, table_[i - 1].opening, table_slope_[i - 1], table_[i].stroke,
                      table_[i].opening, table_slope_[i], stroke);
}

ValueSlope Characteristic::opening(double stroke) const {
  const double h = std::clamp(stroke, 0.0, 1.0);
  ValueSlope phi;
  switch (kind_) {
    case CharacteristicKind::kLinear:
      return {leakage_ + (1 - leakage_) * h, 1 - leakage_};
    case CharacteristicKind::kTable:
      phi = fromTable(h);
      break;
    case CharacteristicKind::kEqualPercentage: {
      if (h < kRunToSeat) return run(h);
      const double value = std::exp(log_rangeability_ * (h - 1));
      phi = {value, value * log_rangeability_};
      break;
    }
  }
  return phi.value < leakage_ ? ValueSlope{leakage_, 0} : phi;
}

double Characteristic::strokeFor(double wanted) const {
  if (!(wanted > opening(0).value)) return 0;
  if (wanted >= opening(1).value) return 1;
  if (kind_ == CharacteristicKind::kLinear) return (wanted - leakage_) / (1 - leakage_);
  if (kind_ == CharacteristicKind::kEqualPercentage) {
    const double stroke = 1 + std::log(wanted) / log_rangeability_;
    if (stroke >= kRunToSeat) return stroke;
  }
  double low = 0;
  double high = 1;
  for (int i = 0; i < 60; ++i) {  // never falling, so halving always closes in
    const double middle = 0.5 * (low + high);
    (opening(middle).value < wanted ? low : high) = middle;
  }
  return high;
}

}  // namespace ebbline::part
