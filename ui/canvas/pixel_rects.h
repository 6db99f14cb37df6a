#pragma once
// Level and upright lines are rectangles. On the screen they are filled straight into the pixels, each edge by the
// share of the pixel it covers: what an antialiased stroke gives, for a small part of its cost.

#include <QImage>
#include <QRectF>
#include <QTransform>

namespace ebbline::canvas {

class PixelRects {
 public:
  /// REQUIRES: 32 bits a pixel, every pixel opaque. The picture must outlive this and keep its pixels where they are.
  explicit PixelRects(QImage& image);

  /// What follows is in the coordinates of a painter with this transform; only moved and evenly scaled, never turned.
  void setTransform(const QTransform& toPixels);
  void fill(const QRectF& box, QRgb colour);

 private:
  /// Pixels a row is filled through, and how much of the outermost two is covered.
  struct Columns {
    int first, last;
    double firstShare, lastShare;
  };
  void fillRows(int from, int to, double cover, const Columns& columns, QRgb colour);

  uchar* bits_;
  qsizetype bytesPerLine_;
  int width_, height_;
  double factor_ = 1, dx_ = 0, dy_ = 0;
};

}  // namespace ebbline::canvas
