#include <cmath>

#include <fmt/format.h>

#include "core/quantity/units.h"

namespace ebbline::quantity {
namespace {

constexpr const char* kNoNumber = "\u2013";
constexpr const char* kTrueMinus = "\u2212";

// Drops the sign of what was rounded to zero and writes the wanted minus.
std::string withSign(std::string digits, Minus minus) {
  if (digits.empty() || digits.front() != '-') return digits;
  digits.erase(0, 1);
  if (digits.find_first_of("123456789") == std::string::npos) return digits;
  return (minus == Minus::kTrue ? kTrueMinus : "-") + digits;
}

}  // namespace

std::string format(double base_value, Quantity quantity, UnitSystem system, Minus minus) {
  const double shown = toShown(base_value, quantity, system);
  if (!std::isfinite(shown)) return kNoNumber;
  // Beyond this the fixed decimals would be digits that a double does not hold.
  if (std::abs(shown) >= 1e12) return withSign(fmt::format("{:.6g}", shown), minus);
  return withSign(fmt::format("{:.{}f}", shown, decimals(quantity, system)), minus);
}

std::string formatWithUnit(double base_value, Quantity quantity, UnitSystem system, Minus minus) {
  return fmt::format("{} {}", format(base_value, quantity, system, minus), unitLabel(quantity, system));
}

std::string formatForEditing(double base_value, Quantity quantity, UnitSystem system, Minus minus) {
  const double shown = toShown(base_value, quantity, system);
  if (!std::isfinite(shown)) return kNoNumber;
  const bool whole_part_longer = std::abs(shown) >= 1e6 && std::abs(shown) < 1e15;
  return withSign(whole_part_longer ? fmt::format("{:.0f}", shown) : fmt::format("{:.6g}", shown), minus);
}

}  // namespace ebbline::quantity
