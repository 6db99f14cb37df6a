#include "app/cli.h"

#include <algorithm>
#include <cerrno>
#include <exception>
#include <filesystem>
#include <fstream>
#include <optional>
#include <ostream>
#include <system_error>

#include <fmt/format.h>
#include <CLI/CLI.hpp>

#include "app/verb.h"

namespace ebbline::app {
namespace {

constexpr const char* kJob =
    "Ebbline decides how a branched chilled- or hot-water loop behaves at part load: which terminals get the flow "
    "they\n"
    "ask for, and at which pump speed.";

constexpr const char* kFooter = R"(
FILE is a .ebbline file, or the name of a sample (see `ebbline sample`).

Examples
  ebbline open office                              the window, on a sample
  ebbline check my-loop.ebbline                    faults with their lines, both methods side by side
  ebbline solve school --set-point 10kPa           who is under-supplied at a lower set-point
  ebbline sweep office --loads 100,75,50,25        part load as a table
  ebbline report office -o out/report.pdf          the same for the client

Exit codes
  0 done   1 the loop or its file has faults   2 the command was not understood
  3 the solver gave no usable answer   4 a file cannot be read or written   5 a fault of Ebbline itself

Results are steady-state estimates for engineering judgement. Check against local codes and the makers' data; have a
licensed engineer sign what is built.)";

std::vector<std::string> verbsOf(const CLI::App& app) {
  std::vector<std::string> names;
  for (const CLI::App* verb : app.get_subcommands([](const CLI::App*) { return true; }))
    names.push_back(verb->get_name());
  return names;
}

// Why there is no verb to run, if that is the fault of the command.
std::optional<text::Remark> wrongVerb(const CLI::App& app, const std::vector<std::string>& arguments) {
  const std::vector<std::string> names = verbsOf(app);
  if (arguments.empty()) return remark(text::Code::kCommandNoVerb, {listed(names)});
  const std::string& first = arguments.front();
  const bool known = std::find(names.begin(), names.end(), first) != names.end();
  if (known || (!first.empty() && first.front() == '-')) return std::nullopt;
  return remark(text::Code::kCommandUnknownVerb, {first, listed(names)});
}

int wrongUsage(const CLI::ParseError& error, Streams streams) {
  std::string sentence = error.what();
  if (sentence.empty()) sentence = "the command was not understood";
  if (sentence.back() != '.') sentence += '.';
  streams.err << "ebbline: " << sentence << " `ebbline --help` lists the verbs, `ebbline VERB --help` explains one.\n";
  return kUsage;
}

int parseAndRun(std::vector<std::string> arguments, Streams streams) {
  CLI::App app{kJob, "ebbline"};
  Context context{streams, {}};
  app.require_subcommand(1);
  app.set_version_flag("--version", "Ebbline " EBBLINE_VERSION);
  app.set_help_flag("-h,--help", "Print this help and stop");
  app.footer(kFooter);
  addOpen(app, context);
  addCheck(app, context);
  addSolve(app, context);
  addSweep(app, context);
  addReport(app, context);
  addConvert(app, context);
  addSample(app, context);
  if (const auto reason = wrongVerb(app, arguments)) return refuse(*reason, kUsage, streams);
  std::reverse(arguments.begin(), arguments.end());  // as CLI11 takes them
  try {
    app.parse(std::move(arguments));
  } catch (const CLI::Success& asked) {  // help or version
    return app.exit(asked, streams.out, streams.err) == 0 ? kDone : kUsage;
  } catch (const CLI::ParseError& error) {
    return wrongUsage(error, streams);
  }
  return context.chosen ? context.chosen() : kUsage;
}

}  // namespace

int run(const std::vector<std::string>& arguments, Streams streams) {
  try {
    return parseAndRun(arguments, streams);
  } catch (const std::bad_alloc&) {
    streams.err << "ebbline: there is not enough memory for this.\n";
  } catch (const std::exception& fault) {
    streams.err << "ebbline: a fault of Ebbline itself: " << fault.what() << ". Please report it with the command.\n";
  }
  return kOwnFault;
}

void addOutputOptions(CLI::App& verb, OutputOptions& options) {
  verb.add_flag("--json", options.json, "Print JSON; its keys carry their units and do not follow --units");
  verb.add_option_function<std::string>(
          "--units", [&options](const std::string& units) { options.ip = units == "ip"; }, "Units of tables: si or ip")
      ->check(CLI::IsMember({"si", "ip"}))
      ->default_str("si");
}

text::Remark remark(text::Code code, std::vector<std::string> arguments) {
  return text::Remark{code, {}, std::move(arguments)};
}

void printRemarks(const std::vector<text::Remark>& remarks, Streams streams) {
  const auto print = [&](text::Severity severity, const char* word) {
    for (const text::Remark& one : remarks)
      if (text::severityOf(one.code) == severity) streams.err << word << ": " << text::oneLine(one) << "\n";
  };
  print(text::Severity::kFault, "fault");
  print(text::Severity::kCaution, "caution");
  print(text::Severity::kNote, "note");
}

int refuse(const text::Remark& reason, int exit_code, Streams streams) {
  streams.err << "ebbline: " << text::oneLine(reason) << "\n";
  return exit_code;
}

int writeText(const std::string& text, const std::string& file, Streams streams) {
  std::error_code error;
  const std::filesystem::path folder = std::filesystem::path(file).parent_path();
  if (!folder.empty()) std::filesystem::create_directories(folder, error);
  errno = 0;
  std::ofstream out(file, std::ios::binary);
  out << text;
  out.close();
  if (!out) {
    const std::string why = error ? error.message() : std::generic_category().message(errno);
    return refuse(remark(text::Code::kCommandCannotWrite, {file, why}), kNoAccess, streams);
  }
  streams.err << "written: " << file << "\n";
  return kDone;
}

std::string listed(const std::vector<std::string>& names) {
  constexpr std::size_t kMost = 12;
  if (names.empty()) return "none";
  const std::size_t shown = std::min(names.size(), kMost);
  std::string line =
      fmt::format("{}", fmt::join(names.begin(), names.begin() + static_cast<std::ptrdiff_t>(shown), ", "));
  if (names.size() > shown) line += fmt::format(" … ({} more)", names.size() - shown);
  return line;
}

}  // namespace ebbline::app
