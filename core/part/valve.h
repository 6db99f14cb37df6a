#pragma once
// Valves: loss by flow coefficient, inherent characteristics and their inverse. Kv in m³/h at 1 bar.
//
//   Δp = (ρ/1000) (q/Kv)² · 1e5 Pa, q in m³/h      [published: IEC 60534-2-1; relative density taken to 1000 kg/m³]

#include <vector>

#include "core/part/value_slope.h"

namespace ebbline::part {

/// Resistance r [Pa s²/m⁶] of Δp = r q|q|, q in m³/s. REQUIRES: kv_m3h > 0.
double kvResistance(double kv_m3h, double density_kg_m3);

/// Kv [m³/h] that has this resistance. REQUIRES: resistance > 0.
double kvOfResistance(double resistance_pa_s2_m6, double density_kg_m3);

/// Δp of a part whose loss is known at one flow: Δp = loss (|q|/flow)^exponent sign(q), and the slope.
/// REQUIRES: coefficient ≥ 0, exponent ≥ 1. Used for coils, plants and strainers told as (q/q0)^m.
ValueSlope powerLoss(double coefficient, double exponent, double flow_m3s);

/// Coefficient of that law. REQUIRES: flow_m3s > 0.
double powerCoefficient(double loss_pa, double flow_m3s, double exponent);

enum class CharacteristicKind { kEqualPercentage, kLinear, kTable };

/// One reading of a table: stroke and Kv/Kvs, both 0…1.
struct CharacteristicReading {
  double stroke = 0;
  double opening = 0;
};

/// Inherent characteristic φ(h) = Kv/Kvs of a control valve against stroke h = 0…1, never falling.
///
/// Equal percentage: φ = R^(h−1) [published: IEC 60534-2-4]. Below stroke kRunToSeat = 0.05 the valve is not
/// controllable; there a cubic with the slope of the curve at its upper end runs to the seat leakage at h = 0
/// (leakage as IEC 60534-4 classes give it; the form of the run is ours, common practice shows such a run without a
/// formula). Linear: φ = leakage + (1 − leakage) h. Table: monotone cubic through the readings, first and last
/// reading held beyond them, never below the leakage.
class Characteristic {
 public:
  Characteristic() = default;
  /// REQUIRES: rangeability > 1, 0 ≤ leakage < 1; table: at least 2 readings, strokes strictly rising, openings
  /// never falling.
  Characteristic(CharacteristicKind kind, double rangeability, double leakage,
                 std::vector<CharacteristicReading> table = {});

  /// φ and dφ/dh at stroke, which is taken into 0…1.
  ValueSlope opening(double stroke) const;
  /// Smallest stroke at which φ reaches `opening`; 1 when it needs more than fully open, 0 when leakage is enough.
  double strokeFor(double opening) const;

  static constexpr double kRunToSeat = 0.05;

 private:
  ValueSlope run(double stroke) const;
  ValueSlope fromTable(double stroke) const;

  CharacteristicKind kind_ = CharacteristicKind::kEqualPercentage;
  double log_rangeability_ = 3.912023005428146;  // ln 50
  double leakage_ = 0;
  std::vector<CharacteristicReading> table_;
  std::vector<double> table_slope_;
};

}  // namespace ebbline::part
