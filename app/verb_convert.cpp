#include <algorithm>
#include <filesystem>
#include <fstream>
#include <memory>
#include <ostream>

#include <CLI/CLI.hpp>

#include "app/csv_tables.h"
#include "app/loop_source.h"
#include "app/verb.h"

namespace ebbline::app {
namespace {

struct Options {
  std::string file;
  std::string output;
  std::string form;
  std::string table = "terminals";
};

// Result of a conversion, or why there is none.
tl::expected<std::string, text::Remark> converted(const loop::Loop& loop, const Options& options) {
  std::string form = options.form;
  if (form.empty() && !options.output.empty()) form = std::filesystem::path(options.output).extension().string();
  if (!form.empty() && form.front() == '.') form.erase(0, 1);
  if (form.empty() || form == "ebbline" || form == "json") return loop::writeLoop(loop);
  if (form != "csv") return tl::unexpected(remark(text::Code::kCommandBadForm, {form}));
  return *csvTable(loop, options.table);  // the name was checked when the command was read
}

int convert(const Options& options, Streams streams) {
  int exit_code = kDone;
  const loop::Reading reading = readFileOrSample(options.file, exit_code);
  printRemarks(reading.remarks, streams);
  if (exit_code != kDone) return exit_code;
  const auto text = converted(reading.loop, options);
  if (!text) return refuse(text.error(), kUsage, streams);
  if (options.output.empty()) {
    streams.out << *text;
    return kDone;
  }
  return writeText(*text, options.output, streams);
}

}  // namespace

void addConvert(CLI::App& app, Context& context) {
  auto options = std::make_shared<Options>();
  CLI::App* verb =
      app.add_subcommand("convert", "A loop as a file of the present version, or one of its tables as CSV");
  verb->add_option("FILE", options->file, "A .ebbline file of any version, or the name of a sample")->required();
  verb->add_option("-o,--output", options->output, "File to write: .ebbline, .json or .csv (else to the terminal)");
  verb->add_option("--to", options->form, "ebbline, json or csv (else by the ending of the file)");
  verb->add_option("--table", options->table, "Table of a CSV: terminals, runs, valves, pumps, joints or states")
      ->check(CLI::IsMember(csvTableNames()))
      ->capture_default_str();
  verb->footer(R"(
Examples
  ebbline convert old.ebbline -o new.ebbline        the present version, keys in their usual order
  ebbline convert office -o terminals.csv
  ebbline convert office --table runs --to csv)");
  verb->callback(
      [options, &context] { context.chosen = [options, &context] { return convert(*options, context.streams); }; });
}

}  // namespace ebbline::app
