#include "core/catalogue/fitting.h"

#include <cmath>
#include <stdexcept>

#include "core/catalogue/names.h"
#include "core/catalogue/pipe.h"
#include "core/quantity/csv.h"
#include "core/quantity/quantity.h"
#include "core/quantity/shown.h"
#include "resources/data_table.h"

namespace ebbline::catalogue {
namespace {

using quantity::CsvTable;

constexpr double kTurbulentRoughness = 0.0018 * 0.0254;  // m; 0.0018 in, see fittings_ft.csv

FittingKind fixedK(const char* name, double k, const char* source) {
  return {name, FittingRule::kFixed, 0, k, {}, {}, source};
}

void addMultiples(std::vector<FittingKind>& kinds) {
  const CsvTable table(resources::dataTable("fittings_n"));
  for (int row = 0; row < table.numRows(); ++row)
    kinds.push_back(
        {table.text(row, "fitting"), FittingRule::kMultiple, table.number(row, "n"), 0, {}, {}, table.source()});
}

void addFixed(std::vector<FittingKind>& kinds) {
  // Source lines of fittings_n.csv and fittings_elbow_K.csv.
  constexpr const char* kRecalled = "[memory: Crane Technical Paper 410, A-29, to be verified]";
  constexpr const char* kPrinted = "[published: Rishel, HVAC Pump Handbook 2nd ed., 2006, Table 3.7, p. 57]";
  kinds.push_back(fixedK("sharp entrance", 0.5, kPrinted));
  kinds.push_back(fixedK("inward projecting entrance", 1.0, kPrinted));
  kinds.push_back(fixedK("bell-mouth entrance", 0.05, kPrinted));
  kinds.push_back(fixedK("exit", 1.0, kRecalled));
}

// The elbow table goes by nominal size in inches: its bores are those of schedule 40 steel.
void addElbows(std::vector<FittingKind>& kinds) {
  const CsvTable table(resources::dataTable("fittings_elbow_K"));
  for (const char* column : {"regular_screwed", "long_radius_screwed", "regular_flanged", "long_radius_flanged"}) {
    FittingKind kind;
    kind.name = "elbow 90 ";
    for (const char* c = column; *c != '\0'; ++c) kind.name += *c == '_' ? ' ' : *c;
    kind.rule = FittingRule::kBySize;
    kind.source = table.source();
    for (int row = 0; row < table.numRows(); ++row) {
      if (table.isEmpty(row, column)) continue;
      const auto size = pipeSize("steel-b36-sch40", "NPS " + table.text(row, "size_in"));
      if (!size) throw std::logic_error("fittings_elbow_K: a size that the pipe table has not");
      kind.bores_m.push_back(size->bore_m);
      kind.ks.push_back(table.number(row, column));
    }
    kinds.push_back(std::move(kind));
  }
}

std::string millimetres(double metres) {
  return quantity::formatWithUnit(metres, quantity::Quantity::kBore, quantity::UnitSystem::kSi);
}

tl::expected<double, text::Remark> kBySize(const FittingKind& kind, double bore_m) {
  // Bores of the same nominal size differ between standards by a few per cent: the ends are stretched by that.
  constexpr double kStretch = 0.2;
  const double first = kind.bores_m.front();
  const double last = kind.bores_m.back();
  if (bore_m < first * (1 - kStretch) || bore_m > last * (1 + kStretch))
    return tl::make_unexpected(text::Remark{
        text::Code::kCatalogueFittingSize,
        {},
        {kind.name, millimetres(first * (1 - kStretch)), millimetres(last * (1 + kStretch)), millimetres(bore_m)}});
  if (bore_m <= first) return kind.ks.front();
  for (std::size_t i = 1; i < kind.ks.size(); ++i)
    if (bore_m <= kind.bores_m[i]) {
      const double share = (bore_m - kind.bores_m[i - 1]) / (kind.bores_m[i] - kind.bores_m[i - 1]);
      return kind.ks[i - 1] + share * (kind.ks[i] - kind.ks[i - 1]);
    }
  return kind.ks.back();
}

}  // namespace

const std::vector<FittingKind>& fittingKinds() {
  static const std::vector<FittingKind> all = [] {
    std::vector<FittingKind> kinds;
    addMultiples(kinds);
    addFixed(kinds);
    addElbows(kinds);
    return kinds;
  }();
  return all;
}

const FittingKind* findFitting(std::string_view name) {
  for (const FittingKind& kind : fittingKinds())
    if (kind.name == name) return &kind;
  return nullptr;
}

tl::expected<double, text::Remark> fittingK(std::string_view name, double bore_m) {
  const FittingKind* kind = findFitting(name);
  if (!kind) {
    std::vector<std::string> names;
    for (const FittingKind& one : fittingKinds()) names.push_back(one.name);
    return tl::make_unexpected(
        text::Remark{text::Code::kCatalogueUnknownFitting, {}, {quantity::shownInMessage(name), listed(names)}});
  }
  switch (kind->rule) {
    case FittingRule::kMultiple:
      return kind->n * turbulentFactor(bore_m);
    case FittingRule::kFixed:
      return kind->k;
    case FittingRule::kBySize:
      return kBySize(*kind, bore_m);
  }
  throw std::logic_error("a fitting without a rule");
}

double turbulentFactor(double bore_m) {
  const double root = 2 * std::log10(3.7 * bore_m / kTurbulentRoughness);
  return 1 / (root * root);
}

}  // namespace ebbline::catalogue
