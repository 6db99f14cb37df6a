// ebbline_shots: opens the main window on a file or sample, sets it up and saves a picture of it.
//   ebbline_shots --out a.png [--size 1440x900] [--dark] [--ip] [--whole 46] [--state 1] [--select T1-1]
//                 [--colour pressure|gradient] [--set-point "10 kPa"] [--position] [--hover] FILE

#include <QCommandLineParser>
#include <QTextStream>

#include "tests/ui/ui_support.h"
#include "ui/shell/main_window.h"

namespace {

using ebbline::shell::MainWindow;

bool openWhat(MainWindow& window, const QString& what) {
  return QFile::exists(what) ? window.openPath(what) : window.openSample(what);
}

void settle(MainWindow& window) {
  ebbline::test::waitFor([&] { return !window.model().busy(); });
  QCoreApplication::processEvents();
}

void selectTag(MainWindow& window, const QString& tag) {
  for (const auto& terminal : window.document().loop().terminals)
    if (QString::fromStdString(terminal.tag) == tag) {
      window.loopPane()->select(terminal.id);
      window.partLoadPage()->select(terminal.id);
    }
}

void setUp(MainWindow& window, const QCommandLineParser& options) {
  if (options.isSet("state")) window.model().chooseState(options.value("state").toInt());
  settle(window);
  if (options.isSet("set-point")) {
    auto* field = window.partLoadPage()->control()->fields().front();
    field->setFocus();
    field->selectAll();
    ebbline::test::type(field, options.value("set-point"));
    ebbline::test::key(field, Qt::Key_Return);
    settle(window);
  }
  if (options.isSet("position")) window.model().setMode(ebbline::loop::DemandKind::kPosition);
  settle(window);
  if (options.isSet("whole")) {
    const double to = options.value("whole").toDouble();
    const double from = window.model().wholePercent();
    for (int i = 1; i <= 12; ++i) {
      window.model().setWhole(from + (to - from) * i / 12);
      settle(window);
    }
  }
  if (options.isSet("select")) selectTag(window, options.value("select"));
  if (options.value("colour") == "pressure")
    window.loopPane()->canvas()->setColourBy(ebbline::canvas::ColourBy::kPressure);
  if (options.value("colour") == "gradient")
    window.loopPane()->canvas()->setColourBy(ebbline::canvas::ColourBy::kGradient);
  if (options.isSet("hover")) {
    auto* plot = window.partLoadPage()->plot();
    ebbline::test::moveTo(plot->viewport(), plot->toPixels(plot->marks().back().at).toPoint() + QPoint(3, 3));
  }
  if (options.isSet("check")) {
    window.model().checkNow();
    ebbline::test::waitFor([&] { return window.model().checked().kind == ebbline::page::Checked::Kind::kDone; });
  }
}

}  // namespace

int main() {
  QApplication& application = ebbline::test::application();
  QCommandLineParser options;
  options.addOptions({{"out", "picture", "png"},
                      {"size", "size", "WxH", "1440x900"},
                      {"dark", "dark theme"},
                      {"ip", "IP units"},
                      {"whole", "whole-loop slider", "percent"},
                      {"state", "load state", "index"},
                      {"select", "chosen terminal", "tag"},
                      {"colour", "colour by", "what"},
                      {"hover", "hover the point"},
                      {"set-point", "typed set-point", "text"},
                      {"position", "sliders by position"},
                      {"check", "second method"}});
  options.addPositionalArgument("file", "file or sample");
  QFile arguments("/proc/self/cmdline");
  if (!arguments.open(QIODevice::ReadOnly)) return 2;
  QStringList words;
  for (const QByteArray& word : arguments.readAll().split('\0')) words << QString::fromUtf8(word);
  words.removeLast();
  options.process(words);
  const QStringList size = options.value("size").split('x');
  MainWindow window(false);
  window.resize(size.value(0).toInt(), size.value(1).toInt());
  if (options.isSet("dark")) window.setThemeMode(ebbline::theme::Mode::kDark);
  if (options.isSet("ip")) window.setUnits(ebbline::quantity::UnitSystem::kIp);
  window.show();
  if (!QTest::qWaitForWindowExposed(&window)) return 3;
  const bool opened = openWhat(window, options.positionalArguments().value(0, "office"));
  settle(window);
  if (opened && window.model().network()) setUp(window, options);
  for (int i = 0; i < 5; ++i) QCoreApplication::processEvents();
  QTextStream(stdout) << window.strip()->text() << '\n';
  (void)application;
  return window.grab().save(options.value("out")) ? 0 : 1;
}
