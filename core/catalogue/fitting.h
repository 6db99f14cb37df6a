#pragma once
// Loss coefficients of fittings: Δp = K ρ v²/2 on the velocity in the pipe's bore.

#include <string>
#include <string_view>
#include <vector>

#include <tl/expected.hpp>

#include "core/text/remark.h"

namespace ebbline::catalogue {

/// How K of a fitting comes about.
enum class FittingRule {
  kMultiple,  ///< K = n · fT(bore).
  kFixed,     ///< One K for every size.
  kBySize,    ///< K from a table by nominal size, straight lines between.
};

struct FittingKind {
  std::string
      name;  ///< Key in the file: "elbow 90 standard", "gate valve", "sharp entrance", "elbow 90 regular screwed" …
  FittingRule rule = FittingRule::kMultiple;
  double n = 0;                 ///< kMultiple.
  double k = 0;                 ///< kFixed.
  std::vector<double> bores_m;  ///< kBySize: bores of the sizes in the table …
  std::vector<double> ks;       ///< … and K there.
  std::string source;           ///< With its mark.
};

/// All fittings, built once at first use.
const std::vector<FittingKind>& fittingKinds();

/// nullptr if there is no fitting of that name.
const FittingKind* findFitting(std::string_view name);

/// K of a fitting in a pipe of this bore. Unknown names, and bores outside a by-size table, give a remark.
/// REQUIRES: bore_m > 0.
tl::expected<double, text::Remark> fittingK(std::string_view name, double bore_m);

/// Fully turbulent friction factor of clean commercial steel of this bore, the fT of K = n fT, whatever the pipe
/// is made of:  1/√fT = 2 log10(3.7 D/ε),  ε = 0.0018 in  [published: von Kármán 1930 rough-pipe law in the constants
/// of Colebrook 1939]. The formula is preferred to the stepped table by nominal size because that table is only
/// recalled; it lies within 5 % of it. REQUIRES: bore_m > 1 mm.
double turbulentFactor(double bore_m);

}  // namespace ebbline::catalogue
