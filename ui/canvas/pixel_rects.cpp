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

void PixelRects::fillRow(int y, double cover, double left, double right, QRgb colour) {
  auto* row = reinterpret_cast<QRgb*>(bits_ + y * bytesPerLine_);
  const int first = static_cast<int>(left), last = std::min(width_ - 1, static_cast<int>(right));
  const auto put = [&](int x, double share) { row[x] = mixed(row[x], colour, shareOf(share)); };
  if (first == last) {
    put(first, cover * (right - left));
    return;
  }
  put(first, cover * (first + 1 - left));
  const unsigned whole = shareOf(cover);
  if (whole == 256)
    std::fill(row + first + 1, row + last, colour | 0xff000000u);
  else
    for (int x = first + 1; x < last; ++x) row[x] = mixed(row[x], colour, whole);
  put(last, cover * (right - last));
}

void PixelRects::fill(const QRectF& box, QRgb colour) {
  const double left = std::max(0.0, box.left() * factor_ + dx_);
  const double right = std::min<double>(width_, box.right() * factor_ + dx_);
  const double top = std::max(0.0, box.top() * factor_ + dy_);
  const double bottom = std::min<double>(height_, box.bottom() * factor_ + dy_);
  if (!(left < right) || !(top < bottom)) return;
  const double alpha = qAlpha(colour) / 255.0;
  const int last = std::min(height_ - 1, static_cast<int>(bottom));
  for (int y = static_cast<int>(top); y <= last; ++y) {
    const double cover = std::min<double>(y + 1, bottom) - std::max<double>(y, top);
    if (cover > 0) fillRow(y, alpha * cover, left, right, colour);
  }
}

}  // namespace ebbline::canvas
