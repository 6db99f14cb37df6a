#include <memory>
#include <ostream>

#include <fmt/format.h>
#include <CLI/CLI.hpp>

#include "app/loop_source.h"
#include "app/results_json.h"
#include "app/table.h"
#include "app/verb.h"

namespace ebbline::app {
namespace {

using quantity::Quantity;
using quantity::UnitSystem;

struct Options {
  LoopOptions loop;
  OutputOptions output;
  bool parts = false;
};

void printPumps(const network::Results& results, UnitSystem units, std::ostream& out) {
  Table table({"pump", "speed, %", head("flow", Quantity::kFlow, units), head("head", Quantity::kHead, units),
               head("pressure", Quantity::kPressure, units), head("shaft power", Quantity::kPower, units),
               "efficiency, %"});
  for (const network::PumpResult& pump : results.pumps) {
    const bool known = pump.efficiency > 0;
    table.add({pump.tag, fmt::format("{:.1f}", 100 * pump.speed), number(pump.flow_m3s, Quantity::kFlow, units),
               number(pump.head_m, Quantity::kHead, units), number(pump.pressure_pa, Quantity::kPressure, units),
               known ? number(pump.shaft_power_w, Quantity::kPower, units) : "–",
               known ? fmt::format("{:.1f}", 100 * pump.efficiency) : "–"});
  }
  table.print(out);
  for (const network::PumpResult& pump : results.pumps)
    if (pump.beyond_data) out << pump.tag << " runs past the last reading of its curve: head and power are a guess.\n";
}

void printTerminals(const network::Results& results, UnitSystem units, std::ostream& out) {
  Table table({"terminal", head("requested", Quantity::kFlow, units), head("delivered", Quantity::kFlow, units),
               "shortfall, %", "valve, %", head("available", Quantity::kPressure, units), "under-supplied"});
  int short_count = 0;
  for (const network::TerminalResult& terminal : results.terminals) {
    short_count += terminal.under_supplied ? 1 : 0;
    table.add({terminal.tag, number(terminal.requested_m3s, Quantity::kFlow, units),
               number(terminal.delivered_m3s, Quantity::kFlow, units),
               terminal.under_supplied ? fmt::format("{:.1f}", 100 * terminal.shortfall) : "–",
               fmt::format("{:.1f}", 100 * terminal.stroke), number(terminal.available_pa, Quantity::kPressure, units),
               terminal.under_supplied ? "yes" : ""});
  }
  table.print(out);
  if (short_count == 0)
    out << "No terminal is under-supplied.\n";
  else
    out << std::to_string(short_count) << (short_count == 1 ? " terminal is" : " terminals are")
        << " under-supplied.\n";
}

void printParts(const network::Results& results, UnitSystem units, std::ostream& out) {
  Table table({"part", "side", head("flow", Quantity::kFlow, units), head("loss", Quantity::kPressure, units),
               head("velocity", Quantity::kVelocity, units), head("gradient", Quantity::kGradient, units)},
              2);
  for (const network::PartResult& part : results.parts) {
    if (part.kind == network::Element::Kind::kTerminal) continue;
    const bool bore = part.velocity_ms != 0;
    table.add({part.tag, part.side == loop::Side::kSingle ? "" : wordOf(part.side),
               number(part.flow_m3s, Quantity::kFlow, units), number(part.loss_pa, Quantity::kPressure, units),
               bore ? number(part.velocity_ms, Quantity::kVelocity, units) : "–",
               bore ? number(part.gradient_pa_m, Quantity::kGradient, units) : "–"});
  }
  out << "\n";
  table.print(out);
}

void printBound(const network::Summary& summary, std::ostream& out) {
  if (summary.bound == network::SpeedBound::kAtMaximum)
    out << "The pump is at its highest speed and does not reach the set-point.\n";
  if (summary.bound == network::SpeedBound::kAtMinimum)
    out << "The pump is at its lowest speed; the set-point is exceeded.\n";
}

int notUsable(const network::Summary& summary, const Options& options, const OpenedLoop& opened, Streams streams) {
  if (options.output.json) {
    streams.out << Json{{"loop", opened.name},
                        {"state", stateName(options.loop)},
                        {"summary", jsonOf(summary, opened.loop, opened.network)}}
                       .dump(2)
                << "\n";
  }
  if (summary.remark) return refuse(*summary.remark, kNotUsable, streams);
  streams.err << "ebbline: no usable answer: " << summary.why << "\n";
  return kNotUsable;
}

int solve(const Options& options, Streams streams) {
  const UnitSystem units = options.output.units();
  const OpenedLoop opened = openLoop(options.loop, units);
  printRemarks(opened.remarks, streams);
  if (opened.exit_code != kDone) return opened.exit_code;
  const auto request = requestOf(opened, options.loop);
  if (!request) return refuse(request.error(), kUsage, streams);

  network::Solver solver(opened.network);
  network::State state;
  const network::Summary summary = solver.solve(*request, state);
  if (!summary.usable()) return notUsable(summary, options, opened, streams);
  const network::Results results = network::resultsOf(opened.network, *request, state);
  if (options.output.json) {
    Json json{{"loop", opened.name},
              {"title", opened.loop.project.title},
              {"state", stateName(options.loop)},
              {"strategy", strategyName(opened.loop.control.strategy)},
              {"summary", jsonOf(summary, opened.loop, opened.network)}};
    json.update(jsonOf(results, opened, *request));
    json["remarks"] = jsonOf(opened.remarks);
    streams.out << json.dump(2) << "\n";
    return kDone;
  }
  streams.out << opened.loop.project.title << ", " << stateName(options.loop) << "; "
              << controlInWords(opened.loop, units) << "\n\n";
  printPumps(results, units, streams.out);
  printBound(summary, streams.out);
  streams.out << "\n";
  printTerminals(results, units, streams.out);
  if (options.parts) printParts(results, units, streams.out);
  streams.out << fmt::format("\nSolved in {} rounds; flow residual {:.0e}, pressure residual {:.0e}.\n", summary.rounds,
                             summary.flow_residual, summary.pressure_residual);
  return kDone;
}

}  // namespace

void addSolve(CLI::App& app, Context& context) {
  auto options = std::make_shared<Options>();
  CLI::App* verb = app.add_subcommand("solve", "Flows, pressures, valve positions and pump duty of one load state");
  addControlOptions(*verb, options->loop);
  addStateOptions(*verb, options->loop);
  verb->add_flag("--parts", options->parts, "Also list every pipe, plant, pump and valve");
  addOutputOptions(*verb, options->output);
  verb->footer(R"(
Examples
  ebbline solve office                                    every terminal asks for its design flow
  ebbline solve office --load 40 --strategy dp-pump --set-point 120kPa
  ebbline solve school --set-point 10kPa --state "March noon"   which terminals fall short?
  ebbline solve closed-form --request T1=0 --request T2=0 --position T4=100
  ebbline solve office --json > office-solved.json)");
  verb->callback(
      [options, &context] { context.chosen = [options, &context] { return solve(*options, context.streams); }; });
}

}  // namespace ebbline::app
