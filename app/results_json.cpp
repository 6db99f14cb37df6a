#include "app/results_json.h"

#include <algorithm>

#include <fmt/format.h>

namespace ebbline::app {
namespace {

using quantity::baseToFile;
using quantity::Quantity;

double litres(double m3s) {
  return baseToFile(m3s, Quantity::kFlow);
}
double kilopascals(double pa) {
  return baseToFile(pa, Quantity::kPressure);
}

std::string tagOfJoint(const loop::Loop& loop, loop::Id id) {
  for (const loop::Joint& joint : loop.joints)
    if (joint.id == id) return joint.tag;
  return {};
}

template <class List>
std::string tagIn(const List& things, loop::Id id) {
  for (const auto& thing : things)
    if (thing.id == id) return thing.tag;
  return {};
}

std::string tagOfPart(const loop::Loop& loop, loop::Id id) {
  for (const std::string& tag : {tagIn(loop.paired_runs, id), tagIn(loop.pipe_runs, id), tagIn(loop.terminals, id),
                                 tagIn(loop.plants, id), tagIn(loop.pumps, id), tagIn(loop.valves, id)})
    if (!tag.empty()) return tag;
  return {};
}

const char* boundWord(network::SpeedBound bound) {
  if (bound == network::SpeedBound::kAtMinimum) return "minimum";
  return bound == network::SpeedBound::kAtMaximum ? "maximum" : "none";
}

Json endJson(const network::EndResult& end, const loop::Loop& loop) {
  Json json{{"joint", end.end.joint},
            {"tag", tagOfJoint(loop, end.end.joint)},
            {"side", wordOf(end.end.side)},
            {"elevation_m", end.elevation_m},
            {"determined", end.determined}};
  json["pressure_kpa"] = end.determined ? Json(kilopascals(end.pressure_pa)) : Json(nullptr);
  json["gauge_kpa"] = end.determined && end.gauge_pa ? Json(kilopascals(*end.gauge_pa)) : Json(nullptr);
  return json;
}

Json partJson(const network::PartResult& part) {
  return {{"kind", wordOf(part.kind)},
          {"id", part.id},
          {"tag", part.tag},
          {"side", wordOf(part.side)},
          {"flow_l_s", litres(part.flow_m3s)},
          {"loss_kpa", kilopascals(part.loss_pa)},
          {"velocity_m_s", part.velocity_ms},
          {"gradient_pa_m", part.gradient_pa_m}};
}

Json terminalJson(const network::TerminalResult& terminal) {
  return {{"id", terminal.id},
          {"tag", terminal.tag},
          {"requested_l_s", litres(terminal.requested_m3s)},
          {"delivered_l_s", litres(terminal.delivered_m3s)},
          {"shortfall_percent", 100 * terminal.shortfall},
          {"under_supplied", terminal.under_supplied},
          {"valve_position_percent", 100 * terminal.stroke},
          {"available_kpa", kilopascals(terminal.available_pa)},
          {"valve_kpa", kilopascals(terminal.valve_pa)}};
}

Json pumpJson(const network::PumpResult& pump) {
  return {{"id", pump.id},
          {"tag", pump.tag},
          {"speed_percent", 100 * pump.speed},
          {"flow_l_s", litres(pump.flow_m3s)},
          {"head_m", pump.head_m},
          {"pressure_kpa", kilopascals(pump.pressure_pa)},
          {"shaft_power_kw", baseToFile(pump.shaft_power_w, Quantity::kPower)},
          {"efficiency_percent", 100 * pump.efficiency},
          {"beyond_data", pump.beyond_data}};
}

}  // namespace

const char* wordOf(network::Element::Kind kind) {
  switch (kind) {
    case network::Element::Kind::kPipe:
      return "pipe";
    case network::Element::Kind::kTerminal:
      return "terminal";
    case network::Element::Kind::kPlant:
      return "plant";
    case network::Element::Kind::kPump:
      return "pump";
    case network::Element::Kind::kValve:
      return "valve";
  }
  return "";
}

const char* wordOf(loop::Side side) {
  if (side == loop::Side::kSupply) return "supply";
  return side == loop::Side::kReturn ? "return" : "single";
}

std::string placeOfNode(const loop::Loop& loop, const network::Network& network, int node) {
  for (const network::EndPlace& place : network.ends) {
    if (place.node != node || node < 0) continue;
    const std::string tag = tagOfJoint(loop, place.end.joint);
    const std::string joint = tag.empty() ? fmt::format("joint {}", place.end.joint) : tag;
    return place.end.side == loop::Side::kSingle ? joint : joint + " " + wordOf(place.end.side);
  }
  return {};
}

std::string placeOfEdge(const loop::Loop& loop, const network::Network& network, int edge) {
  if (edge < 0 || edge >= static_cast<int>(network.edges.size())) return {};
  const network::Edge& of = network.edges[static_cast<std::size_t>(edge)];
  for (int e = of.first_element; e < of.first_element + of.num_elements; ++e) {
    const std::string tag = tagOfPart(loop, network.elements[static_cast<std::size_t>(e)].id);
    if (!tag.empty()) return tag;
  }
  return {};
}

Json jsonOf(const std::vector<text::Remark>& remarks) {
  Json list = Json::array();
  for (const text::Remark& one : remarks) {
    const text::Severity severity = text::severityOf(one.code);
    list.push_back({{"code", text::codeName(one.code)},
                    {"severity", severity == text::Severity::kFault     ? "fault"
                                 : severity == text::Severity::kCaution ? "caution"
                                                                        : "note"},
                    {"line", one.place.line},
                    {"pointer", one.place.pointer},
                    {"id", one.place.id},
                    {"tag", one.place.tag},
                    {"sentence", text::sentence(one)},
                    {"remedy", text::remedy(one)}});
  }
  return list;
}

Json jsonOf(const network::Summary& summary, const loop::Loop& loop, const network::Network& network) {
  Json json{{"usable", summary.usable()},
            {"why", summary.why},
            {"rounds", summary.rounds},
            {"flow_residual", summary.flow_residual},
            {"flow_residual_at", placeOfNode(loop, network, summary.flow_residual_node)},
            {"pressure_residual", summary.pressure_residual},
            {"pressure_residual_at", placeOfEdge(loop, network, summary.pressure_residual_edge)},
            {"speed_bound", boundWord(summary.bound)}};
  if (summary.remark) json["remark"] = jsonOf(std::vector<text::Remark>{*summary.remark})[0];
  return json;
}

Json jsonOf(const network::Results& results, const OpenedLoop& opened, const network::Request& request) {
  Json json{{"ends", Json::array()},
            {"parts", Json::array()},
            {"terminals", Json::array()},
            {"pumps", Json::array()},
            {"taps", Json::array()}};
  for (const auto& end : results.ends) json["ends"].push_back(endJson(end, opened.loop));
  for (const auto& part : results.parts) json["parts"].push_back(partJson(part));
  for (const auto& terminal : results.terminals) json["terminals"].push_back(terminalJson(terminal));
  for (const auto& pump : results.pumps) json["pumps"].push_back(pumpJson(pump));
  const bool sensors = opened.loop.control.strategy == loop::Strategy::kFieldSensor;
  for (std::size_t i = 0; i < results.tap_pressure_pa.size() && i < request.speed.taps.size(); ++i) {
    Json tap{{"set_point_kpa", kilopascals(request.speed.taps[i].set_point_pa)},
             {"reading_kpa", kilopascals(results.tap_pressure_pa[i])}};
    if (sensors && i < opened.loop.control.sensors.size())
      tap["sensor"] = tagIn(opened.loop.sensors, opened.loop.control.sensors[i]);
    json["taps"].push_back(std::move(tap));
  }
  return json;
}

Json jsonOf(const study::SweepRow& row) {
  Json json{{"load_percent", row.load_percent}, {"usable", row.summary.usable()}, {"why", row.summary.why}};
  if (!row.name.empty()) json["state"] = row.name;
  if (!row.summary.usable()) return json;
  json.update({{"requested_l_s", litres(row.requested_m3s)},
               {"delivered_l_s", litres(row.delivered_m3s)},
               {"flow_l_s", litres(row.flow_m3s)},
               {"pressure_kpa", kilopascals(row.pressure_pa)},
               {"head_m", row.head_m},
               {"speed_percent", 100 * row.speed},
               {"speed_bound", boundWord(row.summary.bound)},
               {"shaft_power_kw", baseToFile(row.shaft_power_w, Quantity::kPower)},
               {"efficiency_percent", 100 * row.efficiency},
               {"beyond_data", row.beyond_data},
               {"under_supplied", row.num_under_supplied},
               {"worst_shortfall_percent", 100 * row.worst_shortfall},
               {"worst_terminal", row.worst_terminal},
               {"essential_short", row.essential_short},
               {"rounds", row.summary.rounds},
               {"flow_residual", row.summary.flow_residual},
               {"pressure_residual", row.summary.pressure_residual},
               {"method_difference", row.method_difference ? Json(*row.method_difference) : Json(nullptr)}});
  return json;
}

}  // namespace ebbline::app
