#pragma once
// The field table of the .ebbline file: for each struct its keys in file order with unit, limits, need and one line of
// description. Reader, writer, schema and the range check all walk this one table, so they cannot disagree.
//
// `describe(visitor, object)` calls visitor(key, member, need, about[, limits]) once per field in file order. The
// default of a field is the member of a default-constructed object.

#include <array>
#include <concepts>
#include <string_view>
#include <type_traits>
#include <utility>

#include "core/loop/loop.h"

namespace ebbline::loop {

/// Range of a number in the file's unit; the limits themselves are inside it unless `above` is set.
struct Limits {
  double least = -1e9;
  double most = 1e9;
  bool above = false;  ///< The number must be greater than `least`, not equal to it.
};
// Limits keep absurd input away from the solver; they are wide on purpose (common practice, no source).
constexpr Limits between(double least, double most) {
  return {least, most, false};
}
constexpr Limits atLeast(double least) {
  return {least, 1e9, false};
}
constexpr Limits above(double least, double most = 1e9) {
  return {least, most, true};
}
constexpr double kMostId = 4e9;
constexpr Limits kSheet = between(-1e7, 1e7);

/// Whether a key must be in the file, and whether it is written when it has its default.
enum class Need {
  kRequired,  ///< Must be there; always written.
  kShown,     ///< May be missing; always written.
  kOptional,  ///< May be missing; left out when it equals the default.
};
constexpr Need kRequired = Need::kRequired;
constexpr Need kShown = Need::kShown;
constexpr Need kOptional = Need::kOptional;

/// One choice of an enumeration as it stands in the file.
template <class E>
struct Word {
  E value;
  std::string_view word;
};

constexpr std::array<Word<Side>, 3> words(Side) {
  return {{{Side::kSingle, "single"}, {Side::kSupply, "supply"}, {Side::kReturn, "return"}}};
}
constexpr std::array<Word<FluidKind>, 4> words(FluidKind) {
  return {{{FluidKind::kWater, "water"},
           {FluidKind::kEthyleneGlycol, "ethylene_glycol"},
           {FluidKind::kPropyleneGlycol, "propylene_glycol"},
           {FluidKind::kGiven, "given"}}};
}
constexpr std::array<Word<Characteristic>, 3> words(Characteristic) {
  return {{{Characteristic::kEqualPercentage, "equal_percentage"},
           {Characteristic::kLinear, "linear"},
           {Characteristic::kTable, "table"}}};
}
constexpr std::array<Word<PlantKind>, 3> words(PlantKind) {
  return {{{PlantKind::kChiller, "chiller"},
           {PlantKind::kBoiler, "boiler"},
           {PlantKind::kHeatExchanger, "heat_exchanger"}}};
}
constexpr std::array<Word<ValveKind>, 4> words(ValveKind) {
  return {{{ValveKind::kIsolating, "isolating"},
           {ValveKind::kBalancing, "balancing"},
           {ValveKind::kControl, "control"},
           {ValveKind::kStrainer, "strainer"}}};
}
constexpr std::array<Word<DemandKind>, 2> words(DemandKind) {
  return {{{DemandKind::kRequest, "request"}, {DemandKind::kPosition, "position"}}};
}
constexpr std::array<Word<Strategy>, 4> words(Strategy) {
  return {{{Strategy::kConstantSpeed, "constant_speed"},
           {Strategy::kDpPump, "constant_dp_pump"},
           {Strategy::kDpHeaders, "constant_dp_headers"},
           {Strategy::kFieldSensor, "field_sensor"}}};
}

/// T or const T: the table serves reading and writing alike.
template <class T, class Struct>
concept Like = std::same_as<std::remove_const_t<T>, Struct>;

template <class V, Like<Point> T>
void describe(V& v, T& x) {
  v("x_m", x.x_m, kRequired, "To the right on the sheet.", kSheet);
  v("y_m", x.y_m, kRequired, "Up on the sheet.", kSheet);
}

template <class V, Like<End> T>
void describe(V& v, T& x) {
  v("joint", x.joint, kRequired, "Id of the joint; 0 = not connected.", between(0, kMostId));
  v("side", x.side, kOptional, "Which pipe of a paired joint; single for a single joint.");
}

template <class V, Like<Project> T>
void describe(V& v, T& x) {
  v("title", x.title, kShown, "Building or job.");
  v("subject", x.subject, kOptional, "Chilled water, heating and the like.");
  v("client", x.client, kOptional, "For whom.");
  v("notes", x.notes, kOptional, "Free text.");
}

template <class V, Like<Fluid> T>
void describe(V& v, T& x) {
  v("kind", x.kind, kShown, "What flows.");
  v("temperature_c", x.temperature_c, kShown, "Temperature at which its properties are taken.", between(-50, 200));
  v("glycol_mass_percent", x.glycol_mass_percent, kOptional, "Glycol in the mixture, by mass.", between(0, 100));
  v("density_kg_m3", x.density_kg_m3, kOptional, "Density of a given fluid.", above(0, 1e5));
  v("viscosity_mpa_s", x.viscosity_mpa_s, kOptional, "Dynamic viscosity of a given fluid.", above(0, 1e5));
  v("heat_capacity_kj_kgk", x.heat_capacity_kj_kgk, kOptional, "Heat capacity of a given fluid.", above(0, 1e3));
}

template <class V, Like<Control> T>
void describe(V& v, T& x) {
  v("strategy", x.strategy, kShown, "How the pump's speed is set.");
  v("speed_percent", x.speed_percent, kOptional, "Speed under constant_speed, of reference speed.", above(0, 200));
  v("set_point_kpa", x.set_point_kpa, kOptional, "Set-point across the pump or the headers.", between(0, 1e6));
  v("header_supply", x.header_supply, kOptional, "Supply header under constant_dp_headers.");
  v("header_return", x.header_return, kOptional, "Return header under constant_dp_headers.");
  v("sensors", x.sensors, kOptional, "Sensors under field_sensor: each is kept at or above its set-point.",
    between(0, kMostId));
}

template <class V, Like<Level> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("name", x.name, kShown, "Name of the level.");
  v("elevation_m", x.elevation_m, kRequired, "Height above datum.", between(-1000, 10000));
  v("line_y_m", x.line_y_m, kShown, "Where its line stands on the sheet.", kSheet);
}

