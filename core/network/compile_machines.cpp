#include <cmath>

#include "core/network/compile_draft.h"
#include "core/part/valve.h"

namespace ebbline::network {

using loop::Side;
using text::Code;

namespace {

constexpr double kCubicMetresPerLitre = 1e-3;
constexpr double kPercent = 0.01;

/// Adds a valve of this Kv to the element's fixed losses.
void addKv(Draft& draft, Element& element, double kv_m3h, const char* name, const std::string& tag) {
  if (!needPositive(draft, kv_m3h, name, element.id, tag)) return;
  const double resistance = part::kvResistance(kv_m3h, draft.network.density_kg_m3);
  if (std::isfinite(resistance))
    element.quadratic_pa_s2_m6 += resistance;
  else
    draft.say(Code::kSolveNotPositive, element.id, tag, {name, shown(kv_m3h)});
}

void addBalancing(Draft& draft, Element& element, const loop::BalancingValve& valve, const std::string& tag) {
  if (valve.presetting_kv_m3h && valve.kvs_m3h > 0 && *valve.presetting_kv_m3h > valve.kvs_m3h)
    draft.say(Code::kLoopPresettingAboveKvs, element.id, tag, {shown(*valve.presetting_kv_m3h), shown(valve.kvs_m3h)});
  if (valve.presetting_kv_m3h)
    addKv(draft, element, *valve.presetting_kv_m3h, "the presetting of the balancing valve", tag);
  else
    addKv(draft, element, valve.kvs_m3h, "Kvs of the balancing valve", tag);
}

/// Table of a characteristic: at least two readings, strokes rising, openings not falling, all within 0…100 %.
bool soundTable(Draft& draft, const loop::ControlValve& valve, loop::Id id, const std::string& tag) {
  const auto& table = valve.table;
  if (table.size() < 2) {
    draft.say(Code::kSolveTableShort, id, tag, {std::to_string(table.size())});
    return false;
  }
  for (std::size_t i = 0; i < table.size(); ++i) {
    const bool in_range = table[i].stroke_percent >= 0 && table[i].stroke_percent <= 100 && table[i].kv_percent >= 0 &&
                          table[i].kv_percent <= 100;
    const bool in_order = i == 0 || (table[i].stroke_percent > table[i - 1].stroke_percent &&
                                     table[i].kv_percent >= table[i - 1].kv_percent);
    if (in_range && in_order) continue;
    draft.say(Code::kSolveTableOrder, id, tag, {std::to_string(i + 1)});
    return false;
  }
  return true;
}

bool soundValve(Draft& draft, const loop::ControlValve& valve, loop::Id id, const std::string& tag) {
  const std::size_t before = draft.remarks.size();
  if (valve.characteristic == loop::Characteristic::kTable) soundTable(draft, valve, id, tag);
  if (valve.characteristic == loop::Characteristic::kEqualPercentage) {
    if (!std::isfinite(valve.rangeability))
      draft.say(Code::kSolveNotFinite, id, tag, {"the rangeability"});
    else if (valve.rangeability <= 1)
      draft.say(Code::kSolveRangeability, id, tag, {shown(valve.rangeability)});
  }
  if (needNotNegative(draft, valve.leakage_percent, "the leakage", id, tag) && valve.leakage_percent >= 100)
    draft.say(Code::kSolveLeakage, id, tag, {shown(valve.leakage_percent)});
  return draft.remarks.size() == before;
}

int zoneOf(Draft& draft, const loop::Terminal& terminal) {
  if (terminal.zone == 0) return -1;
  const auto& zones = draft.loop->zones;
  for (std::size_t z = 0; z < zones.size(); ++z)
    if (zones[z].id == terminal.zone) return static_cast<int>(z);
  draft.say(Code::kLoopNoSuchZone, terminal.id, terminal.tag, {"The terminal", std::to_string(terminal.zone)});
  return -1;
}

void addTerminal(Draft& draft, const loop::Terminal& terminal) {
  Element element;
  element.kind = Element::Kind::kTerminal;
  element.id = terminal.id;
  element.terminal = static_cast<int>(draft.network.terminals.size());
  if (terminal.branch) addPipeLaws(draft, element, *terminal.branch, terminal.id, terminal.tag);
  addKnownLoss(draft, element, terminal.coil, "the loss of the coil", terminal.id, terminal.tag);
  if (terminal.strainer_kv_m3h) addKv(draft, element, *terminal.strainer_kv_m3h, "Kv of the strainer", terminal.tag);
  if (terminal.balancing) addBalancing(draft, element, *terminal.balancing, terminal.tag);
  TerminalLaw law;
  law.id = terminal.id;
  law.tag = terminal.tag;
  law.element = static_cast<int>(draft.network.elements.size());
  law.valve = terminal.valve;
  law.valve_kvs_m3h = terminal.valve.kvs_m3h;
  law.design_flow_m3s = terminal.design_flow_l_s * kCubicMetresPerLitre;
  law.zone = zoneOf(draft, terminal);
  law.essential = terminal.essential;
  needPositive(draft, terminal.valve.kvs_m3h, "Kvs of the control valve", terminal.id, terminal.tag);
  soundValve(draft, terminal.valve, terminal.id, terminal.tag);
  if (needNotNegative(draft, terminal.design_flow_l_s, "the design flow", terminal.id, terminal.tag) &&
      terminal.design_flow_l_s == 0)
    draft.say(Code::kLoopNoDesignFlow, terminal.id, terminal.tag);
  draft.network.terminals.push_back(std::move(law));
  const int from = draft.pointOf(terminal.from, terminal.id, terminal.tag, "the supply end of the terminal");
  const int to = draft.pointOf(terminal.to, terminal.id, terminal.tag, "the return end of the terminal");
  if (from >= 0 && to >= 0 && from != to && terminal.from.side != Side::kSingle &&
      terminal.from.side == terminal.to.side)
    draft.say(Code::kSolveSameSide, terminal.id, terminal.tag,
              {terminal.from.side == Side::kSupply ? "supply" : "return"});
  addLink(draft, element, from, to, terminal.tag);
}

void addPlant(Draft& draft, const loop::Plant& plant) {
  Element element;
  element.kind = Element::Kind::kPlant;
  element.id = plant.id;
  addKnownLoss(draft, element, plant.loss, "the loss of the plant", plant.id, plant.tag);
  if (plant.minimum_flow_l_s) needNotNegative(draft, *plant.minimum_flow_l_s, "the minimum flow", plant.id, plant.tag);
  const int from = draft.pointOf(plant.from, plant.id, plant.tag, "the inlet of the plant");
  const int to = draft.pointOf(plant.to, plant.id, plant.tag, "the outlet of the plant");
  addLink(draft, element, from, to, plant.tag);
}

bool soundReadings(Draft& draft, const loop::Pump& pump) {
  if (pump.curve.size() < 2) {
    draft.say(Code::kSolveCurveShort, pump.id, pump.tag, {std::to_string(pump.curve.size())});
    return false;
  }
  for (std::size_t i = 0; i < pump.curve.size(); ++i) {
    const loop::PumpPoint& point = pump.curve[i];
    if (!needNotNegative(draft, point.flow_l_s, "a flow of the pump curve", pump.id, pump.tag)) return false;
    if (!needNotNegative(draft, point.head_m, "a head of the pump curve", pump.id, pump.tag)) return false;
    if (i > 0 && point.flow_l_s <= pump.curve[i - 1].flow_l_s) {
      draft.say(Code::kSolveCurveOrder, pump.id, pump.tag, {std::to_string(i + 1)});
      return false;
    }
    if (point.efficiency_percent && !(*point.efficiency_percent >= 0 && *point.efficiency_percent <= 100)) {
      draft.say(Code::kSolveEfficiencyRange, pump.id, pump.tag, {std::to_string(i + 1)});
      return false;
    }
  }
  if (pump.curve.front().head_m > 0) return true;
  draft.say(Code::kSolveCurveNoHead, pump.id, pump.tag);
  return false;
}

part::PumpCurve curveOf(Draft& draft, const loop::Pump& pump) {
  if (!soundReadings(draft, pump)) return {};
  // Efficiency must be known at every reading but the first, where 0 is right when the flow is 0.
  bool some = false;
  bool all = true;
  for (std::size_t i = 0; i < pump.curve.size(); ++i) {
    const loop::PumpPoint& point = pump.curve[i];
    some = some || point.efficiency_percent.has_value();
    all = all && (point.efficiency_percent || (i == 0 && point.flow_l_s == 0));
  }
  if (some && !all) draft.say(Code::kSolveEfficiencyPartly, pump.id, pump.tag);
  std::vector<part::PumpReading> readings;
  for (const loop::PumpPoint& point : pump.curve)
    readings.push_back({point.flow_l_s * kCubicMetresPerLitre, point.head_m,
                        some && all ? point.efficiency_percent.value_or(0) * kPercent : 0});
  part::PumpCurve curve(std::move(readings));
  if (curve.rises()) draft.say(Code::kSolveCurveRises, pump.id, pump.tag);
  return curve;
}

void addPump(Draft& draft, const loop::Pump& pump) {
  Element element;
  element.kind = Element::Kind::kPump;
  element.id = pump.id;
  element.pump = static_cast<int>(draft.network.pumps.size());
  PumpLaw law;
  law.id = pump.id;
  law.tag = pump.tag;
  law.element = static_cast<int>(draft.network.elements.size());
  law.curve = curveOf(draft, pump);
  law.minimum_speed = pump.minimum_speed_percent / 100;
  law.maximum_speed = pump.maximum_speed_percent / 100;
  if (needPositive(draft, pump.minimum_speed_percent, "the minimum speed", pump.id, pump.tag) &&
      needPositive(draft, pump.maximum_speed_percent, "the maximum speed", pump.id, pump.tag) &&
      pump.minimum_speed_percent > pump.maximum_speed_percent)
    draft.say(Code::kSolveSpeedBounds, pump.id, pump.tag,
              {shown(pump.minimum_speed_percent), shown(pump.maximum_speed_percent)});
  draft.network.pumps.push_back(std::move(law));
  const int from = draft.pointOf(pump.from, pump.id, pump.tag, "the suction of the pump");
  const int to = draft.pointOf(pump.to, pump.id, pump.tag, "the discharge of the pump");
  addLink(draft, element, from, to, pump.tag);
}

void addControlValve(Draft& draft, Element& element, const loop::Valve& valve) {
  const loop::ControlValve& c = valve.characteristic;
  if (!soundValve(draft, c, valve.id, valve.tag)) return;
  std::vector<part::CharacteristicReading> table;
  for (const loop::CharacteristicPoint& point : c.table)
    table.push_back({point.stroke_percent * kPercent, point.kv_percent * kPercent});
  const part::Characteristic characteristic(
      c.characteristic == loop::Characteristic::kLinear  ? part::CharacteristicKind::kLinear
      : c.characteristic == loop::Characteristic::kTable ? part::CharacteristicKind::kTable
                                                         : part::CharacteristicKind::kEqualPercentage,
      c.rangeability, c.leakage_percent * kPercent, std::move(table));
  const double opening = characteristic.opening(valve.opening_percent * kPercent).value;
  if (opening > 0)
    addKv(draft, element, valve.kvs_m3h * opening, "Kvs", valve.tag);
  else
    element.shut = true;
}

void addValve(Draft& draft, const loop::Valve& valve) {
  Element element;
  element.kind = Element::Kind::kValve;
  element.id = valve.id;
  needNotNegative(draft, valve.opening_percent, "the opening", valve.id, valve.tag);
  switch (valve.kind) {
    case loop::ValveKind::kIsolating:
      if (valve.opening_percent > 0 && valve.opening_percent < 100)
        draft.say(Code::kLoopHalfShut, valve.id, valve.tag, {shown(valve.opening_percent)});
      if (valve.opening_percent > 0)
        addKv(draft, element, valve.kvs_m3h, "Kvs", valve.tag);
      else
        element.shut = true;
      break;
    case loop::ValveKind::kBalancing:
      addBalancing(draft, element, {valve.kvs_m3h, valve.presetting_kv_m3h}, valve.tag);
      break;
    case loop::ValveKind::kControl:
      addControlValve(draft, element, valve);
      break;
    case loop::ValveKind::kStrainer:
      addKv(draft, element, valve.kvs_m3h, "Kv of the strainer", valve.tag);
      break;
  }
  const int from = draft.pointOf(valve.from, valve.id, valve.tag, "the first end of the valve");
  const int to = draft.pointOf(valve.to, valve.id, valve.tag, "the second end of the valve");
  addLink(draft, element, from, to, valve.tag);
}

}  // namespace

void draftMachines(Draft& draft) {
  for (const loop::Terminal& terminal : draft.loop->terminals) addTerminal(draft, terminal);
  for (const loop::Plant& plant : draft.loop->plants) addPlant(draft, plant);
  for (const loop::Pump& pump : draft.loop->pumps) addPump(draft, pump);
  for (const loop::Valve& valve : draft.loop->valves) addValve(draft, valve);
}

}  // namespace ebbline::network
