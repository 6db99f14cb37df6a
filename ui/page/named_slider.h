#pragma once
// A slider from 0 to 100 % with its name and number above it.

#include <QLabel>
#include <QSlider>
#include <QWidget>

namespace ebbline::page {

/// Jumps to where it is pressed; steps of 1 % by arrow keys, 10 % by page keys, 0.1 % by the mouse.
class PercentSlider : public QSlider {
  Q_OBJECT
 public:
  explicit PercentSlider(QWidget* parent = nullptr);
  double percent() const { return value() / 10.0; }
  void showPercent(double percent);  ///< Emits nothing.

 signals:
  void moved(double percent);  ///< By the user.

 protected:
  void mousePressEvent(QMouseEvent* event) override;
};

class NamedSlider : public QWidget {
  Q_OBJECT
 public:
  explicit NamedSlider(const QString& name, bool strong = false, QWidget* parent = nullptr);
  void setName(const QString& name);
  void showPercent(double percent);
  PercentSlider* slider() { return slider_; }
  QString text() const { return value_->text(); }

 signals:
  void moved(double percent);

 protected:
  void resizeEvent(QResizeEvent* event) override;

 private:
  void elide();
  QString name_;
  QLabel* label_ = nullptr;
  QLabel* value_ = nullptr;
  PercentSlider* slider_ = nullptr;
};

}  // namespace ebbline::page
