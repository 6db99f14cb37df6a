#pragma once
// The line at the foot of the window: whether the numbers hold, and what was found.

#include <QLabel>
#include <QPushButton>
#include <QWidget>

#include "ui/page/part_load_model.h"
#include "ui/theme/theme.h"

namespace ebbline::shell {

class StatusStrip : public QWidget {
  Q_OBJECT
 public:
  StatusStrip(page::PartLoadModel& model, const theme::ThemeHolder& holder, QWidget* parent = nullptr);
  /// A message of the moment in place of the figures ("Saved to …"); goes with the next picture.
  void say(const QString& words);
  QString text() const;  ///< All that stands in the strip, for tests and screen readers.

 signals:
  void showUnderSupplied(ebbline::loop::Id id);

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  void refresh();
  void showChecked();
  page::PartLoadModel& model_;
  const theme::ThemeHolder& holder_;
  QLabel* solved_ = nullptr;
  QLabel* residual_ = nullptr;
  QLabel* checked_ = nullptr;
  QPushButton* found_ = nullptr;
  loop::Id worst_ = 0;
  enum class Mark { kNone, kTick, kTriangle } mark_ = Mark::kNone;
};

}  // namespace ebbline::shell
