#include "core/quantity/units.h"

#include <array>
#include <cmath>
#include <stdexcept>

namespace ebbline::quantity {
namespace {

// Exact by definition [published: NIST Special Publication 811 (2008), appendix B.8; yard and pound agreement 1959]:
constexpr double kFoot = 0.3048;                           // m
constexpr double kInch = 0.0254;                           // m
constexpr double kGallon = 231 * kInch * kInch * kInch;    // m³, US gallon = 231 in³
constexpr double kGpm = kGallon / 60;                      // m³/s
constexpr double kPound = 0.45359237;                      // kg
constexpr double kPoundForce = kPound * kGravity;          // N
constexpr double kPsi = kPoundForce / (kInch * kInch);     // Pa
constexpr double kHorsepower = 550 * kFoot * kPoundForce;  // W, mechanical: 550 ft·lbf/s
constexpr double kBtu = 1055.05585262;                     // J, International Table
constexpr double kBtuPerHour = kBtu / 3600;                // W
constexpr double kTon = 12000 * kBtuPerHour;               // W, ton of refrigeration
constexpr double kFahrenheit = 5.0 / 9.0;                  // K
// Conventional water column: 1000 kg/m³ at standard gravity (same source).
constexpr double kWaterMetre = 1000 * kGravity;     // Pa
constexpr double kWaterFoot = kFoot * kWaterMetre;  // Pa
constexpr double kLitreASecond = 1e-3;              // m³/s
constexpr double kCubicMetreAnHour = 1.0 / 3600;    // m³/s

constexpr UnitTable kLengthTable{"length",
                                 "12 m or 40 ft",
                                 {"m"},
                                 {"m"},
                                 {"ft", kFoot},
                                 1,
                                 1,
                                 true,
                                 {{{"mm", 1e-3},
                                   {"cm", 1e-2},
                                   {"km", 1e3},
                                   {"in", kInch},
                                   {"\"", kInch},
                                   {"'", kFoot},
                                   {"metre"},
                                   {"metres"},
                                   {"meter"},
                                   {"meters"},
                                   {"feet", kFoot},
                                   {"foot", kFoot},
                                   {"inch", kInch},
                                   {"inches", kInch}}}};
constexpr UnitTable kBoreTable{"diameter",
                               "52.5 mm or 2.067 in",
                               {"mm", 1e-3},
                               {"mm", 1e-3},
                               {"in", kInch},
                               1,
                               3,
                               true,
                               {{{"m"},
                                 {"cm", 1e-2},
                                 {"\"", kInch},
                                 {"ft", kFoot},
                                 {"'", kFoot},
                                 {"inch", kInch},
                                 {"inches", kInch},
                                 {"µm", 1e-6},
                                 {"um", 1e-6}}}};
constexpr UnitTable kFlowTable{"flow",
                               "2.5 L/s or 10 gpm",
                               {"L/s", kLitreASecond},
                               {"L/s", kLitreASecond},
                               {"gpm", kGpm},
                               2,
                               1,
                               false,
                               {{{"l/s", kLitreASecond},
                                 {"m³/h", kCubicMetreAnHour},
                                 {"m3/h", kCubicMetreAnHour},
                                 {"m³/s"},
                                 {"m3/s"},
                                 {"L/min", 1e-3 / 60},
                                 {"L/h", 1e-3 / 3600},
                                 {"mL/s", 1e-6},
                                 {"US gpm", kGpm},
                                 {"gal/min", kGpm}}}};
constexpr UnitTable kValveTable{
    "valve coefficient", "Kv 25 or Cv 11.6", {"m³/h"}, {"Kv"}, {"Cv", kKvPerCv}, 2, 2, false, {{{"m3/h"}, {"Kvs"}}}};
constexpr UnitTable kPressureTable{"pressure",
                                   "30 kPa or 4.4 psi",
                                   {"kPa", 1e3},
                                   {"kPa", 1e3},
                                   {"psi", kPsi},
                                   1,
                                   2,
                                   false,
                                   {{{"Pa"},
                                     {"hPa", 1e2},
                                     {"MPa", 1e6},
                                     {"bar", 1e5},
                                     {"mbar", 1e2},
                                     {"psid", kPsi},
                                     {"m H2O", kWaterMetre},
                                     {"mH2O", kWaterMetre},
                                     {"mm H2O", kWaterMetre * 1e-3},
                                     {"mmH2O", kWaterMetre * 1e-3},
                                     {"ft H2O", kWaterFoot},
                                     {"ftH2O", kWaterFoot},
                                     {"ft", kWaterFoot},
                                     {"in H2O", kWaterFoot / 12},
                                     {"inH2O", kWaterFoot / 12}}}};
constexpr UnitTable kHeadTable{"head",
                               "12 m or 40 ft",
                               {"m"},
                               {"m"},
                               {"ft", kFoot},
                               2,
                               1,
                               true,
                               {{{"mm", 1e-3}, {"in", kInch}, {"\"", kInch}, {"'", kFoot}, {"feet", kFoot}}}};
constexpr UnitTable kVelocityTable{"velocity",
                                   "1.2 m/s or 4 ft/s",
                                   {"m/s"},
                                   {"m/s"},
                                   {"ft/s", kFoot},
                                   2,
                                   2,
                                   false,
                                   {{{"mm/s", 1e-3}, {"fps", kFoot}, {"ft/min", kFoot / 60}, {"fpm", kFoot / 60}}}};
constexpr UnitTable kGradientTable{"friction gradient",
                                   "200 Pa/m or 2.5 ft/100 ft",
                                   {"Pa/m"},
                                   {"Pa/m"},
                                   {"ft/100 ft", kWaterFoot / (100 * kFoot)},
                                   0,
                                   2,
                                   false,
                                   {{{"kPa/m", 1e3},
                                     {"ft/100ft", kWaterFoot / (100 * kFoot)},
                                     {"ft per 100 ft", kWaterFoot / (100 * kFoot)},
                                     {"mm/m", kWaterMetre * 1e-3},
                                     {"psi/100 ft", kPsi / (100 * kFoot)}}}};
constexpr UnitTable kPowerTable{"power",
                                "5.5 kW or 7.5 hp",
                                {"kW", 1e3},
                                {"kW", 1e3},
                                {"hp", kHorsepower},
                                2,
                                2,
                                false,
                                {{{"W"}, {"MW", 1e6}, {"HP", kHorsepower}}}};
constexpr UnitTable kThermalTable{"thermal load",
                                  "20 kW or 70 kBtu/h",
                                  {"kW", 1e3},
                                  {"kW", 1e3},
                                  {"kBtu/h", 1e3 * kBtuPerHour},
                                  1,
                                  1,
                                  false,
                                  {{{"W"},
                                    {"MW", 1e6},
                                    {"Btu/h", kBtuPerHour},
                                    {"MBH", 1e3 * kBtuPerHour},
                                    {"mbh", 1e3 * kBtuPerHour},
                                    {"ton", kTon},
                                    {"tons", kTon}}}};
constexpr UnitTable kTemperatureTable{"temperature",
                                      "6 °C or 43 °F",
                                      {"°C"},
                                      {"°C"},
                                      {"°F", kFahrenheit, -32 * kFahrenheit},
                                      1,
                                      1,
                                      false,
                                      {{{"C"},
                                        {"degC"},
                                        {"F", kFahrenheit, -32 * kFahrenheit},
                                        {"degF", kFahrenheit, -32 * kFahrenheit},
                                        {"K", 1, -273.15}}}};
constexpr UnitTable kDifferenceTable{"temperature difference",
                                     "6 K or 10 °F",
                                     {"K"},
                                     {"K"},
                                     {"°F", kFahrenheit},
                                     1,
                                     1,
                                     false,
                                     {{{"°C"}, {"C"}, {"F", kFahrenheit}, {"degF", kFahrenheit}, {"degC"}}}};
constexpr UnitTable kPercentTable{
    "percentage", "50 %", {"%"}, {"%"}, {"%"}, 1, 1, false, {{{"percent"}, {"per cent"}}}};
constexpr UnitTable kDensityTable{"density",
                                  "999.7 kg/m³",
                                  {"kg/m³"},
                                  {"kg/m³"},
                                  {"lb/ft³", kPound / (kFoot * kFoot * kFoot)},
                                  1,
                                  2,
                                  false,
                                  {{{"kg/m3"}, {"kg/L", 1e3}, {"lb/ft3", kPound / (kFoot * kFoot * kFoot)}}}};
constexpr UnitTable kViscosityTable{"viscosity",
                                    "1.3 mPa·s",
                                    {"mPa·s", 1e-3},
                                    {"mPa·s", 1e-3},
                                    {"cP", 1e-3},
                                    3,
                                    3,
                                    false,
                                    {{{"mPa s", 1e-3}, {"mPas", 1e-3}, {"Pa·s"}, {"Pa s"}, {"Pas"}, {"µPa·s", 1e-6}}}};
constexpr UnitTable kHeatCapacityTable{
    "heat capacity",
    "4.19 kJ/(kg·K)",
    {"kJ/(kg·K)", 1e3},
    {"kJ/(kg·K)", 1e3},
    {"Btu/(lb·°F)", kBtu / (kPound * kFahrenheit)},
    3,
    3,
    false,
    {{{"kJ/kgK", 1e3}, {"kJ/(kg K)", 1e3}, {"J/kgK"}, {"J/(kg·K)"}, {"Btu/lbF", kBtu / (kPound * kFahrenheit)}}}};

}  // namespace

const UnitTable& unitTable(Quantity quantity) {
  switch (quantity) {
    case Quantity::kLength:
      return kLengthTable;
    case Quantity::kBore:
      return kBoreTable;
    case Quantity::kFlow:
      return kFlowTable;
    case Quantity::kValveCoefficient:
      return kValveTable;
    case Quantity::kPressure:
      return kPressureTable;
    case Quantity::kHead:
      return kHeadTable;
    case Quantity::kVelocity:
      return kVelocityTable;
    case Quantity::kGradient:
      return kGradientTable;
    case Quantity::kPower:
      return kPowerTable;
    case Quantity::kThermalLoad:
      return kThermalTable;
    case Quantity::kTemperature:
      return kTemperatureTable;
    case Quantity::kTemperatureDifference:
      return kDifferenceTable;
    case Quantity::kPercent:
      return kPercentTable;
    case Quantity::kDensity:
      return kDensityTable;
    case Quantity::kViscosity:
      return kViscosityTable;
    case Quantity::kHeatCapacity:
      return kHeatCapacityTable;
  }
  throw std::logic_error("a quantity without a table of units");
}

const Unit& shownUnit(Quantity quantity, UnitSystem system) {
  const UnitTable& table = unitTable(quantity);
  return system == UnitSystem::kSi ? table.si : table.ip;
}

std::string_view nameOf(Quantity quantity) {
  return unitTable(quantity).words;
}

std::string_view unitLabel(Quantity quantity, UnitSystem system) {
  return shownUnit(quantity, system).name;
}

int decimals(Quantity quantity, UnitSystem system) {
  const UnitTable& table = unitTable(quantity);
  return system == UnitSystem::kSi ? table.si_decimals : table.ip_decimals;
}

double toShown(double base_value, Quantity quantity, UnitSystem system) {
  const Unit& unit = shownUnit(quantity, system);
  return (base_value - unit.offset) / unit.factor;
}

double fromShown(double shown_value, Quantity quantity, UnitSystem system) {
  const Unit& unit = shownUnit(quantity, system);
  return shown_value * unit.factor + unit.offset;
}

double fileToBase(double file_value, Quantity quantity) {
  return file_value * unitTable(quantity).file.factor;
}

double baseToFile(double base_value, Quantity quantity) {
  return base_value / unitTable(quantity).file.factor;
}

std::vector<std::string_view> acceptedUnits(Quantity quantity) {
  const UnitTable& table = unitTable(quantity);
  std::vector<std::string_view> names;
  const auto add = [&names](std::string_view name) {
    for (const std::string_view known : names)
      if (known == name) return;
    names.push_back(name);
  };
  add(table.si.name);
  add(table.ip.name);
  add(table.file.name);
  for (const Unit& unit : table.others)
    if (!unit.name.empty()) add(unit.name);
  return names;
}

}  // namespace ebbline::quantity
