#pragma once
// The drawing on the screen: pan, zoom, choose, hover. It keeps its own copy of the loop and of the results, so that a
// slider only ever hands over results.

#include <QPointer>
#include <QWidget>
#include <memory>
#include <optional>

#include "ui/canvas/loop_picture.h"

namespace ebbline::canvas {

class LoopCanvas : public QWidget {
  Q_OBJECT
 public:
  explicit LoopCanvas(const theme::ThemeHolder& holder, QWidget* parent = nullptr);
  ~LoopCanvas() override;

  /// Shows another loop. Fits it unless `keepView`.
  void setLoop(loop::Loop loop, bool keepView = false);
  const loop::Loop& loop() const;
  void setResults(network::Results results);  ///< Clears the stale state.
  void clearResults();
  void setColourBy(ColourBy colourBy);
  void setUnits(quantity::UnitSystem units);
  void setOptions(const PaintOptions& options);
  void setStale(bool stale);  ///< A newer solve is running: the picture fades to 55 %.

  loop::Id selected() const { return selected_; }
  void select(loop::Id id);  ///< From outside; emits nothing. 0 = none.

  void fit();
  void zoomBy(double factor, QPointF about);  ///< Keeps the place under `about` where it is.
  void panBy(QPointF px);
  double pxPerMetre() const { return scale_; }
  QPointF toScreen(loop::Point at) const;

  /// The drawn thing under a place of the widget, 0 = none. Terminals and other symbols win over runs.
  loop::Id hit(QPointF place) const;

  /// "T1-1: delivered 0.30 L/s of 0.36 …": the text of the hover card as one sentence.
  QString describe(loop::Id id) const;

  QSize sizeHint() const override { return {640, 560}; }
  QSize minimumSizeHint() const override { return {240, 200}; }

 signals:
  void picked(ebbline::loop::Id id);     ///< The user chose (0: the ground).
  void activated(ebbline::loop::Id id);  ///< Double click or Enter on the chosen thing.
  void viewChanged();

 protected:
  bool event(QEvent*) override;
  void paintEvent(QPaintEvent*) override;
  void resizeEvent(QResizeEvent*) override;
  void showEvent(QShowEvent*) override;
  void mousePressEvent(QMouseEvent*) override;
  void mouseMoveEvent(QMouseEvent*) override;
  void mouseReleaseEvent(QMouseEvent*) override;
  void mouseDoubleClickEvent(QMouseEvent*) override;
  void wheelEvent(QWheelEvent*) override;
  void keyPressEvent(QKeyEvent*) override;
  void keyReleaseEvent(QKeyEvent*) override;
  void leaveEvent(QEvent*) override;
  void focusInEvent(QFocusEvent*) override;
  void focusOutEvent(QFocusEvent*) override;
  bool focusNextPrevChild(bool next) override;

 private:
  struct Cache;
  void ensureCache() const;
  const QImage& frame();
  void choose(loop::Id id);
  void hover(QPointF place);
  void describeChoice();
  void paintCard(QPainter& painter);
  void reveal(loop::Id id);

  const theme::ThemeHolder& holder_;
  loop::Loop loop_;
  std::optional<network::Results> results_;
  quantity::UnitSystem units_ = quantity::UnitSystem::kSi;
  ColourBy colourBy_ = ColourBy::kNone;
  PaintOptions options_;
  loop::Id selected_ = 0;
  loop::Id hovered_ = 0;
  QPointF hoverPlace_;
  double scale_ = 1;    ///< px per metre.
  QPointF origin_;      ///< Where metre (0, 0) stands in the widget.
  bool fitted_ = true;  ///< Follow the size of the widget until the user moves the view.
  bool stale_ = false;
  bool spaceHeld_ = false;
  bool keyboardFocus_ = false;
  std::optional<QPointF> dragFrom_;
  bool dragging_ = false;
  mutable std::unique_ptr<Cache> cache_;
};

}  // namespace ebbline::canvas