template <class V, Like<Zone> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("name", x.name, kShown, "Name of the zone.");
  v("flow_limit_l_s", x.flow_limit_l_s, kOptional, "Most the zone may draw at once.", atLeast(0));
}

template <class V, Like<Joint> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("tag", x.tag, kOptional, "Name on the drawing.");
  v("paired", x.paired, kOptional, "True: a supply and a return point; false: one point.");
  v("at", x.at, kRequired, "Its (supply) point on the sheet.");
  v("level", x.level, kOptional, "Id of its level; 0 = none.", between(0, kMostId));
  v("above_level_m", x.above_level_m, kOptional, "Height above its level.", between(-10000, 10000));
}

template <class V, Like<KnownLoss> T>
void describe(V& v, T& x) {
  v("flow_l_s", x.flow_l_s, kRequired, "Flow at which the loss is known.", atLeast(0));
  v("loss_kpa", x.loss_kpa, kRequired, "Pressure drop at that flow.", atLeast(0));
  v("exponent", x.exponent, kOptional, "Loss grows with flow to this power.", between(1, 3));
}

template <class V, Like<Fitting> T>
void describe(V& v, T& x) {
  v("kind", x.kind, kRequired, "Name of the fitting in the catalogue.");
  v("count", x.count, kOptional, "How many.", between(0, 1e6));
}

template <class V, Like<Pipe> T>
void describe(V& v, T& x) {
  v("length_m", x.length_m, kRequired, "Length of one pipe.", between(0, 1e6));
  v("series", x.series, kOptional, "Pipe table of the catalogue.");
  v("size", x.size, kOptional, "Size in that table.");
  v("bore_mm", x.bore_mm, kOptional, "Inside diameter; wins over series and size.", above(0, 1e5));
  v("roughness_mm", x.roughness_mm, kOptional, "Roughness; wins over that of the table.", between(0, 1000));
  v("fittings", x.fittings, kOptional, "Fittings counted.");
  v("fittings_allowance_percent", x.fittings_allowance_percent, kOptional,
    "Added to the length for fittings not counted.", between(0, 1000));
  v("extra_k", x.extra_k, kOptional, "Further loss coefficient on the velocity in the bore.", between(0, 1e6));
  v("known_loss", x.known_loss, kOptional, "If present the pipe is this loss alone.");
}

