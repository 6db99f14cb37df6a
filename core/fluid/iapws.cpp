#include "core/fluid/iapws.h"

#include <array>
#include <cmath>

namespace ebbline::fluid {
namespace {

struct Region1Term {
  int i;
  int j;
  double n;
};

// [published: IAPWS R7-97(2012), table 2; recalled, and confirmed by its verification table 5 in the tests]
constexpr std::array<Region1Term, 34> kRegion1 = {{
    {0, -2, 0.14632971213167},        {0, -1, -0.84548187169114},       {0, 0, -0.37563603672040e1},
    {0, 1, 0.33855169168385e1},       {0, 2, -0.95791963387872},        {0, 3, 0.15772038513228},
    {0, 4, -0.16616417199501e-1},     {0, 5, 0.81214629983568e-3},      {1, -9, 0.28319080123804e-3},
    {1, -7, -0.60706301565874e-3},    {1, -1, -0.18990068218419e-1},    {1, 0, -0.32529748770505e-1},
    {1, 1, -0.21841717175414e-1},     {1, 3, -0.52838357969930e-4},     {2, -3, -0.47184321073267e-3},
    {2, 0, -0.30001780793026e-3},     {2, 1, 0.47661393906987e-4},      {2, 3, -0.44141845330846e-5},
    {2, 17, -0.72694996297594e-15},   {3, -4, -0.31679644845054e-4},    {3, 0, -0.28270797985312e-5},
    {3, 6, -0.85205128120103e-9},     {4, -5, -0.22425281908000e-5},    {4, -2, -0.65171222895601e-6},
    {4, 10, -0.14341729937924e-12},   {5, -8, -0.40516996860117e-6},    {8, -11, -0.12734301741641e-8},
    {8, -6, -0.17424871230634e-9},    {21, -29, -0.68762131295531e-18}, {23, -31, 0.14478307828521e-19},
    {29, -38, 0.26335781662795e-22},  {30, -39, -0.11947622640071e-22}, {31, -40, 0.18228094581404e-23},
    {32, -41, -0.93537087292458e-25},
}};
constexpr double kGasConstant = 0.461526;  // kJ/(kg·K), R7-97 equation 1

// [published: IAPWS R7-97(2012), table 34]
constexpr std::array<double, 10> kSaturation = {
    0.11670521452767e4, -0.72421316703206e6, -0.17073846940092e2, 0.12020824702470e5, -0.32325550322333e7,
    0.14915108613530e2, -0.48232657361591e4, 0.40511340542057e6,  -0.23855557567849,  0.65017534844798e3};

// [published: IAPWS R12-08, tables 1 and 2]
constexpr std::array<double, 4> kDiluteViscosity = {1.67752, 2.20462, 0.6366564, -0.241605};
struct ViscosityTerm {
  int i;
  int j;
  double h;
};
constexpr std::array<ViscosityTerm, 21> kViscosity = {{
    {0, 0, 5.20094e-1},  {1, 0, 8.50895e-2},  {2, 0, -1.08374},    {3, 0, -2.89555e-1}, {0, 1, 2.22531e-1},
    {1, 1, 9.99115e-1},  {2, 1, 1.88797},     {3, 1, 1.26613},     {5, 1, 1.20573e-1},  {0, 2, -2.81378e-1},
    {1, 2, -9.06851e-1}, {2, 2, -7.72479e-1}, {3, 2, -4.89837e-1}, {4, 2, -2.57040e-1}, {0, 3, 1.61913e-1},
    {1, 3, 2.57399e-1},  {0, 4, -3.25372e-2}, {3, 4, 6.98452e-2},  {4, 5, 8.72102e-3},  {3, 6, -4.35673e-3},
    {5, 6, -5.93264e-4},
}};
constexpr double kCriticalTemperature = 647.096;  // K, R12-08 equation 5
constexpr double kCriticalDensity = 322.0;        // kg/m³, equation 7

}  // namespace

WaterRegion1 waterRegion1(double temperature_k, double pressure_mpa) {
  const double pi = pressure_mpa / 16.53;
  const double tau = 1386.0 / temperature_k;
  const double x = 7.1 - pi;
  const double y = tau - 1.222;
  double gamma_pi = 0;       // ∂γ/∂π
  double gamma_tau = 0;      // ∂γ/∂τ
  double gamma_tau_tau = 0;  // ∂²γ/∂τ²
  for (const auto& [i, j, n] : kRegion1) {
    const double x_i = std::pow(x, i);
    gamma_pi -= n * i * std::pow(x, i - 1) * std::pow(y, j);
    gamma_tau += n * x_i * j * std::pow(y, j - 1);
    gamma_tau_tau += n * x_i * j * (j - 1) * std::pow(y, j - 2);
  }
  WaterRegion1 water;  // R7-97 table 3
  water.volume_m3_kg = pi * gamma_pi * kGasConstant * temperature_k / (pressure_mpa * 1e3);
  water.enthalpy_kj_kg = tau * gamma_tau * kGasConstant * temperature_k;
  water.heat_capacity_kj_kgk = -tau * tau * gamma_tau_tau * kGasConstant;
  return water;
}

double saturationPressure(double temperature_k) {
  const auto& n = kSaturation;
  const double theta = temperature_k + n[8] / (temperature_k - n[9]);
  const double a = theta * theta + n[0] * theta + n[1];
  const double b = n[2] * theta * theta + n[3] * theta + n[4];
  const double c = n[5] * theta * theta + n[6] * theta + n[7];
  return std::pow(2 * c / (-b + std::sqrt(b * b - 4 * a * c)), 4);
}

double waterViscosity(double temperature_k, double density_kg_m3) {
  const double t = temperature_k / kCriticalTemperature;
  const double rho = density_kg_m3 / kCriticalDensity;
  double dilute = 0;
  for (std::size_t i = 0; i < kDiluteViscosity.size(); ++i) dilute += kDiluteViscosity[i] / std::pow(t, i);
  double dense = 0;
  for (const auto& [i, j, h] : kViscosity) dense += h * std::pow(1 / t - 1, i) * std::pow(rho - 1, j);
  return 1e-6 * 100 * std::sqrt(t) / dilute * std::exp(rho * dense);
}

}  // namespace ebbline::fluid
