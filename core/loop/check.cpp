#include "core/loop/check.h"

#include <charconv>
#include <unordered_map>
#include <unordered_set>

#include "core/loop/fields.h"
#include "core/loop/file.h"

namespace ebbline::loop {
namespace {

using text::Code;

std::string shortest(double value) {
  char buffer[40];
  return {buffer, std::to_chars(buffer, buffer + sizeof buffer, value).ptr};
}

/// What an id stands for.
struct Owner {
  std::string kind;
  std::string tag;
  const Joint* joint = nullptr;
  bool draws = false;  ///< Terminal or zone.
  bool is_level = false;
  bool is_zone = false;
  const Sensor* sensor = nullptr;

  std::string words() const { return "the " + kind + (tag.empty() ? "" : " " + tag); }
};

/// Walks the loop in file order.
class Checker {
 public:
  explicit Checker(const Loop& loop) : loop_(loop) {}

  std::vector<text::Remark> run() {
    collectIds();
    fluid();
    control();
    forEachList(
        [this](const char* key, const auto& list, const char*) {
          for (std::size_t i = 0; i < list.size() && room(); ++i) {
            place_ = {std::string("/") + key + "/" + std::to_string(i), 0, list[i].id, std::string(labelOf(list[i]))};
            thing(list[i]);
          }
        },
        loop_);
    return std::move(remarks_);
  }

 private:
  bool room() const { return remarks_.size() < kMostRemarks; }

  void note(Code code, const std::string& below, std::vector<std::string> arguments) {
    if (!room()) return;
    text::Place place = place_;
    place.pointer += below;
    remarks_.push_back({code, place, std::move(arguments)});
  }

  void collectIds() {
    std::unordered_set<std::string_view> tags;
    forEachList(
        [&](const char* key, const auto& list, const char*) {
          for (std::size_t i = 0; i < list.size(); ++i) {
            place_ = {std::string("/") + key + "/" + std::to_string(i), 0, list[i].id, std::string(labelOf(list[i]))};
            collect(list[i]);
            if constexpr (requires { list[i].tag; })
              if (!list[i].tag.empty() && !tags.insert(list[i].tag).second)
                note(Code::kLoopTagTwice, "/tag", {list[i].tag});
          }
        },
        loop_);
    place_ = {};
  }

  template <class T>
  void collect(const T& x) {
    Owner owner{NameOf<T>::kValue, std::string(labelOf(x))};
    if constexpr (std::same_as<T, Joint>) owner.joint = &x;
    if constexpr (std::same_as<T, Sensor>) owner.sensor = &x;
    owner.draws = std::same_as<T, Terminal> || std::same_as<T, Zone>;
    owner.is_level = std::same_as<T, Level>;
    owner.is_zone = std::same_as<T, Zone>;
    if (x.id == 0) {
      note(Code::kLoopIdZero, "/id", {owner.words()});
      return;
    }
    const auto [first, is_new] = owners_.emplace(x.id, owner);
    if (!is_new) note(Code::kLoopIdTwice, "/id", {std::to_string(x.id), first->second.words(), owner.words()});
  }

  const Owner* owner(Id id) const {
    const auto found = owners_.find(id);
    return found == owners_.end() ? nullptr : &found->second;
  }

  // ---- parts of things

  void end(const End& end, const std::string& key) {
    const std::string below = "/" + key;
    if (end.joint == 0) {
      note(Code::kLoopNotConnected, below, {key});
      return;
    }
    const Owner* at = owner(end.joint);
    const std::string id = std::to_string(end.joint);
    if (!at || !at->joint)
      note(Code::kLoopNoSuchJoint, below + "/joint", {key, id});
    else if (at->joint->paired && end.side == Side::kSingle)
      note(Code::kLoopSideNotNamed, below, {named(*at->joint)});
    else if (!at->joint->paired && end.side != Side::kSingle)
      note(Code::kLoopSideMissing, below + "/side",
           {named(*at->joint), end.side == Side::kSupply ? "supply" : "return"});
  }

  static std::string named(const Joint& joint) { return joint.tag.empty() ? std::to_string(joint.id) : joint.tag; }

  template <class T>
  void ends(const T& x) {
    end(x.from, "from");
    end(x.to, "to");
    if (x.from == x.to && x.from.joint != 0) note(Code::kLoopSameEnds, "/to", {owner_words(x)});
  }

  template <class T>
  static std::string owner_words(const T& x) {
    return Owner{NameOf<T>::kValue, std::string(labelOf(x))}.words();
  }

  void pairedEnd(Id joint, const std::string& key) {
    if (joint == 0) {
      note(Code::kLoopNotConnected, "/" + key, {key});
      return;
    }
    const Owner* at = owner(joint);
    if (!at || !at->joint)
      note(Code::kLoopNoSuchJoint, "/" + key, {key, std::to_string(joint)});
    else if (!at->joint->paired)
      note(Code::kLoopRunNeedsPair, "/" + key, {named(*at->joint)});
  }

