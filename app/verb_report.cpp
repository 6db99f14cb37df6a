#include <memory>
#include <ostream>

#include <fmt/format.h>
#include <CLI/CLI.hpp>

#include "app/loop_source.h"
#include "app/verb.h"
#ifdef EBBLINE_WITH_UI
#include <cstdio>
#include <filesystem>

#include <QApplication>

#include "core/network/part_load.h"
#include "core/study/sweep/sweep.h"
#include "ui/report/report.h"
#endif

namespace ebbline::app {
namespace {

struct Options {
  LoopOptions loop;
  OutputOptions output;
  std::string file = "out/report.pdf";
  std::string question;
};

#ifdef EBBLINE_WITH_UI
const char* seriesKey(loop::Strategy strategy) {
  switch (strategy) {
    case loop::Strategy::kConstantSpeed:
      return "constant_speed";
    case loop::Strategy::kDpPump:
      return "dp_pump";
    case loop::Strategy::kDpHeaders:
      return "dp_headers";
    case loop::Strategy::kFieldSensor:
      return "field_sensor";
  }
  return "constant_speed";
}

// The state drawn: what the options ask for, else the first load state of the file that is not full load.
LoopOptions withState(const LoopOptions& options, const loop::Loop& loop) {
  LoopOptions chosen = options;
  const bool asked =
      !options.state.empty() || !options.load.empty() || !options.requests.empty() || !options.positions.empty();
  if (asked) return chosen;
  for (const loop::LoadState& state : loop.load_states)
    if (state.rest_percent < 100) {
      chosen.state = state.name;
      return chosen;
    }
  chosen.load = "50";
  return chosen;
}

// Qt warns where there is no login session (a server, a container); nothing here uses what it looks for.
void tellQtMessage(QtMsgType type, const QMessageLogContext&, const QString& message) {
  if (type == QtWarningMsg && message.startsWith(QStringLiteral("QStandardPaths: XDG_RUNTIME_DIR"))) return;
  std::fputs((message + QLatin1Char('\n')).toLocal8Bit().constData(), stderr);
}

int draw(const Options& options, const OpenedLoop& opened, const report::ReportContent& content, Streams streams) {
  std::error_code error;
  const std::filesystem::path folder = std::filesystem::path(options.file).parent_path();
  if (!folder.empty()) std::filesystem::create_directories(folder, error);
  if (error)
    return refuse(remark(text::Code::kCommandCannotWrite, {options.file, error.message()}), kNoAccess, streams);
  qputenv("QT_QPA_PLATFORM", "offscreen");  // paper needs no display
  qInstallMessageHandler(tellQtMessage);
  int argc = 1;
  char name[] = "ebbline";
  char* argv[] = {name, nullptr};
  const QApplication application(argc, argv);
  const QString failed = report::writeReport(content, QString::fromStdString(options.file));
  if (!failed.isEmpty())
    return refuse(remark(text::Code::kCommandCannotWrite, {options.file, failed.toStdString()}), kNoAccess, streams);
  streams.out << fmt::format("{}: report of {} pages written to {}\n", opened.loop.project.title,
                             report::pageCount(content), options.file);
  return kDone;
}

int makeReport(const Options& options, Streams streams) {
  const OpenedLoop opened = openLoop(options.loop, options.output.units());
  printRemarks(opened.remarks, streams);
  if (opened.exit_code != kDone) return opened.exit_code;
  const LoopOptions chosen = withState(options.loop, opened.loop);
  const auto request = requestOf(opened, chosen);
  if (!request) return refuse(request.error(), kUsage, streams);

  network::PartLoadSolver solver(std::make_shared<const network::Network>(opened.network));
  const network::PartLoadGround ground = solver.ground(request->speed);
  const network::PartLoadPicture picture = solver.picture(*request, ground);  // its first, so from the cold start
  if (!picture.summary.usable() || !ground.usable) {
    streams.err << "ebbline: no report: " << (picture.summary.usable() ? ground.why : picture.summary.why) << "\n";
    return kNotUsable;
  }
  const network::SecondOpinion opinion = network::secondOpinion(opened.network, *request);

  report::ReportContent content;
  content.loop = &opened.loop;
  content.file_name = opened.name;
  content.question = options.question;
  content.state_name = stateName(chosen);
  content.strategy = controlInWords(opened.loop, options.output.units());
  content.series_key = seriesKey(opened.loop.control.strategy);
  content.ground = &ground;
  content.picture = &picture;
  content.rows = study::sweep(opened.loop, opened.network);
  study::SweepOptions states;
  states.named_states = true;
  content.state_rows = study::sweep(opened.loop, opened.network, states);
  if (opinion.usable()) content.method_difference = opinion.difference.relative;
  content.units = options.output.units();
  return draw(options, opened, content, streams);
}
#else
int makeReport(const Options&, Streams streams) {
  return refuse(remark(text::Code::kCommandNoWindow), kUsage, streams);
}
#endif

}  // namespace

void addReport(CLI::App& app, Context& context) {
  auto options = std::make_shared<Options>();
  CLI::App* verb = app.add_subcommand("report", "The report for a client as PDF: picture, plot, table, cautions");
  addControlOptions(*verb, options->loop);
  addStateOptions(*verb, options->loop);
  verb->add_option("-o,--output", options->file, "File to write")->capture_default_str();
  verb->add_option("--question", options->question, "The question at the head of the report");
  verb->add_option_function<std::string>(
          "--units", [options](const std::string& units) { options->output.ip = units == "ip"; },
          "si (A4 paper) or ip (Letter paper)")
      ->check(CLI::IsMember({"si", "ip"}))
      ->default_str("si");
  verb->footer(R"(
Examples
  ebbline report office -o out/report.pdf
  ebbline report school --state "Wing C alone" --set-point 10kPa -o short.pdf --units ip)");
  verb->callback(
      [options, &context] { context.chosen = [options, &context] { return makeReport(*options, context.streams); }; });
}

}  // namespace ebbline::app
