#include <algorithm>
#include <cmath>
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

// One state by both methods.
struct BothMethods {
  network::Summary newton;
  network::Summary hardy_cross;
  network::Results first;   // usable if newton is
  network::Results second;  // usable if hardy_cross is
  network::Difference difference;
  bool comparable() const { return newton.usable() && hardy_cross.usable(); }
};

BothMethods solveBoth(const network::Network& network, const network::Request& request) {
  BothMethods both;
  network::Solver solver(network);
  network::State state;
  both.newton = solver.solve(request, state);
  if (both.newton.usable()) both.first = network::resultsOf(network, request, state);
  network::HardyCross other(network);
  network::State other_state;
  both.hardy_cross = other.solve(request, other_state);
  if (both.hardy_cross.usable()) both.second = network::resultsOf(network, request, other_state);
  if (both.comparable()) both.difference = network::largestDifference(state, other_state);
  return both;
}

std::string residual(const network::Summary& summary, double value) {
  return summary.usable() ? fmt::format("{:.0e}", value) : "–";
}

void printSummaries(const BothMethods& both, std::ostream& out) {
  const network::Summary& a = both.newton;
  const network::Summary& b = both.hardy_cross;
  Table table({"", "Newton", "Hardy Cross"});
  table.add({"usable", a.usable() ? "yes" : "no", b.usable() ? "yes" : "no"});
  table.add({"rounds", std::to_string(a.rounds), std::to_string(b.rounds)});
  table.add({"flow residual", residual(a, a.flow_residual), residual(b, b.flow_residual)});
  table.add({"pressure residual", residual(a, a.pressure_residual), residual(b, b.pressure_residual)});
  table.print(out);
  if (!a.usable()) out << "Newton: " << a.why << "\n";
  if (!b.usable()) out << "Hardy Cross: " << b.why << "\n";
}

void printSideBySide(const BothMethods& both, bool every_part, UnitSystem units, std::ostream& out) {
  const std::string unit = fmt::format(", {}", quantity::unitLabel(Quantity::kFlow, units));
  Table table({"part", "side", "Newton" + unit, "Hardy Cross" + unit, "difference" + unit}, 2);
  for (std::size_t i = 0; i < both.first.parts.size() && i < both.second.parts.size(); ++i) {
    const network::PartResult& a = both.first.parts[i];
    const network::PartResult& b = both.second.parts[i];
    const bool shown = every_part || a.kind == network::Element::Kind::kTerminal ||
                       a.kind == network::Element::Kind::kPump || a.kind == network::Element::Kind::kPlant;
    if (!shown) continue;
    const auto flow = [units](double m3s) {
      return fmt::format("{:.6f}", quantity::toShown(m3s, Quantity::kFlow, units));
    };
    table.add({a.tag, a.side == loop::Side::kSingle ? "" : wordOf(a.side), flow(a.flow_m3s), flow(b.flow_m3s),
               fmt::format("{:.0e}", quantity::toShown(std::abs(a.flow_m3s - b.flow_m3s), Quantity::kFlow, units))});
  }
  table.print(out);
}

Json bothJson(const BothMethods& both, const OpenedLoop& opened) {
  Json json{{"newton", jsonOf(both.newton, opened.loop, opened.network)},
            {"hardy_cross", jsonOf(both.hardy_cross, opened.loop, opened.network)},
            {"largest_difference", both.comparable() ? Json(both.difference.relative) : Json(nullptr)},
            {"largest_difference_at", placeOfEdge(opened.loop, opened.network, both.difference.edge)},
            {"parts", Json::array()}};
  for (std::size_t i = 0; both.comparable() && i < both.first.parts.size(); ++i) {
    const network::PartResult& a = both.first.parts[i];
    json["parts"].push_back(
        {{"kind", wordOf(a.kind)},
         {"id", a.id},
         {"tag", a.tag},
         {"side", wordOf(a.side)},
         {"newton_l_s", quantity::baseToFile(a.flow_m3s, Quantity::kFlow)},
         {"hardy_cross_l_s", quantity::baseToFile(both.second.parts[i].flow_m3s, Quantity::kFlow)}});
  }
  return json;
}

int check(const Options& options, Streams streams) {
  const UnitSystem units = options.output.units();
  const OpenedLoop opened = openLoop(options.loop, units);
  printRemarks(opened.remarks, streams);
  Json json{{"loop", opened.name}, {"remarks", jsonOf(opened.remarks)}};
  if (opened.exit_code != kDone) {
    if (options.output.json) streams.out << json.dump(2) << "\n";
    return opened.exit_code;
  }
  const auto request = requestOf(opened, options.loop);
  if (!request) return refuse(request.error(), kUsage, streams);
  const BothMethods both = solveBoth(opened.network, *request);
  const int exit_code = both.newton.usable() ? kDone : kNotUsable;
  if (options.output.json) {
    json.update(bothJson(both, opened));
    streams.out << json.dump(2) << "\n";
    return exit_code;
  }
  std::ostream& out = streams.out;
  const loop::Loop& loop = opened.loop;
  out << fmt::format("{}: {} terminals, {} runs, {} pump(s); no faults.\n", opened.name, loop.terminals.size(),
                     loop.paired_runs.size() + loop.pipe_runs.size(), loop.pumps.size());
  out << stateName(options.loop) << "; " << controlInWords(loop, units) << "\n\n";
  printSummaries(both, out);
  if (both.comparable()) {
    out << "\n";
    printSideBySide(both, options.parts, units, out);
    out << fmt::format("\nLargest difference {:.0e} of the largest flow, at {}.\n", both.difference.relative,
                       placeOfEdge(loop, opened.network, both.difference.edge));
  }
  return exit_code;
}

}  // namespace

void addCheck(CLI::App& app, Context& context) {
  auto options = std::make_shared<Options>();
  CLI::App* verb =
      app.add_subcommand("check", "Faults of a file with their lines, and both solving methods side by side");
  addControlOptions(*verb, options->loop);
  addStateOptions(*verb, options->loop);
  verb->add_flag("--parts", options->parts, "Compare every pipe, not only terminals, plant and pumps");
  addOutputOptions(*verb, options->output);
  verb->footer(R"(
Examples
  ebbline check my-loop.ebbline
  ebbline check office --load 30 --parts)");
  verb->callback(
      [options, &context] { context.chosen = [options, &context] { return check(*options, context.streams); }; });
}

}  // namespace ebbline::app