template <class V, Like<PairedRun> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("tag", x.tag, kOptional, "Name on the drawing.");
  v("from", x.from, kRequired, "Id of the paired joint it starts at; 0 = not connected.", between(0, kMostId));
  v("to", x.to, kRequired, "Id of the paired joint it leads to; 0 = not connected.", between(0, kMostId));
  v("pipe", x.pipe, kRequired, "Supply pipe, and return pipe unless return_pipe is given.");
  v("return_pipe", x.return_pipe, kOptional, "Return pipe if it differs.");
  v("bends", x.bends, kOptional, "Corners of the drawn line.");
  v("typed", x.typed, kOptional, "Numbers as typed, by key.");
}

template <class V, Like<PipeRun> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("tag", x.tag, kOptional, "Name on the drawing.");
  v("from", x.from, kRequired, "Where it starts.");
  v("to", x.to, kRequired, "Where it leads to.");
  v("pipe", x.pipe, kRequired, "What it is made of.");
  v("bends", x.bends, kOptional, "Corners of the drawn line.");
  v("typed", x.typed, kOptional, "Numbers as typed, by key.");
}

template <class V, Like<CharacteristicPoint> T>
void describe(V& v, T& x) {
  v("stroke_percent", x.stroke_percent, kRequired, "Stroke.", between(0, 100));
  v("kv_percent", x.kv_percent, kRequired, "Kv at that stroke, of Kvs.", between(0, 100));
}

template <class V, Like<ControlValve> T>
void describe(V& v, T& x) {
  v("kvs_m3h", x.kvs_m3h, kOptional, "Kv fully open.", between(0, 1e6));
  v("characteristic", x.characteristic, kOptional, "How Kv follows the stroke.");
  v("rangeability", x.rangeability, kOptional, "Kvs over the smallest Kv of the characteristic.", above(1, 1e6));
  v("leakage_percent", x.leakage_percent, kOptional, "Seat leakage, of Kvs.", between(0, 100));
  v("table", x.table, kOptional, "Readings of the characteristic if it is table.");
}

template <class V, Like<BalancingValve> T>
void describe(V& v, T& x) {
  v("kvs_m3h", x.kvs_m3h, kRequired, "Kv fully open.", between(0, 1e6));
  v("presetting_kv_m3h", x.presetting_kv_m3h, kOptional, "Kv it is set to; missing = fully open.", between(0, 1e6));
}

template <class V, Like<Terminal> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("tag", x.tag, kOptional, "Name on the drawing.");
  v("from", x.from, kRequired, "Supply.");
  v("to", x.to, kRequired, "Return.");
  v("at", x.at, kRequired, "Where its symbol stands.");
  v("zone", x.zone, kOptional, "Id of its zone; 0 = none.", between(0, kMostId));
  v("essential", x.essential, kOptional, "May not be under-supplied even for minutes.");
  v("design_flow_l_s", x.design_flow_l_s, kRequired, "Flow at design load.", between(0, 1e6));
  v("load_kw", x.load_kw, kOptional, "Design load.", between(0, 1e6));
  v("coil", x.coil, kRequired, "Loss of the coil.");
  v("strainer_kv_m3h", x.strainer_kv_m3h, kOptional, "Kv of the strainer.", above(0, 1e6));
  v("valve", x.valve, kRequired, "Control valve.");
  v("balancing", x.balancing, kOptional, "Balancing valve.");
  v("branch", x.branch, kOptional, "Branch pipe, supply and return together.");
  v("typed", x.typed, kOptional, "Numbers as typed, by key.");
}

template <class V, Like<Plant> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("tag", x.tag, kOptional, "Name on the drawing.");
  v("kind", x.kind, kShown, "What it is.");
  v("from", x.from, kRequired, "Return to the plant.");
  v("to", x.to, kRequired, "Supply from the plant.");
  v("at", x.at, kRequired, "Where its symbol stands.");
  v("loss", x.loss, kRequired, "Its pressure drop.");
  v("minimum_flow_l_s", x.minimum_flow_l_s, kOptional, "Least flow it may have.", between(0, 1e6));
  v("supply_c", x.supply_c, kOptional, "Supply temperature.", between(-50, 200));
  v("return_c", x.return_c, kOptional, "Return temperature.", between(-50, 200));
  v("typed", x.typed, kOptional, "Numbers as typed, by key.");
}

template <class V, Like<PumpPoint> T>
void describe(V& v, T& x) {
  v("flow_l_s", x.flow_l_s, kRequired, "Flow at reference speed.", between(0, 1e6));
  v("head_m", x.head_m, kRequired, "Head at that flow.", between(0, 1e5));
  v("efficiency_percent", x.efficiency_percent, kOptional, "Of the pump alone.", between(0, 100));
}

