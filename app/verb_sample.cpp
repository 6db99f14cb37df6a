#include <memory>
#include <ostream>

#include <fmt/format.h>
#include <CLI/CLI.hpp>

#include "app/loop_source.h"
#include "app/table.h"
#include "app/verb.h"
#include "core/loop/campus.h"
#include "resources/samples.h"

namespace ebbline::app {
namespace {

struct Options {
  std::string name;
  std::string output;
  int terminals = 100;
};

void list(std::ostream& out) {
  Table table({"sample", "loop", "terminals"}, 2);
  for (const std::string_view name : resources::sampleNames()) {
    const loop::Loop loop = loop::readLoop(resources::sampleText(name)).loop;
    table.add(
        {std::string(name), loop.project.title + ", " + loop.project.subject, std::to_string(loop.terminals.size())});
  }
  table.add({"campus", "buildings in a row, of any size (--terminals N)", "N"});
  table.print(out);
  out << "\nAll are invented. `ebbline open NAME` shows one, `ebbline sample NAME -o FILE` writes it to a file.\n";
}

int sample(const Options& options, Streams streams) {
  if (options.name.empty()) {
    list(streams.out);
    return kDone;
  }
  std::string text;
  if (options.name == "campus") {
    if (options.terminals < 1 || options.terminals > loop::kMostCampusTerminals)
      return refuse(remark(text::Code::kCommandBadCount,
                           {std::to_string(options.terminals), "1", std::to_string(loop::kMostCampusTerminals)}),
                    kUsage, streams);
    text = loop::writeLoop(loop::campus(options.terminals));
  } else {
    text = resources::sampleText(options.name);
  }
  if (text.empty()) return refuse(remark(text::Code::kCommandUnknownSample, {options.name}), kUsage, streams);
  if (!options.output.empty()) return writeText(text, options.output, streams);
  streams.out << text;
  return kDone;
}

}  // namespace

void addSample(CLI::App& app, Context& context) {
  auto options = std::make_shared<Options>();
  CLI::App* verb = app.add_subcommand("sample", "List the sample loops, or write one");
  verb->add_option("NAME", options->name, "Sample to write; without a name they are listed");
  verb->add_option("-o,--output", options->output, "File to write (else to the terminal)");
  verb->add_option("--terminals", options->terminals, "Size of the campus")->capture_default_str();
  verb->footer(R"(
Examples
  ebbline sample
  ebbline sample school -o my-school.ebbline
  ebbline sample campus --terminals 1000 -o campus.ebbline)");
  verb->callback(
      [options, &context] { context.chosen = [options, &context] { return sample(*options, context.streams); }; });
}

}  // namespace ebbline::app
