#pragma once
// The table of units behind parsing and formatting; private to core/quantity.

#include <array>
#include <string_view>

#include "core/quantity/quantity.h"

namespace ebbline::quantity {

/// One spelling of a unit: base = value · factor + offset.
struct Unit {
  std::string_view name;
  double factor = 1;
  double offset = 0;
};

/// How one quantity is stored and shown.
struct UnitTable {
  std::string_view words;    ///< "flow".
  std::string_view example;  ///< "2.5 L/s".
  Unit file;                 ///< Unit of the document.
  Unit si;                   ///< Shown in SI,
  Unit ip;                   ///< and in inch-pound.
  int si_decimals = 2;
  int ip_decimals = 2;
  bool feet_and_inches = false;   ///< 40'6" may be written.
  std::array<Unit, 16> others{};  ///< Further spellings and units that may be typed; the rest are empty.
};

const UnitTable& unitTable(Quantity quantity);
const Unit& shownUnit(Quantity quantity, UnitSystem system);

}  // namespace ebbline::quantity
