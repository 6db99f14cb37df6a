// Paints the drawing into PNG files, so that people can look at it: canvas_pictures FOLDER [FILE.ebbline …]

#include <QApplication>
#include <QPainter>
#include <QPdfWriter>
#include <QPixmap>
#include <cstdio>

#include "core/loop/file.h"
#include "tests/ui/canvas/trial_loop.h"
#include "ui/canvas/loop_canvas.h"

using namespace ebbline;

namespace {

void take(canvas::LoopCanvas& canvas, const QString& path) {
  QCoreApplication::processEvents();
  if (!canvas.grab().save(path)) std::fprintf(stderr, "cannot write %s\n", qPrintable(path));
}

void pictures(const QString& folder, theme::Mode mode, QSize size) {
  theme::ThemeHolder holder(mode);
  theme::applyTheme(*qApp, holder.theme());
  canvas::LoopCanvas canvas(holder);
  canvas.resize(size);
  const loop::Loop loop = trial::building(4, 6);
  canvas.setLoop(loop);
  canvas.setResults(trial::results(loop, 0.46));
  canvas.show();
  const QString stem = folder + (mode == theme::Mode::kDark ? "/dark" : "/light") + QString("-%1").arg(size.width());
  take(canvas, stem + "-ink.png");
  canvas.setColourBy(canvas::ColourBy::kPressure);
  canvas.select(loop.terminals[8].id);
  take(canvas, stem + "-pressure.png");
  canvas.setColourBy(canvas::ColourBy::kGradient);
  canvas.select(loop.paired_runs[3].id);
  canvas.zoomBy(1.8, QPointF(size.width() * 0.2, size.height() * 0.8));
  take(canvas, stem + "-gradient.png");
}

void sample(const QString& folder, const QString& file, QSize size) {
  const loop::Reading reading = loop::readLoopFile(file.toStdString());
  theme::ThemeHolder holder(theme::Mode::kLight);
  canvas::LoopCanvas canvas(holder);
  canvas::PaintOptions options;
  options.sizes = options.elevations = true;
  canvas.setOptions(options);
  canvas.resize(size);
  canvas.setLoop(reading.loop);
  canvas.show();
  take(canvas, folder + "/" + file.section('/', -1).section('.', 0, 0) + QString("-%1.png").arg(size.width()));
}

void page(const QString& folder) {
  QPdfWriter writer(folder + "/page.pdf");
  writer.setPageSize(QPageSize(QPageSize::A4));
  writer.setResolution(96);
  QPainter painter(&writer);
  const loop::Loop loop = trial::building(4, 6);
  const network::Results results = trial::results(loop, 0.46);
  canvas::LoopPicture picture;
  picture.loop = &loop;
  picture.results = &results;
  canvas::paintLoop(painter, {0, 40, 700, 420}, picture, theme::printTheme());
  picture.colourBy = canvas::ColourBy::kPressure;
  picture.units = quantity::UnitSystem::kIp;
  canvas::paintLoop(painter, {0, 500, 700, 420}, picture, theme::printTheme());
}

}  // namespace

int main(int argc, char** argv) {
  QApplication application(argc, argv);
  const QString folder = argc > 1 ? argv[1] : ".";
  for (const theme::Mode mode : {theme::Mode::kLight, theme::Mode::kDark})
    for (const QSize size : {QSize(568, 700), QSize(1280, 800), QSize(1920, 1080)}) pictures(folder, mode, size);
  page(folder);
  for (int i = 2; i < argc; ++i)
    for (const QSize size : {QSize(568, 700), QSize(1280, 800)}) sample(folder, argv[i], size);
  return 0;
}
