#pragma once
// Where everything stands at one zoom, in px from the drawing's metre (0, 0), y down. Depends on the loop and the scale
// alone: results only dress it. A pan moves it, a slider repaints it; neither builds it again.

#include <QPointF>
#include <QRectF>
#include <vector>

#include "ui/canvas/symbols.h"
#include "ui/canvas/topology.h"

namespace ebbline::canvas {

/// What a line or a dot belongs to, so that results can dress it: one pipe of a run, or a leg of a part.
struct Strand {
  loop::Id id = 0;
  loop::Side side = loop::Side::kSingle;  ///< Paired runs: which pipe.
  PartKind kind = PartKind::kPipeRun;
  loop::End from, to;  ///< Ends whose pressure it has; equal for a leg.
  bool isReturn = false;
  bool leg = false;  ///< Short connection of a symbol: never heavier than half the scale of weights.
};

/// A straight piece of a line as drawn, overpass gaps already cut out.
struct Piece {
  QPointF a, b;
  int strand = 0;
  double along = 0;  ///< Distance of `a` from the start of its line, so that dashes run on behind a gap.
};

struct Dot {
  QPointF at;
  double radius = 2.6;
  int strand = 0;
};

/// A symbol in its place.
struct Mark {
  PartRef part;
  loop::Id id = 0;
  Symbol symbol = Symbol::kTerminal;
  QPointF centre;
  double scale = 1;
  int quarterTurns = 0;
  double portHalf = 26;  ///< Plants.
  bool above = false;    ///< Terminals: the symbol stands above its run, so its tag goes over it.
  QRectF box;            ///< What a click hits.
  int strand = -1;
};

/// Thin line from a sensor or vessel to where it is tapped.
struct Tap {
  QPointF a, b;
  loop::Id id = 0;
};

struct Geometry {
  double scale = 1;  ///< px per metre.
  double symbolScale = 1;
  std::vector<Strand> strands;
  std::vector<Piece> pieces;
  std::vector<Dot> dots;
  std::vector<Mark> marks;
  std::vector<Tap> taps;
  std::vector<QPointF> openEnds;
  QRectF bounds;  ///< Of everything but text.
};

struct GeometryOptions {
  double pairGap = 9;  ///< px between the centres of a pair.
  double largestSymbol = 1;
  bool snap = true;  ///< Put lines on half pixels, for the screen.
  bool cut = true;   ///< Draw crossings as overpasses; not needed where only the size is asked for.
};

Geometry makeGeometry(const loop::Loop& loop, const Topology& topology, double scale, const GeometryOptions& options);

/// Size of symbols at a zoom: they follow the distance between terminals down, and stop growing at largestSymbol.
double symbolScaleAt(const loop::Loop& loop, const Topology& topology, double scale, double largestSymbol);

}  // namespace ebbline::canvas
