#pragma once
// Part load: what happens as valves close? Control above, head and flow, the table of terminals below.

#include <QLabel>
#include <QPushButton>
#include <QTimer>
#include <QWidget>

#include "ui/page/control_line.h"
#include "ui/page/part_load_model.h"
#include "ui/page/terminal_table.h"
#include "ui/plot/head_flow_plot.h"

namespace ebbline::page {

class PartLoadPage : public QWidget {
  Q_OBJECT
 public:
  PartLoadPage(PartLoadModel& model, const theme::ThemeHolder& holder, QWidget* parent = nullptr);

  void setUnits(quantity::UnitSystem units);
  void select(loop::Id id);  ///< From outside; emits nothing.
  plot::HeadFlowPlot* plot() { return plot_; }
  TerminalTable* table() { return table_; }
  QString countText() const { return count_->text(); }
  ControlLine* control() { return control_; }

 signals:
  void picked(ebbline::loop::Id id);

 private:
  void showGround();
  void showPicture();
  PartLoadModel& model_;
  const theme::ThemeHolder& holder_;
  quantity::UnitSystem units_ = quantity::UnitSystem::kSi;
  ControlLine* control_ = nullptr;
  plot::HeadFlowPlot* plot_ = nullptr;
  QLabel* count_ = nullptr;
  QPushButton* underFirst_ = nullptr;
  TerminalTable* table_ = nullptr;
};

}  // namespace ebbline::page
