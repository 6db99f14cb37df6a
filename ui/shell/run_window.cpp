#include "ui/shell/run_window.h"

#include <algorithm>
#include <cstdlib>

#include <QApplication>
#include <QFileInfo>
#include <QTimer>

#include "resources/samples.h"
#include "ui/shell/main_window.h"

namespace ebbline::shell {

namespace {

bool isSet(const char* name) {
  const char* value = std::getenv(name);
  return value && *value;
}

// Qt ends the program when it finds no display, so it is not asked then.
bool displayInReach() {
  return isSet("DISPLAY") || isSet("WAYLAND_DISPLAY") || isSet("QT_QPA_PLATFORM");
}

void openWhat(MainWindow& window, const QString& what) {
  const auto& samples = resources::sampleNames();
  const std::string name = what.toStdString();
  if (what.isEmpty()) {
    if (!samples.empty())
      window.openSample(QString::fromUtf8(samples.front().data(), static_cast<qsizetype>(samples.front().size())));
  } else if (!QFileInfo::exists(what) && std::find(samples.begin(), samples.end(), name) != samples.end()) {
    window.openSample(what);
  } else {
    window.openPath(what);
  }
}

}  // namespace

int runWindow(const std::string& file, std::optional<quantity::UnitSystem> units) {
  if (!displayInReach()) return kNoDisplay;
  int argc = 1;
  char name[] = "ebbline";
  char* argv[] = {name, nullptr};
  QApplication application(argc, argv);
  QApplication::setApplicationName(QStringLiteral("Ebbline"));
  QApplication::setOrganizationName(QStringLiteral("Ebbline"));
  QApplication::setApplicationVersion(QStringLiteral(EBBLINE_VERSION));
  MainWindow window;
  if (units) window.setUnits(*units);
  window.show();
  // After the first paint, so that the window stands before the file is read.
  QTimer::singleShot(0, &window, [&window, what = QString::fromStdString(file)] { openWhat(window, what); });
  return QApplication::exec();
}

}  // namespace ebbline::shell
