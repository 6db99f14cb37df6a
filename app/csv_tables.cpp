#include "app/csv_tables.h"

#include <fmt/format.h>

#include "core/loop/fields.h"

namespace ebbline::app {
namespace {

using Row = std::vector<std::string>;

std::string quoted(const std::string& text) {
  if (text.find_first_of(",\"\n\r") == std::string::npos) return text;
  std::string result = "\"";
  for (const char c : text) {
    if (c == '"') result += '"';
    result += c;
  }
  return result + "\"";
}

std::string cell(double number) {
  return fmt::format("{}", number);
}
std::string cell(const std::optional<double>& number) {
  return number ? cell(*number) : "";
}

template <class E>
std::string wordFor(E value) {
  for (const auto& word : loop::words(E{}))
    if (word.value == value) return std::string(word.word);
  return {};
}

std::string textOf(const std::vector<Row>& rows) {
  std::string text;
  for (const Row& row : rows) {
    for (std::size_t i = 0; i < row.size(); ++i) text += (i == 0 ? "" : ",") + quoted(row[i]);
    text += "\n";
  }
  return text;
}

template <class List>
std::string nameIn(const List& list, loop::Id id) {
  for (const auto& one : list)
    if (one.id == id) return one.name;
  return {};
}

std::string jointName(const loop::Loop& loop, loop::Id id) {
  for (const loop::Joint& joint : loop.joints)
    if (joint.id == id) return joint.tag.empty() ? std::to_string(id) : joint.tag;
  return {};
}

std::string endName(const loop::Loop& loop, const loop::End& end) {
  const std::string joint = jointName(loop, end.joint);
  return end.side == loop::Side::kSingle ? joint : joint + " " + wordFor(end.side);
}

std::vector<Row> terminals(const loop::Loop& loop) {
  std::vector<Row> rows = {{"id", "tag", "zone", "essential", "from", "to", "design_flow_l_s", "load_kw",
                            "coil_flow_l_s", "coil_loss_kpa", "strainer_kv_m3h", "valve_kvs_m3h", "characteristic",
                            "rangeability", "balancing_kvs_m3h", "presetting_kv_m3h"}};
  for (const loop::Terminal& t : loop.terminals) {
    const std::optional<double> none;
    rows.push_back(
        {std::to_string(t.id), t.tag, nameIn(loop.zones, t.zone), t.essential ? "yes" : "no", endName(loop, t.from),
         endName(loop, t.to), cell(t.design_flow_l_s), cell(t.load_kw), cell(t.coil.flow_l_s), cell(t.coil.loss_kpa),
         cell(t.strainer_kv_m3h), cell(t.valve.kvs_m3h), wordFor(t.valve.characteristic), cell(t.valve.rangeability),
         t.balancing ? cell(t.balancing->kvs_m3h) : "", cell(t.balancing ? t.balancing->presetting_kv_m3h : none)});
  }
  return rows;
}

Row runRow(loop::Id id, const std::string& tag, const char* kind, const std::string& from, const std::string& to,
           const loop::Pipe& pipe) {
  return {std::to_string(id),
          tag,
          kind,
          from,
          to,
          cell(pipe.length_m),
          pipe.series,
          pipe.size,
          cell(pipe.bore_mm),
          cell(pipe.roughness_mm),
          cell(pipe.fittings_allowance_percent),
          cell(pipe.extra_k)};
}

std::vector<Row> runs(const loop::Loop& loop) {
  std::vector<Row> rows = {{"id", "tag", "kind", "from", "to", "length_m", "series", "size", "bore_mm", "roughness_mm",
                            "fittings_allowance_percent", "extra_k"}};
  for (const loop::PairedRun& run : loop.paired_runs) {
    const char* kind = run.return_pipe ? "paired run, supply" : "paired run";
    rows.push_back(runRow(run.id, run.tag, kind, jointName(loop, run.from), jointName(loop, run.to), run.pipe));
    if (run.return_pipe)
      rows.push_back(runRow(run.id, run.tag, "paired run, return", jointName(loop, run.from), jointName(loop, run.to),
                            *run.return_pipe));
  }
  for (const loop::PipeRun& run : loop.pipe_runs)
    rows.push_back(runRow(run.id, run.tag, "pipe run", endName(loop, run.from), endName(loop, run.to), run.pipe));
  return rows;
}

std::vector<Row> valves(const loop::Loop& loop) {
  std::vector<Row> rows = {{"id", "tag", "kind", "from", "to", "kvs_m3h", "presetting_kv_m3h", "opening_percent"}};
  for (const loop::Valve& valve : loop.valves)
    rows.push_back({std::to_string(valve.id), valve.tag, wordFor(valve.kind), endName(loop, valve.from),
                    endName(loop, valve.to), cell(valve.kvs_m3h), cell(valve.presetting_kv_m3h),
                    cell(valve.opening_percent)});
  return rows;
}

std::vector<Row> pumps(const loop::Loop& loop) {
  std::vector<Row> rows = {{"id", "tag", "flow_l_s", "head_m", "efficiency_percent"}};
  for (const loop::Pump& pump : loop.pumps)
    for (const loop::PumpPoint& point : pump.curve)
      rows.push_back({std::to_string(pump.id), pump.tag, cell(point.flow_l_s), cell(point.head_m),
                      cell(point.efficiency_percent)});
  return rows;
}

std::vector<Row> joints(const loop::Loop& loop) {
  std::vector<Row> rows = {{"id", "tag", "paired", "x_m", "y_m", "level", "above_level_m"}};
  for (const loop::Joint& joint : loop.joints)
    rows.push_back({std::to_string(joint.id), joint.tag, joint.paired ? "yes" : "no", cell(joint.at.x_m),
                    cell(joint.at.y_m), nameIn(loop.levels, joint.level), cell(joint.above_level_m)});
  return rows;
}

std::vector<Row> states(const loop::Loop& loop) {
  std::vector<Row> rows = {{"state", "of", "kind", "percent"}};
  for (const loop::LoadState& state : loop.load_states) {
    rows.push_back({state.name, "all others", wordFor(state.rest_kind), cell(state.rest_percent)});
    for (const loop::Demand& demand : state.demands) {
      std::string of = nameIn(loop.zones, demand.of);
      for (const loop::Terminal& terminal : loop.terminals)
        if (terminal.id == demand.of) of = terminal.tag;
      rows.push_back({state.name, of, wordFor(demand.kind), cell(demand.percent)});
    }
  }
  return rows;
}

struct Maker {
  const char* name;
  std::vector<Row> (*make)(const loop::Loop&);
};
constexpr Maker kMakers[] = {{"terminals", terminals}, {"runs", runs},     {"valves", valves},
                             {"pumps", pumps},         {"joints", joints}, {"states", states}};

}  // namespace

std::vector<std::string> csvTableNames() {
  std::vector<std::string> names;
  for (const Maker& maker : kMakers) names.emplace_back(maker.name);
  return names;
}

std::optional<std::string> csvTable(const loop::Loop& loop, std::string_view name) {
  for (const Maker& maker : kMakers)
    if (name == maker.name) return textOf(maker.make(loop));
  return std::nullopt;
}

}  // namespace ebbline::app
