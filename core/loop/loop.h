#pragma once
// The loop as drawn: the document. Plain data in file units; everything else in Ebbline is a pure function of it.
// It changes only through a Change (core/loop/change.h). Units are in the names and equal the keys of the file.

#include <cstdint>
#include <map>
#include <optional>
#include <string>
#include <vector>

namespace ebbline::loop {

/// Identity of a thing in the loop: unique over all kinds, never reused, 0 = none.
using Id = std::uint32_t;

/// Which pipe of a joint is meant. A paired joint has a supply and a return side, a single joint has one.
enum class Side { kSingle, kSupply, kReturn };

/// One connection point: a side of a joint.
struct End {
  Id joint = 0;
  Side side = Side::kSingle;
  bool operator==(const End&) const = default;
};

/// A position on the sheet, in metres of the drawing (x to the right, y up).
struct Point {
  double x_m = 0;
  double y_m = 0;
  bool operator==(const Point&) const = default;
};

/// Numbers as the user typed them, by key ("length_m" → "40 ft"), so that they can be shown again that way.
using Typed = std::map<std::string, std::string>;

struct Project {
  std::string title;    ///< Building or job.
  std::string subject;  ///< "chilled water", "heating" …
  std::string client;
  std::string notes;
  bool operator==(const Project&) const = default;
};

enum class FluidKind { kWater, kEthyleneGlycol, kPropyleneGlycol, kGiven };

/// The fluid and the one temperature at which its properties are taken.
struct Fluid {
  FluidKind kind = FluidKind::kWater;
  double temperature_c = 10;
  double glycol_mass_percent = 0;              ///< Of glycol in the mixture, by mass.
  std::optional<double> density_kg_m3;         ///< kGiven only.
  std::optional<double> viscosity_mpa_s;       ///< kGiven only; dynamic.
  std::optional<double> heat_capacity_kj_kgk;  ///< kGiven only.
  bool operator==(const Fluid&) const = default;
};

/// A level of the building: a datum line on the sheet and its elevation.
struct Level {
  Id id = 0;
  std::string name;
  double elevation_m = 0;
  double line_y_m = 0;  ///< Where its datum line stands on the sheet.
  bool operator==(const Level&) const = default;
};

/// Terminals that share a load or a schedule.
struct Zone {
  Id id = 0;
  std::string name;
  std::optional<double> flow_limit_l_s;  ///< Most the zone may draw at once; absent = no limit.
  bool operator==(const Zone&) const = default;
};

/// A place where things connect. Paired: a supply point and its return point drawn together.
struct Joint {
  Id id = 0;
  std::string tag;
  bool paired = true;
  Point at;
  Id level = 0;              ///< 0 = elevation counts from 0.
  double above_level_m = 0;  ///< Elevation = level elevation + this.
  bool operator==(const Joint&) const = default;
};

/// A pressure drop known at one flow: Δp = loss · (q/flow)^exponent, odd in q.
struct KnownLoss {
  double flow_l_s = 0;
  double loss_kpa = 0;
  double exponent = 2;
  bool operator==(const KnownLoss&) const = default;
};

struct Fitting {
  std::string kind;  ///< Name in the catalogue, e.g. "elbow 90 standard".
  int count = 1;
  bool operator==(const Fitting&) const = default;
};

/// What one pipe is made of.
struct Pipe {
  double length_m = 0;
  std::string series;                  ///< Pipe table in the catalogue, e.g. "steel-en10255-medium".
  std::string size;                    ///< Size in that table, e.g. "DN 50".
  std::optional<double> bore_mm;       ///< Typed inside diameter; wins over series and size.
  std::optional<double> roughness_mm;  ///< Typed; wins over the table's.
  std::vector<Fitting> fittings;
  double fittings_allowance_percent = 0;  ///< Added to the length for fittings not counted.
  double extra_k = 0;                     ///< Further loss coefficient on the bore's velocity.
  std::optional<KnownLoss> known_loss;    ///< If present the pipe is this loss alone; length is for the drawing.
  bool operator==(const Pipe&) const = default;
};

/// Supply pipe and its return drawn as one stroke, between two paired joints.
struct PairedRun {
  Id id = 0;
  std::string tag;
  Id from = 0;
  Id to = 0;
  Pipe pipe;  ///< Both pipes, unless return_pipe says otherwise.
  std::optional<Pipe> return_pipe;
  std::vector<Point> bends;  ///< Corners of the drawn line between its joints.
  Typed typed;
  bool operator==(const PairedRun&) const = default;
};

/// One pipe between two ends.
struct PipeRun {
  Id id = 0;
  std::string tag;
  End from;
  End to;
  Pipe pipe;
  std::vector<Point> bends;
  Typed typed;
  bool operator==(const PipeRun&) const = default;
};

enum class Characteristic { kEqualPercentage, kLinear, kTable };

/// One reading of a valve characteristic.
struct CharacteristicPoint {
  double stroke_percent = 0;
  double kv_percent = 0;  ///< Of Kvs.
  bool operator==(const CharacteristicPoint&) const = default;
};

struct ControlValve {
  double kvs_m3h = 0;
  Characteristic characteristic = Characteristic::kEqualPercentage;
  double rangeability = 50;
  double leakage_percent = 0;              ///< Seat leakage, % of Kvs (IEC 60534-4 classes give ready values).
  std::vector<CharacteristicPoint> table;  ///< kTable only.
  bool operator==(const ControlValve&) const = default;
};

/// A valve set once. Fully open it has kvs_m3h; presetting_kv_m3h is what it is set to (absent = fully open).
struct BalancingValve {
  double kvs_m3h = 0;
  std::optional<double> presetting_kv_m3h;
  bool operator==(const BalancingValve&) const = default;
};

/// Coil, strainer, control valve, balancing valve and branch pipe in series: one symbol on the drawing.
struct Terminal {
  Id id = 0;
  std::string tag;
  End from;  ///< Supply.
  End to;    ///< Return.
  Point at;  ///< Where its symbol stands.
  Id zone = 0;
  bool essential = false;  ///< May not be under-supplied even for minutes.
  double design_flow_l_s = 0;
  std::optional<double> load_kw;
  KnownLoss coil;
  std::optional<double> strainer_kv_m3h;
  ControlValve valve;
  std::optional<BalancingValve> balancing;
  std::optional<Pipe> branch;  ///< Supply and return branch together.
  Typed typed;
  bool operator==(const Terminal&) const = default;
};

enum class PlantKind { kChiller, kBoiler, kHeatExchanger };

struct Plant {
  Id id = 0;
  std::string tag;
  PlantKind kind = PlantKind::kChiller;
  End from;  ///< Return to the plant.
  End to;    ///< Supply from the plant.
  Point at;
  KnownLoss loss;
  std::optional<double> minimum_flow_l_s;
  std::optional<double> supply_c;
  std::optional<double> return_c;
  Typed typed;
  bool operator==(const Plant&) const = default;
};

/// One reading of a pump curve at reference speed.
struct PumpPoint {
  double flow_l_s = 0;
  double head_m = 0;
  std::optional<double> efficiency_percent;  ///< Pump alone, shaft to water.
  bool operator==(const PumpPoint&) const = default;
};

struct Pump {
  Id id = 0;
  std::string tag;
  End from;  ///< Suction.
  End to;    ///< Discharge.
  Point at;
  std::vector<PumpPoint> curve;       ///< 2 points: H0 − aQ²; 3: a parabola; 4 or more: monotone cubic.
  double minimum_speed_percent = 20;  ///< Of reference speed.
  double maximum_speed_percent = 100;
  std::optional<double> run_out_flow_l_s;
  std::optional<double> minimum_flow_l_s;
  std::optional<double> motor_kw;
  Typed typed;
  bool operator==(const Pump&) const = default;
};

enum class ValveKind { kIsolating, kBalancing, kControl, kStrainer };

/// A valve or strainer on its own in a run.
struct Valve {
  Id id = 0;
  std::string tag;
  ValveKind kind = ValveKind::kIsolating;
  End from;
  End to;
  Point at;
  double kvs_m3h = 0;
  std::optional<double> presetting_kv_m3h;  ///< kBalancing: what it is set to.
  double opening_percent = 100;             ///< kIsolating: 0 shut or 100 open. kControl: stroke.
  ControlValve characteristic;              ///< kControl only; its kvs_m3h is not used.
  Typed typed;
  bool operator==(const Valve&) const = default;
};

/// A differential-pressure cell between two taps: reads static pressure at `high` minus static pressure at `low`.
struct Sensor {
  Id id = 0;
  std::string tag;
  End high;
  End low;
  Point at;
  std::optional<double> set_point_kpa;
  std::optional<double> high_bore_mm;  ///< Bore at the tap, for the velocity head; absent = that of the joined run.
  std::optional<double> low_bore_mm;
  Typed typed;
  bool operator==(const Sensor&) const = default;
};

/// The expansion vessel: the one place whose pressure the pump cannot change.
struct Vessel {
  Id id = 0;
  std::string tag;
  End at_end;
  Point at;
  double fill_kpa = 100;  ///< Gauge pressure at its connection.
  bool operator==(const Vessel&) const = default;
};

struct Note {
  Id id = 0;
  std::string text;
  Point at;
  bool operator==(const Note&) const = default;
};

/// A plan or picture under the drawing.
struct Underlay {
  Id id = 0;
  std::string file;  ///< Relative to the loop's file.
  int page = 1;
  Point at;
  double width_m = 0;
  double opacity_percent = 40;
  bool operator==(const Underlay&) const = default;
};

enum class DemandKind { kRequest, kPosition };

/// What one terminal or zone does in a load state: asks for a share of design flow, or stands at a stroke.
struct Demand {
  Id of = 0;  ///< Terminal or zone.
  DemandKind kind = DemandKind::kRequest;
  double percent = 100;  ///< kRequest: of design flow. kPosition: stroke of the control valve.
  bool operator==(const Demand&) const = default;
};

/// Named set of terminal loads or valve positions. A terminal's own line wins over its zone's, that over the rest.
struct LoadState {
  Id id = 0;
  std::string name;
  DemandKind rest_kind = DemandKind::kRequest;
  double rest_percent = 100;
  std::vector<Demand> demands;
  bool operator==(const LoadState&) const = default;
};

enum class Strategy { kConstantSpeed, kDpPump, kDpHeaders, kFieldSensor };

/// How the pump's speed is set.
struct Control {
  Strategy strategy = Strategy::kConstantSpeed;
  double speed_percent = 100;           ///< kConstantSpeed.
  std::optional<double> set_point_kpa;  ///< kDpPump and kDpHeaders; field sensors carry their own.
  std::optional<End> header_supply;     ///< kDpHeaders.
  std::optional<End> header_return;
  std::vector<Id> sensors;  ///< kFieldSensor: every one at or above its set-point.
  bool operator==(const Control&) const = default;
};

/// The whole closed system: one file.
struct Loop {
  Project project;
  Fluid fluid;
  Control control;
  std::vector<Level> levels;
  std::vector<Zone> zones;
  std::vector<Joint> joints;
  std::vector<PairedRun> paired_runs;
  std::vector<PipeRun> pipe_runs;
  std::vector<Terminal> terminals;
  std::vector<Plant> plants;
  std::vector<Pump> pumps;
  std::vector<Valve> valves;
  std::vector<Sensor> sensors;
  std::vector<Vessel> vessels;
  std::vector<LoadState> load_states;
  std::vector<Note> notes;
  std::vector<Underlay> underlays;
  bool operator==(const Loop&) const = default;
};

/// Version of the file written; older versions are migrated on reading, newer ones refused.
inline constexpr int kSchemaVersion = 1;

}  // namespace ebbline::loop