  void knownLoss(const KnownLoss& loss, const std::string& below) {
    if (loss.flow_l_s == 0 && loss.loss_kpa > 0) note(Code::kLoopLossWithoutFlow, below, {shortest(loss.loss_kpa)});
    unusual(loss.loss_kpa, 1000, "A loss", "kPa", below + "/loss_kpa");
  }

  // Limits beyond which a slip of the unit is likelier than a building (common practice).
  void unusual(double value, double most, const char* what, const char* unit, const std::string& below) {
    if (value > most) note(Code::kLoopUnusual, below, {what, shortest(value) + " " + unit});
  }

  void pipe(const Pipe& pipe, const std::string& below) {
    unusual(pipe.length_m, 10000, "A length", "m", below + "/length_m");
    if (pipe.known_loss) {
      knownLoss(*pipe.known_loss, below + "/known_loss");
      return;
    }
    if (!pipe.bore_mm && (pipe.series.empty() || pipe.size.empty())) note(Code::kLoopPipeNoSize, below, {});
    if (pipe.length_m == 0 && pipe.fittings.empty() && pipe.extra_k == 0) note(Code::kLoopPipeNoLength, below, {});
  }

  void presetting(const std::optional<double>& preset, double kvs, const std::string& below) {
    if (preset && *preset > kvs)
      note(Code::kLoopPresettingAboveKvs, below + "/presetting_kv_m3h", {shortest(*preset), shortest(kvs)});
  }

  void characteristic(const ControlValve& valve, const std::string& below) {
    const auto& table = valve.table;
    if (valve.characteristic != Characteristic::kTable) {
      const bool linear = valve.characteristic == Characteristic::kLinear;
      if (!table.empty()) note(Code::kLoopTableWithoutUse, below + "/table", {linear ? "linear" : "equal percentage"});
      return;
    }
    if (table.size() < 2) note(Code::kLoopTableShort, below, {std::to_string(table.size())});
    for (std::size_t i = 1; i < table.size(); ++i)
      if (table[i].stroke_percent <= table[i - 1].stroke_percent || table[i].kv_percent < table[i - 1].kv_percent)
        note(Code::kLoopTableOrder, below + "/table/" + std::to_string(i), {std::to_string(i + 1)});
  }

  void stroke(DemandKind kind, double percent, const std::string& below) {
    if (kind == DemandKind::kPosition && percent > 100) note(Code::kLoopStrokeAboveFull, below, {shortest(percent)});
  }

  // ---- things, in file order

  void fluid() {
    place_.pointer = "/fluid";
    const Fluid& fluid = loop_.fluid;
    const bool glycol = fluid.kind == FluidKind::kEthyleneGlycol || fluid.kind == FluidKind::kPropyleneGlycol;
    if (glycol && fluid.glycol_mass_percent == 0) note(Code::kLoopGlycolMissing, "", {});
    if (!glycol && fluid.glycol_mass_percent > 0)
      note(Code::kLoopGlycolWithoutUse, "/glycol_mass_percent",
           {shortest(fluid.glycol_mass_percent), fluid.kind == FluidKind::kWater ? "water" : "given"});
    if (fluid.kind != FluidKind::kGiven) return;
    if (!fluid.density_kg_m3) note(Code::kLoopFluidIncomplete, "", {"density_kg_m3"});
    if (!fluid.viscosity_mpa_s) note(Code::kLoopFluidIncomplete, "", {"viscosity_mpa_s"});
  }

  void control() {
    place_ = {};
    place_.pointer = "/control";
    const Control& control = loop_.control;
    const bool headers = control.strategy == Strategy::kDpHeaders;
    if ((control.strategy == Strategy::kDpPump || headers) && !control.set_point_kpa)
      note(Code::kLoopNoSetPoint, "", {"The control"});
    header(control.header_supply, "header_supply", headers);
    header(control.header_return, "header_return", headers);
    controlSensors(control);
    place_ = {};
  }

  void header(const std::optional<End>& at, const std::string& key, bool needed) {
    if (at)
      end(*at, key);
    else if (needed)
      note(Code::kLoopNoHeader, "", {key});
  }

  void controlSensors(const Control& control) {
    const bool used = control.strategy == Strategy::kFieldSensor;
    if (used && control.sensors.empty()) note(Code::kLoopNoSensor, "", {});
    std::unordered_set<Id> seen;
    for (std::size_t i = 0; i < control.sensors.size() && room(); ++i) {
      const std::string below = "/sensors/" + std::to_string(i);
      const Id id = control.sensors[i];
      const Owner* at = owner(id);
      if (!at || !at->sensor)
        note(Code::kLoopNoSuchSensor, below, {std::to_string(id)});
      else if (used && !at->sensor->set_point_kpa)
        note(Code::kLoopNoSetPoint, below, {"The sensor " + at->tag});
      if (!seen.insert(id).second) note(Code::kLoopSensorTwice, below, {std::to_string(id)});
    }
  }

  void thing(const Level&) {}
  void thing(const Zone&) {}
  void thing(const Note&) {}

