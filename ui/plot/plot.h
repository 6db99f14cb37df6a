#pragma once
// Ground of every plot: round axes, lines with direct labels, marks with hover cards, states, export. Points are given
// in the units shown; nothing is computed here but pixels.

#include <QChartView>
#include <QHash>
#include <QPixmap>
#include <functional>
#include <optional>
#include <vector>

#include "ui/theme/theme.h"

class QLineSeries;
class QValueAxis;

namespace ebbline::plot {

/// What an axis says and how far it reaches.
struct Axis {
  QString title;  ///< With unit: "flow, L/s".
  double low = 0;
  double high = 1;
};

/// Where the direct label of a line stands.
enum class LabelAt { kNone, kRightEnd, kUpperEnd, kStart, kMiddle };

/// A line with its words. `key` names it for updates, `words` on the card and in the CSV.
struct Line {
  QString key;
  QString words;
  QString label;  ///< Direct label; empty = none.
  LabelAt at = LabelAt::kNone;
  int importance = 0;  ///< When labels collide the less important one moves, then hides.
  QPen pen;
  QColor labelInk;
  int labelWeight = 600;
  bool hover = true;  ///< Its points can be hovered.
  std::vector<QPointF> points;
};

/// A single place worth pointing at.
struct Mark {
  enum class Shape { kRing, kOperating, kSeries };
  QString key;
  QString words;
  Shape shape = Shape::kRing;
  QPointF at;
  QColor ink;  ///< kOperating: the dot inside; kSeries: the marker.
  theme::Marker marker = theme::Marker::kCircle;
  std::vector<std::pair<QString, QString>> more;  ///< Further lines of the card, name and value.
};

enum class PlotState { kIdle, kStale, kEmpty, kWithheld };

class Plot : public QChartView {
  Q_OBJECT
 public:
  explicit Plot(const theme::ThemeHolder& holder, QWidget* parent = nullptr);

  void setTitles(const QString& title, const QString& second);
  void setAxes(const Axis& x, const Axis& y);
  /// Adds the line or changes it; lines are painted in the order of their first coming.
  void setLine(const Line& line);
  void removeLine(const QString& key);
  void clearLines();
  void setMarks(std::vector<Mark> marks);
  /// Ink tags on both axes with dotted lines to the point.
  void setTags(std::optional<QPointF> at);
  void addTrailPoint(QPointF at);
  void clearTrail();
  /// `words`: what is missing (kEmpty) or the reason (kWithheld).
  void setState(PlotState state, const QString& words = {});
  PlotState state() const { return state_; }
  void setCrosshair(bool on) { crosshair_ = on; }

  const std::vector<Line>& lines() const { return lines_; }
  const std::vector<Mark>& marks() const { return marks_; }
  const std::vector<QPointF>& trail() const { return trail_; }
  QPointF toPixels(QPointF value) const;
  QString cardText() const;  ///< What the hover card says; empty without one.

  /// The plot's data, one block per line; locale-free.
  QString csv() const;
  bool savePicture(const QString& path);  ///< By suffix: png, svg, pdf.
  void resetZoom();

 signals:
  void painted();

 protected:
  void resizeEvent(QResizeEvent* event) override;
  void paintEvent(QPaintEvent* event) override;
  void drawBackground(QPainter* painter, const QRectF& rect) override;
  void drawForeground(QPainter* painter, const QRectF& rect) override;
  void mouseMoveEvent(QMouseEvent* event) override;
  void leaveEvent(QEvent* event) override;
  void keyPressEvent(QKeyEvent* event) override;
  void focusInEvent(QFocusEvent* event) override;
  void focusOutEvent(QFocusEvent* event) override;
  void wheelEvent(QWheelEvent* event) override;
  void contextMenuEvent(QContextMenuEvent* event) override;
  virtual void restyle();
  const theme::Theme& look() const { return holder_.theme(); }

 private:
  struct Hovered {
    QPointF at;  ///< In values.
    QString words;
    std::vector<std::pair<QString, QString>> more;
  };
  QLineSeries* seriesOf(const Line& line);
  void layOut();
  void showRange(const Axis& x, const Axis& y);
  void zoom(double factor, QPointF about);
  std::vector<Hovered> stops() const;
  std::optional<Hovered> nearest(QPointF pixel) const;
  std::vector<std::pair<QString, QString>> cardLines(const Hovered& hovered) const;
  void setHovered(std::optional<Hovered> hovered);
  void paintTitles(QPainter& painter) const;
  void paintAxes(QPainter& painter) const;
  void paintTrail(QPainter& painter) const;
  void paintTags(QPainter& painter) const;
  /// Boxes of the tags on the x and the y axis; null without tags.
  std::pair<QRectF, QRectF> tagBoxes() const;
  void paintMarks(QPainter& painter) const;
  void paintLabels(QPainter& painter) const;
  /// A label with its halo; on the screen from a picture kept, on paper as outlines.
  void paintHalo(QPainter& painter, QPointF baseline, const Line& line, const QColor& ground) const;
  void paintCrosshair(QPainter& painter) const;
  void paintCard(QPainter& painter) const;
  void paintWords(QPainter& painter) const;
  void saveAs(const QString& suffix, const QString& filter);

  const theme::ThemeHolder& holder_;
  QString title_, second_;
  Axis x_, y_;            // as set
  Axis shownX_, shownY_;  // after zooming
  QValueAxis* axisX_ = nullptr;
  QValueAxis* axisY_ = nullptr;
  std::vector<Line> lines_;
  std::vector<QLineSeries*> series_;  // owned by the chart, in step with lines_
  std::vector<Mark> marks_;
  std::vector<QPointF> trail_;
  std::optional<QPointF> tags_;
  std::optional<Hovered> hovered_;
  std::optional<QPointF> pointer_;  // pixels
  mutable QHash<QString, QPixmap> halos_;
  int stop_ = -1;  // reached by arrow keys
  bool crosshair_ = false;
  PlotState state_ = PlotState::kEmpty;
  QString words_;
};

}  // namespace ebbline::plot
