#include <cmath>
#include <numeric>

#include <fmt/format.h>

#include "core/network/compile_draft.h"

namespace ebbline::network {

using loop::Side;
using text::Code;

std::string shown(double number) {
  return fmt::format("{:g}", number);
}

bool needNotNegative(Draft& draft, double value, const char* name, loop::Id id, const std::string& tag) {
  if (!std::isfinite(value)) {
    draft.say(Code::kSolveNotFinite, id, tag, {name});
    return false;
  }
  if (value < 0) draft.say(Code::kSolveNegative, id, tag, {name, shown(value)});
  return value >= 0;
}

bool needPositive(Draft& draft, double value, const char* name, loop::Id id, const std::string& tag) {
  if (!std::isfinite(value)) {
    draft.say(Code::kSolveNotFinite, id, tag, {name});
    return false;
  }
  if (value <= 0) draft.say(Code::kSolveNotPositive, id, tag, {name, shown(value)});
  return value > 0;
}

namespace {

double elevationOf(Draft& draft, const loop::Joint& joint, const std::unordered_map<loop::Id, double>& levels) {
  double elevation = joint.above_level_m;
  if (joint.level != 0) {
    const auto level = levels.find(joint.level);
    if (level == levels.end())
      draft.say(Code::kLoopNoSuchLevel, joint.id, joint.tag, {"The joint", std::to_string(joint.level)});
    else
      elevation += level->second;
  }
  if (std::isfinite(elevation)) return elevation;
  draft.say(Code::kSolveNotFinite, joint.id, joint.tag, {"the elevation"});
  return 0;
}

}  // namespace

void draftPoints(Draft& draft) {
  std::unordered_map<loop::Id, double> levels;
  for (const loop::Level& level : draft.loop->levels) levels[level.id] = level.elevation_m;
  for (const loop::Joint& joint : draft.loop->joints) {
    const int index = static_cast<int>(draft.first_point.size());
    if (!draft.joint_of.emplace(joint.id, index).second)
      draft.say(Code::kLoopIdTwice, joint.id, joint.tag, {std::to_string(joint.id), "a joint", "a joint"});
    draft.first_point.push_back(static_cast<int>(draft.points.size()));
    const double elevation = elevationOf(draft, joint, levels);
    const auto add = [&](Side side) { draft.points.push_back({{joint.id, side}, elevation, joint.tag}); };
    if (joint.paired) {
      add(Side::kSupply);
      add(Side::kReturn);
    } else {
      add(Side::kSingle);
    }
  }
}

int Draft::pointOf(const loop::End& end, loop::Id id, const std::string& tag, const char* which) {
  if (end.joint == 0) {
    say(Code::kSolveOpenEnd, id, tag, {which});
    return -1;
  }
  const auto found = joint_of.find(end.joint);
  if (found == joint_of.end()) {
    say(Code::kLoopNoSuchJoint, id, tag, {which, std::to_string(end.joint)});
    return -1;
  }
  const loop::Joint& joint = loop->joints[found->second];
  const std::string name = joint.tag.empty() ? std::to_string(joint.id) : joint.tag;
  if (joint.paired == (end.side == Side::kSingle)) {
    if (joint.paired)
      say(Code::kLoopSideNotNamed, id, tag, {name});
    else
      say(Code::kLoopSideMissing, id, tag, {name, end.side == Side::kSupply ? "supply" : "return"});
    return -1;
  }
  return first_point[found->second] + (end.side == Side::kReturn ? 1 : 0);
}

namespace {

void keepEnd(Draft& draft, const loop::End& end, loop::Id id, const std::string& tag, const char* which) {
  const int point = draft.pointOf(end, id, tag, which);
  if (point < 0) return;
  draft.points[point].kept = true;
  if (draft.points[point].degree == 0) draft.say(Code::kSolveNothingThere, id, tag, {which});
}

void keepSensors(Draft& draft) {
  for (const loop::Sensor& sensor : draft.loop->sensors) {
    // An unused sensor may still be unplaced; only those that are placed, or control the pump, must be sound.
    bool controls = false;
    if (draft.loop->control.strategy == loop::Strategy::kFieldSensor)
      for (const loop::Id id : draft.loop->control.sensors) controls = controls || id == sensor.id;
    if (!controls && (sensor.high.joint == 0 || sensor.low.joint == 0)) continue;
    keepEnd(draft, sensor.high, sensor.id, sensor.tag, "the high tap");
    keepEnd(draft, sensor.low, sensor.id, sensor.tag, "the low tap");
    if (sensor.high == sensor.low) draft.say(Code::kLoopSameEnds, sensor.id, sensor.tag, {"the sensor"});
    for (const auto& bore : {sensor.high_bore_mm, sensor.low_bore_mm})
      if (bore) needPositive(draft, *bore, "the bore at a tap", sensor.id, sensor.tag);
    if (!controls) continue;
    if (!sensor.set_point_kpa)
      draft.say(Code::kSolveNoSetPoint, sensor.id, sensor.tag, {"The sensor"});
    else
      needNotNegative(draft, *sensor.set_point_kpa, "the set-point", sensor.id, sensor.tag);
  }
}

void keepControl(Draft& draft) {
  const loop::Control& control = draft.loop->control;
  if (control.strategy == loop::Strategy::kConstantSpeed) {
    needPositive(draft, control.speed_percent, "the speed", 0, {});
    return;
  }
  if (control.strategy == loop::Strategy::kFieldSensor) {
    if (control.sensors.empty()) draft.say(Code::kSolveNoSensor, 0, {});
    for (const loop::Id id : control.sensors) {
      bool found = false;
      for (const loop::Sensor& sensor : draft.loop->sensors) found = found || sensor.id == id;
      if (!found) draft.say(Code::kLoopNoSuchSensor, 0, {}, {std::to_string(id)});
    }
    return;
  }
  if (!control.set_point_kpa)
    draft.say(Code::kSolveNoSetPoint, 0, {}, {"The control"});
  else
    needNotNegative(draft, *control.set_point_kpa, "the set-point", 0, {});
  if (control.strategy != loop::Strategy::kDpHeaders) return;
  keepEnd(draft, control.header_supply.value_or(loop::End{}), 0, {}, "the supply header of the control");
  keepEnd(draft, control.header_return.value_or(loop::End{}), 0, {}, "the return header of the control");
}

/// Where the vessel connects; without one the supply end of the first plant.
void keepDatum(Draft& draft) {
  Network& network = draft.network;
  for (const loop::Vessel& vessel : draft.loop->vessels) {
    if (draft.datum_point >= 0) {
      draft.say(Code::kSolveTwoVessels, vessel.id, vessel.tag);
      continue;
    }
    keepEnd(draft, vessel.at_end, vessel.id, vessel.tag, "the connection of the vessel");
    if (!std::isfinite(vessel.fill_kpa)) draft.say(Code::kSolveNotFinite, vessel.id, vessel.tag, {"the fill pressure"});
    const auto joint = draft.joint_of.find(vessel.at_end.joint);
    if (joint == draft.joint_of.end()) continue;
    draft.datum_point = draft.first_point[joint->second] + (vessel.at_end.side == Side::kReturn ? 1 : 0);
    network.datum_known = true;
    network.datum_gauge_pa = 1000 * vessel.fill_kpa;
  }
  if (network.datum_known || draft.links.empty()) return;
  for (const Link& link : draft.links) {
    if (draft.network.elements[link.element].kind != Element::Kind::kPlant) continue;
    draft.datum_point = link.to;
    break;
  }
  if (draft.datum_point < 0) draft.datum_point = draft.links.front().from;
  draft.points[draft.datum_point].kept = true;
  if (draft.loop->vessels.empty()) draft.say(Code::kSolveNoVessel, 0, {});
}

}  // namespace

void keepTaps(Draft& draft) {
  keepSensors(draft);
  keepControl(draft);
  keepDatum(draft);
  for (const Link& link : draft.links) {
    if (draft.network.elements[link.element].kind != Element::Kind::kPump) continue;
    draft.points[link.from].kept = true;
    draft.points[link.to].kept = true;
  }
}

namespace {

int rootOf(std::vector<int>& parent, int i) {
  while (parent[i] != i) i = parent[i] = parent[parent[i]];
  return i;
}

}  // namespace

void checkConnections(Draft& draft) {
  const loop::Loop& loop = *draft.loop;
  if (loop.plants.empty()) draft.say(Code::kLoopEmpty, 0, {}, {"plant"});
  if (loop.pumps.empty()) draft.say(Code::kLoopEmpty, 0, {}, {"pump"});
  if (loop.terminals.empty()) draft.say(Code::kLoopEmpty, 0, {}, {"terminal"});
  std::vector<int> parent(draft.points.size());
  std::iota(parent.begin(), parent.end(), 0);
  for (const Link& link : draft.links) parent[rootOf(parent, link.from)] = rootOf(parent, link.to);
  std::vector<char> has_pump(draft.points.size(), 0);
  for (const Link& link : draft.links)
    if (draft.network.elements[link.element].kind == Element::Kind::kPump) has_pump[rootOf(parent, link.from)] = 1;
  std::vector<char> told(draft.points.size(), 0);
  for (const Link& link : draft.links) {
    const int root = rootOf(parent, link.from);
    if (has_pump[root] || told[root] || loop.pumps.empty()) continue;
    told[root] = 1;
    draft.say(Code::kSolveIsland, draft.network.elements[link.element].id, link.tag);
  }
}

}  // namespace ebbline::network
