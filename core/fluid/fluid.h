#pragma once
// Properties of the fluid in the loop, at one temperature and pressure.

#include <tl/expected.hpp>

#include "core/text/remark.h"

namespace ebbline::fluid {

enum class Kind { kWater, kEthyleneGlycol, kPropyleneGlycol };

/// Which fluid, and its state.
struct FluidState {
  Kind kind = Kind::kWater;
  double temperature_c = 10;
  double glycol_mass_fraction = 0;  ///< 0…0.6 of the mixture, by mass (never by volume). Ignored for water.
  double pressure_pa = 101325;      ///< Absolute. Default: standard atmosphere.
};

struct FluidProperties {
  double density_kg_m3 = 0;
  double viscosity_pa_s = 0;       ///< Dynamic.
  double heat_capacity_j_kgk = 0;  ///< At constant pressure.
  double vapour_pressure_pa = 0;   ///< Absolute. For mixtures that of pure water, which is never less: errs safe.
  double freezing_c = 0;           ///< Where ice begins to form.
};

/// Water: density and heat capacity from IAPWS-IF97 region 1, vapour pressure from its region 4, viscosity from
/// IAPWS R12-08 without critical enhancement, as the release recommends for industrial use. 0…200 °C, to 10 MPa.
///
/// Glycols: Melinder 2010 (IIR), from the freezing point to 100 °C, up to 60 % by mass; the effect of pressure (under
/// 0.05 % per MPa on density) is left out. Extended to pure water those polynomials miss it by up to 0.1 % in density,
/// 0.25 % in heat capacity and 1.8 % in viscosity, so a step would appear between "water" and "0 % glycol". Below 10 %
/// by mass the miss is taken out by a factor that fades as (1 − x/0.1)²: at x = 0 the result is exactly that of water,
/// from x = 0.1 on exactly Melinder's. The fade is ours and has no authority beyond joining the two.
///
/// Refused with a remark: fluid frozen or boiling, temperature, pressure or glycol share out of range or not finite.
tl::expected<FluidProperties, text::Remark> propertiesOf(const FluidState& state);

/// Freezing point of a mixture [°C]; 0 for water. REQUIRES: 0 <= glycol_mass_fraction <= 0.6.
double freezingPoint(Kind kind, double glycol_mass_fraction);

/// Largest glycol share by mass that the tables hold.
inline constexpr double kMostGlycolFraction = 0.6;
/// Highest temperatures [°C] accepted.
inline constexpr double kMostWaterTemperature = 200;
inline constexpr double kMostGlycolTemperature = 100;
/// Highest absolute pressure accepted [Pa].
inline constexpr double kMostPressure = 10e6;

}  // namespace ebbline::fluid
