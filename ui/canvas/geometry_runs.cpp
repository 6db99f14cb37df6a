#include <algorithm>
#include <cmath>

#include "ui/canvas/geometry_builder.h"

namespace ebbline::canvas {
namespace {

using loop::End;
using loop::Side;

constexpr double kStraight = 0.5;  // px; less than this aside counts as level or upright

double length(QPointF v) {
  return std::hypot(v.x(), v.y());
}
double dot(QPointF a, QPointF b) {
  return a.x() * b.x() + a.y() * b.y();
}

// The side of a run on which its return lies: up and to the left.
QPointF normalUpLeft(QPointF direction) {
  QPointF normal(direction.y(), -direction.x());
  normal /= length(normal);
  const double lean = dot(normal, {-1, -1});
  return lean > 1e-9 || (std::abs(lean) <= 1e-9 && normal.y() < 0) ? normal : -normal;
}

}  // namespace

GeometryBuilder::GeometryBuilder(const loop::Loop& loop, const Topology& topology, double scale,
                                 const GeometryOptions& options)
    : loop_(loop), topology_(topology), scale_(scale), options_(options) {
  out_.scale = scale;
  out_.symbolScale = symbolScaleAt(loop, topology, scale, options.largestSymbol);
}

QPointF GeometryBuilder::px(loop::Point at) const {
  const QPointF exact(at.x_m * scale_, -at.y_m * scale_);
  if (!options_.snap) return exact;
  return {std::floor(exact.x()) + 0.5, std::floor(exact.y()) + 0.5};
}

QPointF GeometryBuilder::pointOf(const End& end) const {
  const auto found = joints_.find(end.joint);
  if (found == joints_.end()) return {};
  return end.side == Side::kReturn ? found->second.back : found->second.supply;
}

int GeometryBuilder::addStrand(Strand strand) {
  out_.strands.push_back(strand);
  return static_cast<int>(out_.strands.size()) - 1;
}

void GeometryBuilder::addLine(std::vector<QPointF> points, int strand) {
  const Strand& of = out_.strands[static_cast<size_t>(strand)];
  lines_.push_back({std::move(points), strand, of.isReturn, of.leg});
}

std::vector<QPointF> GeometryBuilder::directionsAt(loop::Id joint) const {
  std::vector<QPointF> out;
  for (const PartRef& part : topology_.at(joint)) {
    if (part.kind != PartKind::kPairedRun) continue;
    const loop::PairedRun& run = loop_.paired_runs[static_cast<size_t>(part.index)];
    const loop::Joint* other = topology_.joint(run.from == joint ? run.to : run.from);
    const loop::Joint* here = topology_.joint(joint);
    if (!other || !here) continue;
    const loop::Point next = run.bends.empty() ? other->at : run.from == joint ? run.bends.front() : run.bends.back();
    const QPointF direction = px(next) - px(here->at);
    if (length(direction) > kStraight) out.push_back(direction / length(direction));
  }
  return out;
}

// As above, of every run that meets one end: single pipes count too.
std::vector<QPointF> GeometryBuilder::waysTakenAt(const End& end) const {
  std::vector<QPointF> out = directionsAt(end.joint);
  for (const PartRef& part : topology_.at(end.joint)) {
    if (part.kind != PartKind::kPipeRun) continue;
    const loop::PipeRun& run = loop_.pipe_runs[static_cast<size_t>(part.index)];
    const bool leaves = run.from == end;
    const loop::Joint *other = topology_.joint(leaves ? run.to.joint : run.from.joint),
                      *here = topology_.joint(end.joint);
    if ((!leaves && !(run.to == end)) || !other || !here) continue;
    const loop::Point next = run.bends.empty() ? other->at : leaves ? run.bends.front() : run.bends.back();
    const QPointF direction = px(next) - px(here->at);
    if (length(direction) > kStraight) out.push_back(direction / length(direction));
  }
  return out;
}

// Where the return stands from its supply: on the offset line of every run that meets here, so that corners are mitred.
QPointF GeometryBuilder::pairShift(const std::vector<QPointF>& directions) const {
  const double gap = options_.pairGap;
  if (directions.empty()) return {-gap, -gap};
  const QPointF first = normalUpLeft(directions.front());
  for (const QPointF& direction : directions) {
    const QPointF second = normalUpLeft(direction);
    const double cross = first.x() * second.y() - first.y() * second.x();
    if (std::abs(cross) < 0.2) continue;  // nearly in line: a mitre would run far out
    return QPointF(second.y() - first.y(), first.x() - second.x()) * (gap / cross);
  }
  return first * gap;
}

GeometryBuilder::JointPoints GeometryBuilder::placeJoint(const loop::Joint& joint) const {
  const QPointF at = px(joint.at);
  if (!joint.paired) return {at, at};
  JointPoints points{at, at + pairShift(directionsAt(joint.id))};
  setApart(joint, points);
  return points;
}

// At the end of a branch with nothing but its last terminal the mains turn straight into the terminal's legs.
void GeometryBuilder::setApart(const loop::Joint& joint, JointPoints& points) const {
  const std::vector<PartRef>& parts = topology_.at(joint.id);
  if (parts.size() != 2) return;
  const auto terminal =
      std::find_if(parts.begin(), parts.end(), [](const PartRef& p) { return p.kind == PartKind::kTerminal; });
  const std::vector<QPointF> directions = directionsAt(joint.id);
  if (terminal == parts.end() || directions.size() != 1 || std::abs(directions.front().y()) > 0.01) return;
  const QPointF at = px(loop_.terminals[static_cast<size_t>(terminal->index)].at);
  const double legs = 6 * out_.symbolScale;
  if (std::abs(at.x() - points.supply.x()) > 3 * options_.pairGap ||
      std::abs(at.y() - points.supply.y()) < 12 * out_.symbolScale)
    return;
  points.supply.setX(at.x() - legs);
  points.back.setX(at.x() + legs);
}

void GeometryBuilder::placeJoints() {
  joints_.reserve(loop_.joints.size());
  for (const loop::Joint& joint : loop_.joints) joints_[joint.id] = placeJoint(joint);
}

void GeometryBuilder::layPairedRuns() {
  for (const loop::PairedRun& run : loop_.paired_runs) {
    if (!topology_.joint(run.from) || !topology_.joint(run.to)) continue;
    const JointPoints &from = joints_[run.from], &to = joints_[run.to];
    std::vector<QPointF> centre{px(topology_.joint(run.from)->at)};
    for (const loop::Point& bend : run.bends) centre.push_back(px(bend));
    centre.push_back(px(topology_.joint(run.to)->at));
    std::vector<QPointF> supply = centre, back = centre;
    supply.front() = from.supply;
    supply.back() = to.supply;
    back.front() = from.back;
    back.back() = to.back;
    for (size_t i = 1; i + 1 < centre.size(); ++i) {
      const QPointF before = centre[i] - centre[i - 1], after = centre[i + 1] - centre[i];
      if (length(before) > 0 && length(after) > 0)
        back[i] = centre[i] + pairShift({before / length(before), after / length(after)});
    }
    const auto strand = [&](Side side) {
      return addStrand(
          {run.id, side, PartKind::kPairedRun, {run.from, side}, {run.to, side}, side == Side::kReturn, false});
    };
    addLine(std::move(supply), strand(Side::kSupply));
    addLine(std::move(back), strand(Side::kReturn));
  }
}

// A single pipe keeps its upright and level stretches when one of its ends is the shifted return of a pair.
std::vector<QPointF> GeometryBuilder::singleRoute(const loop::PipeRun& run) const {
  std::vector<QPointF> drawn{px(topology_.joint(run.from.joint)->at)};
  for (const loop::Point& bend : run.bends) drawn.push_back(px(bend));
  drawn.push_back(px(topology_.joint(run.to.joint)->at));
  std::vector<QPointF> moved = drawn;
  moved.front() = pointOf(run.from);
  moved.back() = pointOf(run.to);
  const size_t last = drawn.size() - 1;
  const auto follow = [&](size_t i, size_t neighbour) {
    const QPointF step = drawn[i] - drawn[neighbour];
    if (std::abs(step.x()) < kStraight)
      moved[i].setX(moved[neighbour].x());
    else if (std::abs(step.y()) < kStraight)
      moved[i].setY(moved[neighbour].y());
  };
  for (size_t i = 1; i < last; ++i) follow(i, i - 1);
  for (size_t i = last; i-- > 1;) follow(i, i + 1);
  if (last == 1) {
    const QPointF step = drawn[1] - drawn[0], now = moved[1] - moved[0];
    const bool level = std::abs(step.y()) < kStraight && std::abs(now.y()) > kStraight;
    const bool upright = std::abs(step.x()) < kStraight && std::abs(now.x()) > kStraight;
    if (level || upright) {  // shifted across its own direction: a step half-way keeps it square
      const QPointF middle = (moved[0] + moved[1]) / 2;
      moved.insert(moved.begin() + 1, level ? QPointF(middle.x(), moved[0].y()) : QPointF(moved[0].x(), middle.y()));
      moved.insert(moved.begin() + 2,
                   level ? QPointF(middle.x(), moved.back().y()) : QPointF(moved.back().x(), middle.y()));
    }
  }
  return moved;
}

void GeometryBuilder::layPipeRuns() {
  for (const loop::PipeRun& run : loop_.pipe_runs) {
    if (!topology_.joint(run.from.joint) || !topology_.joint(run.to.joint)) continue;
    const bool back = topology_.isReturn(run.from) && topology_.isReturn(run.to);
    addLine(singleRoute(run), addStrand({run.id, Side::kSingle, PartKind::kPipeRun, run.from, run.to, back, false}));
  }
}

}  // namespace ebbline::canvas
