#pragma once
// The foot of the drawing: one slider for the whole loop, one per zone, and the chosen terminal's own.

#include <vector>

#include <QLabel>
#include <QWidget>

#include "ui/page/named_slider.h"
#include "ui/page/part_load_model.h"
#include "ui/theme/controls.h"

class QGridLayout;

namespace ebbline::page {

class LoadSliders : public QWidget {
  Q_OBJECT
 public:
  LoadSliders(PartLoadModel& model, const theme::ThemeHolder& holder, QWidget* parent = nullptr);

  /// Shows the slider of the terminal with this id; 0 or another thing: none.
  void setSelected(loop::Id id);
  NamedSlider* whole() { return whole_; }
  const std::vector<NamedSlider*>& zones() const { return zones_; }
  NamedSlider* terminal() { return terminal_; }
  theme::SegmentedSwitch* modeSwitch() { return mode_; }

 protected:
  void resizeEvent(QResizeEvent* event) override;

 private:
  void buildZones();
  void placeZones();
  void show();

  PartLoadModel& model_;
  NamedSlider* whole_ = nullptr;
  QWidget* zoneArea_ = nullptr;
  QGridLayout* zoneGrid_ = nullptr;
  std::vector<NamedSlider*> zones_;
  NamedSlider* terminal_ = nullptr;
  QLabel* hint_ = nullptr;
  theme::SegmentedSwitch* mode_ = nullptr;
  loop::Id selected_ = 0;
  int terminalIndex_ = -1;
  int columns_ = 0;
};

}  // namespace ebbline::page
