// The window as a person uses it: mouse and keys go to the window, never to a widget's slots.

#include <QAction>
#include <QCheckBox>
#include <QFile>
#include <QHeaderView>
#include <QLineEdit>
#include <QMenu>
#include <QMenuBar>
#include <QTemporaryDir>
#include <QTimer>
#include <QToolButton>
#include <QUndoStack>

#include <gtest/gtest.h>

#include "resources/samples.h"
#include "tests/ui/ui_support.h"
#include "ui/shell/main_window.h"

namespace ebbline::shell {
namespace {

class WindowTest : public testing::Test {
 protected:
  void SetUp() override {
    test::application();
    window_ = std::make_unique<MainWindow>(false);
    window_->resize(1440, 900);
    window_->show();
    ASSERT_TRUE(QTest::qWaitForWindowExposed(window_.get()));
    window_->activateWindow();
  }

  void openSample(const char* name) {
    ASSERT_TRUE(window_->openSample(name));
    settle();
    ASSERT_NE(window_->model().picture(), nullptr);
    ASSERT_TRUE(window_->model().picture()->summary.usable()) << window_->model().picture()->summary.why;
  }
  void settle() {
    ASSERT_TRUE(test::waitFor([&] { return !window_->model().busy(); }));
    QCoreApplication::processEvents();
  }
  static QPoint handle(const page::PercentSlider* slider, double percent) {
    return {static_cast<int>(8 + (slider->width() - 16) * percent / 100), slider->height() / 2};
  }
  void drag(page::PercentSlider* slider, double to) {
    test::press(slider, handle(slider, slider->percent()));
    for (int i = 1; i <= 8; ++i)
      test::moveTo(slider, handle(slider, slider->percent() + (to - slider->percent()) * i / 8));
    test::release(slider, handle(slider, to));
    settle();
  }
  page::LoadSliders& sliders() { return *window_->loopPane()->sliders(); }
  page::TerminalTable& table() { return *window_->partLoadPage()->table(); }
  plot::HeadFlowPlot& plot() { return *window_->partLoadPage()->plot(); }
  QPointF operating() {
    for (const plot::Mark& mark : plot().marks())
      if (mark.shape == plot::Mark::Shape::kOperating) return mark.at;
    return {-1, -1};
  }
  QString cell(int row, page::TerminalTableModel::Column column) {
    return table().model()->index(row, column).data().toString();
  }
  QAction* action(const QString& menu, const QString& words) {
    for (QAction* top : window_->findChild<QMenuBar*>()->actions())
      if (top->text().remove('&') == menu)
        for (QAction* one : top->menu()->actions())
          if (one->text().remove('&') == words) return one;
    return nullptr;
  }