  void thing(const Joint& joint) {
    const Owner* at = owner(joint.level);
    if (joint.level != 0 && (!at || !at->is_level))
      note(Code::kLoopNoSuchLevel, "/level", {owner_words(joint), std::to_string(joint.level)});
  }

  void thing(const PairedRun& run) {
    pairedEnd(run.from, "from");
    pairedEnd(run.to, "to");
    if (run.from == run.to && run.from != 0) note(Code::kLoopSameEnds, "/to", {owner_words(run)});
    pipe(run.pipe, "/pipe");
    if (run.return_pipe) pipe(*run.return_pipe, "/return_pipe");
  }

  void thing(const PipeRun& run) {
    ends(run);
    pipe(run.pipe, "/pipe");
  }

  void thing(const Terminal& terminal) {
    ends(terminal);
    const Owner* zone = owner(terminal.zone);
    if (terminal.zone != 0 && (!zone || !zone->is_zone))
      note(Code::kLoopNoSuchZone, "/zone", {owner_words(terminal), std::to_string(terminal.zone)});
    if (terminal.design_flow_l_s == 0) note(Code::kLoopNoDesignFlow, "/design_flow_l_s", {});
    knownLoss(terminal.coil, "/coil");
    if (terminal.valve.kvs_m3h == 0) note(Code::kLoopValveNoKvs, "/valve", {});
    characteristic(terminal.valve, "/valve");
    if (terminal.balancing)
      presetting(terminal.balancing->presetting_kv_m3h, terminal.balancing->kvs_m3h, "/balancing");
    if (terminal.branch) pipe(*terminal.branch, "/branch");
  }

  void thing(const Plant& plant) {
    ends(plant);
    knownLoss(plant.loss, "/loss");
  }

  void thing(const Pump& pump) {
    ends(pump);
    if (pump.curve.size() < 2)
      note(Code::kLoopCurveShort, "/curve", {std::to_string(pump.curve.size())});
    else if (pump.curve.front().head_m == 0)
      note(Code::kLoopCurveNoHead, "/curve/0/head_m", {});
    for (std::size_t i = 1; i < pump.curve.size(); ++i)
      if (pump.curve[i].flow_l_s <= pump.curve[i - 1].flow_l_s)
        note(Code::kLoopCurveOrder, "/curve/" + std::to_string(i) + "/flow_l_s", {std::to_string(i + 1)});
    if (pump.minimum_speed_percent > pump.maximum_speed_percent)
      note(Code::kLoopSpeedBounds, "/minimum_speed_percent",
           {shortest(pump.minimum_speed_percent), shortest(pump.maximum_speed_percent)});
  }

  void thing(const Valve& valve) {
    ends(valve);
    if (valve.kvs_m3h == 0) note(Code::kLoopValveNoKvs, "/kvs_m3h", {});
    if (valve.kind == ValveKind::kBalancing) presetting(valve.presetting_kv_m3h, valve.kvs_m3h, "");
    const bool half = valve.opening_percent > 0 && valve.opening_percent < 100;
    if (valve.kind == ValveKind::kIsolating && half)
      note(Code::kLoopHalfShut, "/opening_percent", {shortest(valve.opening_percent)});
    if (valve.kind == ValveKind::kControl) characteristic(valve.characteristic, "/characteristic");
  }

  void thing(const Sensor& sensor) {
    end(sensor.high, "high");
    end(sensor.low, "low");
    if (sensor.high == sensor.low && sensor.high.joint != 0) note(Code::kLoopSameEnds, "/low", {owner_words(sensor)});
  }

  void thing(const Vessel& vessel) { end(vessel.at_end, "at_end"); }

  void thing(const LoadState& state) {
    if (!state.name.empty() && !state_names_.insert(state.name).second)
      note(Code::kLoopStateNameTwice, "/name", {state.name});
    stroke(state.rest_kind, state.rest_percent, "/rest_percent");
    std::unordered_set<Id> seen;
    for (std::size_t i = 0; i < state.demands.size() && room(); ++i) {
      const Demand& demand = state.demands[i];
      const std::string below = "/demands/" + std::to_string(i);
      const Owner* of = owner(demand.of);
      if (!of || !of->draws)
        note(Code::kLoopNoSuchTarget, below + "/of", {of ? of->words() : "the id " + std::to_string(demand.of)});
      else if (!seen.insert(demand.of).second)
        note(Code::kLoopDemandTwice, below + "/of", {of->words()});
      stroke(demand.kind, demand.percent, below + "/percent");
    }
  }

  void thing(const Underlay& underlay) {
    const bool drive = underlay.file.size() > 1 && underlay.file[1] == ':';
    if (underlay.file.starts_with('/') || drive) note(Code::kLoopUnderlayAbsolute, "/file", {underlay.file});
  }

  const Loop& loop_;
  std::unordered_map<Id, Owner> owners_;
  std::unordered_set<std::string_view> state_names_;
  text::Place place_;
  std::vector<text::Remark> remarks_;
};

}  // namespace

std::vector<text::Remark> checkContent(const Loop& loop) {
  return Checker(loop).run();
}

}  // namespace ebbline::loop
