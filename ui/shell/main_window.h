#pragma once
// The window: only wires the parts together. One document, its model, the loop on the left, the page on the right.

#include <QMainWindow>

#include "core/quantity/quantity.h"
#include "ui/document/document.h"
#include "ui/page/loop_pane.h"
#include "ui/page/part_load_model.h"
#include "ui/page/part_load_page.h"
#include "ui/page/remark_list.h"
#include "ui/shell/status_strip.h"
#include "ui/theme/controls.h"
#include "ui/theme/theme.h"
#include "ui/work/worker.h"

class QAction;
class QStackedWidget;

namespace ebbline::shell {

/// Menus, undo, title, units and theme in one row.
class HeaderBar : public QWidget {
  Q_OBJECT
 public:
  explicit HeaderBar(const theme::ThemeHolder& holder, QWidget* parent = nullptr);
  void setTitle(const QString& title, bool dirty);
  class QHBoxLayout* left() {
    return left_;
  }
  class QHBoxLayout* right() {
    return right_;
  }

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  const theme::ThemeHolder& holder_;
  QHBoxLayout* left_ = nullptr;
  QHBoxLayout* right_ = nullptr;
  QString title_;
  bool dirty_ = false;
};

class MainWindow : public QMainWindow {
  Q_OBJECT
 public:
  /// Without settings nothing is read from or written to the user's settings (tests, pictures).
  explicit MainWindow(bool useSettings = true, QWidget* parent = nullptr);
  ~MainWindow() override;

  /// Opens a file, or shows its remarks in place of the page and keeps the loop there was. True if it was opened.
  bool openPath(const QString& path);
  /// Opens a sample by its name, without a path.
  bool openSample(const QString& name);
  void setUnits(quantity::UnitSystem units);
  void setThemeMode(theme::Mode mode);
  /// Solves the load state shown afresh, sweeps, writes the report. Told in the strip when done.
  void writeReportTo(const QString& path);

  document::Document& document() { return document_; }
  page::PartLoadModel& model() { return *model_; }
  page::LoopPane* loopPane() { return pane_; }
  page::PartLoadPage* partLoadPage() { return page_; }
  page::RemarkList* remarkList() { return remarks_; }
  StatusStrip* strip() { return strip_; }
  bool showsRemarks() const;
  const theme::ThemeHolder& themeHolder() const { return holder_; }
  quantity::UnitSystem units() const { return units_; }

 signals:
  void reportWritten(const QString& path, const QString& error);  ///< error empty: done.

 protected:
  void closeEvent(QCloseEvent* event) override;
  void dragEnterEvent(QDragEnterEvent* event) override;
  void dropEvent(QDropEvent* event) override;

 private:
  void applyLook();
  void buildMenus();
  void buildFileMenu();
  void buildEditMenu();
  void buildLoopMenu();
  void buildViewMenu();
  void buildHelpMenu();
  void buildHeader();
  void buildBody();
  void connectParts();
  void select(loop::Id id);
  void showRemarks(const QString& title, const std::vector<text::Remark>& remarks);
  void showPage();
  void afterOpening(const QString& name, const std::vector<text::Remark>& remarks, bool opened);
  void refreshTitle();
  void openByDialog();
  bool save();
  bool saveAs();
  bool writeTo(const QString& path);
  bool mayLoseWork();
  void reportByDialog();
  void readSettings();
  void writeSettings();

  bool useSettings_;
  theme::ThemeHolder holder_;
  quantity::UnitSystem units_ = quantity::UnitSystem::kSi;
  document::Document document_;
  page::PartLoadModel* model_ = nullptr;
  HeaderBar* header_ = nullptr;
  class QMenuBar* menus_ = nullptr;
  theme::SegmentedSwitch* unitSwitch_ = nullptr;
  theme::IconButton* themeButton_ = nullptr;
  theme::TextTabs* tabs_ = nullptr;
  page::LoopPane* pane_ = nullptr;
  page::PartLoadPage* page_ = nullptr;
  page::RemarkList* remarks_ = nullptr;
  std::vector<text::Remark> cautions_;  // of the file just opened, until they are shown
  QStackedWidget* stack_ = nullptr;
  StatusStrip* strip_ = nullptr;
  QList<QAction*> unitActions_;
  QList<QAction*> themeActions_;
  QAction* reportAction_ = nullptr;
  QAction* checkAction_ = nullptr;
  QAction* saveAction_ = nullptr;
  loop::Id selected_ = 0;
  work::Worker reporter_;
};

}  // namespace ebbline::shell
