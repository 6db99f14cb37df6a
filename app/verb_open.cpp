#include <memory>

#include <CLI/CLI.hpp>

#include "app/loop_source.h"
#include "app/verb.h"
#include "resources/samples.h"
#ifdef EBBLINE_WITH_UI
#include "ui/shell/run_window.h"
#endif

namespace ebbline::app {
namespace {

struct Options {
  std::string file;
  OutputOptions output;
};

#ifdef EBBLINE_WITH_UI
int open(const Options& options, Streams streams) {
  return shell::runWindow(options.file, options.output.units()) == 0
             ? kDone
             : refuse(remark(text::Code::kCommandNoWindow), kOwnFault, streams);
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
  verb->footer(R"(
Examples
  ebbline open
  ebbline open office
  ebbline open my-loop.ebbline)");
  verb->callback(
      [options, &context] { context.chosen = [options, &context] { return open(*options, context.streams); }; });
}

}  // namespace ebbline::app
