#pragma once
// Mixtures of glycol and water by the polynomials of Melinder 2010; private to core/fluid.

namespace ebbline::fluid {

enum class Glycol { kEthylene, kPropylene };

struct GlycolValues {
  double density_kg_m3 = 0;
  double viscosity_pa_s = 0;
  double heat_capacity_j_kgk = 0;
};

/// y = Σ c_ij (T − T_b)^i (x − x_b)^j, T in K and x by mass; the viscosity polynomial gives ln(mPa·s).
/// [published: Melinder, Properties of Secondary Working Fluids for Indirect Systems, IIR 2010; coefficients and their
/// way here in resources/data/glycol_coefficients.csv]
GlycolValues melinder(Glycol glycol, double temperature_c, double mass_fraction);

/// Freezing point [°C] by the same source.
double melinderFreezing(Glycol glycol, double mass_fraction);

}  // namespace ebbline::fluid
