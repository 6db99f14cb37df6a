#include <algorithm>
#include <cmath>

#include "core/fluid/fluid.h"
#include "core/network/compile_draft.h"
#include "core/quantity/quantity.h"

namespace ebbline::network {

using text::Code;

namespace {

constexpr double kStandardAtmosphere = 101325;  // Pa [published: CGPM 1954]
constexpr double kPaPerKpa = 1000;

void givenFluid(Draft& draft) {
  const loop::Fluid& fluid = draft.loop->fluid;
  if (!fluid.density_kg_m3 || !fluid.viscosity_mpa_s) {
    draft.say(Code::kSolveFluidIncomplete, 0, {}, {fluid.density_kg_m3 ? "its viscosity" : "its density"});
    return;
  }
  if (!needPositive(draft, *fluid.density_kg_m3, "the density of the fluid", 0, {})) return;
  if (!needPositive(draft, *fluid.viscosity_mpa_s, "the viscosity of the fluid", 0, {})) return;
  draft.network.density_kg_m3 = *fluid.density_kg_m3;
  draft.network.viscosity_pa_s = *fluid.viscosity_mpa_s / 1000;
}

/// Absolute pressure at which properties are taken: the vessel's, at least enough not to boil there is not assumed.
double absolutePressure(const loop::Loop& loop) {
  double gauge = 0;
  if (!loop.vessels.empty() && std::isfinite(loop.vessels.front().fill_kpa))
    gauge = kPaPerKpa * std::max(0.0, loop.vessels.front().fill_kpa);
  return kStandardAtmosphere + gauge;
}

}  // namespace

void draftFluid(Draft& draft) {
  const loop::Fluid& fluid = draft.loop->fluid;
  if (fluid.kind == loop::FluidKind::kGiven) {
    givenFluid(draft);
    return;
  }
  fluid::FluidState state;
  state.kind = fluid.kind == loop::FluidKind::kEthyleneGlycol    ? fluid::Kind::kEthyleneGlycol
               : fluid.kind == loop::FluidKind::kPropyleneGlycol ? fluid::Kind::kPropyleneGlycol
                                                                 : fluid::Kind::kWater;
  state.temperature_c = fluid.temperature_c;
  state.glycol_mass_fraction = fluid.glycol_mass_percent / 100;
  state.pressure_pa = absolutePressure(*draft.loop);
  const auto properties = fluid::propertiesOf(state);
  if (!properties) {
    draft.remarks.push_back(properties.error());
    return;
  }
  draft.network.density_kg_m3 = properties->density_kg_m3;
  draft.network.viscosity_pa_s = properties->viscosity_pa_s;
  draft.network.vapour_pressure_pa = properties->vapour_pressure_pa;
}

namespace {

/// Water loses pressure with height: the highest connected point is where it boils first when the pump stands.
void noteBoiling(Draft& draft, const DraftPoint& highest) {
  const Network& network = draft.network;
  if (!network.datum_known || network.vapour_pressure_pa <= 0) return;
  const double rise = highest.elevation_m - draft.points[draft.datum_point].elevation_m;
  const double gauge = network.datum_gauge_pa - rise * network.density_kg_m3 * quantity::kGravity;
  if (gauge + kStandardAtmosphere > network.vapour_pressure_pa) {
    if (gauge < 0)
      draft.say(Code::kSolveBelowAtmosphere, highest.end.joint, highest.tag, {shown(std::round(gauge / 100) / 10)});
    return;
  }
  draft.say(Code::kSolveBoils, highest.end.joint, highest.tag,
            {shown(draft.loop->fluid.temperature_c), shown(std::round(gauge / 100) / 10)});
}

/// [common practice] Hot water in a rising supply and cold in its return push a little of their own accord: about
/// 1 kPa per 10 m at 80/60 °C. Left out; told where it could matter.
void noteBuoyancy(Draft& draft, double height_m) {
  constexpr double kWarm = 40;        // °C: below it the effect is under 0.5 kPa per 10 m
  constexpr double kWorthSaying = 5;  // m
  if (draft.loop->fluid.kind == loop::FluidKind::kGiven) return;
  if (draft.loop->fluid.temperature_c < kWarm || height_m < kWorthSaying) return;
  draft.say(Code::kSolveBuoyancy, 0, {}, {shown(std::round(height_m * 10) / 10)});
}

}  // namespace

void noteHeights(Draft& draft) {
  const DraftPoint* highest = nullptr;
  const DraftPoint* lowest = nullptr;
  for (const DraftPoint& point : draft.points) {
    if (point.degree == 0) continue;
    if (!highest || point.elevation_m > highest->elevation_m) highest = &point;
    if (!lowest || point.elevation_m < lowest->elevation_m) lowest = &point;
  }
  if (!highest) return;
  noteBoiling(draft, *highest);
  noteBuoyancy(draft, highest->elevation_m - lowest->elevation_m);
}

}  // namespace ebbline::network
