#include <algorithm>
#include <cmath>

#include "ui/canvas/geometry_builder.h"

namespace ebbline::canvas {
namespace {

using loop::End;
using loop::Side;

constexpr double kNear = 1.0;  // px; nearer than this is in line

QRectF around(QPointF centre, double halfWidth, double halfHeight) {
  // Nothing under 24 px to hit, however small it is drawn.
  const double w = std::max(halfWidth, 12.0), h = std::max(halfHeight, 12.0);
  return {centre.x() - w, centre.y() - h, 2 * w, 2 * h};
}

Symbol symbolOf(loop::ValveKind kind) {
  switch (kind) {
    case loop::ValveKind::kIsolating:
      return Symbol::kIsolatingValve;
    case loop::ValveKind::kBalancing:
      return Symbol::kBalancingValve;
    case loop::ValveKind::kControl:
      return Symbol::kControlValve;
    case loop::ValveKind::kStrainer:
      return Symbol::kStrainer;
  }
  return Symbol::kIsolatingValve;
}

Symbol symbolOf(loop::PlantKind kind) {
  switch (kind) {
    case loop::PlantKind::kChiller:
      return Symbol::kChiller;
    case loop::PlantKind::kBoiler:
      return Symbol::kBoiler;
    case loop::PlantKind::kHeatExchanger:
      return Symbol::kHeatExchanger;
  }
  return Symbol::kHeatExchanger;
}

}  // namespace

// True if a level main goes on from the joint to the right (or left), so that a leg set down there meets it.
bool GeometryBuilder::mainPasses(const End& end, double toRight) const {
  const std::vector<QPointF> ways = waysTakenAt(end);
  return std::any_of(ways.begin(), ways.end(), [&](QPointF way) { return way.x() * toRight > 0.99; });
}

void GeometryBuilder::terminalLeg(const loop::Terminal& terminal, const Mark& mark, const End& end, double offset) {
  if (!topology_.joint(end.joint)) return;
  const QPointF start = pointOf(end), centre = mark.centre;
  const double half = 11 * mark.scale, x = centre.x() + offset;
  const int strand = addStrand({terminal.id, end == terminal.from ? Side::kSupply : Side::kReturn, PartKind::kTerminal,
                                end, end, topology_.isReturn(end) || end == terminal.to, true});
  if (std::abs(start.y() - centre.y()) < half) {  // beside it: straight into its flank
    const double edge = start.x() < centre.x() ? centre.x() - half : centre.x() + half;
    addLine({start, {edge, start.y()}}, strand);
    return;
  }
  const double edge = start.y() < centre.y() ? centre.y() - half : centre.y() + half;
  const QPointF top(x, start.y());
  std::vector<QPointF> line{top, {x, edge}};
  const double away = x - start.x();
  const bool onMain = std::abs(away) < 3 * options_.pairGap + 1 && mainPasses(end, away > 0 ? 1 : -1);
  if (std::abs(away) > kNear && !onMain) line.insert(line.begin(), start);
  if (!onMain && topology_.connections(end) >= 3)
    out_.dots.push_back({start, 2.1 * std::min(1.0, mark.scale + 0.15), strand});
  if (onMain && std::abs(away) > kNear) out_.dots.push_back({top, 2.1 * std::min(1.0, mark.scale + 0.15), strand});
  addLine(std::move(line), strand);
}

void GeometryBuilder::layTerminals() {
  const double s = out_.symbolScale;
  for (size_t i = 0; i < loop_.terminals.size(); ++i) {
    const loop::Terminal& terminal = loop_.terminals[i];
    Mark mark{{PartKind::kTerminal, static_cast<int>(i)},
              terminal.id,
              Symbol::kTerminal,
              px(terminal.at),
              s,
              0,
              26,
              false,
              {},
              -1};
    mark.above = mark.centre.y() < pointOf(terminal.from).y() - 11 * s;
    mark.box = around(mark.centre, 11 * s, 11 * s);
    terminalLeg(terminal, mark, terminal.from, -6 * s);
    mark.strand = static_cast<int>(out_.strands.size()) - 1;
    terminalLeg(terminal, mark, terminal.to, 6 * s);
    out_.marks.push_back(mark);
  }
}

void GeometryBuilder::plantLeg(const loop::Plant& plant, const End& end, QPointF port, double outward) {
  if (!topology_.joint(end.joint)) return;
  const QPointF start = pointOf(end);
  const bool back = end == plant.from;
  const int strand =
      addStrand({plant.id, back ? Side::kReturn : Side::kSupply, PartKind::kPlant, end, end, back, false});
  std::vector<QPointF> line{start, port};
  if (std::abs(start.y() - port.y()) > kNear) {
    const double x = port.x() + outward * (back ? 10 : 18) * out_.symbolScale;
    line = {start, {x, start.y()}, {x, port.y()}, port};
  }
  addLine(std::move(line), strand);
}

void GeometryBuilder::layPlants() {
  for (size_t i = 0; i < loop_.plants.size(); ++i) {
    const loop::Plant& plant = loop_.plants[i];
    const QPointF in = pointOf(plant.from), out = pointOf(plant.to);
    QPointF centre = px(plant.at);
    const double s = std::max(out_.symbolScale, 0.2);
    // Ports take the height of the pipes that come to them, within what still looks like a plant.
    const double apart = std::abs(out.y() - in.y()) / 2;
    const bool fits = apart >= 14 * s && apart <= 60 * s;
    const double half = fits ? apart : 26 * s;
    if (fits) centre.setY((in.y() + out.y()) / 2);
    const bool fromLeft = (in.x() + out.x()) / 2 <= centre.x();
    Mark mark{{PartKind::kPlant, static_cast<int>(i)},
              plant.id,
              symbolOf(plant.kind),
              centre,
              s,
              fromLeft ? 0 : 2,
              half / s,
              false,
              {},
              -1};
    mark.box = around(centre, 34 * s, half + 12 * s);
    const double edge = centre.x() + (fromLeft ? -34 : 34) * s, outward = fromLeft ? -1 : 1;
    const bool supplyOnTop = out.y() <= in.y();
    plantLeg(plant, plant.to, {edge, centre.y() + (supplyOnTop ? -half : half)}, outward);
    mark.strand = static_cast<int>(out_.strands.size()) - 1;
    plantLeg(plant, plant.from, {edge, centre.y() + (supplyOnTop ? half : -half)}, outward);
    out_.marks.push_back(mark);
  }
}

void GeometryBuilder::layInline(const PartRef& part, loop::Id id, Symbol symbol, const End& from, const End& to,
                                loop::Point at) {
  if (!topology_.joint(from.joint) || !topology_.joint(to.joint)) return;
  const QPointF a = pointOf(from), b = pointOf(to), step = b - a;
  const bool level = std::abs(step.x()) >= std::abs(step.y());
  QPointF centre = px(at);
  const double s = out_.symbolScale;
  // A pair's return is drawn aside of where it was placed; a symbol between two such ends goes with it.
  if (level && std::abs(step.y()) < kNear && std::abs(centre.y() - a.y()) < 2 * options_.pairGap) centre.setY(a.y());
  if (!level && std::abs(step.x()) < kNear && std::abs(centre.x() - a.x()) < 2 * options_.pairGap) centre.setX(a.x());
  const double sign = (level ? step.x() : step.y()) < 0 ? -1 : 1;
  const QPointF along = level ? QPointF(sign, 0) : QPointF(0, sign);
  const bool back = topology_.isReturn(from) && topology_.isReturn(to);
  const int strand = addStrand({id, Side::kSingle, part.kind, from, to, back, false});
  const auto leg = [&](QPointF end, QPointF port, bool towards) {
    const QPointF corner = level ? QPointF(port.x(), end.y()) : QPointF(end.x(), port.y());
    const double reach = (level ? port.x() - end.x() : port.y() - end.y()) * sign * (towards ? 1 : -1);
    if (reach <= 0 && std::abs(level ? port.y() - end.y() : port.x() - end.x()) < kNear) return;  // under the symbol
    addLine({end, corner, port}, strand);
  };
  leg(a, centre - along * 12 * s, true);
  leg(b, centre + along * 12 * s, false);
  const int turns = level ? (sign < 0 ? 2 : 0) : (sign < 0 ? 3 : 1);
  out_.marks.push_back({part, id, symbol, centre, s, turns, 26, false, around(centre, 12 * s, 10 * s), strand});
}

void GeometryBuilder::layPumpsAndValves() {
  for (size_t i = 0; i < loop_.pumps.size(); ++i) {
    const loop::Pump& pump = loop_.pumps[i];
    layInline({PartKind::kPump, static_cast<int>(i)}, pump.id, Symbol::kPump, pump.from, pump.to, pump.at);
  }
  for (size_t i = 0; i < loop_.valves.size(); ++i) {
    const loop::Valve& valve = loop_.valves[i];
    layInline({PartKind::kValve, static_cast<int>(i)}, valve.id, symbolOf(valve.kind), valve.from, valve.to, valve.at);
  }
}

bool GeometryBuilder::crossesTerminal(QPointF a, QPointF b) const {
  const QRectF path = QRectF(a, b).normalized().adjusted(-0.5, -0.5, 0.5, 0.5);
  return std::any_of(out_.marks.begin(), out_.marks.end(), [&](const Mark& mark) {
    const double half = 11 * mark.scale;
    return mark.part.kind == PartKind::kTerminal &&
           path.intersects(QRectF(mark.centre - QPointF(half, half), QSizeF(2 * half, 2 * half)));
  });
}

// Square where no run already goes that way and no terminal stands in it, else straight across.
QPointF GeometryBuilder::tapCorner(const End& end, QPointF to) const {
  const QPointF from = pointOf(end), step = to - from;
  const std::vector<QPointF> taken = waysTakenAt(end);
  const auto free = [&](QPointF way, QPointF corner) {
    const bool open =
        std::none_of(taken.begin(), taken.end(), [&](QPointF d) { return d.x() * way.x() + d.y() * way.y() > 0.99; });
    return open && !crossesTerminal(from, corner) && !crossesTerminal(corner, to);
  };
  const QPointF upright(from.x(), to.y()), level(to.x(), from.y());
  if (free({0, step.y() < 0 ? -1.0 : 1.0}, upright)) return upright;
  if (free({step.x() < 0 ? -1.0 : 1.0, 0}, level)) return level;
  return to;
}

void GeometryBuilder::layTaps() {
  const double s = out_.symbolScale;
  const auto tap = [this](const End& end, QPointF to, loop::Id id) {
    const QPointF from = pointOf(end), corner = tapCorner(end, to);
    if (from != corner) out_.taps.push_back({from, corner, id});
    if (corner != to) out_.taps.push_back({corner, to, id});
  };
  for (size_t i = 0; i < loop_.sensors.size(); ++i) {
    const loop::Sensor& sensor = loop_.sensors[i];
    const QPointF centre = px(sensor.at);
    for (const End& end : {sensor.high, sensor.low}) {
      if (!topology_.joint(end.joint)) continue;
      out_.dots.push_back({pointOf(end), 2.5 * std::min(1.0, s + 0.2), -1});
      tap(end, centre, sensor.id);
    }
    out_.marks.push_back({{PartKind::kSensor, static_cast<int>(i)},
                          sensor.id,
                          Symbol::kSensor,
                          centre,
                          s,
                          0,
                          26,
                          false,
                          around(centre, 10 * s, 10 * s),
                          -1});
  }
  for (size_t i = 0; i < loop_.vessels.size(); ++i) {
    const loop::Vessel& vessel = loop_.vessels[i];
    const QPointF centre = px(vessel.at), foot = pointOf(vessel.at_end);
    const double size = 0.85 * s;
    const bool hangs = centre.y() > foot.y() + 9 * s;
    if (topology_.joint(vessel.at_end.joint)) {
      tap(vessel.at_end, centre + QPointF(0, (hangs ? -22 : 22) * size), vessel.id);
      out_.dots.push_back({foot, 2.2 * std::min(1.0, s + 0.2), -1});
    }
    out_.marks.push_back({{PartKind::kVessel, static_cast<int>(i)},
                          vessel.id,
                          Symbol::kVessel,
                          centre,
                          size,
                          hangs ? 2 : 0,
                          26,
                          false,
                          around(centre, 9 * size, 18 * size),
                          -1});
  }
  for (size_t i = 0; i < loop_.notes.size(); ++i) {
    const QPointF centre = px(loop_.notes[i].at);
    out_.marks.push_back({{PartKind::kNote, static_cast<int>(i)},
                          loop_.notes[i].id,
                          Symbol::kNote,
                          centre,
                          0.7 * s,
                          0,
                          26,
                          false,
                          around(centre, 6 * s, 6 * s),
                          -1});
  }
}

// A dot where three or more meet, a ring where a pipe just stops.
void GeometryBuilder::markJoints() {
  for (const loop::Joint& joint : loop_.joints) {
    const auto points = joints_.find(joint.id);
    const auto mark = [&](Side side, QPointF at) {
      const End end{joint.id, side};
      const int meeting = topology_.connections(end);
      int terminals = 0;  // their legs bring their own dot
      for (const PartRef& part : topology_.at(joint.id)) {
        if (part.kind != PartKind::kTerminal) continue;
        const loop::Terminal& terminal = loop_.terminals[static_cast<size_t>(part.index)];
        terminals += (terminal.from == end ? 1 : 0) + (terminal.to == end ? 1 : 0);
      }
      if (meeting == 1) out_.openEnds.push_back(at);
      if (meeting - terminals >= 3) out_.dots.push_back({at, 2.6 * std::min(1.0, out_.symbolScale + 0.2), -1});
    };
    if (joint.paired) {
      mark(Side::kSupply, points->second.supply);
      mark(Side::kReturn, points->second.back);
    } else {
      mark(Side::kSingle, points->second.supply);
    }
  }
}

void GeometryBuilder::measure() {
  QRectF bounds;
  const auto add = [&bounds](const QRectF& box) { bounds = bounds.isNull() ? box : bounds.united(box); };
  for (const Line& line : lines_)
    for (const QPointF& point : line.points) add(QRectF(point - QPointF(3, 3), QSizeF(6, 6)));
  for (const Mark& mark : out_.marks) add(mark.box);
  out_.bounds = bounds;
}

Geometry GeometryBuilder::build() {
  placeJoints();
  layPairedRuns();
  layPipeRuns();
  layTerminals();
  layPlants();
  layPumpsAndValves();
  layTaps();
  markJoints();
  measure();
  // Gaps shrink with the symbols; where symbols are too small to read, crossings are too small to see.
  out_.pieces =
      cutAtCrossings(lines_, !options_.cut || out_.symbolScale < 0.3 ? 0 : std::min(1.0, out_.symbolScale / 0.75));
  return std::move(out_);
}

Geometry makeGeometry(const loop::Loop& loop, const Topology& topology, double scale, const GeometryOptions& options) {
  return GeometryBuilder(loop, topology, scale, options).build();
}

double symbolScaleAt(const loop::Loop& loop, const Topology& topology, double scale, double largestSymbol) {
  // 84 px between terminals and 26 px from run to terminal carry a symbol at its drawn size (from the look's mocks).
  const double spacing = topology.terminalSpacing_m() > 0 ? topology.terminalSpacing_m() : 6;
  double hang = 0;
  for (const loop::Terminal& terminal : loop.terminals)
    if (const loop::Joint* joint = topology.joint(terminal.from.joint)) {
      hang = std::hypot(terminal.at.x_m - joint->at.x_m, terminal.at.y_m - joint->at.y_m);
      break;
    }
  double size = spacing * scale / 84;
  if (hang > 0) size = std::min(size, hang * scale / 26);
  return std::clamp(size, 0.08, largestSymbol);
}

}  // namespace ebbline::canvas
