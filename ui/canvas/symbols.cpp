#include "ui/canvas/symbols.h"

#include <QPainter>
#include <array>
#include <cmath>
#include <cstdlib>
#include <stdexcept>

namespace ebbline::canvas {
namespace {

using Fill = SymbolStroke::Fill;

/// Reads path data; keeps the control point for T.
class DataReader {
 public:
  explicit DataReader(const char* data) : at_(data) {}

  QPainterPath read() {
    char command = 0;
    while (skipBlanks(), *at_ != 0) {
      if (*at_ >= 'A' && *at_ <= 'Z') command = *at_++;
      step(command);
      if (command == 'M') command = 'L';  // further pairs after a move are lines
    }
    return path_;
  }

 private:
  void skipBlanks() {
    while (*at_ == ' ' || *at_ == ',') ++at_;
  }

  double number() {
    skipBlanks();
    char* end = nullptr;
    const double value = std::strtod(at_, &end);
    if (end == at_) throw std::logic_error("symbol path: a number is missing");
    at_ = end;
    return value;
  }

  QPointF point() {
    const double x = number();
    return {x, number()};
  }

  void step(char command) {
    const QPointF here = path_.currentPosition();
    switch (command) {
      case 'M':
        path_.moveTo(point());
        break;
      case 'L':
        path_.lineTo(point());
        break;
      case 'H':
        path_.lineTo(number(), here.y());
        break;
      case 'V':
        path_.lineTo(here.x(), number());
        break;
      case 'Q':
        control_ = point();
        path_.quadTo(control_, point());
        break;
      case 'T':
        control_ = 2 * here - control_;
        path_.quadTo(control_, point());
        break;
      case 'A':
        halfEllipse(here);
        break;
      case 'Z':
        path_.closeSubpath();
        break;
      default:
        throw std::logic_error("symbol path: unknown command");
    }
  }

  // A rx ry 0 0 1 x y between points one diameter apart on one height: the upper half when drawn to the right.
  void halfEllipse(QPointF from) {
    const double rx = number(), ry = number();
    for (int flag = 0; flag < 3; ++flag) number();
    const QPointF to = point();
    const QPointF middle = (from + to) / 2;
    if (std::abs(std::abs(to.x() - from.x()) - 2 * rx) > 1e-6 || to.y() != from.y())
      throw std::logic_error("symbol path: only half circles are drawn");
    path_.arcTo(QRectF(middle.x() - rx, middle.y() - ry, 2 * rx, 2 * ry), to.x() > from.x() ? 180 : 0, -180);
  }

