#include "core/fluid/glycol.h"

#include <array>
#include <cmath>
#include <stdexcept>

#include "core/quantity/csv.h"
#include "resources/data_table.h"

namespace ebbline::fluid {
namespace {

constexpr int kNumT = 4;
constexpr int kNumX = 6;
using Polynomial = std::array<std::array<double, kNumX>, kNumT>;

struct Coefficients {
  double base_t_k = 0;
  double base_x = 0;
  Polynomial freezing{};
  Polynomial density{};
  Polynomial heat_capacity{};
  Polynomial log_viscosity{};
};

void place(Coefficients& all, const std::string& property, int i, int j, double value) {
  const auto set = [&](Polynomial& polynomial) {
    polynomial.at(static_cast<std::size_t>(i)).at(static_cast<std::size_t>(j)) = value;
  };
  if (property == "freeze_K") return set(all.freezing);
  if (property == "rho_kg_m3") return set(all.density);
  if (property == "cp_J_kgK") return set(all.heat_capacity);
  if (property == "ln_mu_mPa_s") return set(all.log_viscosity);
  if (property != "k_W_mK") throw std::logic_error("glycol_coefficients: unknown property " + property);
}

Coefficients read(const std::string& fluid, double base_t_k, double base_x) {
  const quantity::CsvTable table(resources::dataTable("glycol_coefficients"));
  Coefficients all;
  all.base_t_k = base_t_k;
  all.base_x = base_x;
  for (int row = 0; row < table.numRows(); ++row)
    if (table.text(row, "fluid") == fluid)
      place(all, table.text(row, "property"), static_cast<int>(table.number(row, "i")),
            static_cast<int>(table.number(row, "j")), table.number(row, "c"));
  return all;
}

const Coefficients& coefficientsOf(Glycol glycol) {
  // Bases of the polynomials, from the first line of the table.
  static const Coefficients ethylene = read("EG", 304.878, 0.308462);
  static const Coefficients propylene = read("PG", 305.8583, 0.307031);
  return glycol == Glycol::kEthylene ? ethylene : propylene;
}

double valueOf(const Polynomial& polynomial, double t, double x) {
  double sum = 0;
  for (int i = kNumT - 1; i >= 0; --i) {
    double row = 0;
    for (int j = kNumX - 1; j >= 0; --j)
      row = row * x + polynomial[static_cast<std::size_t>(i)][static_cast<std::size_t>(j)];
    sum = sum * t + row;
  }
  return sum;
}

}  // namespace

GlycolValues melinder(Glycol glycol, double temperature_c, double mass_fraction) {
  const Coefficients& c = coefficientsOf(glycol);
  const double t = temperature_c + 273.15 - c.base_t_k;
  const double x = mass_fraction - c.base_x;
  return {valueOf(c.density, t, x), 1e-3 * std::exp(valueOf(c.log_viscosity, t, x)), valueOf(c.heat_capacity, t, x)};
}

double melinderFreezing(Glycol glycol, double mass_fraction) {
  const Coefficients& c = coefficientsOf(glycol);
  return valueOf(c.freezing, 0, mass_fraction - c.base_x) - 273.15;
}

}  // namespace ebbline::fluid
