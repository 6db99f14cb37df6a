#include "core/part/pipe.h"

#include <numbers>

namespace ebbline::part {

namespace {

/// f Re² at Re = 4000 and its slope: where the blend must end.
ValueSlope turbulentBegin(double rough) {
  FrictionMemory memory;
  const ColebrookRoot c = colebrookRoot(rough, kSmoothConstant / kTurbulentBegin, memory);
  const double factor = 1 / (c.root * c.root);
  return {factor * kTurbulentBegin * kTurbulentBegin, 2 * factor * kTurbulentBegin * c.steepness};
}

}  // namespace

PipeConstants pipeConstants(double length_m, double bore_m, double roughness_m, double loss_k, double density_kg_m3,
                            double viscosity_pa_s) {
  const double area = std::numbers::pi / 4 * bore_m * bore_m;
  const double dynamic = 0.5 * density_kg_m3 / (area * area);  // ρ v²/2 = dynamic · q²
  PipeConstants pipe;
  pipe.reynolds_per_flow = density_kg_m3 * bore_m / (viscosity_pa_s * area);
  pipe.rough = roughness_m / bore_m / kRoughnessDivisor;
  pipe.friction = length_m / bore_m * dynamic;
  pipe.quadratic = loss_k * dynamic;
  pipe.turbulent_begin = turbulentBegin(pipe.rough);
  return pipe;
}

ValueSlope frictionFactor(double reynolds, double relative_roughness) {
  if (reynolds <= kLaminarEnd) return {64 / reynolds, -64 / (reynolds * reynolds)};
  const double rough = relative_roughness / kRoughnessDivisor;
  const auto fromLoss = [&](ValueSlope loss) {  // f = g/Re², f' = g'/Re² − 2 g/Re³
    const double squared = reynolds * reynolds;
    return ValueSlope{loss.value / squared, loss.slope / squared - 2 * loss.value / (squared * reynolds)};
  };
  if (reynolds < kTurbulentBegin) {
    return fromLoss(frictionBlend(turbulentBegin(rough), reynolds));
  }
  FrictionMemory memory;
  const ColebrookRoot c = colebrookRoot(rough, kSmoothConstant / reynolds, memory);
  const double factor = 1 / (c.root * c.root);
  return {factor, 2 * factor / reynolds * (c.steepness - 1)};
}

}  // namespace ebbline::part
