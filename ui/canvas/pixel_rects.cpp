#include "ui/canvas/pixel_rects.h"

#include <algorithm>
#include <cmath>

namespace ebbline::canvas {
namespace {

// `share` of 256 parts of the second colour over the first. Two channels a multiplication: 255 · 256 + 128 has 16 bits.
QRgb mixed(QRgb under, QRgb over, unsigned share) {
  const unsigned rest = 256 - share;
  const unsigned rb = (((under & 0xff00ffu) * rest + (over & 0xff00ffu) * share + 0x800080u) >> 8) & 0xff00ffu;
  const unsigned g = (((under & 0x00ff00u) * rest + (over & 0x00ff00u) * share + 0x008000u) >> 8) & 0x00ff00u;
  return 0xff000000u | rb | g;
}

unsigned shareOf(double cover) {
  return static_cast<unsigned>(cover * 256 + 0.5);
}

}  // namespace

PixelRects::PixelRects(QImage& image)
    : bits_(image.bits()), bytesPerLine_(image.bytesPerLine()), width_(image.width()), height_(image.height()) {}

void PixelRects::setTransform(const QTransform& toPixels) {
  factor_ = toPixels.m11();
  dx_ = toPixels.dx();
  dy_ = toPixels.dy();
}

void PixelRects::fillRows(int from, int to, double cover, const Columns& columns, QRgb colour) {
  const unsigned first = shareOf(cover * columns.firstShare), inner = shareOf(cover);
  const unsigned last = shareOf(cover * columns.lastShare);
  for (int y = from; y < to; ++y) {
    auto* row = reinterpret_cast<QRgb*>(bits_ + y * bytesPerLine_);
    row[columns.first] = mixed(row[columns.first], colour, first);
    if (inner == 256)
      for (int x = columns.first + 1; x < columns.last; ++x) row[x] = colour;
    else
      for (int x = columns.first + 1; x < columns.last; ++x) row[x] = mixed(row[x], colour, inner);
    if (columns.last > columns.first) row[columns.last] = mixed(row[columns.last], colour, last);
  }
}

void PixelRects::fill(const QRectF& box, QRgb colour) {
  const double left = std::max(0.0, box.left() * factor_ + dx_);
  const double right = std::min<double>(width_, box.right() * factor_ + dx_);
  const double top = std::max(0.0, box.top() * factor_ + dy_);
  const double bottom = std::min<double>(height_, box.bottom() * factor_ + dy_);
  if (!(left < right) || !(top < bottom)) return;
  // The pixels that hold the edges; an edge between two pixels belongs to the inner one.
  Columns columns{static_cast<int>(left), static_cast<int>(std::ceil(right)) - 1, 0, 0};
  columns.firstShare = std::min<double>(columns.first + 1, right) - left;
  columns.lastShare = right - columns.last;
  const int first = static_cast<int>(top), last = static_cast<int>(std::ceil(bottom)) - 1;
  const double alpha = qAlpha(colour) / 255.0;
  colour |= 0xff000000u;
  fillRows(first, first + 1, alpha * (std::min<double>(first + 1, bottom) - top), columns, colour);
  fillRows(first + 1, last, alpha, columns, colour);
  if (last > first) fillRows(last, last + 1, alpha * (bottom - last), columns, colour);
}

}  // namespace ebbline::canvas
