#include "core/catalogue/pipe.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>

#include "core/catalogue/names.h"
#include "core/quantity/csv.h"
#include "core/quantity/shown.h"
#include "resources/data_table.h"

namespace ebbline::catalogue {
namespace {

using quantity::CsvTable;

constexpr double kInch = 0.0254;                           // m, exact
constexpr double kMillimetre = 1e-3;                       // m
constexpr double kGpm = 231 * kInch * kInch * kInch / 60;  // m³/s, exact: US gallon = 231 in³
constexpr const char* kSteel = "commercial steel / wrought iron new";
constexpr const char* kCopper = "drawn tubing: copper brass glass";

CsvTable tableNamed(std::string_view name) {
  return CsvTable(resources::dataTable(name));
}

PipeSize sizeOf(const CsvTable& table, int row, const char* unit, double unit_m) {
  const std::string suffix = std::string("_") + unit;
  PipeSize size;
  size.bore_m = table.number(row, "ID" + suffix) * unit_m;
  size.outside_m = table.number(row, "OD" + suffix) * unit_m;
  size.wall_m = table.number(row, "wall" + suffix) * unit_m;
  size.source = table.source();
  return size;
}

PipeSeries seriesOf(std::string name, std::string title, const char* material) {
  PipeSeries series{std::move(name), std::move(title), material, {}, {}, {}};
  for (const Roughness& roughness : roughnesses())
    if (roughness.material == material) {
      series.roughness_mark = roughness.mark;
      series.roughness_source = roughness.source;
      return series;
    }
  throw std::logic_error(series.name + ": its material has no roughness");
}

// Roughness into every size, and sizes in rising order.
PipeSeries finished(PipeSeries series) {
  for (const Roughness& roughness : roughnesses())
    if (roughness.material == series.material)
      for (PipeSize& size : series.sizes) size.roughness_m = roughness.roughness_m;
  std::sort(series.sizes.begin(), series.sizes.end(),
            [](const PipeSize& a, const PipeSize& b) { return a.outside_m < b.outside_m; });
  return series;
}

PipeSeries steelByDn(std::string name, std::string title, std::string_view table_name, const char* common_mark) {
  const CsvTable table = tableNamed(table_name);
  PipeSeries series = seriesOf(std::move(name), std::move(title), kSteel);
  for (int row = 0; row < table.numRows(); ++row) {
    PipeSize size = sizeOf(table, row, "mm", kMillimetre);
    size.name = "DN " + table.text(row, "DN");
    size.mark = table.hasColumn("mark") ? table.text(row, "mark") : common_mark;
    series.sizes.push_back(std::move(size));
  }
  return finished(std::move(series));
}

// Standard wall equals schedule 40 up to NPS 10; the table holds as STD only the sizes above.
PipeSeries steelByNps(std::string name, std::string title, bool standard_wall) {
  const CsvTable table = tableNamed("pipe_steel_b36");
  PipeSeries series = seriesOf(std::move(name), std::move(title), kSteel);
  for (int row = 0; row < table.numRows(); ++row) {
    const bool is_standard = table.text(row, "schedule") == "STD";
    const bool is_common = !is_standard && table.number(row, "DN") <= 250;
    if (standard_wall ? !is_standard && !is_common : is_standard) continue;
    PipeSize size = sizeOf(table, row, "in", kInch);
    size.name = "NPS " + table.text(row, "NPS_in");
    size.other_name = "DN " + table.text(row, "DN");
    size.mark = table.text(row, "mark");
    series.sizes.push_back(std::move(size));
  }
  return finished(std::move(series));
}

PipeSeries copperByInch(std::string name, std::string title, std::string_view type) {
  const CsvTable table = tableNamed("pipe_copper_b88");
  PipeSeries series = seriesOf(std::move(name), std::move(title), kCopper);
  for (int row = 0; row < table.numRows(); ++row) {
    if (table.text(row, "type") != type) continue;
    PipeSize size = sizeOf(table, row, "in", kInch);
    size.name = table.text(row, "nominal_in") + " in";
    size.mark = "published";
    series.sizes.push_back(std::move(size));
  }
  return finished(std::move(series));
}

PipeSeries copperByOutside(std::string name, std::string title, std::string_view wall_table) {
  const CsvTable table = tableNamed("pipe_copper_en1057");
  PipeSeries series = seriesOf(std::move(name), std::move(title), kCopper);
  for (int row = 0; row < table.numRows(); ++row) {
    if (table.text(row, "table") != wall_table) continue;
    PipeSize size = sizeOf(table, row, "mm", kMillimetre);
    size.name = table.text(row, "OD_mm") + " mm";
    size.mark = "published";
    series.sizes.push_back(std::move(size));
  }
  return finished(std::move(series));
}

std::vector<MaximumFlow> readMaximumFlows(const CsvTable& table) {
  static constexpr const char* kColumns[3][2] = {{"other_le2000h", "variable_le2000h"},
                                                 {"other_2000_4400h", "variable_2000_4400h"},
                                                 {"other_gt4400h", "variable_gt4400h"}};
  std::vector<MaximumFlow> rows;
  for (int row = 0; row < table.numRows(); ++row) {
    MaximumFlow flow{"NPS " + table.text(row, "NPS_in"), {}};
    for (int hours = 0; hours < 3; ++hours)
      for (int variable = 0; variable < 2; ++variable)
        flow.flow_m3s[hours][variable] = table.number(row, kColumns[hours][variable]) * kGpm;
    rows.push_back(std::move(flow));
  }
  return rows;
}

}  // namespace

const std::vector<PipeSeries>& pipeSeries() {
  static const std::vector<PipeSeries> all = {
      steelByDn("steel-en10255-medium", "Steel EN 10255, medium", "pipe_steel_en10255_medium", ""),
      steelByDn("steel-en10220", "Steel EN 10220, normal wall", "pipe_steel_en10220", "memory"),
      steelByNps("steel-b36-sch40", "Steel ASME B36.10M, schedule 40", false),
      steelByNps("steel-b36-std", "Steel ASME B36.10M, standard wall", true),
      copperByInch("copper-b88-k", "Copper ASTM B88, type K", "K"),
      copperByInch("copper-b88-l", "Copper ASTM B88, type L", "L"),
      copperByOutside("copper-en1057-x", "Copper EN 1057, table X (thin)", "X"),
      copperByOutside("copper-en1057-y", "Copper EN 1057, table Y (thick)", "Y"),
  };
  return all;
}

const PipeSeries* findSeries(std::string_view series) {
  for (const PipeSeries& one : pipeSeries())
    if (one.name == series) return &one;
  return nullptr;
}

tl::expected<PipeSize, text::Remark> pipeSize(std::string_view series, std::string_view size) {
  const PipeSeries* found = findSeries(series);
  if (!found) {
    std::vector<std::string> names;
    for (const PipeSeries& one : pipeSeries()) names.push_back(one.name);
    return tl::make_unexpected(
        text::Remark{text::Code::kCatalogueUnknownSeries, {}, {quantity::shownInMessage(series), listed(names)}});
  }
  const std::string wanted = comparable(size);
  for (const PipeSize& one : found->sizes)
    if (comparable(one.name) == wanted || (!one.other_name.empty() && comparable(one.other_name) == wanted)) return one;
  std::vector<std::string> names;
  for (const PipeSize& one : found->sizes) names.push_back(one.name);
  return tl::make_unexpected(text::Remark{
      text::Code::kCatalogueUnknownSize, {}, {quantity::shownInMessage(size), found->name, listed(names)}});
}

const std::vector<Roughness>& roughnesses() {
  static const std::vector<Roughness> all = [] {
    const CsvTable table = tableNamed("roughness");
    std::vector<Roughness> rows;
    rows.reserve(table.numRows());
    for (int row = 0; row < table.numRows(); ++row)
      rows.push_back({table.text(row, "material"), table.number(row, "eps_mm") * kMillimetre, table.text(row, "mark"),
                      table.source()});
    return rows;
  }();
  return all;
}

const std::vector<MaximumFlow>& maximumFlows() {
  static const std::vector<MaximumFlow> all = readMaximumFlows(tableNamed("pipe_max_flow"));
  return all;
}

const std::string& maximumFlowSource() {
  static const std::string source = tableNamed("pipe_max_flow").source();
  return source;
}

}  // namespace ebbline::catalogue
