#pragma once
// Darcy friction factor of a round pipe against Reynolds number and relative roughness ε/D.
//
//   Re ≤ 2000   f = 64/Re                                             [published: Hagen–Poiseuille]
//   Re ≥ 4000   1/√f = −2 log10(ε/D/3.7 + 2.51/(Re √f))               [published: Colebrook, J. ICE 11, 1939]
//   between     f Re² (which is proportional to the loss) is the cubic in Re that meets value and slope at both ends
//
// No correlation is authoritative between 2000 and 4000 (Moody 1944 leaves a critical zone; from memory). The blend
// there is ours and has no physical authority: it is chosen only because the loss then rises strictly with flow and
// loss and slope are continuous, which Newton's method needs.
//
// Colebrook is solved to machine precision. With x = 1/√f, a = ε/D/3.7, b = 2.51/Re the root of x + 2 log10(a + b x)
// is found by Newton. The logarithm is taken from the one before by a short series while its argument changes by
// less than 12 %, so that repeated evaluations near each other need no logarithm at all.

#include <cmath>

#include "core/part/value_slope.h"

namespace ebbline::part {

inline constexpr double kLaminarEnd = 2000;       ///< Reynolds number where 64/Re ends. [common practice]
inline constexpr double kTurbulentBegin = 4000;   ///< Reynolds number where Colebrook begins. [common practice]
inline constexpr double kRoughnessDivisor = 3.7;  ///< [published: Colebrook 1939]
inline constexpr double kSmoothConstant = 2.51;   ///< [published: Colebrook 1939]
inline constexpr double kTwoOverLn10 = 0.86858896380650365530;  // 2/ln 10: 2 log10(y) = kTwoOverLn10 · ln y

/// What one pipe remembers between evaluations. Only speed depends on it, not the answer (beyond 1e-12 relative).
struct FrictionMemory {
  double root = 0;    ///< Last 1/√f; 0 = nothing remembered.
  double at = 0;      ///< Argument of the last logarithm taken …
  double log_at = 0;  ///< … and its natural logarithm.
};

/// Natural logarithm of y > 0 and 1/y, the logarithm from the remembered one by
/// ln(y/y0) = 2 artanh((y − y0)/(y + y0)) when near. One division serves both.
struct LogAndInverse {
  double log = 0;
  double inverse = 0;
};
inline LogAndInverse logNear(double y, FrictionMemory& memory) {
  const double sum = y + memory.at;
  const double both = 1 / (y * sum);
  const double inverse = both * sum;
  const double s = (y - memory.at) * both * y;
  const double s2 = s * s;
  if (s2 < 0.0036)  // next term 2 s^11/11 < 7e-15
    return {memory.log_at + 2 * s * (1 + s2 * (1.0 / 3 + s2 * (1.0 / 5 + s2 * (1.0 / 7 + s2 * (1.0 / 9))))), inverse};
  memory.at = y;
  memory.log_at = std::log(y);
  return {memory.log_at, inverse};
}

/// 1/√f of Colebrook, and what slopes need: `steepness` = 1/(1 + (2/ln 10) b/(a + b x)), which makes
/// d(f q²)/dq = 2 f q · steepness.
struct ColebrookRoot {
  double root = 0;
  double steepness = 1;
};

/// `a` = ε/D/3.7 ≥ 0, `b` = 2.51/Re > 0.
///
/// Chebyshev's third-order step on g(x) = x + c ln(a + b x), c = 2/ln 10: with s = c b/(a + b x) the derivatives are
/// 1 + s, −s²/c and 2 s³/c². The error left is below s³/(3 c² (1 + s)) times the cube of the change: under 1e-12
/// where s = 0.12 (smooth pipes) and 2e-11 where s = 0.5, once the change is under 1e-3. A remembered root nearby then
/// costs one evaluation.
inline ColebrookRoot colebrookRoot(double a, double b, FrictionMemory& memory) {
  constexpr double kSmallChange = 1e-3;
  // First guess: the root with x = 8 put into the logarithm; any guess in reach converges, the function is concave.
  double x = memory.root > 0 ? memory.root : -kTwoOverLn10 * std::log(a + 8 * b);
  if (!(x > 0.5)) x = 0.5;
  double steepness = 1;
  for (int i = 0; i < 40; ++i) {
    const double y = a + b * x;
    const LogAndInverse near = logNear(y, memory);
    const double share = kTwoOverLn10 * b * near.inverse;
    steepness = 1 / (1 + share);
    const double newton = -(x + kTwoOverLn10 * near.log) * steepness;
    const double bend = share * share * steepness / kTwoOverLn10;
    double change = newton * (1 + 0.5 * newton * bend);
    if (!(x + change > 0)) change = -0.5 * x;
    x += change;
    steepness *= 1 + bend * change;  // what the change does to s, to first order
    if (std::abs(change) < kSmallChange) break;
  }
  memory.root = x;
  return {x, steepness};
}

/// Friction factor and its derivative to Re. REQUIRES: reynolds > 0, relative_roughness ≥ 0.
ValueSlope frictionFactor(double reynolds, double relative_roughness);

}  // namespace ebbline::part
