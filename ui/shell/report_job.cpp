// The report of what is shown: solved afresh from the standard cold start away from the UI thread, then written.

#include <QFileInfo>

#include "core/study/sweep/sweep.h"
#include "ui/report/report.h"
#include "ui/shell/main_window.h"

namespace ebbline::shell {

namespace {

/// Everything the report borrows, kept together until it is written.
struct Material {
  std::shared_ptr<const loop::Loop> loop;
  network::Network network;
  network::PartLoadGround ground;
  network::PartLoadPicture picture;
  std::vector<study::SweepRow> rows, state_rows;
  std::optional<double> method_difference;
};

std::shared_ptr<Material> solveAfresh(std::shared_ptr<const loop::Loop> loop, const network::Network& network,
                                      const network::Request& request, const std::stop_token& stop) {
  auto material = std::make_shared<Material>();
  material->loop = std::move(loop);
  material->network = network;
  network::PartLoadSolver solver(std::make_shared<const network::Network>(network));
  material->ground = solver.ground(request.speed, stop);
  material->picture = solver.picture(request, material->ground, stop);
  material->rows = study::sweep(*material->loop, material->network, {}, stop);
  if (!material->loop->load_states.empty()) {
    study::SweepOptions named;
    named.named_states = true;
    material->state_rows = study::sweep(*material->loop, material->network, named, stop);
  }
  const network::SecondOpinion opinion = network::secondOpinion(network, request, stop);
  if (opinion.usable()) material->method_difference = opinion.difference.relative;
  return material;
}

}  // namespace

void MainWindow::writeReportTo(const QString& path) {
  const network::PartLoadPicture* picture = model_->picture();
  if (!model_->network() || !picture || !picture->summary.usable()) {
    strip_->say(tr("No report: the state shown is not solved."));
    emit reportWritten(path, tr("not solved"));
    return;
  }
  strip_->say(tr("writing the report"));
  const QString name = document_.path().isEmpty() ? document_.title() : QFileInfo(document_.path()).fileName();
  const QString state = pane_->stateChooser()->text();
  reporter_.start([this, path, name, state, units = units_, loop = document_.snapshot(),
                   network = model_->networkShared(), request = picture->request](const work::Job& job) -> work::Then {
    const auto material = solveAfresh(loop, *network, request, job.stop());
    return [this, path, name, state, units, material] {
      report::ReportContent content;
      content.loop = material->loop.get();
      content.file_name = name.toStdString();
      content.state_name = state.toStdString();
      content.strategy = page::ControlLine::words(*material->loop, units).toStdString();
      content.series_key = page::ControlLine::seriesKey(material->loop->control.strategy).toStdString();
      content.ground = &material->ground;
      content.picture = &material->picture;
      content.rows = material->rows;
      content.state_rows = material->state_rows;
      content.method_difference = material->method_difference;
      content.units = units;
      const QString error = material->picture.summary.usable() ? report::writeReport(content, path)
                                                               : tr("the state shown could not be solved afresh");
      strip_->say(error.isEmpty() ? tr("report saved as %1").arg(path) : tr("no report: %1").arg(error));
      emit reportWritten(path, error);
    };
  });
}

}  // namespace ebbline::shell
