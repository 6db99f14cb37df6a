#pragma once
// Water by the formulations of the International Association for the Properties of Water and Steam, in their own units
// of temperature and pressure (K, MPa) so that the verification tables can be read off directly.

namespace ebbline::fluid {

/// Liquid water, IAPWS-IF97 region 1 (IAPWS R7-97(2012), equation 7 and table 2).
struct WaterRegion1 {
  double volume_m3_kg = 0;
  double enthalpy_kj_kg = 0;
  double heat_capacity_kj_kgk = 0;
};
/// REQUIRES: 273.15 K <= temperature <= 623.15 K and saturation pressure <= pressure <= 100 MPa; outside the numbers
/// are finite near by but without authority.
WaterRegion1 waterRegion1(double temperature_k, double pressure_mpa);

/// Saturation pressure [MPa], IAPWS-IF97 region 4 (R7-97(2012), equation 30). REQUIRES: 273.15 <= temperature <=
/// 647.096.
double saturationPressure(double temperature_k);

/// Dynamic viscosity [Pa·s] at temperature and density [kg/m³], IAPWS R12-08 equations 10–12 with the critical
/// enhancement left out (μ2 = 1).
double waterViscosity(double temperature_k, double density_kg_m3);

}  // namespace ebbline::fluid
