#pragma once
// The printed sheet: size, margins, type, running head and foot. Lengths are in px of 1/96 inch, y downwards.

#include <memory>

#include <QPainter>
#include <QPdfWriter>
#include <QString>

#include "ui/theme/theme.h"

namespace ebbline::report {

enum class Size { kA4, kLetter };

class Paper {
 public:
  /// Opens the file; ok() tells whether it can be written.
  Paper(const QString& path, Size size, const QString& title);
  ~Paper();
  bool ok() const { return painter_.isActive(); }
  /// False if anything could not be written.
  bool finish();

  QPainter& painter() { return painter_; }
  const theme::Theme& look() const { return look_; }
  QRectF body() const;  ///< Between the margins.

  void nextPage();

  /// Font of the printed page without hinting, so that letters stand where the PDF viewer puts them.
  QFont font(theme::Text text, int weight = 0) const;
  QFont question() const;  ///< 20 pt, weight 300.

  /// One line, baseline at y; x is the left, right or middle by alignment. Returns its width.
  double line(QPointF baseline, const QString& text, const QFont& font, const QColor& ink,
              Qt::Alignment alignment = Qt::AlignLeft);
  /// Words wrapped into the width from `top` on; returns the y below the last line.
  double paragraph(QPointF top, double width, const QString& text, const QFont& font, const QColor& ink,
                   double line_height);
  /// Height the paragraph would take.
  double paragraphHeight(double width, const QString& text, const QFont& font, double line_height) const;
  void rule(double y, const QColor& ink, double width = 1);
  void rule(double left, double right, double y, const QColor& ink, double width = 1);

 private:
  theme::Theme look_;
  QPdfWriter writer_;
  QPainter painter_;
};

}  // namespace ebbline::report
