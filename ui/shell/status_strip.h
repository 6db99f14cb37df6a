#pragma once
// The line at the foot of the window: whether the numbers hold, and what was found.

#include <QAbstractButton>
#include <QWidget>

#include "ui/page/part_load_model.h"
#include "ui/theme/theme.h"

namespace ebbline::shell {

/// Strong words with a chevron: what was found, and a click to it.
class FindingButton : public QAbstractButton {
  Q_OBJECT
 public:
  explicit FindingButton(const theme::ThemeHolder& holder, QWidget* parent = nullptr);
  QSize sizeHint() const override;

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  const theme::ThemeHolder& holder_;
};

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
  void put(QString& part, const QString& words);
  QString solved_, residual_, checked_;  // painted here: labels would lay the window out at each picture
  FindingButton* found_ = nullptr;
  loop::Id worst_ = 0;
  enum class Mark { kNone, kTick, kTriangle } mark_ = Mark::kNone;
};

}  // namespace ebbline::shell
