#include "core/catalogue/machine.h"

#include <algorithm>
#include <cmath>

#include "core/catalogue/names.h"
#include "core/quantity/csv.h"
#include "core/quantity/quantity.h"
#include "core/quantity/shown.h"
#include "resources/data_table.h"

namespace ebbline::catalogue {
namespace {

using quantity::CsvTable;

constexpr double kHorsepower = 745.69987158227022;  // W, exact: 550 ft·lbf/s

MotorClass motorClass(const CsvTable& table, std::string name, const char* rating, double rating_w,
                      const char* column) {
  MotorClass one;
  one.name = std::move(name);
  one.source = table.source();
  for (int row = 0; row < table.numRows(); ++row) {
    if (table.isEmpty(row, column)) continue;
    one.ratings_w.push_back(table.number(row, rating) * rating_w);
    one.efficiencies.push_back(table.number(row, column) / 100);
    one.marks.push_back(table.hasColumn("mark") ? table.text(row, "mark") : "published");
  }
  return one;
}

// y at x on the straight lines through the points; the ends are held. REQUIRES: xs rising, not empty.
double between(const std::vector<double>& xs, const std::vector<double>& ys, double x) {
  if (x <= xs.front()) return ys.front();
  for (std::size_t i = 1; i < xs.size(); ++i)
    if (x <= xs[i]) return ys[i - 1] + (x - xs[i - 1]) / (xs[i] - xs[i - 1]) * (ys[i] - ys[i - 1]);
  return ys.back();
}

std::vector<double> logarithms(std::vector<double> values) {
  for (double& value : values) value = std::log(value);
  return values;
}

struct DriveTable {
  std::vector<double> log_ratings;                // ln W
  std::vector<double> loads;                      // 0…1, the first is 0
  std::vector<std::vector<double>> efficiencies;  // [rating][load], 0…1
  std::string source;
};

const DriveTable& driveTable() {
  static const DriveTable table = [] {
    const CsvTable csv(resources::dataTable("vfd_efficiency"));
    DriveTable drive{{}, {0, 0.016, 0.125, 0.25, 0.42, 0.5, 0.75, 1}, {}, csv.source()};
    for (int row = 0; row < csv.numRows(); ++row) {
      drive.log_ratings.push_back(std::log(csv.number(row, "hp") * kHorsepower));
      std::vector<double> line = {0};
      for (const char* column : {"at_1.6", "at_12.5", "at_25", "at_42", "at_50", "at_75", "at_100"})
        line.push_back(csv.number(row, column) / 100);
      drive.efficiencies.push_back(std::move(line));
    }
    return drive;
  }();
  return table;
}

std::string kilowatts(double watts) {
  return quantity::formatWithUnit(watts, quantity::Quantity::kPower, quantity::UnitSystem::kSi);
}

}  // namespace

const std::vector<MotorClass>& motorClasses() {
  static const std::vector<MotorClass> all = [] {
    const CsvTable iec(resources::dataTable("motor_iec_4pole_50hz"));
    const CsvTable us(resources::dataTable("motor_us_4pole_60hz"));
    std::vector<MotorClass> classes;
    for (const char* name : {"IE1", "IE2", "IE3", "IE4"}) classes.push_back(motorClass(iec, name, "kW", 1e3, name));
    classes.push_back(motorClass(us, "open premium", "hp", kHorsepower, "open_premium"));
    classes.push_back(motorClass(us, "enclosed premium", "hp", kHorsepower, "enclosed_premium"));
    classes.push_back(motorClass(us, "open 1997", "hp", kHorsepower, "open_1997"));
    classes.push_back(motorClass(us, "enclosed 1997", "hp", kHorsepower, "enclosed_1997"));
    return classes;
  }();
  return all;
}

const MotorClass* findMotorClass(std::string_view name) {
  for (const MotorClass& one : motorClasses())
    if (one.name == name) return &one;
  return nullptr;
}

tl::expected<double, text::Remark> motorEfficiency(std::string_view motor_class, double rating_w) {
  const MotorClass* found = findMotorClass(motor_class);
  if (!found) {
    std::vector<std::string> names;
    for (const MotorClass& one : motorClasses()) names.push_back(one.name);
    return tl::make_unexpected(
        text::Remark{text::Code::kCatalogueUnknownMotor, {}, {quantity::shownInMessage(motor_class), listed(names)}});
  }
  // Written so that a rating that is not a number is refused as well. The margin takes up conversion of units.
  constexpr double kRounding = 1e-9;
  const double first = found->ratings_w.front();
  const double last = found->ratings_w.back();
  if (!(rating_w >= first * (1 - kRounding) && rating_w <= last * (1 + kRounding)))
    return tl::make_unexpected(text::Remark{
        text::Code::kCatalogueMotorSize, {}, {found->name, kilowatts(first), kilowatts(last), kilowatts(rating_w)}});
  return between(logarithms(found->ratings_w), found->efficiencies, std::log(rating_w));
}

double driveEfficiency(double rating_w, double load_fraction) {
  const DriveTable& table = driveTable();
  std::vector<double> at_load;
  for (const std::vector<double>& line : table.efficiencies)
    at_load.push_back(between(table.loads, line, load_fraction));
  return between(table.log_ratings, at_load, std::log(rating_w));
}

const std::string& driveSource() {
  return driveTable().source;
}

const std::vector<double>& preferredKvs() {
  static const std::vector<double> all = {0.1, 0.16, 0.25, 0.4, 0.63, 1,   1.6, 2.5, 4,   6.3, 10,
                                          16,  25,   40,   63,  100,  160, 250, 400, 630, 1000};
  return all;
}

std::optional<double> kvsAtMost(double kv_m3h) {
  const auto& all = preferredKvs();
  const auto above = std::upper_bound(all.begin(), all.end(), kv_m3h);
  if (std::isnan(kv_m3h) || above == all.begin()) return std::nullopt;
  return *(above - 1);
}

std::optional<double> kvsAtLeast(double kv_m3h) {
  const auto& all = preferredKvs();
  const auto found = std::lower_bound(all.begin(), all.end(), kv_m3h);
  if (std::isnan(kv_m3h) || found == all.end()) return std::nullopt;
  return *found;
}

}  // namespace ebbline::catalogue