template <class V, Like<Pump> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("tag", x.tag, kOptional, "Name on the drawing.");
  v("from", x.from, kRequired, "Suction.");
  v("to", x.to, kRequired, "Discharge.");
  v("at", x.at, kRequired, "Where its symbol stands.");
  v("curve", x.curve, kRequired, "Readings at reference speed, flow rising.");
  v("minimum_speed_percent", x.minimum_speed_percent, kOptional, "Of reference speed.", above(0, 200));
  v("maximum_speed_percent", x.maximum_speed_percent, kOptional, "Of reference speed.", above(0, 200));
  v("run_out_flow_l_s", x.run_out_flow_l_s, kOptional, "Largest flow allowed at reference speed.", between(0, 1e6));
  v("minimum_flow_l_s", x.minimum_flow_l_s, kOptional, "Least flow allowed at reference speed.", between(0, 1e6));
  v("motor_kw", x.motor_kw, kOptional, "Rated power of the motor.", between(0, 1e6));
  v("typed", x.typed, kOptional, "Numbers as typed, by key.");
}

template <class V, Like<Valve> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("tag", x.tag, kOptional, "Name on the drawing.");
  v("kind", x.kind, kShown, "What it is.");
  v("from", x.from, kRequired, "Where the flow enters.");
  v("to", x.to, kRequired, "Where the flow leaves.");
  v("at", x.at, kRequired, "Where its symbol stands.");
  v("kvs_m3h", x.kvs_m3h, kShown, "Kv fully open.", between(0, 1e6));
  v("presetting_kv_m3h", x.presetting_kv_m3h, kOptional, "Kv a balancing valve is set to.", between(0, 1e6));
  v("opening_percent", x.opening_percent, kOptional, "Isolating: 0 or 100. Control: stroke.", between(0, 100));
  v("characteristic", x.characteristic, kOptional, "Characteristic of a control valve.");
  v("typed", x.typed, kOptional, "Numbers as typed, by key.");
}

template <class V, Like<Sensor> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("tag", x.tag, kOptional, "Name on the drawing.");
  v("high", x.high, kRequired, "Tap at the higher pressure.");
  v("low", x.low, kRequired, "Tap at the lower pressure.");
  v("at", x.at, kRequired, "Where its symbol stands.");
  v("set_point_kpa", x.set_point_kpa, kOptional, "Pressure difference to be kept.", between(0, 1e6));
  v("high_bore_mm", x.high_bore_mm, kOptional, "Bore at the high tap, if not that of its run.", above(0, 1e5));
  v("low_bore_mm", x.low_bore_mm, kOptional, "Bore at the low tap, if not that of its run.", above(0, 1e5));
  v("typed", x.typed, kOptional, "Numbers as typed, by key.");
}

template <class V, Like<Vessel> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("tag", x.tag, kOptional, "Name on the drawing.");
  v("at_end", x.at_end, kRequired, "Where it connects.");
  v("at", x.at, kRequired, "Where its symbol stands.");
  v("fill_kpa", x.fill_kpa, kShown, "Gauge pressure at its connection.", between(-100, 1e5));
}

template <class V, Like<Demand> T>
void describe(V& v, T& x) {
  v("of", x.of, kRequired, "Id of the terminal or zone.", between(0, kMostId));
  v("kind", x.kind, kOptional, "Asks for a share of design flow, or stands at a stroke.");
  v("percent", x.percent, kRequired, "Of design flow, or stroke.", between(0, 1000));
}

template <class V, Like<LoadState> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("name", x.name, kShown, "Name of the load state.");
  v("rest_kind", x.rest_kind, kOptional, "What terminals without a line of their own do.");
  v("rest_percent", x.rest_percent, kShown, "Of design flow, or stroke.", between(0, 1000));
  v("demands", x.demands, kOptional, "Lines for terminals and zones.");
}

template <class V, Like<Note> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("text", x.text, kShown, "What it says.");
  v("at", x.at, kRequired, "Where it stands.");
}

template <class V, Like<Underlay> T>
void describe(V& v, T& x) {
  v("id", x.id, kRequired, "Identity, unique in the file.", between(0, kMostId));
  v("file", x.file, kRequired, "Plan or picture, relative to this file.");
  v("page", x.page, kOptional, "Page of the plan.", between(1, 1e6));
  v("at", x.at, kRequired, "Its lower left corner.");
  v("width_m", x.width_m, kRequired, "Its width on the sheet.", between(0, 1e7));
  v("opacity_percent", x.opacity_percent, kOptional, "How strongly it is drawn.", between(0, 100));
}

