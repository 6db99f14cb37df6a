#pragma once
// The few controls that a style sheet cannot give the look's shape.

#include <QAbstractButton>
#include <QTabBar>
#include <QWidget>

#include "ui/theme/theme.h"

namespace ebbline::theme {

/// SI | IP: two (or more) words in one frame, one chosen. Arrow keys move the choice.
class SegmentedSwitch : public QWidget {
  Q_OBJECT
 public:
  SegmentedSwitch(const QStringList& words, const ThemeHolder& holder, QWidget* parent = nullptr);
  int chosen() const { return chosen_; }
  void setChosen(int index);
  QSize sizeHint() const override;
  QSize minimumSizeHint() const override { return sizeHint(); }

 signals:
  void chosenChanged(int index);

 protected:
  void paintEvent(QPaintEvent*) override;
  void mousePressEvent(QMouseEvent*) override;
  void keyPressEvent(QKeyEvent*) override;
  void focusInEvent(QFocusEvent*) override;

 private:
  QRect cell(int index) const;
  QStringList words_;
  const ThemeHolder& holder_;
  int chosen_ = 0;
};

/// Text tabs with a 3-px accent underline the width of the word; the chosen word is 600.
class TextTabs : public QTabBar {
  Q_OBJECT
 public:
  explicit TextTabs(const ThemeHolder& holder, QWidget* parent = nullptr);

 protected:
  QSize tabSizeHint(int index) const override;
  QSize minimumTabSizeHint(int index) const override { return tabSizeHint(index); }
  void paintEvent(QPaintEvent*) override;

 private:
  const ThemeHolder& holder_;
};

/// A button that shows one drawn icon and says what it does and its key in the tooltip.
class IconButton : public QAbstractButton {
  Q_OBJECT
 public:
  IconButton(Icon icon, const QString& words, const ThemeHolder& holder, QWidget* parent = nullptr);
  void setGlyph(Icon icon);
  QSize sizeHint() const override { return {28, 28}; }

 protected:
  void paintEvent(QPaintEvent*) override;

 private:
  Icon icon_;
  const ThemeHolder& holder_;
};

}  // namespace ebbline::theme
