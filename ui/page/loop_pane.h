#pragma once
// The left side of the window: the load state, the loop, the sliders.

#include <QLabel>
#include <QToolButton>
#include <QWidget>

#include "ui/canvas/loop_canvas.h"
#include "ui/page/load_sliders.h"
#include "ui/page/part_load_model.h"

namespace ebbline::page {

class LoopPane : public QWidget {
  Q_OBJECT
 public:
  LoopPane(PartLoadModel& model, const theme::ThemeHolder& holder, QWidget* parent = nullptr);

  void setUnits(quantity::UnitSystem units) { canvas_->setUnits(units); }
  void select(loop::Id id);  ///< From outside; emits nothing.
  canvas::LoopCanvas* canvas() { return canvas_; }
  LoadSliders* sliders() { return sliders_; }
  QToolButton* stateChooser() { return chooser_; }

 signals:
  void picked(ebbline::loop::Id id);

 private:
  void fillStates();
  void showLoop();
  void showPicture();
  QString stateName() const;

  PartLoadModel& model_;
  QToolButton* chooser_ = nullptr;
  QLabel* share_ = nullptr;
  canvas::LoopCanvas* canvas_ = nullptr;
  LoadSliders* sliders_ = nullptr;
  const void* shownNetwork_ = nullptr;
};

}  // namespace ebbline::page
