#include <memory>
#include <ostream>

#include <fmt/format.h>
#include <CLI/CLI.hpp>

#include "app/loop_source.h"
#include "app/results_json.h"
#include "app/table.h"
#include "app/verb.h"
#include "core/study/sweep/sweep.h"

namespace ebbline::app {
namespace {

using quantity::Quantity;
using quantity::UnitSystem;

struct Options {
  LoopOptions loop;
  OutputOptions output;
  std::string loads;
  std::string order = "together";
  bool states = false;
  bool second = false;
};

std::vector<std::string> cells(const study::SweepRow& row, const Options& options) {
  const UnitSystem units = options.output.units();
  const auto number = [units](double base, Quantity quantity) { return app::number(base, quantity, units); };
  const std::string load = fmt::format("{:.0f}", row.load_percent);
  std::vector<std::string> line = {row.name.empty() ? load : row.name};
  if (options.states) line.push_back(row.summary.usable() ? load : "–");
  if (!row.summary.usable()) {
    line.resize(options.states ? 9 : 8, "–");
    line.push_back("not solved: " + row.summary.why);
    if (options.second) line.emplace_back("–");
    return line;
  }
  const bool power = row.shaft_power_w > 0;
  const std::string bound = row.summary.bound == network::SpeedBound::kAtMaximum   ? " max"
                            : row.summary.bound == network::SpeedBound::kAtMinimum ? " min"
                                                                                   : "";
  line.push_back(number(row.flow_m3s, Quantity::kFlow));
  line.push_back(number(row.pressure_pa, Quantity::kPressure));
  line.push_back(number(row.head_m, Quantity::kHead));
  line.push_back(fmt::format("{:.1f}{}", 100 * row.speed, bound));
  line.push_back(power ? fmt::format("{:.1f}", 100 * row.efficiency) : "–");
  line.push_back(power ? number(row.shaft_power_w, Quantity::kPower) : "–");
  line.push_back(row.num_under_supplied == 0 ? "none" : std::to_string(row.num_under_supplied));
  line.push_back(
      row.num_under_supplied == 0 ? "–" : fmt::format("{} -{:.1f} %", row.worst_terminal, 100 * row.worst_shortfall));
  if (options.second) line.push_back(row.method_difference ? fmt::format("{:.0e}", *row.method_difference) : "–");
  return line;
}

void printTable(const std::vector<study::SweepRow>& rows, const Options& options, std::ostream& out) {
  const UnitSystem units = options.output.units();
  std::vector<std::string> heads = {options.states ? "load state" : "load, %"};
  if (options.states) heads.emplace_back("load, %");
  for (std::string one :
       {head("flow", Quantity::kFlow, units), head("pump pressure", Quantity::kPressure, units),
        head("head", Quantity::kHead, units), std::string("speed, %"), std::string("efficiency, %"),
        head("shaft power", Quantity::kPower, units), std::string("under-supplied"), std::string("worst")})
    heads.push_back(std::move(one));
  if (options.second) heads.emplace_back("second method");
  Table table(std::move(heads));
  for (const study::SweepRow& row : rows) table.add(cells(row, options));
  table.print(out);
}

void printResiduals(const std::vector<study::SweepRow>& rows, std::ostream& out) {
  double flow = 0;
  double pressure = 0;
  bool beyond = false;
  bool essential = false;
  for (const study::SweepRow& row : rows) {
    flow = std::max(flow, row.summary.flow_residual);
    pressure = std::max(pressure, row.summary.pressure_residual);
    beyond = beyond || row.beyond_data;
    essential = essential || row.essential_short;
  }
  out << fmt::format("\nLargest flow residual {:.0e}, largest pressure residual {:.0e}.\n", flow, pressure);
  if (beyond) out << "A pump runs past the last reading of its curve in some rows: head and power there are a guess.\n";
  if (essential) out << "An essential terminal is under-supplied in some rows.\n";
  out << "Steady-state estimate for engineering judgement.\n";
}

bool readLoads(const std::string& text, std::vector<double>& loads) {
  loads.clear();
  std::size_t start = 0;
  while (start <= text.size()) {
    const std::size_t comma = std::min(text.find(',', start), text.size());
    const auto percent = quantity::parseToFileUnit(text.substr(start, comma - start), Quantity::kPercent);
    if (!percent || !(*percent > 0 && *percent <= 100)) return false;
    loads.push_back(*percent);
    start = comma + 1;
  }
  return !loads.empty();
}

int sweep(const Options& options, Streams streams) {
  study::SweepOptions how;
  how.named_states = options.states;
  how.second_method = options.second;
  if (options.order == "far-first") how.order = study::ClosingOrder::kFarFirst;
  if (options.order == "near-first") how.order = study::ClosingOrder::kNearFirst;
  if (!options.loads.empty() && !readLoads(options.loads, how.loads_percent))
    return refuse(remark(text::Code::kCommandBadLoads, {options.loads}), kUsage, streams);

  const OpenedLoop opened = openLoop(options.loop, options.output.units());
  printRemarks(opened.remarks, streams);
  if (opened.exit_code != kDone) return opened.exit_code;
  const std::vector<study::SweepRow> rows = study::sweep(opened.loop, opened.network, how);
  bool all_usable = true;
  for (const study::SweepRow& row : rows) all_usable = all_usable && row.summary.usable();
  if (options.output.json) {
    Json json{{"loop", opened.name},
              {"title", opened.loop.project.title},
              {"strategy", strategyName(opened.loop.control.strategy)},
              {"order", options.order},
              {"rows", Json::array()}};
    for (const study::SweepRow& row : rows) json["rows"].push_back(jsonOf(row));
    json["remarks"] = jsonOf(opened.remarks);
    streams.out << json.dump(2) << "\n";
  } else {
    streams.out << opened.loop.project.title << "; " << controlInWords(opened.loop, options.output.units()) << "\n\n";
    printTable(rows, options, streams.out);
    printResiduals(rows, streams.out);
  }
  return all_usable ? kDone : kNotUsable;
}

}  // namespace

void addSweep(CLI::App& app, Context& context) {
  auto options = std::make_shared<Options>();
  CLI::App* verb = app.add_subcommand("sweep", "Pump duty and shortfalls as the load falls, one row per load state");
  addControlOptions(*verb, options->loop);
  verb->add_option("--loads", options->loads, "Loads in percent of design flow (else 100,90 … 10)");
  verb->add_option("--order", options->order,
                   "How terminals close: together, far-first or near-first (one after another)")
      ->check(CLI::IsMember({"together", "far-first", "near-first"}))
      ->capture_default_str();
  verb->add_flag("--states", options->states, "The load states of the file instead");
  verb->add_flag("--second-method", options->second, "Solve each row by Hardy Cross as well and print the difference");
  addOutputOptions(*verb, options->output);
  verb->footer(R"(
Examples
  ebbline sweep office
  ebbline sweep office --order far-first --strategy dp-pump --set-point 150kPa
  ebbline sweep closed-form --loads 100,75,50,25,10 --second-method
  ebbline sweep school --states --json)");
  verb->callback(
      [options, &context] { context.chosen = [options, &context] { return sweep(*options, context.streams); }; });
}

}  // namespace ebbline::app
