#include <QGuiApplication>
#include <QIconEngine>
#include <QPainter>
#include <cmath>

#include "ui/theme/theme.h"

namespace ebbline::theme {
namespace {

QPolygonF polygon(std::initializer_list<QPointF> points) {
  return QPolygonF(QList<QPointF>(points));
}

// Paths of the interface icons, drawn for this program on a 16-unit square.
QPainterPath undoPath() {
  QPainterPath p;
  p.moveTo(-2, -5);
  p.lineTo(-6, -1.5);
  p.lineTo(-2, 2);
  p.moveTo(-6, -1.5);
  p.lineTo(2, -1.5);
  p.cubicTo(4.07, -1.5, 5.75, 0.18, 5.75, 2.25);
  p.cubicTo(5.75, 4.32, 4.07, 6, 2, 6);
  p.lineTo(-1, 6);
  return p;
}

QPainterPath sunPath() {
  QPainterPath p;
  p.addEllipse(QPointF(0, 0), 3.2, 3.2);
  for (int i = 0; i < 8; ++i) {
    const double angle = i * M_PI / 4, c = std::cos(angle), s = std::sin(angle);
    p.moveTo(5.6 * c, 5.6 * s);
    p.lineTo(7 * c, 7 * s);
  }
  return p;
}

QPainterPath moonPath() {
  QPainterPath p;
  p.moveTo(2.2, -5.8);
  p.arcTo(QRectF(-6, -6, 12, 12), 68, 292 - 68 + 20);
  p.quadTo(-2.5, 1.5, 2.2, -5.8);
  return p;
}

QPainterPath lines(std::initializer_list<std::initializer_list<QPointF>> strokes) {
  QPainterPath p;
  for (const auto& stroke : strokes) {
    bool first = true;
    for (const QPointF& point : stroke) {
      first ? p.moveTo(point) : p.lineTo(point);
      first = false;
    }
  }
  return p;
}

QPainterPath searchPath() {
  QPainterPath p;
  p.addEllipse(QPointF(-1.2, -1.2), 4.3, 4.3);
  p.moveTo(2, 2);
  p.lineTo(6, 6);
  return p;
}

QPainterPath warningPath() {
  QPainterPath p = lines({{{0, -6}, {6.8, 5.6}, {-6.8, 5.6}, {0, -6}}, {{0, -1.8}, {0, 1.6}}});
  p.addEllipse(QPointF(0, 3.6), 0.15, 0.15);
  return p;
}

QPainterPath savePath() {
  return lines({{{-6, -6}, {3.5, -6}, {6, -3.5}, {6, 6}, {-6, 6}, {-6, -6}},
                {{-3, 6}, {-3, 1.5}, {3, 1.5}, {3, 6}},
                {{-3, -6}, {-3, -2.8}, {2, -2.8}, {2, -6}}});
}

// Paints the path when asked, so that one icon serves every size, device ratio and enabled state.
class PathEngine : public QIconEngine {
 public:
  PathEngine(Icon icon, QColor ink, QColor disabled, QColor chosen)
      : icon_(icon), ink_(std::move(ink)), disabled_(std::move(disabled)), chosen_(std::move(chosen)) {}

  void paint(QPainter* painter, const QRect& rect, QIcon::Mode mode, QIcon::State state) override {
    const QColor& ink = mode == QIcon::Disabled ? disabled_ : state == QIcon::On ? chosen_ : ink_;
    drawIcon(*painter, icon_, QRectF(rect).center(), ink, rect.height() / 16.0);
  }
  QPixmap pixmap(const QSize& size, QIcon::Mode mode, QIcon::State state) override {
    QPixmap out(size);
    out.fill(Qt::transparent);
    QPainter painter(&out);
    paint(&painter, QRect(QPoint(), size), mode, state);
    return out;
  }
  QIconEngine* clone() const override { return new PathEngine(*this); }

 private:
  Icon icon_;
  QColor ink_, disabled_, chosen_;
};

}  // namespace

QPainterPath iconPath(Icon icon) {
  switch (icon) {
    case Icon::kUndo:
      return undoPath();
    case Icon::kRedo:
      return QTransform::fromScale(-1, 1).map(undoPath());
    case Icon::kSun:
      return sunPath();
    case Icon::kMoon:
      return moonPath();
    case Icon::kPresent:
      return lines({{{-7, -5}, {7, -5}, {7, 4}, {-7, 4}, {-7, -5}}, {{-3, 7}, {3, 7}}});
    case Icon::kChevronRight:
      return lines({{{-2, -4}, {2, 0}, {-2, 4}}});
    case Icon::kChevronLeft:
      return lines({{{2, -4}, {-2, 0}, {2, 4}}});
    case Icon::kChevronDown:
      return lines({{{-4, -2}, {0, 2}, {4, -2}}});
    case Icon::kTick:
      return lines({{{-4.5, 0.5}, {-1.5, 3.5}, {4.5, -3.5}}});
    case Icon::kWarning:
      return warningPath();
    case Icon::kSearch:
      return searchPath();
    case Icon::kCross:
      return lines({{{-4, -4}, {4, 4}}, {{-4, 4}, {4, -4}}});
    case Icon::kPlus:
      return lines({{{-5, 0}, {5, 0}}, {{0, -5}, {0, 5}}});
    case Icon::kSelect:
      return lines({{{-4, -7}, {-4, 5}, {-1, 2.2}, {1.2, 7}, {3, 6.2}, {0.9, 1.5}, {5, 1.5}, {-4, -7}}});
    case Icon::kOpen:
      return lines({{{-7, 5}, {-7, -5}, {-2, -5}, {-0.5, -3}, {6, -3}, {6, 5}, {-7, 5}}});
    case Icon::kSave:
      return savePath();
    case Icon::kPlay:
      return lines({{{-3.5, -5}, {5, 0}, {-3.5, 5}, {-3.5, -5}}});
    case Icon::kPause:
      return lines({{{-3, -5}, {-3, 5}}, {{3, -5}, {3, 5}}});
  }
  return {};
}

void drawIcon(QPainter& painter, Icon icon, QPointF centre, const QColor& ink, double scale) {
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing);
  painter.translate(centre);
  painter.scale(scale, scale);
  painter.setPen(QPen(ink, 1.5, Qt::SolidLine, Qt::RoundCap, Qt::RoundJoin));
  painter.setBrush(Qt::NoBrush);
  painter.drawPath(iconPath(icon));
  painter.restore();
}