  std::unique_ptr<MainWindow> window_;
};

TEST_F(WindowTest, DraggingTheWholeLoopMovesPlotDrawingAndTableTogether) {
  openSample("office");
  drag(sliders().whole()->slider(), 90);
  const QPointF before = operating();
  const QString delivered = cell(5, page::TerminalTableModel::kDelivered);
  const QImage drawing = window_->loopPane()->canvas()->grab().toImage();
  drag(sliders().whole()->slider(), 30);
  EXPECT_NEAR(window_->model().wholePercent(), 30, 1.0);
  EXPECT_LT(operating().x(), 0.6 * before.x());
  EXPECT_NE(cell(5, page::TerminalTableModel::kDelivered), delivered);
  EXPECT_NE(window_->loopPane()->canvas()->grab().toImage(), drawing);
  EXPECT_GT(plot().trail().size(), 2U);
}

TEST_F(WindowTest, AZoneSliderMovesItsOwnTerminalsAlone) {
  openSample("office");
  ASSERT_GE(sliders().zones().size(), 2U);
  const double other = window_->model().zonePercent(window_->model().zonesShown()[1]);
  drag(sliders().zones()[0]->slider(), 15);
  EXPECT_NEAR(window_->model().zonePercent(window_->model().zonesShown()[0]), 15, 2.0);
  EXPECT_DOUBLE_EQ(window_->model().zonePercent(window_->model().zonesShown()[1]), other);
}

TEST_F(WindowTest, MovingTheWholeLoopAndBackRestoresEveryTerminal) {
  openSample("office");
  drag(sliders().whole()->slider(), 60);
  std::vector<double> before;
  for (int i = 0; i < 24; ++i) before.push_back(window_->model().terminalPercent(i));
  const double whole = window_->model().wholePercent();
  window_->model().setWhole(5);
  window_->model().setWhole(97);
  window_->model().setWhole(whole);
  for (int i = 0; i < 24; ++i) EXPECT_NEAR(window_->model().terminalPercent(i), before[i], 1e-6);
}

TEST_F(WindowTest, ClickingARowChoosesTheTerminalEverywhereAndShowsItsSlider) {
  openSample("office");
  EXPECT_FALSE(sliders().terminal()->isVisible());
  const QRect row = table().visualRect(table().model()->index(2, 1));
  test::click(table().viewport(), row.center());
  const loop::Id id = table().selected();
  ASSERT_NE(id, 0U);
  EXPECT_EQ(window_->loopPane()->canvas()->selected(), id);
  ASSERT_TRUE(sliders().terminal()->isVisible());
  drag(sliders().terminal()->slider(), 40);
  const int at = table().terminals()->rowOf(id);
  int index = 0;
  for (std::size_t i = 0; i < window_->document().loop().terminals.size(); ++i)
    if (window_->document().loop().terminals[i].id == id) index = static_cast<int>(i);
  EXPECT_NEAR(window_->model().terminalPercent(index), 40, 1.5);
  EXPECT_EQ(table().selected(), id);
  EXPECT_TRUE(table().selectionModel()->isRowSelected(at));
}

TEST_F(WindowTest, ClickingATerminalOnTheDrawingChoosesItsRow) {
  openSample("office");
  const loop::Terminal& terminal = window_->document().loop().terminals.at(7);
  auto* canvas = window_->loopPane()->canvas();
  test::click(canvas, canvas->toScreen(terminal.at).toPoint());
  EXPECT_EQ(table().selected(), terminal.id);
}

TEST_F(WindowTest, ByPositionNothingMovesUntilASliderDoes) {
  openSample("office");
  drag(sliders().whole()->slider(), 70);
  const QPointF before = operating();
  window_->model().setMode(loop::DemandKind::kPosition);
  settle();
  EXPECT_NEAR(operating().x(), before.x(), 1e-3 * before.x());
  EXPECT_NEAR(operating().y(), before.y(), 1e-3 * before.y());
  EXPECT_EQ(cell(0, page::TerminalTableModel::kRequested), QString(theme::kEnDash));
}

TEST_F(WindowTest, ASetPointTypedInAnotherUnitIsTakenAndCanBeUndone) {
  openSample("school");
  auto* field = window_->partLoadPage()->control()->fields().at(0);
  const loop::Loop before = window_->document().loop();
  test::click(field, field->rect().center());
  field->selectAll();
  test::type(field, "2 psi");
  test::key(field, Qt::Key_Return);
  settle();
  ASSERT_NE(window_->document().loop(), before);
  const loop::Id sensor = before.control.sensors.at(0);
  for (const loop::Sensor& one : window_->document().loop().sensors) {
    if (one.id != sensor) continue;
    EXPECT_NEAR(*one.set_point_kpa, 13.789514586336722, 1e-9);  // 2 psi, exact definitions
  }
  window_->loopPane()->canvas()->setFocus();
  test::key(window_.get(), Qt::Key_Z, Qt::ControlModifier);
  settle();
  EXPECT_EQ(window_->document().loop(), before);
}

TEST_F(WindowTest, ACautionOfAFileIsShownBeforeThePage) {
  QTemporaryDir folder;
  QFile file(folder.filePath("misspelt.ebbline"));
  ASSERT_TRUE(file.open(QIODevice::WriteOnly));
  file.write(QByteArray::fromStdString(std::string(resources::sampleText("school"))).replace("\"strategy\"", "\"stratgy\""));
  file.close();
  EXPECT_TRUE(window_->openPath(file.fileName()));
  settle();
  EXPECT_TRUE(window_->showsRemarks());
  EXPECT_TRUE(window_->remarkList()->text().contains("stratgy")) << window_->remarkList()->text().toStdString();
}

TEST_F(WindowTest, AtGivenPositionsNobodyIsCalledSupplied) {
  openSample("school");
  EXPECT_TRUE(window_->partLoadPage()->countText().contains("supplied"));
  window_->model().setMode(loop::DemandKind::kPosition);
  settle();
  EXPECT_FALSE(window_->partLoadPage()->countText().contains("supplied"));
}

TEST_F(WindowTest, AnotherStrategyIsChosenFromTheLineAndUndone) {
  openSample("school");
  const loop::Loop before = window_->document().loop();
  auto* button = window_->partLoadPage()->control()->findChild<QToolButton*>();
  ASSERT_NE(button, nullptr);
  QTimer::singleShot(50, [button] {  // the menu runs its own event loop
    test::key(button->menu(), Qt::Key_Down);
    test::key(button->menu(), Qt::Key_Return);
  });
  button->setFocus();
  test::key(window_.get(), Qt::Key_Space);
  settle();
  EXPECT_EQ(window_->document().loop().control.strategy, loop::Strategy::kConstantSpeed);
  EXPECT_NEAR(window_->model().picture()->state.speed, before.control.speed_percent / 100, 1e-12);
  window_->loopPane()->canvas()->setFocus();
  test::key(window_.get(), Qt::Key_Z, Qt::ControlModifier);
  settle();
  EXPECT_EQ(window_->document().loop(), before);
}

TEST_F(WindowTest, ABadEntryKeepsItsTextSaysWhyAndChangesNothing) {
  openSample("school");
  auto* field = window_->partLoadPage()->control()->fields().at(0);
  const loop::Loop before = window_->document().loop();
  for (const char* bad : {"twelve", "12 kg", "-5", "0"}) {
    test::click(field, field->rect().center());
    field->selectAll();
    test::type(field, bad);
    test::key(field, Qt::Key_Return);
    EXPECT_EQ(field->text(), bad);
    EXPECT_TRUE(field->property("wrong").toBool()) << bad;
    EXPECT_FALSE(field->accessibleDescription().isEmpty()) << bad;
  }
  EXPECT_EQ(window_->document().loop(), before);
  test::key(field, Qt::Key_Escape);
  EXPECT_FALSE(field->property("wrong").toBool());
}

TEST_F(WindowTest, ALowerSetPointShowsWhoIsUnderSuppliedInStripAndTable) {
  openSample("school");
  auto* field = window_->partLoadPage()->control()->fields().at(0);
  test::click(field, field->rect().center());
  field->selectAll();
  test::type(field, "10 kPa");
  test::key(field, Qt::Key_Return);
  settle();
  ASSERT_GT(window_->model().picture()->under_supplied, 0);
  EXPECT_TRUE(window_->strip()->text().contains("under-supplied")) << window_->strip()->text().toStdString();
  EXPECT_NE(cell(0, page::TerminalTableModel::kShortfall), "none");
  auto* found = window_->strip()->findChild<FindingButton*>();
  test::click(found, found->rect().center());
  EXPECT_EQ(table().selected(), table().terminals()->idAt(0));
}

TEST_F(WindowTest, UnitsChangeEveryNumberAndBack) {
  openSample("office");
  const QString si = cell(0, page::TerminalTableModel::kDelivered);
  test::key(window_.get(), Qt::Key_U, Qt::ControlModifier);
  EXPECT_TRUE(table().model()->headerData(1, Qt::Horizontal, Qt::DisplayRole).toString().contains("gpm"));
  EXPECT_NE(cell(0, page::TerminalTableModel::kDelivered), si);
  EXPECT_TRUE(plot().csv().contains("gpm"));
  test::key(window_.get(), Qt::Key_U, Qt::ControlModifier);
  EXPECT_EQ(cell(0, page::TerminalTableModel::kDelivered), si);
}

TEST_F(WindowTest, DarkAndLightRepaintTheWholeWindow) {
  openSample("office");
  const QColor light = window_->grab().toImage().pixelColor(20, 300);
  test::key(window_.get(), Qt::Key_T, Qt::ControlModifier);
  const QColor dark = window_->grab().toImage().pixelColor(20, 300);
  EXPECT_GT(light.lightness(), 200);
  EXPECT_LT(dark.lightness(), 60);
  test::key(window_.get(), Qt::Key_T, Qt::ControlModifier);
  EXPECT_EQ(window_->grab().toImage().pixelColor(20, 300), light);
}

TEST_F(WindowTest, ABadFileIsListedInPlaceOfThePageAndTheLoopIsKept) {
  openSample("office");
  const loop::Loop before = window_->document().loop();
  QTemporaryDir folder;
  QFile bad(folder.filePath("bad.ebbline"));
  ASSERT_TRUE(bad.open(QIODevice::WriteOnly));
  bad.write("{\n \"schema_version\": 1,\n \"schema_version\": 1\n}\n");
  bad.close();
  EXPECT_FALSE(window_->openPath(bad.fileName()));
  EXPECT_TRUE(window_->showsRemarks());
  EXPECT_TRUE(window_->remarkList()->text().contains("line")) << window_->remarkList()->text().toStdString();
  EXPECT_EQ(window_->document().loop(), before);
  auto* back = window_->remarkList()->findChildren<QPushButton*>().at(1);
  test::click(back, back->rect().center());
  EXPECT_FALSE(window_->showsRemarks());
}

TEST_F(WindowTest, EveryPartIsReachedByTabAndMovedByKeys) {
  openSample("office");
  test::key(window_.get(), Qt::Key_L, Qt::ControlModifier);
  ASSERT_EQ(QApplication::focusWidget(), sliders().whole()->slider());
  const double before = window_->model().wholePercent();
  for (int i = 0; i < 5; ++i) test::key(window_.get(), Qt::Key_Left);
  settle();
  EXPECT_NEAR(window_->model().wholePercent(), before - 5, 0.2);
  QSet<QWidget*> reached;
  for (int i = 0; i < 80; ++i) {
    test::key(window_.get(), Qt::Key_Tab);
    if (QApplication::focusWidget()) reached << QApplication::focusWidget();
  }
  EXPECT_TRUE(reached.contains(&table()));
  EXPECT_TRUE(reached.contains(&plot()));
  EXPECT_TRUE(reached.contains(window_->loopPane()->canvas()));
  EXPECT_TRUE(reached.contains(sliders().zones().at(0)->slider()));
  EXPECT_TRUE(reached.contains(window_->partLoadPage()->control()->fields().at(0)));
  for (QWidget* widget : reached)
    EXPECT_FALSE(widget->accessibleName().isEmpty() && widget->toolTip().isEmpty() &&
                 !widget->inherits("QAbstractButton"))
        << widget->metaObject()->className();
}

TEST_F(WindowTest, TheSecondMethodIsAskedAndItsAgreementStandsInTheStrip) {
  openSample("office");
  test::key(window_.get(), Qt::Key_R, Qt::ControlModifier);
  ASSERT_TRUE(test::waitFor([&] { return window_->model().checked().kind == page::Checked::Kind::kDone; }));
  EXPECT_TRUE(window_->strip()->text().contains("second method agrees")) << window_->strip()->text().toStdString();
  drag(sliders().whole()->slider(), 35);
  EXPECT_FALSE(window_->strip()->text().contains("second method agrees"));
}

int receiversOf(const QAction& action) {
  struct Peek : QAction {
    using QAction::receivers;
  };
  return (action.*&Peek::receivers)(SIGNAL(triggered(bool)));
}

TEST_F(WindowTest, NoMenuEntryIsDead) {
  openSample("office");
  for (const char* menu : {"File", "Edit", "Loop", "View", "Help"}) {
    QMenu* found = nullptr;
    for (QAction* top : window_->findChild<QMenuBar*>()->actions())
      if (top->text().remove('&') == menu) found = top->menu();
    ASSERT_NE(found, nullptr) << menu;
    for (QAction* one : found->actions()) {
      if (one->isSeparator()) continue;
      const bool leads = one->menu() || receiversOf(*one) > 0;
      EXPECT_TRUE(leads) << one->text().toStdString();
    }
  }
}

TEST_F(WindowTest, TheReportIsWritten) {
  openSample("office");
  QTemporaryDir folder;
  const QString path = folder.filePath("report.pdf");
  QString error = "not yet";
  QObject::connect(window_.get(), &MainWindow::reportWritten, window_.get(),
                   [&](const QString&, const QString& told) { error = told; });
  window_->writeReportTo(path);
  ASSERT_TRUE(test::waitFor([&] { return error != "not yet"; }, 60000));
  EXPECT_EQ(error, "");
  EXPECT_GT(QFile(path).size(), 5000);
}

TEST_F(WindowTest, EverySampleOpensAndIsSolved) {
  for (const char* name : {"office", "school", "laboratory", "closed-form"}) openSample(name);
}

}  // namespace
}  // namespace ebbline::shell
