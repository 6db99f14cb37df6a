#include <memory>
#include <optional>

#include <CLI/CLI.hpp>

#include "app/verb.h"
#ifdef EBBLINE_WITH_UI
#include "ui/shell/run_window.h"
#endif

namespace ebbline::app {
namespace {

struct Options {
  std::string file;
  std::optional<quantity::UnitSystem> units;
};

#ifdef EBBLINE_WITH_UI
int open(const Options& options, Streams streams) {
  const int result = shell::runWindow(options.file, options.units);
  if (result == shell::kNoDisplay) return refuse(remark(text::Code::kCommandNoDisplay), kNoAccess, streams);
  return result == 0 ? kDone : kOwnFault;
}
#else
int open(const Options&, Streams streams) {
  return refuse(remark(text::Code::kCommandNoWindow), kUsage, streams);
}
#endif

}  // namespace

void addOpen(CLI::App& app, Context& context) {
  auto options = std::make_shared<Options>();
  CLI::App* verb = app.add_subcommand("open", "The window, on a file, a sample or nothing");
  verb->add_option("FILE", options->file, "A .ebbline file, or the name of a sample");
  verb->add_option_function<std::string>(
          "--units",
          [options](const std::string& units) {
            options->units = units == "ip" ? quantity::UnitSystem::kIp : quantity::UnitSystem::kSi;
          },
          "Units shown: si or ip (else those of the last time)")
      ->check(CLI::IsMember({"si", "ip"}));
  verb->footer(R"(
Examples
  ebbline open
  ebbline open office
  ebbline open my-loop.ebbline)");
  verb->callback(
      [options, &context] { context.chosen = [options, &context] { return open(*options, context.streams); }; });
}

}  // namespace ebbline::app
