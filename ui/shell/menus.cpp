// The menus and what they do with files.

#include <QActionGroup>
#include <QFileDialog>
#include <QFileInfo>
#include <QMenu>
#include <QMenuBar>

#include "resources/samples.h"
#include "ui/report/report.h"
#include "ui/shell/help.h"
#include "ui/shell/main_window.h"

namespace ebbline::shell {

namespace {

const QString kFilter = QStringLiteral("Ebbline (*.ebbline)");

QString sampleWords(std::string_view name) {
  if (name == "office") return MainWindow::tr("Office, chilled water");
  if (name == "school") return MainWindow::tr("School, hot water");
  if (name == "laboratory") return MainWindow::tr("Laboratory, reverse return");
  if (name == "closed-form") return MainWindow::tr("Four branches, closed form");
  return QString::fromUtf8(name.data(), static_cast<qsizetype>(name.size()));
}

QList<QAction*> exclusive(QMenu* menu, const QStringList& words) {
  auto* group = new QActionGroup(menu);
  QList<QAction*> actions;
  for (const QString& word : words) {
    QAction* action = menu->addAction(word);
    action->setCheckable(true);
    group->addAction(action);
    actions << action;
  }
  return actions;
}

}  // namespace

void MainWindow::buildMenus() {
  buildFileMenu();
  buildEditMenu();
  buildLoopMenu();
  buildViewMenu();
  buildHelpMenu();
}

void MainWindow::buildFileMenu() {
  QMenu* file = menus_->addMenu(tr("&File"));
  file->addAction(tr("&Open…"), QKeySequence::Open, this, [this] {
    if (mayLoseWork()) openByDialog();
  });
  QMenu* samples = file->addMenu(tr("Open s&ample"));
  for (const std::string_view name : resources::sampleNames()) {
    const QString key = QString::fromUtf8(name.data(), static_cast<qsizetype>(name.size()));
    samples->addAction(sampleWords(name), this, [this, key] {
      if (mayLoseWork()) openSample(key);
    });
  }
  file->addSeparator();
  saveAction_ = file->addAction(tr("&Save"), QKeySequence::Save, this, [this] { save(); });
  QAction* as =
      file->addAction(tr("Save &as…"), QKeySequence(Qt::CTRL | Qt::SHIFT | Qt::Key_S), this, [this] { saveAs(); });
  reportAction_ = file->addAction(tr("Save &report as PDF…"), QKeySequence::Print, this, &MainWindow::reportByDialog);
  reportAction_->setEnabled(false);
  as->setEnabled(false);
  connect(&document_, &document::Document::replaced, as, [this, as] { as->setEnabled(!document_.isEmpty()); });
  file->addSeparator();
  file->addAction(tr("&Quit"), QKeySequence::Quit, this, &QWidget::close);
}

void MainWindow::buildEditMenu() {
  QMenu* edit = menus_->addMenu(tr("&Edit"));
  QAction* undo = document_.undoStack().createUndoAction(this, tr("&Undo"));
  QAction* redo = document_.undoStack().createRedoAction(this, tr("&Redo"));
  undo->setShortcut(QKeySequence::Undo);
  redo->setShortcut(QKeySequence(Qt::CTRL | Qt::SHIFT | Qt::Key_Z));
  edit->addAction(undo);
  edit->addAction(redo);
}

void MainWindow::buildLoopMenu() {
  QMenu* menu = menus_->addMenu(tr("&Loop"));
  QMenu* colour = menu->addMenu(tr("&Colour by"));
  const QList<QAction*> colours = exclusive(colour, {tr("&nothing"), tr("&pressure"), tr("&friction gradient")});
  colours[0]->setChecked(true);
  const canvas::ColourBy kinds[] = {canvas::ColourBy::kNone, canvas::ColourBy::kPressure, canvas::ColourBy::kGradient};
  for (int i = 0; i < 3; ++i)
    connect(colours[i], &QAction::triggered, this, [this, kind = kinds[i]] { pane_->canvas()->setColourBy(kind); });
  QMenu* units = menu->addMenu(tr("&Units"));
  unitActions_ = exclusive(units, {tr("&SI"), tr("&IP")});
  unitActions_[0]->setChecked(true);
  connect(unitActions_[0], &QAction::triggered, this, [this] { setUnits(quantity::UnitSystem::kSi); });
  connect(unitActions_[1], &QAction::triggered, this, [this] { setUnits(quantity::UnitSystem::kIp); });
  menu->addAction(tr("&Other units"), QKeySequence(Qt::CTRL | Qt::Key_U), this, [this] {
    setUnits(units_ == quantity::UnitSystem::kSi ? quantity::UnitSystem::kIp : quantity::UnitSystem::kSi);
  });
  menu->addSeparator();
  checkAction_ = menu->addAction(tr("Check this &result"), QKeySequence(Qt::CTRL | Qt::Key_R), this,
                                 [this] { model_->checkNow(); });
  checkAction_->setEnabled(false);
  menu->addAction(tr("&Whole-loop slider"), QKeySequence(Qt::CTRL | Qt::Key_L), this,
                  [this] { pane_->sliders()->whole()->slider()->setFocus(Qt::ShortcutFocusReason); });
}

void MainWindow::buildViewMenu() {
  QMenu* view = menus_->addMenu(tr("&View"));
  themeActions_ = exclusive(view, {tr("&Light"), tr("&Dark")});
  connect(themeActions_[0], &QAction::triggered, this, [this] { setThemeMode(theme::Mode::kLight); });
  connect(themeActions_[1], &QAction::triggered, this, [this] { setThemeMode(theme::Mode::kDark); });
  view->addAction(tr("Light or dark"), QKeySequence(Qt::CTRL | Qt::Key_T), this,
                  [this] { setThemeMode(holder_.theme().dark() ? theme::Mode::kLight : theme::Mode::kDark); });
  view->addSeparator();
  view->addAction(tr("&Zoom to fit"), QKeySequence(Qt::CTRL | Qt::Key_0), this, [this] { pane_->canvas()->fit(); });
}

void MainWindow::buildHelpMenu() {
  QMenu* help = menus_->addMenu(tr("&Help"));
  help->addAction(tr("&Keyboard"), QKeySequence::HelpContents, this, [this] { showKeyboard(this); });
  help->addAction(tr("&About Ebbline"), this, [this] { showAbout(this); });
}

void MainWindow::openByDialog() {
  const QString path = QFileDialog::getOpenFileName(this, tr("Open loop"), {}, kFilter);
  if (!path.isEmpty()) openPath(path);
}

bool MainWindow::save() {
  return document_.path().isEmpty() ? saveAs() : writeTo(document_.path());
}

bool MainWindow::saveAs() {
  QString path = QFileDialog::getSaveFileName(this, tr("Save loop"), document_.path(), kFilter);
  if (path.isEmpty()) return false;
  if (QFileInfo(path).suffix().isEmpty()) path += QStringLiteral(".ebbline");
  return writeTo(path);
}

bool MainWindow::writeTo(const QString& path) {
  const std::vector<text::Remark> remarks = document_.save(path);
  if (text::anyFault(remarks)) {
    showRemarks(tr("%1 was not saved").arg(QFileInfo(path).fileName()), remarks);
    return false;
  }
  strip_->say(tr("saved as %1").arg(path));
  return true;
}

void MainWindow::reportByDialog() {
  QString path = QFileDialog::getSaveFileName(this, tr("Save report"), QStringLiteral("report.pdf"),
                                              QStringLiteral("PDF (*.pdf)"));
  if (path.isEmpty()) return;
  if (QFileInfo(path).suffix().isEmpty()) path += QStringLiteral(".pdf");
  writeReportTo(path);
}

}  // namespace ebbline::shell
