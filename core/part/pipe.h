#pragma once
// Straight pipe with its loss coefficients: Δp = (f L/D + ΣK) ρ v|v|/2 [published: Darcy–Weisbach], with f of
// friction.h.

#include "core/part/friction.h"

namespace ebbline::part {

/// What the friction of a pipe depends on outside of the blend. SI.
struct PipeFriction {
  double reynolds_per_flow = 0;  ///< Re = this · |q|                                    [s/m³]
  double rough = 0;              ///< ε/D/3.7
  double friction = 0;           ///< Δp of friction = this · f · q|q|                   [Pa s²/m⁶]
};

/// Where the blend of friction.h must end: f Re² at Re = 4000, and its derivative to Re.
using TurbulentBegin = ValueSlope;

/// A pipe reduced to what its loss depends on.
struct PipeConstants : PipeFriction {
  TurbulentBegin turbulent_begin;
  double quadratic = 0;  ///< Δp of the loss coefficients = this · q|q|          [Pa s²/m⁶]
};

/// REQUIRES: bore, density and viscosity > 0, the others ≥ 0.
PipeConstants pipeConstants(double length_m, double bore_m, double roughness_m, double loss_k, double density_kg_m3,
                            double viscosity_pa_s);

/// The blend of friction.h: f Re² and its derivative to Re. REQUIRES: 2000 ≤ reynolds ≤ 4000.
inline ValueSlope frictionBlend(const TurbulentBegin& end, double reynolds) {
  constexpr double kWidth = kTurbulentBegin - kLaminarEnd;
  constexpr double kBegin = 64 * kLaminarEnd;
  const double t = (reynolds - kLaminarEnd) / kWidth;
  const double rise = end.value - kBegin;
  const double slope_begin = 64 * kWidth;
  const double slope_end = end.slope * kWidth;
  const double c2 = 3 * rise - 2 * slope_begin - slope_end;
  const double c3 = slope_begin + slope_end - 2 * rise;
  return {kBegin + t * (slope_begin + t * (c2 + t * c3)), (slope_begin + t * (2 * c2 + 3 * t * c3)) / kWidth};
}

/// Loss of friction alone [Pa] and its derivative to flow, odd in q; finite slope 128 μ L/(π D⁴) at q = 0.
inline ValueSlope pipeFriction(const PipeFriction& pipe, const TurbulentBegin& end, double flow_m3s,
                               FrictionMemory& memory) {
  const double q = std::abs(flow_m3s);
  const double reynolds = pipe.reynolds_per_flow * q;
  if (reynolds >= kTurbulentBegin) {
    const ColebrookRoot c = colebrookRoot(pipe.rough, kSmoothConstant / reynolds, memory);
    const double per_flow = pipe.friction * q / (c.root * c.root);
    return {per_flow * flow_m3s, 2 * per_flow * c.steepness};
  }
  if (reynolds <= kLaminarEnd) {
    const double slope = pipe.friction * 64 / pipe.reynolds_per_flow;
    return {slope * flow_m3s, slope};
  }
  const ValueSlope blend = frictionBlend(end, reynolds);
  const double scale = pipe.friction / (pipe.reynolds_per_flow * pipe.reynolds_per_flow);
  return {std::copysign(scale * blend.value, flow_m3s), scale * blend.slope * pipe.reynolds_per_flow};
}

inline ValueSlope pipeFriction(const PipeConstants& pipe, double flow_m3s, FrictionMemory& memory) {
  return pipeFriction(pipe, pipe.turbulent_begin, flow_m3s, memory);
}

/// Loss of the whole pipe [Pa] and its derivative to flow.
inline ValueSlope pipeLoss(const PipeConstants& pipe, double flow_m3s, FrictionMemory& memory) {
  ValueSlope loss = pipeFriction(pipe, flow_m3s, memory);
  const double q = std::abs(flow_m3s);
  loss.value += pipe.quadratic * q * flow_m3s;
  loss.slope += 2 * pipe.quadratic * q;
  return loss;
}

}  // namespace ebbline::part