/// Calls f(key, list, about) for each list of things, in file order.
template <class F, Like<Loop> T>
void forEachList(F&& f, T& x) {
  f("levels", x.levels, "Levels of the building.");
  f("zones", x.zones, "Terminals that share a load.");
  f("joints", x.joints, "Places where things connect.");
  f("paired_runs", x.paired_runs, "Supply pipe and its return drawn as one stroke.");
  f("pipe_runs", x.pipe_runs, "Single pipes.");
  f("terminals", x.terminals, "Coil, strainer, control valve, balancing valve and branch.");
  f("plants", x.plants, "Chillers, boilers, heat exchangers.");
  f("pumps", x.pumps, "Pumps.");
  f("valves", x.valves, "Valves and strainers on their own.");
  f("sensors", x.sensors, "Differential-pressure sensors.");
  f("vessels", x.vessels, "Expansion vessels.");
  f("load_states", x.load_states, "Named sets of terminal loads or valve positions.");
  f("notes", x.notes, "Notes on the drawing.");
  f("underlays", x.underlays, "Plans under the drawing.");
}

template <class V, Like<Loop> T>
void describe(V& v, T& x) {
  v("project", x.project, kShown, "What the file is about.");
  v("fluid", x.fluid, kShown, "What flows.");
  v("control", x.control, kShown, "How the pump's speed is set.");
  forEachList([&v](const char* key, auto& list, const char* about) { v(key, list, kOptional, about); }, x);
}

/// Name of a struct in the schema and in messages ("a terminal").
template <class T>
struct NameOf;
#define EBBLINE_NAME(type, name)                \
  template <>                                   \
  struct NameOf<type> {                         \
    static constexpr const char* kValue = name; \
  };
EBBLINE_NAME(Point, "point")
EBBLINE_NAME(End, "end")
EBBLINE_NAME(Project, "project")
EBBLINE_NAME(Fluid, "fluid")
EBBLINE_NAME(Control, "control")
EBBLINE_NAME(Level, "level")
EBBLINE_NAME(Zone, "zone")
EBBLINE_NAME(Joint, "joint")
EBBLINE_NAME(KnownLoss, "known loss")
EBBLINE_NAME(Fitting, "fitting")
EBBLINE_NAME(Pipe, "pipe")
EBBLINE_NAME(PairedRun, "paired run")
EBBLINE_NAME(PipeRun, "pipe run")
EBBLINE_NAME(CharacteristicPoint, "characteristic point")
EBBLINE_NAME(ControlValve, "control valve")
EBBLINE_NAME(BalancingValve, "balancing valve")
EBBLINE_NAME(Terminal, "terminal")
EBBLINE_NAME(Plant, "plant")
EBBLINE_NAME(PumpPoint, "pump point")
EBBLINE_NAME(Pump, "pump")
EBBLINE_NAME(Valve, "valve")
EBBLINE_NAME(Sensor, "sensor")
EBBLINE_NAME(Vessel, "vessel")
EBBLINE_NAME(Demand, "demand")
EBBLINE_NAME(LoadState, "load state")
EBBLINE_NAME(Note, "note")
EBBLINE_NAME(Underlay, "underlay")
#undef EBBLINE_NAME

/// True for structs that are written on one line.
template <class T>
inline constexpr bool kOnOneLine =
    Like<T, Point> || Like<T, End> || Like<T, KnownLoss> || Like<T, Fitting> || Like<T, Pipe> ||
    Like<T, CharacteristicPoint> || Like<T, ControlValve> || Like<T, BalancingValve> || Like<T, PumpPoint> ||
    Like<T, Demand> || Like<T, Level> || Like<T, Zone> || Like<T, Joint> || Like<T, Note>;

template <class T>
inline constexpr bool kIsVector = false;
template <class T>
inline constexpr bool kIsVector<std::vector<T>> = true;
template <class T>
inline constexpr bool kIsOptional = false;
template <class T>
inline constexpr bool kIsOptional<std::optional<T>> = true;
template <class T>
inline constexpr bool kIsStruct = requires {
  NameOf<T>::kValue;
};

/// Tag or name of a thing, "" if its kind has none.
template <class T>
std::string_view labelOf(const T& thing) {
  if constexpr (requires { thing.tag; })
    return thing.tag;
  else if constexpr (requires { thing.name; })
    return thing.name;
  else
    return {};
}

}  // namespace ebbline::loop
