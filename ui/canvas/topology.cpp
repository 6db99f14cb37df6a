#include "ui/canvas/topology.h"

#include <algorithm>
#include <cmath>
#include <deque>

namespace ebbline::canvas {
namespace {

using loop::End;
using loop::Side;

const std::vector<PartRef> kNothing;

}  // namespace

Topology::Topology(const loop::Loop& loop) : loop_(loop) {
  for (size_t i = 0; i < loop.joints.size(); ++i) joints_[loop.joints[i].id] = static_cast<int>(i);
  indexParts();
  markReturn();
  measureSpacing();
  for (const loop::Terminal& terminal : loop.terminals) designFlow_m3s_ += terminal.design_flow_l_s * 1e-3;
}

const loop::Joint* Topology::joint(loop::Id id) const {
  const auto found = joints_.find(id);
  return found == joints_.end() ? nullptr : &loop_.joints[static_cast<size_t>(found->second)];
}

const PartRef* Topology::part(loop::Id id) const {
  const auto found = parts_.find(id);
  return found == parts_.end() ? nullptr : &found->second;
}

const std::vector<PartRef>& Topology::at(loop::Id joint) const {
  const auto found = meeting_.find(joint);
  return found == meeting_.end() ? kNothing : found->second;
}

int Topology::connections(const End& end) const {
  const auto found = connections_.find(end);
  return found == connections_.end() ? 0 : found->second;
}

bool Topology::isReturn(const End& end) const {
  if (end.side == Side::kReturn) return true;
  if (end.side == Side::kSupply) return false;
  const auto found = return_.find(end);
  return found != return_.end() && found->second;
}

void Topology::connect(const End& end, PartRef part) {
  ++connections_[end];
  std::vector<PartRef>& here = meeting_[end.joint];
  const bool known = std::any_of(here.begin(), here.end(), [&](const PartRef& other) {
    return other.kind == part.kind && other.index == part.index;
  });
  if (!known) here.push_back(part);
}

void Topology::indexParts() {
  const auto each = [this](const auto& list, PartKind kind, auto&& visit) {
    for (size_t i = 0; i < list.size(); ++i) {
      const PartRef ref{kind, static_cast<int>(i)};
      parts_[list[i].id] = ref;
      visit(list[i], ref);
    }
  };
  const auto both = [this](const auto& one, PartRef ref) {
    connect(one.from, ref);
    connect(one.to, ref);
  };
  each(loop_.paired_runs, PartKind::kPairedRun, [this](const loop::PairedRun& run, PartRef ref) {
    for (const loop::Id joint : {run.from, run.to})
      for (const Side side : {Side::kSupply, Side::kReturn}) connect({joint, side}, ref);
  });
  each(loop_.pipe_runs, PartKind::kPipeRun, both);
  each(loop_.terminals, PartKind::kTerminal, both);
  each(loop_.plants, PartKind::kPlant, both);
  each(loop_.pumps, PartKind::kPump, both);
  each(loop_.valves, PartKind::kValve, both);
  const auto nothing = [](const auto&, PartRef) {};
  each(loop_.sensors, PartKind::kSensor, nothing);
  each(loop_.vessels, PartKind::kVessel, nothing);
  each(loop_.notes, PartKind::kNote, nothing);
}

// Walks from the plant's inlets and from the return sides of paired joints over single pipes, pumps and valves: what is
// reached that way is return. Terminals and plants end the walk, since the water changes its side there.
void Topology::markReturn() {
  std::map<End, std::vector<End>, EndLess> next;
  const auto link = [&next](const auto& list) {
    for (const auto& one : list) {
      next[one.from].push_back(one.to);
      next[one.to].push_back(one.from);
    }
  };
  link(loop_.pipe_runs);
  link(loop_.pumps);
  link(loop_.valves);
  const auto flood = [&](std::deque<End> open, bool isReturnSide) {
    while (!open.empty()) {
      const End end = open.front();
      open.pop_front();
      if (!return_.emplace(end, isReturnSide).second) continue;
      for (const End& other : next[end]) open.push_back(other);
    }
  };
  std::deque<End> supply, back;
  for (const loop::Plant& plant : loop_.plants) {
    supply.push_back(plant.to);
    back.push_back(plant.from);
  }
  for (const loop::Terminal& terminal : loop_.terminals) {
    supply.push_back(terminal.from);
    back.push_back(terminal.to);
  }
  flood(std::move(supply), false);
  flood(std::move(back), true);
}

void Topology::measureSpacing() {
  // Median over the terminals of the distance to the nearest other one on nearly the same height. Sorting by height and
  // then by place makes the neighbours adjacent.
  std::vector<loop::Point> places;
  for (const loop::Terminal& terminal : loop_.terminals) places.push_back(terminal.at);
  std::sort(places.begin(), places.end(),
            [](const loop::Point& a, const loop::Point& b) { return a.y_m != b.y_m ? a.y_m < b.y_m : a.x_m < b.x_m; });
  std::vector<double> gaps;
  for (size_t i = 1; i < places.size(); ++i) {
    const double gap = std::hypot(places[i].x_m - places[i - 1].x_m, places[i].y_m - places[i - 1].y_m);
    if (gap > 0) gaps.push_back(gap);
  }
  if (gaps.empty()) return;
  const auto middle = gaps.begin() + static_cast<std::ptrdiff_t>(gaps.size() / 2);
  std::nth_element(gaps.begin(), middle, gaps.end());
  terminalSpacing_m_ = *middle;
}

}  // namespace ebbline::canvas
