#pragma once
// The pump: head and efficiency at reference speed, and the affinity laws for other speeds.

#include <vector>

#include "core/part/value_slope.h"

namespace ebbline::part {

/// One reading at reference speed, SI.
struct PumpReading {
  double flow_m3s = 0;
  double head_m = 0;
  double efficiency = 0;  ///< 0…1; 0 at the first reading is allowed, all 0 = unknown.
};

/// Head [m] and efficiency against flow at reference speed, and by the affinity laws at any relative speed n:
/// Q ~ n, H ~ n², P ~ n³, efficiency kept. 2 readings: H0 − a Q²; 3: the parabola through them; 4 or more:
/// monotone-preserving cubic (Fritsch & Carlson 1980, from memory). Continued tangentially beyond the data, and for
/// flows below zero so that head never falls as flow turns back. Efficiency: 2 readings a straight line, 3 a parabola,
/// 4 or more the monotone cubic.
class PumpCurve {
 public:
  PumpCurve() = default;
  /// REQUIRES: at least 2 readings, flows strictly rising from ≥ 0, heads > 0 at the first.
  explicit PumpCurve(std::vector<PumpReading> readings);

  /// Head [m] and dH/dQ [m/(m³/s)] at flow [m³/s] and relative speed > 0. Continues past both ends of the data.
  ValueSlope head(double flow_m3s, double speed) const;
  /// Efficiency 0…1 at flow and speed; 0 when unknown.
  double efficiency(double flow_m3s, double speed) const;
  /// Shaft power [W] at flow and speed, ρ g Q H/η; 0 when efficiency is unknown. Finite at zero flow: where efficiency
  /// is 0 at zero flow its limit is used. Past the best flow efficiency counts as a twentieth of its best at least, so
  /// that power stays finite beyond the data; such points are marked in results.
  double shaftPower(double flow_m3s, double speed, double density_kg_m3) const;
  bool hasEfficiency() const;
  /// True if head rises with flow anywhere within the data (two operating points are then possible).
  bool rises() const;
  double lastFlow() const;     ///< Largest flow of the data at reference speed [m³/s].
  double shutOffHead() const;  ///< Head at zero flow and reference speed [m].
  const std::vector<PumpReading>& readings() const { return readings_; }

 private:
  ValueSlope headAtReference(double flow_m3s) const;
  ValueSlope efficiencyAtReference(double flow_m3s) const;

  std::vector<PumpReading> readings_;
  std::vector<double> flow_;
  std::vector<double> head_;
  std::vector<double> head_slope_;  // at the readings, cubic only
  std::vector<double> efficiency_;
  std::vector<double> efficiency_slope_;
  double head_c_[3] = {0, 0, 0};  // parabola: c0 + c1 Q + c2 Q²
  double efficiency_c_[3] = {0, 0, 0};
  double best_efficiency_ = 0;
  double best_flow_ = 0;
};

}  // namespace ebbline::part
