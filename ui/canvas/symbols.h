#pragma once
// The symbols of the drawing as paths on a 24-unit grid, stroke 1.5; parts on a run connect at ±12. The shapes are
// those of the look's symbol sheet and of no other source.

#include <QColor>
#include <QPainterPath>
#include <QVector>
#include <vector>

class QPainter;

namespace ebbline::canvas {

enum class Symbol {
  kChiller,
  kBoiler,
  kHeatExchanger,  ///< Drawn by drawPlant, whose ports move.
  kPump,
  kIsolatingValve,
  kBalancingValve,
  kControlValve,
  kStrainer,
  kTerminal,
  kEssential,
  kUnderSupplied,
  kSensor,
  kVessel,
  kNote,
  kOpenEnd
};

/// One stroke of a symbol, back to front.
struct SymbolStroke {
  enum class Fill { kNone, kGround, kInk };
  QPainterPath path;
  double width = 1.5;  ///< 0 = no outline.
  Fill fill = Fill::kNone;
  QVector<qreal> dash;  ///< In units of the grid.
};

/// Strokes of every symbol but the plant's.
const std::vector<SymbolStroke>& strokesOf(Symbol symbol);

/// Strokes of a plant whose two ports stand at (−34, ±portHalf).
std::vector<SymbolStroke> plantStrokes(Symbol symbol, double portHalf);

void drawStrokes(QPainter& painter, const std::vector<SymbolStroke>& strokes, QPointF centre, double scale,
                 int quarterTurns, const QColor& ink, const QColor& ground, double widthFactor = 1);

/// Path data in the notation of SVG, upper-case commands M L H V Q T A Z; A draws half circles only.
/// Throws std::logic_error on anything else: the data are the program's own.
QPainterPath pathFromData(const char* data);

}  // namespace ebbline::canvas
