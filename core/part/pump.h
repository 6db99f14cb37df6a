#pragma once
// The pump: head and efficiency at reference speed, and the affinity laws for other speeds.

#include <vector>

namespace ebbline::part {

/// Value and first derivative.
struct ValueSlope {
  double value = 0;
  double slope = 0;
};

/// One reading at reference speed, SI.
struct PumpReading {
  double flow_m3s = 0;
  double head_m = 0;
  double efficiency = 0;  ///< 0…1; 0 at the first reading is allowed, all 0 = unknown.
};

/// Head [m] and efficiency against flow at reference speed, and by the affinity laws at any relative speed n:
/// Q ~ n, H ~ n², P ~ n³, efficiency kept. 2 readings: H0 − a Q²; 3: the parabola through them; 4 or more:
/// monotone-preserving cubic (Fritsch & Carlson 1980, from memory). Continued tangentially beyond the data.
class PumpCurve {
 public:
  PumpCurve() = default;
  /// REQUIRES: at least 2 readings, flows strictly rising from ≥ 0, heads > 0 at the first.
  explicit PumpCurve(std::vector<PumpReading> readings);

  /// Head [m] and dH/dQ [m/(m³/s)] at flow [m³/s] and relative speed > 0. Continues past both ends of the data.
  ValueSlope head(double flow_m3s, double speed) const;
  /// Efficiency 0…1 at flow and speed; 0 when unknown.
  double efficiency(double flow_m3s, double speed) const;
  /// Shaft power [W] at flow and speed; finite at zero flow; 0 when efficiency is unknown.
  double shaftPower(double flow_m3s, double speed, double density_kg_m3) const;
  bool hasEfficiency() const;
  /// True if head rises with flow anywhere within the data (two operating points are then possible).
  bool rises() const;
  double lastFlow() const;    ///< Largest flow of the data at reference speed [m³/s].
  double shutOffHead() const; ///< Head at zero flow and reference speed [m].
  const std::vector<PumpReading>& readings() const { return readings_; }

 private:
  std::vector<PumpReading> readings_;
  std::vector<double> head_slope_;        // at the readings, cubic only
  std::vector<double> efficiency_slope_;
  double head_c_[3] = {0, 0, 0};          // parabola: c0 + c1 Q + c2 Q²
  double efficiency_c_[3] = {0, 0, 0};
};

}  // namespace ebbline::part
