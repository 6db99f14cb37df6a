#include "core/fluid/fluid.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include "core/fluid/glycol.h"
#include "core/fluid/iapws.h"
#include "core/quantity/quantity.h"

namespace ebbline::fluid {
namespace {

using quantity::Quantity;
using text::Code;
using text::Remark;

constexpr double kZeroCelsius = 273.15;  // K, exact
constexpr double kFadeFraction = 0.1;    // of glycol; where the correction to pure water ends, see fluid.h

std::string words(double base_value, Quantity quantity) {
  return quantity::formatWithUnit(base_value, quantity, quantity::UnitSystem::kSi);
}

std::string nameOf(Kind kind) {
  switch (kind) {
    case Kind::kEthyleneGlycol:
      return "ethylene glycol in water";
    case Kind::kPropyleneGlycol:
      return "propylene glycol in water";
    case Kind::kWater:
      break;
  }
  return "water";
}

Glycol glycolOf(Kind kind) {
  return kind == Kind::kEthyleneGlycol ? Glycol::kEthylene : Glycol::kPropylene;
}

// Liquid water without checks.
FluidProperties water(double temperature_c, double pressure_pa) {
  const double t = temperature_c + kZeroCelsius;
  const WaterRegion1 region = waterRegion1(t, pressure_pa * 1e-6);
  FluidProperties properties;
  properties.density_kg_m3 = 1 / region.volume_m3_kg;
  properties.viscosity_pa_s = waterViscosity(t, properties.density_kg_m3);
  properties.heat_capacity_j_kgk = region.heat_capacity_kj_kgk * 1e3;
  properties.vapour_pressure_pa = saturationPressure(t) * 1e6;
  return properties;
}

// 1 for pure water, 0 from kFadeFraction on, with no kink between.
double fade(double mass_fraction) {
  const double left = std::max(0.0, 1 - mass_fraction / kFadeFraction);
  return left * left;
}

FluidProperties mixture(const FluidState& state) {
  const Glycol glycol = glycolOf(state.kind);
  const GlycolValues values = melinder(glycol, state.temperature_c, state.glycol_mass_fraction);
  FluidProperties properties;
  properties.density_kg_m3 = values.density_kg_m3;
  properties.viscosity_pa_s = values.viscosity_pa_s;
  properties.heat_capacity_j_kgk = values.heat_capacity_j_kgk;
  // Below 0 °C there is no liquid water to compare with: both sides are taken where it begins.
  const double liquid_c = std::max(0.0, state.temperature_c);
  const FluidProperties pure = water(liquid_c, state.pressure_pa);
  if (const double share = fade(state.glycol_mass_fraction); share > 0) {
    const GlycolValues zero = melinder(glycol, liquid_c, 0);
    properties.density_kg_m3 *= 1 + share * (pure.density_kg_m3 / zero.density_kg_m3 - 1);
    properties.viscosity_pa_s *= 1 + share * (pure.viscosity_pa_s / zero.viscosity_pa_s - 1);
    properties.heat_capacity_j_kgk *= 1 + share * (pure.heat_capacity_j_kgk / zero.heat_capacity_j_kgk - 1);
  }
  properties.vapour_pressure_pa = pure.vapour_pressure_pa;
  return properties;
}

std::optional<Remark> faultOfNumbers(const FluidState& state) {
  const auto notFinite = [](const char* what) { return Remark{Code::kFluidNotFinite, {}, {what}}; };
  if (!std::isfinite(state.temperature_c)) return notFinite("temperature");
  if (!std::isfinite(state.glycol_mass_fraction)) return notFinite("share of glycol");
  if (!std::isfinite(state.pressure_pa)) return notFinite("pressure");
  if (state.kind != Kind::kWater &&
      (state.glycol_mass_fraction < 0 || state.glycol_mass_fraction > kMostGlycolFraction))
    return Remark{Code::kFluidGlycolRange,
                  {},
                  {words(state.glycol_mass_fraction * 100, Quantity::kPercent),
                   words(kMostGlycolFraction * 100, Quantity::kPercent)}};
  if (state.pressure_pa <= 0 || state.pressure_pa > kMostPressure)
    return Remark{Code::kFluidPressureRange,
                  {},
                  {words(state.pressure_pa, Quantity::kPressure), words(kMostPressure, Quantity::kPressure)}};
  return std::nullopt;
}

std::optional<Remark> faultOfTemperature(const FluidState& state) {
  const std::string temperature = words(state.temperature_c, Quantity::kTemperature);
  const double most = state.kind == Kind::kWater ? kMostWaterTemperature : kMostGlycolTemperature;
  if (state.temperature_c > most)
    return Remark{
        Code::kFluidTemperatureRange, {}, {temperature, words(most, Quantity::kTemperature), nameOf(state.kind)}};
  const double freezing = freezingPoint(state.kind, state.glycol_mass_fraction);
  if (state.temperature_c <= freezing)
    return Remark{Code::kFluidFrozen, {}, {temperature, nameOf(state.kind), words(freezing, Quantity::kTemperature)}};
  const double liquid_k = std::max(0.0, state.temperature_c) + kZeroCelsius;
  if (const double vapour_pa = saturationPressure(liquid_k) * 1e6; vapour_pa >= state.pressure_pa)
    return Remark{Code::kFluidBoils,
                  {},
                  {temperature, nameOf(state.kind), words(vapour_pa, Quantity::kPressure),
                   words(state.pressure_pa, Quantity::kPressure)}};
  return std::nullopt;
}

}  // namespace

double freezingPoint(Kind kind, double glycol_mass_fraction) {
  if (kind == Kind::kWater) return 0;
  const Glycol glycol = glycolOf(kind);
  return melinderFreezing(glycol, glycol_mass_fraction) - fade(glycol_mass_fraction) * melinderFreezing(glycol, 0);
}

tl::expected<FluidProperties, Remark> propertiesOf(const FluidState& state) {
  if (auto fault = faultOfNumbers(state)) return tl::make_unexpected(*fault);
  if (auto fault = faultOfTemperature(state)) return tl::make_unexpected(*fault);
  FluidProperties properties =
      state.kind == Kind::kWater ? water(state.temperature_c, state.pressure_pa) : mixture(state);
  properties.freezing_c = freezingPoint(state.kind, state.glycol_mass_fraction);
  return properties;
}

}  // namespace ebbline::fluid
