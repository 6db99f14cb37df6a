#pragma once
// Numbers as people write them, and as the program computes with them. Every conversion factor stands in
// quantity.cpp with its source. Nothing here depends on the locale.

#include <string>
#include <string_view>
#include <vector>

#include <tl/expected.hpp>

#include "core/text/remark.h"

namespace ebbline::quantity {

/// What a number measures. "base" is the unit used in calculation, "file" the unit of the document and of JSON keys,
/// then the units shown in the two systems.
enum class Quantity {
  kLength,                 ///< base m, file m; m | ft. Pipe runs, levels, distances.
  kBore,                   ///< base m, file mm; mm | in. Diameters, walls, roughness.
  kFlow,                   ///< base m³/s, file L/s; L/s | gpm (US).
  kValveCoefficient,       ///< base and file m³/h at 1 bar (Kv); Kv | Cv.
  kPressure,               ///< base Pa, file kPa; kPa | psi. Differences and gauge pressures alike.
  kHead,                   ///< base m, file m; m | ft. Of the fluid itself.
  kVelocity,               ///< base m/s, file m/s; m/s | ft/s.
  kGradient,               ///< base Pa/m, file Pa/m; Pa/m | ft/100 ft of conventional water (1000 kg/m³).
  kPower,                  ///< base W, file kW; kW | hp. Pump, motor, drive.
  kThermalLoad,            ///< base W, file kW; kW | kBtu/h.
  kTemperature,            ///< base °C, file °C; °C | °F.
  kTemperatureDifference,  ///< base K, file K; K | °F.
  kPercent,                ///< base %, file %; %.
  kDensity,                ///< base kg/m³, file kg/m³; kg/m³ | lb/ft³.
  kViscosity,              ///< base Pa·s, file mPa·s; mPa·s | cP. Dynamic.
  kHeatCapacity,           ///< base J/(kg·K), file kJ/(kg·K); kJ/(kg·K) | Btu/(lb·°F).
};

enum class UnitSystem { kSi, kIp };

/// How a negative number is written: with the true minus U+2212 for people, or with the hyphen for files and scripts.
enum class Minus { kTrue, kHyphen };

/// Reads `text` and returns the number in the base unit. A bare number is in the display unit of `bare`.
///
/// Accepted: "12", "12 m", "2.5 L/s", "1.2e3", "-3 kPa" (hyphen or U+2212); fractions "3/4 in", "1-1/4 in", "1 1/4 in";
/// feet and inches for lengths and bores "40'6\"", "40 ft 6 in", "40'-6 1/2\""; "Kv 25" and "Cv 11.56" as well as
/// "25 Kv". The point is always the decimal point. A comma is a decimal comma ("2,5") unless it could as well group
/// thousands ("1,250"), which is refused; "1,250,000" and "1,250.5" can only group and are accepted.
/// Units are matched as written first, then without regard to capitals.
/// The remark says what is wrong and what is accepted; its place is left for the caller to fill.
tl::expected<double, text::Remark> parse(std::string_view text, Quantity quantity, UnitSystem bare = UnitSystem::kSi);

/// As parse, but in the file unit; a number typed in the file unit comes back without any rounding.
tl::expected<double, text::Remark> parseToFileUnit(std::string_view text, Quantity quantity,
                                                   UnitSystem bare = UnitSystem::kSi);

/// The number with the decimals usual for the quantity ("2.50"), without unit: columns line up.
/// Not a finite number gives "–"; what rounds to zero is written without a sign.
std::string format(double base_value, Quantity quantity, UnitSystem system, Minus minus = Minus::kTrue);

/// "2.50 L/s".
std::string formatWithUnit(double base_value, Quantity quantity, UnitSystem system, Minus minus = Minus::kTrue);

/// At most six significant digits without trailing zeros ("2.5"): for fields that are edited.
std::string formatForEditing(double base_value, Quantity quantity, UnitSystem system, Minus minus = Minus::kHyphen);

/// Unit shown in a system: "L/s", "gpm", "°C", "%".
std::string_view unitLabel(Quantity quantity, UnitSystem system);

/// Decimals that `format` writes.
int decimals(Quantity quantity, UnitSystem system);

/// From the base unit to the unit shown, and back: for axes and spin boxes.
double toShown(double base_value, Quantity quantity, UnitSystem system);
double fromShown(double shown_value, Quantity quantity, UnitSystem system);

/// Between file unit and base unit (L/s ↔ m³/s, kPa ↔ Pa …).
double fileToBase(double file_value, Quantity quantity);
double baseToFile(double base_value, Quantity quantity);

/// The quantity in words ("flow", "pressure"), as used in remarks.
std::string_view nameOf(Quantity quantity);

/// The units that `parse` accepts for a quantity, the shown ones first.
std::vector<std::string_view> acceptedUnits(Quantity quantity);

/// Standard acceleration of gravity [m/s²], exact. [published: 3rd CGPM 1901; BIPM SI Brochure]
inline constexpr double kGravity = 9.80665;

/// Kv = kKvPerCv · Cv: (m³/h per US gpm) · √(1 bar / 1 psi), exact in its parts.
/// 0.22712470704 · √(100000 / 6894.757293168361) = 0.8649776554
/// [published definitions: IEC 60534-2-1 (Kv: m³/h at 1 bar), ANSI/ISA-75.01.01 (Cv: US gpm at 1 psi)]
inline constexpr double kKvPerCv = 0.8649776554423018;

}  // namespace ebbline::quantity
