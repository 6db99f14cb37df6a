#pragma once
// Motors, drives and preferred valve sizes.

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include <tl/expected.hpp>

#include "core/text/remark.h"

namespace ebbline::catalogue {

/// Nominal full-load efficiencies of one class of motor, ratings rising.
struct MotorClass {
  std::string name;                  ///< "IE3", "open premium" …
  std::vector<double> ratings_w;     ///< Rated shaft power.
  std::vector<double> efficiencies;  ///< 0…1.
  std::vector<std::string> marks;    ///< Of each rating: published or from memory.
  std::string source;
};

/// IE1…IE4 (4-pole, 50 Hz) and "open premium", "enclosed premium", "open 1997", "enclosed 1997" (4-pole, 60 Hz).
const std::vector<MotorClass>& motorClasses();
const MotorClass* findMotorClass(std::string_view name);

/// Efficiency 0…1 at full load; straight lines against the logarithm of the rating between listed ratings. A remark for
/// an unknown class or a rating outside its table.
tl::expected<double, text::Remark> motorEfficiency(std::string_view motor_class, double rating_w);

/// Efficiency 0…1 of a variable-speed drive of a rating [W] at a fraction of its rated output. Between the ratings
/// of the table (3…200 hp) straight lines against the logarithm, beyond them the nearest; between loads straight lines,
/// down to 0 at no load; above full load that of full load.
/// REQUIRES: rating_w > 0, load_fraction >= 0.
double driveEfficiency(double rating_w, double load_fraction);
const std::string& driveSource();

/// Preferred valve sizes [m³/h]: 1, 1.6, 2.5, 4, 6.3 in every decade from 0.1 to 1000. [from memory: ISO 3:1973 series
/// R5, as valve tables print it]
const std::vector<double>& preferredKvs();
/// Largest preferred size not above, smallest not below; empty outside the series.
std::optional<double> kvsAtMost(double kv_m3h);
std::optional<double> kvsAtLeast(double kv_m3h);

}  // namespace ebbline::catalogue
