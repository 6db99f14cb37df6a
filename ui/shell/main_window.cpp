#include "ui/shell/main_window.h"

#include <algorithm>
#include <utility>

#include <QApplication>
#include <QCloseEvent>
#include <QDropEvent>
#include <QFileInfo>
#include <QHBoxLayout>
#include <QMenuBar>
#include <QMessageBox>
#include <QMimeData>
#include <QPainter>
#include <QSettings>
#include <QSplitter>
#include <QStackedWidget>
#include <QVBoxLayout>

#include "resources/samples.h"

namespace ebbline::shell {

HeaderBar::HeaderBar(const theme::ThemeHolder& holder, QWidget* parent) : QWidget(parent), holder_(holder) {
  setProperty("look", "bar");
  setAttribute(Qt::WA_StyledBackground);
  setFixedHeight(holder.theme().space.toolbar);
  left_ = new QHBoxLayout;
  right_ = new QHBoxLayout;
  left_->setSpacing(4);
  right_->setSpacing(8);
  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(0, 0, 12, 0);
  row->addLayout(left_);
  row->addStretch(1);
  row->addLayout(right_);
}

void HeaderBar::setTitle(const QString& title, bool dirty) {
  title_ = title;
  dirty_ = dirty;
  update();
}

void HeaderBar::paintEvent(QPaintEvent* event) {
  QWidget::paintEvent(event);
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  painter.setFont(holder_.theme().font(theme::Text::kStrong));
  painter.setPen(holder_.theme().colours.ink1);
  const QFontMetricsF metrics(painter.font());
  // Centred in the window, but never under the menus or the switches.
  const double from = left_->geometry().right() + 16;
  const double to = right_->geometry().left() - 16;
  const QString text = metrics.elidedText(title_, Qt::ElideRight, std::max(0.0, to - from - 16));
  const double wide = metrics.horizontalAdvance(text);
  const double left = std::clamp((width() - wide) / 2, from, std::max(from, to - wide - 16));
  painter.drawText(QRectF(left, 0, wide + 2, height()), Qt::AlignVCenter, text);
  if (!dirty_) return;
  painter.setPen(Qt::NoPen);
  painter.setBrush(holder_.theme().colours.accent);
  painter.drawEllipse(QPointF(left + wide + 10, height() / 2.0 + 1), 3, 3);
}

MainWindow::MainWindow(bool useSettings, QWidget* parent)
    : QMainWindow(parent), useSettings_(useSettings), holder_(theme::Mode::kLight) {
  setAttribute(Qt::WA_StyledBackground);
  setAcceptDrops(true);
  setMinimumSize(960, 600);
  resize(1440, 900);
  applyLook();  // first: a widget takes the typeface that stands when it is made
  model_ = new page::PartLoadModel(document_, this);
  buildHeader();
  buildMenus();
  buildBody();
  connectParts();
  setThemeMode(theme::Mode::kLight);
  if (useSettings_) readSettings();
  refreshTitle();
}

MainWindow::~MainWindow() {
  // The document outlives the widgets that show it; they hear no more of it.
  document_.undoStack().disconnect();
  delete centralWidget();
  delete model_;
}

void MainWindow::buildHeader() {
  header_ = new HeaderBar(holder_);
  menus_ = new QMenuBar;
  menus_->setNativeMenuBar(false);
  menus_->setSizePolicy(QSizePolicy::Maximum, QSizePolicy::Preferred);
  header_->left()->addWidget(menus_, 0, Qt::AlignVCenter);
  QUndoStack& stack = document_.undoStack();
  const auto button = [&](theme::Icon icon, const QString& words, auto slot, auto signal, bool enabled) {
    auto* made = new theme::IconButton(icon, words, holder_);
    made->setEnabled(enabled);
    connect(made, &QAbstractButton::clicked, &stack, slot);
    connect(&stack, signal, made, &QWidget::setEnabled);
    header_->left()->addWidget(made);
  };
  button(theme::Icon::kUndo, tr("Undo (Ctrl+Z)"), &QUndoStack::undo, &QUndoStack::canUndoChanged, false);
  button(theme::Icon::kRedo, tr("Redo (Ctrl+Shift+Z)"), &QUndoStack::redo, &QUndoStack::canRedoChanged, false);
  unitSwitch_ = new theme::SegmentedSwitch({tr("SI"), tr("IP")}, holder_);
  unitSwitch_->setAccessibleName(tr("Units"));
  themeButton_ = new theme::IconButton(theme::Icon::kMoon, tr("Light or dark (Ctrl+T)"), holder_);
  header_->right()->addWidget(unitSwitch_);
  header_->right()->addWidget(themeButton_);
  setMenuWidget(header_);
}

void MainWindow::buildBody() {
  auto* body = new QWidget;
  auto* column = new QVBoxLayout(body);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(0);
  auto* pages = new QWidget;
  pages->setProperty("look", "bar");
  pages->setAttribute(Qt::WA_StyledBackground);
  pages->setFixedHeight(holder_.theme().space.toolbar);
  auto* pagesRow = new QHBoxLayout(pages);
  pagesRow->setContentsMargins(2, 0, 16, 0);
  tabs_ = new theme::TextTabs(holder_);
  tabs_->setAccessibleName(tr("Pages"));
  tabs_->addTab(tr("Part load"));
  pagesRow->addWidget(tabs_);
  pagesRow->addStretch(1);
  pane_ = new page::LoopPane(*model_, holder_);
  page_ = new page::PartLoadPage(*model_, holder_);
  remarks_ = new page::RemarkList;
  stack_ = new QStackedWidget;
  stack_->addWidget(page_);
  stack_->addWidget(remarks_);
  auto* split = new QSplitter(Qt::Horizontal);
  split->setChildrenCollapsible(false);
  split->addWidget(pane_);
  split->addWidget(stack_);
  split->setStretchFactor(0, 40);
  split->setStretchFactor(1, 60);
  split->setSizes({568, 872});
  strip_ = new StatusStrip(*model_, holder_);
  column->addWidget(pages);
  column->addWidget(split, 1);
  column->addWidget(strip_);
  setCentralWidget(body);
  pane_->canvas()->setFocus();
}

void MainWindow::connectParts() {
  connect(pane_, &page::LoopPane::picked, this, &MainWindow::select);
  connect(page_, &page::PartLoadPage::picked, this, &MainWindow::select);
  connect(strip_, &StatusStrip::showUnderSupplied, this, &MainWindow::select);
  connect(remarks_, &page::RemarkList::back, this, &MainWindow::showPage);
  connect(remarks_, &page::RemarkList::openAnother, this, &MainWindow::openByDialog);
  connect(remarks_, &page::RemarkList::pointedAt, this, &MainWindow::select);
  connect(unitSwitch_, &theme::SegmentedSwitch::chosenChanged, this,
          [this](int chosen) { setUnits(chosen == 0 ? quantity::UnitSystem::kSi : quantity::UnitSystem::kIp); });
  connect(themeButton_, &QAbstractButton::clicked, this,
          [this] { setThemeMode(holder_.theme().dark() ? theme::Mode::kLight : theme::Mode::kDark); });
  connect(&document_, &document::Document::fileChanged, this, &MainWindow::refreshTitle);
  connect(&document_, &document::Document::changed, this, &MainWindow::refreshTitle);
  connect(&document_, &document::Document::replaced, this, [this] { selected_ = 0; });
  connect(model_, &page::PartLoadModel::networkChanged, this, [this] {
    const bool solvable = model_->network() != nullptr;
    reportAction_->setEnabled(solvable);
    checkAction_->setEnabled(solvable);
    if (solvable && !cautions_.empty()) return showRemarks(tr("Opened, with cautions"), std::exchange(cautions_, {}));
    if (solvable) return showPage();
    showRemarks(tr("The loop cannot be solved as it is drawn"), model_->faults());
  });
  const auto tellFailure = [this](const QString& message) {
    strip_->say(
        tr("A fault of the program ended the calculation: %1. Save your work under another name.").arg(message));
  };
  connect(model_, &page::PartLoadModel::failed, this, tellFailure);
  connect(&reporter_, &work::Worker::failed, this, tellFailure);
}

void MainWindow::select(loop::Id id) {
  selected_ = id;
  pane_->select(id);
  page_->select(id);
}

void MainWindow::setUnits(quantity::UnitSystem units) {
  units_ = units;
  const int index = units == quantity::UnitSystem::kSi ? 0 : 1;
  if (unitSwitch_->chosen() != index) unitSwitch_->setChosen(index);
  unitActions_[index]->setChecked(true);
  pane_->setUnits(units);
  page_->setUnits(units);
}

void MainWindow::applyLook() {
  if (auto* application = qobject_cast<QApplication*>(QCoreApplication::instance()))
    theme::applyTheme(*application, holder_.theme());
}

void MainWindow::setThemeMode(theme::Mode mode) {
  if (holder_.theme().mode != mode) {
    holder_.setMode(mode);
    applyLook();
  }
  themeButton_->setGlyph(mode == theme::Mode::kDark ? theme::Icon::kSun : theme::Icon::kMoon);
  themeActions_[mode == theme::Mode::kDark ? 1 : 0]->setChecked(true);
}

void MainWindow::refreshTitle() {
  const QString title = document_.isEmpty() ? QString() : document_.title();
  header_->setTitle(title, document_.isDirty());
  setWindowTitle(title.isEmpty() ? tr("Ebbline") : tr("%1[*] – Ebbline").arg(title));
  setWindowModified(document_.isDirty());
  setWindowFilePath({});
  saveAction_->setEnabled(!document_.isEmpty());
}

bool MainWindow::showsRemarks() const {
  return stack_->currentWidget() == remarks_;
}

void MainWindow::showRemarks(const QString& title, const std::vector<text::Remark>& remarks) {
  remarks_->show(title, remarks, model_->network() != nullptr);
  stack_->setCurrentWidget(remarks_);
}

void MainWindow::showPage() {
  stack_->setCurrentWidget(page_);
}

bool MainWindow::openPath(const QString& path) {
  const std::vector<text::Remark> remarks = document_.open(path);
  const bool opened = !text::anyFault(remarks);
  afterOpening(QFileInfo(path).fileName(), remarks, opened);
  return opened;
}

bool MainWindow::openSample(const QString& name) {
  const std::vector<text::Remark> remarks = document_.openText(resources::sampleText(name.toStdString()));
  const bool opened = !text::anyFault(remarks);
  afterOpening(name, remarks, opened);
  return opened;
}

void MainWindow::afterOpening(const QString& name, const std::vector<text::Remark>& remarks, bool opened) {
  if (!opened) return showRemarks(tr("%1 was not opened").arg(name), remarks);
  // A caution changes what is solved (a misspelt key was left out, say): it is shown once the loop is ready, before the
  // page.
  cautions_.clear();
  if (std::any_of(remarks.begin(), remarks.end(),
                  [](const text::Remark& remark) { return text::severityOf(remark.code) == text::Severity::kCaution; }))
    cautions_ = remarks;
  showPage();
  if (!remarks.empty()) strip_->say(QString::fromStdString(text::oneLine(remarks.front())));
}

void MainWindow::readSettings() {
  const QSettings settings;
  restoreGeometry(settings.value("window/geometry").toByteArray());
  if (settings.value("look/theme").toString() == QStringLiteral("dark")) setThemeMode(theme::Mode::kDark);
  if (settings.value("look/units").toString() == QStringLiteral("ip")) setUnits(quantity::UnitSystem::kIp);
}

void MainWindow::writeSettings() {
  QSettings settings;
  settings.setValue("window/geometry", saveGeometry());
  settings.setValue("look/theme", holder_.theme().dark() ? "dark" : "light");
  settings.setValue("look/units", units_ == quantity::UnitSystem::kSi ? "si" : "ip");
}

void MainWindow::closeEvent(QCloseEvent* event) {
  if (!mayLoseWork()) return event->ignore();
  if (useSettings_) writeSettings();
  event->accept();
}

void MainWindow::dragEnterEvent(QDragEnterEvent* event) {
  if (event->mimeData()->hasUrls() && event->mimeData()->urls().front().isLocalFile()) event->acceptProposedAction();
}

void MainWindow::dropEvent(QDropEvent* event) {
  if (!event->mimeData()->hasUrls()) return;
  event->acceptProposedAction();
  const QString path = event->mimeData()->urls().front().toLocalFile();
  if (mayLoseWork()) openPath(path);
}

bool MainWindow::mayLoseWork() {
  if (!document_.isDirty()) return true;
  QMessageBox box(QMessageBox::NoIcon, tr("Ebbline"), tr("%1 has changes that are not saved.").arg(document_.title()),
                  QMessageBox::Save | QMessageBox::Discard | QMessageBox::Cancel, this);
  box.setDefaultButton(QMessageBox::Save);
  const int answer = box.exec();
  return answer == QMessageBox::Discard || (answer == QMessageBox::Save && save());
}

}  // namespace ebbline::shell
