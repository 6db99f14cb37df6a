#pragma once
// Puts geometry, dressing and labels on a painter, layer by layer: levels, lines, dots, symbols, marks, words, key.

#include <QHash>
#include <QPixmap>

#include "ui/canvas/labels.h"
#include "ui/canvas/pixel_rects.h"

namespace ebbline::canvas {

/// Pictures of symbols already drawn, for the screen. Cleared when theme, zoom or device ratio change.
class SymbolPixmaps {
 public:
  void use(double deviceRatio);  ///< Forgets everything when the ratio is another.
  void clear();
  /// Draws a terminal's symbol (without its bar) from the cache.
  void drawTerminal(QPainter& painter, QPointF centre, double scale, const QColor& ink, const QColor& ground,
                    double width);
  /// Draws words with their halo; the halo, whose outline costs most, from the cache.
  void drawHaloText(QPainter& painter, QPointF baseline, const QString& text, const QFont& font, const QColor& ink,
                    const QColor& ground);

 private:
  double ratio_ = 1;
  QHash<QRgb, QPixmap> terminals_;
  QHash<QString, QPixmap> halos_;
  double scale_ = 0;
};

/// What makes painting on the screen cheap. A page goes without and is all vectors.
struct ScreenAids {
  SymbolPixmaps& pixmaps;
  PixelRects& rects;  ///< Of the picture the painter paints on.
};

struct Scene {
  const Geometry& geometry;
  const Dressing& dressing;
  const std::vector<Label>& labels;
  const LoopPicture& picture;
  const theme::Theme& theme;
  const PaintOptions& options;
};

class ScenePainter {
 public:
  /// `origin`: where metre (0, 0) stands in `view`. `screen` null: everything as vectors.
  ScenePainter(QPainter& painter, const Scene& scene, const QRectF& view, QPointF origin, ScreenAids* screen);
  void paint();

 private:
  void levels();
  void levelNames();
  void selectionBand();
  void lines();
  void tapsAndDots();
  void marks();
  void mark(const Mark& mark);
  void terminal(const Mark& mark);
  void smallTerminal(const Mark& mark);
  void openEnds();
  void words();
  bool onLevelLine(const Label& label) const;
  void foot();
  double weightKeyWidth(const std::vector<double>& flows) const;
  void weightKey(double baseline);
  QRectF legendBar() const;
  void colourLegend();
  QColor inkOf(const Mark& mark) const;
  void fillBox(const QRectF& box, const QColor& colour);
  void haloText(QPointF baseline, const QString& text, const QFont& font, const QColor& ink);
  void strokeLines(const std::vector<QLineF>& lines, const QColor& colour, double width, bool square);
  void fillLines(const std::vector<QLineF>& lines, const QColor& colour, double width, bool square);
  void addDashes(const Piece& piece, bool leg, double width, std::vector<QLineF>& out) const;

  QPainter& painter_;
  const Scene& scene_;
  QRectF view_;
  QPointF origin_;
  QRectF visible_;  ///< In the px of the geometry, with a margin.
  ScreenAids* screen_;
};

/// Flows written in the key of weights: at most four of the 1-2-5 numbers up to `most`, ascending.
std::vector<double> keyFlows(double most);

}  // namespace ebbline::canvas