  const char* at_;
  QPainterPath path_;
  QPointF control_;
};

SymbolStroke stroke(const char* data, double width = 1.5, Fill fill = Fill::kNone, QVector<qreal> dash = {}) {
  return {pathFromData(data), width, fill, std::move(dash)};
}

SymbolStroke circle(double x, double y, double radius, double width = 1.5, Fill fill = Fill::kGround) {
  QPainterPath path;
  path.addEllipse(QPointF(x, y), radius, radius);
  return {path, width, fill, {}};
}

constexpr const char* kBowTie = "M-9 -6 L9 6 V-6 L-9 6 Z";
constexpr const char* kStubs = "M-12 0 H-9 M9 0 H12";

std::vector<SymbolStroke> make(Symbol symbol) {
  switch (symbol) {
    case Symbol::kPump:
      return {stroke("M-12 0 H-10 M10 0 H12"), circle(0, 0, 10), stroke("M-5 -8.7 L10 0 L-5 8.7")};
    case Symbol::kIsolatingValve:
      return {stroke(kStubs), stroke(kBowTie, 1.5, Fill::kGround)};
    case Symbol::kBalancingValve:
      return {stroke(kStubs), stroke("M0 0 V-11 M-4.5 -11 H4.5 M-3 -8 H3", 1.25), stroke(kBowTie, 1.5, Fill::kGround)};
    case Symbol::kControlValve:
      return {stroke(kStubs), stroke("M0 0 V-8", 1.25), stroke("M-5 -8 A5 5 0 0 1 5 -8 Z", 1.5, Fill::kGround),
              stroke(kBowTie, 1.5, Fill::kGround)};
    case Symbol::kStrainer:
      return {stroke("M-12 0 H-8 M8 0 H12"), stroke("M-8 -6 H8 V6 H-8 Z", 1.5, Fill::kGround),
              stroke("M-8 6 L8 -6", 1.25, Fill::kNone, {2.2, 1.8})};
    case Symbol::kTerminal:
      return {stroke("M-11 -11 H11 V11 H-11 Z", 1.5, Fill::kGround),
              stroke("M-11 -1.5 L-8.25 -6.5 L-2.75 3.5 L2.75 -6.5 L8.25 3.5 L11 -1.5", 1.25)};
    case Symbol::kEssential:
      return {stroke("M0 -8 L6.93 -4 L6.93 4 L0 8 L-6.93 4 L-6.93 -4 Z", 1.5, Fill::kGround),
              stroke("M0 -4 L3.46 -2 L3.46 2 L0 4 L-3.46 2 L-3.46 -2 Z", 0, Fill::kInk)};
    case Symbol::kUnderSupplied:
      return {stroke("M-7 -5 H7 L0 7 Z", 0, Fill::kInk)};
    case Symbol::kSensor:
      return {circle(0, 0, 10)};
    case Symbol::kVessel:
      return {stroke("M0 18 V22"), stroke("M-9 -9 A9 9 0 0 1 9 -9 V9 A9 9 0 0 1 -9 9 Z", 1.5, Fill::kGround),
              stroke("M-9 1 Q-4.5 5 0 1 T9 1", 1.25)};
    case Symbol::kNote:
      return {stroke("M-9 -9 H4 L9 -4 V9 H-9 Z", 1.25, Fill::kGround), stroke("M4 -9 V-4 H9 M-5 -1 H5 M-5 3 H2", 1)};
    case Symbol::kOpenEnd:
      return {stroke("M0 -9 V-4.5 M0 4.5 V9", 1.75), circle(0, 0, 4.5, 1.75)};
    case Symbol::kChiller:
    case Symbol::kBoiler:
    case Symbol::kHeatExchanger:
      return plantStrokes(symbol, 26);
  }
  throw std::logic_error("symbol without a shape");
}

constexpr int kCount = static_cast<int>(Symbol::kOpenEnd) + 1;

// A coil between the ports: six strokes to and fro, as wide for every height.
SymbolStroke coil(double portHalf, double side) {
  QPainterPath path(QPointF(side * 34, -portHalf));
  path.lineTo(side * 20, -portHalf);
  constexpr int kTurns = 6;
  for (int i = 0; i < kTurns; ++i) {
    const double y = -portHalf + (i + 0.5) * 2 * portHalf / kTurns;
    path.lineTo(side * (i % 2 == 0 ? 13 : 27), y);
  }
  path.lineTo(side * 20, portHalf);
  path.lineTo(side * 34, portHalf);
  return {path, 1.25, Fill::kNone, {}};
}

}  // namespace

QPainterPath pathFromData(const char* data) {
  return DataReader(data).read();
}

const std::vector<SymbolStroke>& strokesOf(Symbol symbol) {
  static const auto kAll = [] {
    std::array<std::vector<SymbolStroke>, kCount> all;
    for (int i = 0; i < kCount; ++i) all[static_cast<size_t>(i)] = make(static_cast<Symbol>(i));
    return all;
  }();
  return kAll[static_cast<size_t>(symbol)];
}

std::vector<SymbolStroke> plantStrokes(Symbol symbol, double portHalf) {
  QPainterPath body;
  body.addRect(QRectF(-34, -portHalf - 12, 68, 2 * portHalf + 24));
  std::vector<SymbolStroke> out{{body, 1.5, Fill::kGround, {}}, coil(portHalf, -1)};
  if (symbol == Symbol::kChiller) {
    out.push_back(circle(12, 0, 13));
    out.push_back(stroke("M5.5 -11.3 L23.8 -5.5 M5.5 11.3 L23.8 5.5", 1.25));
  } else if (symbol == Symbol::kBoiler) {
    SymbolStroke flame = stroke("M-10 0 L0 -18 L10 0 M-4 0 L0 -7.5 L4 0", 1.25);
    flame.path.translate(12, portHalf + 12);
    out.push_back(flame);
  } else {
    out.push_back(coil(portHalf, 1));
  }
  return out;
}

void drawStrokes(QPainter& painter, const std::vector<SymbolStroke>& strokes, QPointF centre, double scale,
                 int quarterTurns, const QColor& ink, const QColor& ground, double widthFactor) {
  painter.save();
  painter.translate(centre);
  painter.rotate(90 * quarterTurns);
  painter.scale(scale, scale);
  for (const SymbolStroke& each : strokes) {
    QPen pen(ink, each.width * widthFactor, Qt::SolidLine, Qt::FlatCap, Qt::RoundJoin);
    if (!each.dash.isEmpty()) {
      QVector<qreal> dash;
      for (const qreal length : each.dash) dash.append(length / pen.widthF());
      pen.setDashPattern(dash);
    }
    painter.setPen(each.width > 0 ? pen : QPen(Qt::NoPen));
    painter.setBrush(each.fill == Fill::kGround ? QBrush(ground) : each.fill == Fill::kInk ? QBrush(ink) : QBrush());
    painter.drawPath(each.path);
  }
  painter.restore();
}

}  // namespace ebbline::canvas