QIcon icon(Icon which, const Theme& theme) {
  return QIcon(new PathEngine(which, theme.colours.ink2, theme.colours.ink4, theme.colours.accent));
}

QPen dashedPen(const QColor& colour, double width, const QVector<qreal>& dashPx) {
  QPen pen(colour, width, Qt::SolidLine, Qt::FlatCap, Qt::MiterJoin);
  if (dashPx.isEmpty()) return pen;
  QVector<qreal> dash;
  for (const qreal length : dashPx) dash.append(length / width);
  pen.setDashPattern(dash);
  return pen;
}

QPen seriesPen(const Series& series, const Theme& theme, bool chosen) {
  const double width = (chosen ? theme.stroke.seriesChosen : theme.stroke.series) * theme.strokeFactor;
  QPen pen = dashedPen(series.colour, width, series.dash);
  pen.setJoinStyle(Qt::RoundJoin);
  return pen;
}

void drawMarker(QPainter& painter, Marker marker, QPointF centre, const QColor& colour, const QColor& ground,
                double size) {
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing);
  painter.translate(centre);
  painter.scale(size / 7, size / 7);
  const QPen stroke(colour, 2.2, Qt::SolidLine, Qt::FlatCap, Qt::MiterJoin);
  painter.setPen(Qt::NoPen);
  painter.setBrush(colour);
  switch (marker) {
    case Marker::kSquare:
      painter.drawRect(QRectF(-3.2, -3.2, 6.4, 6.4));
      break;
    case Marker::kTriangle:
      painter.drawPolygon(polygon({{-4, 3.2}, {4, 3.2}, {0, -4}}));
      break;
    case Marker::kTriangleDown:
      painter.drawPolygon(polygon({{-4, -3.2}, {4, -3.2}, {0, 4}}));
      break;
    case Marker::kDiamond:
      painter.drawPolygon(polygon({{-4.2, 0}, {0, -4.2}, {4.2, 0}, {0, 4.2}}));
      break;
    case Marker::kCircle:
      painter.drawEllipse(QPointF(), 3.5, 3.5);
      break;
    case Marker::kBar:
      painter.drawRect(QRectF(-4.5, -1.5, 9, 3));
      break;
    case Marker::kRing:
      painter.setPen(QPen(colour, 2));
      painter.setBrush(ground);
      painter.drawEllipse(QPointF(), 3.4, 3.4);
      break;
    case Marker::kPlus:
      painter.setPen(stroke);
      painter.drawLine(QPointF(-4, 0), QPointF(4, 0));
      painter.drawLine(QPointF(0, -4), QPointF(0, 4));
      break;
    case Marker::kCross:
      painter.setPen(stroke);
      painter.drawLine(QPointF(-3, -3), QPointF(3, 3));
      painter.drawLine(QPointF(-3, 3), QPointF(3, -3));
      break;
  }
  painter.restore();
}

void drawSeriesSample(QPainter& painter, const QRectF& box, const Series& series, const Theme& theme, bool faded) {
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing);
  if (faded) painter.setOpacity(0.4);
  painter.setPen(seriesPen(series, theme));
  const double y = box.center().y();
  painter.drawLine(QPointF(box.left(), y), QPointF(box.right(), y));
  drawMarker(painter, series.marker, box.center(), series.colour, theme.colours.sheet);
  painter.restore();
}

void drawHaloText(QPainter& painter, QPointF baseline, const QString& text, const QFont& font, const QColor& ink,
                  const QColor& ground, Qt::Alignment alignment) {
  const double width = QFontMetricsF(font).horizontalAdvance(text);
  if (alignment & Qt::AlignRight) baseline.rx() -= width;
  if (alignment & Qt::AlignHCenter) baseline.rx() -= width / 2;
  QPainterPath outline;
  outline.addText(baseline, font, text);
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing);
  painter.strokePath(outline, QPen(ground, 4, Qt::SolidLine, Qt::RoundCap, Qt::RoundJoin));
  painter.setFont(font);
  painter.setPen(ink);
  painter.drawText(baseline, text);
  painter.restore();
}

}  // namespace ebbline::theme
