#pragma once
// What the tests of the window share: one application, waiting without sleeping, real events to the window.

#include <functional>

#include <QApplication>
#include <QElapsedTimer>
#include <QEventLoop>
#include <QPoint>
#include <QTest>
#include <QTimer>
#include <QWidget>
#include <QWindow>

namespace ebbline::test {

/// The one QApplication of the process; without a display it paints off screen. It is left standing at the end on
/// purpose: ended by a static destructor it would outlive parts of Qt and crash there.
inline QApplication& application() {
  if (qEnvironmentVariableIsEmpty("DISPLAY") && qEnvironmentVariableIsEmpty("QT_QPA_PLATFORM"))
    qputenv("QT_QPA_PLATFORM", "offscreen");
  static int argc = 1;
  static char name[] = "ebbline-test";
  static char* argv[] = {name, nullptr};
  static auto* const one = new QApplication(argc, argv);
  return *one;
}

/// Runs the event loop until `done` holds; false after `most_ms`.
inline bool waitFor(const std::function<bool()>& done, int most_ms = 20000) {
  QElapsedTimer clock;
  clock.start();
  while (!done()) {
    if (clock.elapsed() > most_ms) return false;
    QCoreApplication::processEvents(QEventLoop::AllEvents | QEventLoop::WaitForMoreEvents, 10);
    QTimer::singleShot(10, [] {});  // so that waiting for more events ends
  }
  return true;
}

/// Where a place of a widget is in its window.
inline QPoint inWindow(const QWidget* widget, QPoint place) {
  return widget->mapTo(widget->window(), place);
}

inline QWindow* windowOf(const QWidget* widget) {
  return widget->window()->windowHandle();
}

inline void press(const QWidget* widget, QPoint place) {
  QTest::mousePress(windowOf(widget), Qt::LeftButton, {}, inWindow(widget, place));
}
inline void moveTo(const QWidget* widget, QPoint place) {
  QTest::mouseMove(windowOf(widget), inWindow(widget, place));
}
inline void release(const QWidget* widget, QPoint place) {
  QTest::mouseRelease(windowOf(widget), Qt::LeftButton, {}, inWindow(widget, place));
}
inline void click(const QWidget* widget, QPoint place) {
  press(widget, place);
  release(widget, place);
}
inline void key(const QWidget* widget, Qt::Key key, Qt::KeyboardModifiers modifiers = {}) {
  QTest::keyClick(windowOf(widget), key, modifiers);
}
inline void type(const QWidget* widget, const QString& text) {
  for (const QChar c : text) QTest::keyClick(windowOf(widget), c.toLatin1());
}

}  // namespace ebbline::test
