#include "core/loop/campus.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "core/catalogue/pipe.h"
#include "core/part/pipe.h"

namespace ebbline::loop {
namespace {

// Sizing rules. [common practice]
constexpr double kGradientPaM = 150;        // friction per metre at design flow
constexpr double kValvePa = 25e3;           // least loss of an open control valve
constexpr double kBalancingPa = 3e3;        // least loss of an open balancing valve
constexpr double kSpareHead = 1.1;          // pump head over the sum of the losses
constexpr double kDensity = 999.70;         // water at 10 °C [published: IAPWS-95, from memory]
constexpr double kViscosity = 1.3059e-3;    // water at 10 °C [published: IAPWS 2008, from memory]
constexpr double kGravity = 9.80665;        // standard gravity [published: CGPM 1901]
constexpr double kKwPerLitreSecond = 25.2;  // 6 K temperature difference, 4.20 kJ/(L K)

// The drawing [m of the sheet]. [invented]
constexpr double kTerminalStep = 6;
constexpr double kFloorStep = 8;
constexpr double kFloorHeight = 4;
constexpr double kTerminalDrop = 3;

/// Preferred numbers of the R5 series. [published: ISO 3]
constexpr std::array kR5 = {0.25, 0.4, 0.63, 1.0, 1.6, 2.5, 4.0, 6.3, 10.0, 16.0, 25.0};

double kvFor(double flow_l_s, double loss_pa) {
  return flow_l_s * 3.6 / std::sqrt(loss_pa / 1e5);
}
double kvLossPa(double flow_l_s, double kv_m3h) {
  return 1e5 * std::pow(flow_l_s * 3.6 / kv_m3h, 2);
}

// Largest of the series that still has at least the loss.
double r5Below(double kv_m3h) {
  double chosen = kR5.front();
  for (const double kv : kR5)
    if (kv <= kv_m3h) chosen = kv;
  return chosen;
}

double rounded(double value, double step) {
  return std::round(value / step) * step;
}

/// Two decimals as a person would type them: 0.36, not 0.36000000000000004.
double twoDecimals(double value) {
  return std::round(value * 100) / 100;
}

double lossPa(const Pipe& pipe, double bore_m, double roughness_m, double flow_l_s) {
  part::FrictionMemory memory;
  const double length = pipe.length_m * (1 + pipe.fittings_allowance_percent / 100);
  const auto constants = part::pipeConstants(length, bore_m, roughness_m, pipe.extra_k, kDensity, kViscosity);
  return part::pipeLoss(constants, flow_l_s / 1000, memory).value;
}

/// A pipe of the right size and its loss at design flow.
struct Sized {
  Pipe pipe;
  double loss_pa = 0;
};

Sized sized(double length_m, double flow_l_s) {
  Pipe metre;
  metre.length_m = 1;
  Sized chosen;
  chosen.pipe.length_m = length_m;
  chosen.pipe.fittings_allowance_percent = 20;
  const auto take = [&](double bore_m, double roughness_m) {
    if (lossPa(metre, bore_m, roughness_m, flow_l_s) > kGradientPaM) return false;
    chosen.loss_pa = lossPa(chosen.pipe, bore_m, roughness_m, flow_l_s);
    return true;
  };
  for (const char* series : {"steel-en10255-medium", "steel-en10220"})
    for (const catalogue::PipeSize& size : catalogue::findSeries(series)->sizes)
      if (size.bore_m > 0.016 && take(size.bore_m, size.roughness_m)) {
        chosen.pipe.series = series;
        chosen.pipe.size = size.name;
        return chosen;
      }
  // Beyond the tables: welded pipe by its bore.
  chosen.pipe.roughness_mm = 0.045;  // commercial steel, new [published: see resources/data/roughness.csv]
  double bore_mm = 550;
  while (!take(bore_mm / 1000, *chosen.pipe.roughness_mm / 1000)) bore_mm += 50;
  chosen.pipe.bore_mm = bore_mm;
  return chosen;
}

/// A paired joint of the tree and the run that leads to it.
struct Spot {
  Id joint = 0;
  int parent = -1;
  int run = -1;
  int terminal = -1;
  double length_m = 0;
  double flow_l_s = 0;
  double run_loss_pa = 0;   ///< Supply and return.
  double need_pa = 0;       ///< What the terminal and everything beyond need here.
  double available_pa = 0;  ///< What stands here when every terminal has its design flow.
};

class Builder {
 public:
  explicit Builder(int terminals) : left_(terminals) {
    per_floor_ = terminals < 60 ? 6 : 10;
    floors_ = terminals <= 1000 ? 5 : 8;
    if (terminals < 60) floors_ = 4;
    const int buildings = (terminals + per_floor_ * floors_ - 1) / (per_floor_ * floors_);
    row_length_ = std::max(1, static_cast<int>(std::ceil(std::sqrt(buildings * 1.0))));
  }

  Loop build() {
    loop_.project = {"Invented campus", "chilled water", "", "All buildings, loads and machines are invented."};
    ground_ = addLevel("Ground", 0, 0);
    int spot = addSpot(-1, {0, 0}, ground_, 0, 0);
    for (int row = 0; left_ > 0; ++row) spot = addRow(row, spot);
    sumFlows();
    sizeRuns();
    settlePressures();
    addPlantRoom();
    addSensorAndControl();
    addLoadStates();
    return std::move(loop_);
  }

 private:
  Id nextId() { return ++last_id_; }

  Id addLevel(const std::string& name, double elevation_m, double line_y_m) {
    loop_.levels.push_back({nextId(), name, elevation_m, line_y_m});
    return last_id_;
  }

  int addSpot(int parent, Point at, Id level, double above_level_m, double length_m) {
    const auto index = static_cast<int>(spots_.size());
    Joint joint;
    joint.id = nextId();
    joint.at = at;
    joint.level = level;
    joint.above_level_m = above_level_m;
    loop_.joints.push_back(joint);
    Spot spot;
    spot.joint = joint.id;
    spot.parent = parent;
    spot.length_m = length_m;
    if (parent >= 0) {
      spot.run = static_cast<int>(loop_.paired_runs.size());
      PairedRun run;
      run.id = nextId();
      run.tag = "R" + std::to_string(spot.run + 1);
      run.from = spots_[static_cast<std::size_t>(parent)].joint;
      run.to = spot.joint;
      loop_.paired_runs.push_back(run);
    }
    spots_.push_back(spot);
    return index;
  }

  // A row of buildings on a main of its own; returns the trunk joint it leaves from.
  int addRow(int row, int trunk) {
    const double pitch = kFloorStep * (floors_ + 2);
    const double y = kFloorStep + row * pitch;
    const std::string name =
        left_ > per_floor_ * floors_ || row > 0 ? "Row " + std::to_string(row + 1) + ", level " : "Level ";
    std::vector<Id> levels;
    const int per_building = per_floor_ * floors_;
    const int used = std::min(floors_, (std::min(left_, per_building) + per_floor_ - 1) / per_floor_);
    levels.reserve(used);
    for (int floor = 0; floor < used; ++floor)
      levels.push_back(
          addLevel(name + std::to_string(floor + 1), kFloorHeight * (floor + 1), y + kFloorStep * (floor + 1) - 5));
    const int at_row = addSpot(trunk, {0, y}, ground_, 0, row == 0 ? 20 : 60);
    int main = at_row;
    for (int b = 0; b < row_length_ && left_ > 0; ++b) {
      const double x = 8 + b * kTerminalStep * (per_floor_ + 2);
      main = addSpot(main, {x, y}, ground_, 0, b == 0 ? 15 : 50);
      addBuilding(main, x, y, levels);
    }
    return at_row;
  }

  void addBuilding(int foot, double x, double y, const std::vector<Id>& levels) {
    const auto number = loop_.zones.size() + 1;
    const Id zone = nextId();
    loop_.zones.push_back({zone, "Building " + std::to_string(number), {}});
    int riser = foot;
    for (std::size_t floor = 0; floor < levels.size() && left_ > 0; ++floor) {
      const double floor_y = y + kFloorStep * static_cast<double>(floor + 1);
      riser = addSpot(riser, {x, floor_y}, levels[floor], 3, kFloorHeight);
      last_riser_end_ = riser;
      int branch = riser;
      for (int t = 0; t < per_floor_ && left_ > 0; ++t) {
        const Point at{x + kTerminalStep * (t + 1), floor_y};
        branch = addSpot(branch, at, levels[floor], 3, kTerminalStep);
        addTerminal(branch, at, zone,
                    "T" + std::to_string(number) + "-" + std::to_string(floor + 1) + "-" + std::to_string(t + 1));
        --left_;
      }
    }
  }

  void addTerminal(int spot, Point at, Id zone, const std::string& tag) {
    const auto n = static_cast<unsigned>(loop_.terminals.size());
    const unsigned mixed = (n * 2654435761U) >> 16;  // multiplicative hash: loads that vary without pattern
    Terminal terminal;
    terminal.id = nextId();
    terminal.tag = tag;
    terminal.from = {spots_[static_cast<std::size_t>(spot)].joint, Side::kSupply};
    terminal.to = {terminal.from.joint, Side::kReturn};
    terminal.at = {at.x_m, at.y_m - kTerminalDrop};
    terminal.zone = zone;
    terminal.essential = mixed % 40 == 7;
    terminal.load_kw = 6 + mixed % 11;
    terminal.design_flow_l_s = twoDecimals(*terminal.load_kw / kKwPerLitreSecond);
    terminal.coil = {terminal.design_flow_l_s, 14.0 + (mixed >> 4) % 8, 2};
    terminal.strainer_kv_m3h = 10;
    terminal.valve.kvs_m3h = r5Below(kvFor(terminal.design_flow_l_s, kValvePa));
    terminal.balancing = BalancingValve{r5Below(kvFor(terminal.design_flow_l_s, kBalancingPa)), {}};
    terminal.branch = sized(4, terminal.design_flow_l_s).pipe;
    Spot& here = spots_[static_cast<std::size_t>(spot)];
    here.terminal = static_cast<int>(n);
    here.flow_l_s = terminal.design_flow_l_s;
    loop_.terminals.push_back(terminal);
  }

  // Parents stand before their children in spots_.
  void sumFlows() {
    for (std::size_t i = spots_.size(); i-- > 1;)
      spots_[static_cast<std::size_t>(spots_[i].parent)].flow_l_s += spots_[i].flow_l_s;
  }

  void sizeRuns() {
    for (Spot& spot : spots_) {
      if (spot.run < 0) continue;
      const Sized chosen = sized(spot.length_m, spot.flow_l_s);
      loop_.paired_runs[static_cast<std::size_t>(spot.run)].pipe = chosen.pipe;
      spot.run_loss_pa = 2 * chosen.loss_pa;
    }
  }

  // Loss of a terminal with its balancing valve fully open.
  static double terminalNeedPa(const Terminal& terminal) {
    const double flow = terminal.design_flow_l_s;
    return terminal.coil.loss_kpa * 1000 + kvLossPa(flow, *terminal.strainer_kv_m3h) +
           kvLossPa(flow, terminal.valve.kvs_m3h) + kvLossPa(flow, terminal.balancing->kvs_m3h) +
           sized(terminal.branch->length_m, flow).loss_pa;
  }

  void settlePressures() {
    for (std::size_t i = spots_.size(); i-- > 0;) {
      Spot& spot = spots_[i];
      if (spot.terminal >= 0)
        spot.need_pa = std::max(spot.need_pa, terminalNeedPa(loop_.terminals[static_cast<std::size_t>(spot.terminal)]));
      if (spot.parent < 0) continue;
      Spot& parent = spots_[static_cast<std::size_t>(spot.parent)];
      parent.need_pa = std::max(parent.need_pa, spot.need_pa + spot.run_loss_pa);
    }
    spots_[0].available_pa = spots_[0].need_pa;
    for (std::size_t i = 1; i < spots_.size(); ++i) {
      Spot& spot = spots_[i];
      spot.available_pa = spots_[static_cast<std::size_t>(spot.parent)].available_pa - spot.run_loss_pa;
      if (spot.terminal >= 0) preset(loop_.terminals[static_cast<std::size_t>(spot.terminal)], spot.available_pa);
    }
  }

  // The balancing valve takes what is left over.
  static void preset(Terminal& terminal, double available_pa) {
    BalancingValve& valve = *terminal.balancing;
    const double open_pa = kvLossPa(terminal.design_flow_l_s, valve.kvs_m3h);
    const double left_over = available_pa - terminalNeedPa(terminal) + open_pa;
    const double kv = kvFor(terminal.design_flow_l_s, left_over);
    if (left_over > open_pa * 1.01) valve.presetting_kv_m3h = std::min(rounded(kv, 1e-3), valve.kvs_m3h);
  }

  Id addSingle(Point at) {
    Joint joint;
    joint.id = nextId();
    joint.paired = false;
    joint.at = at;
    joint.level = ground_;
    loop_.joints.push_back(joint);
    return joint.id;
  }

  // Returns the loss [Pa].
  double addPipeRun(End from, End to, double length_m, std::vector<Point> bends) {
    const Sized chosen = sized(length_m, spots_[0].flow_l_s);
    PipeRun run;
    run.id = nextId();
    run.tag = "M" + std::to_string(loop_.pipe_runs.size() + 1);
    run.from = from;
    run.to = to;
    run.pipe = chosen.pipe;
    run.bends = std::move(bends);
    loop_.pipe_runs.push_back(run);
    return chosen.loss_pa;
  }

  void addPlantRoom() {
    constexpr double kReturnY = -6;
    const double right = 8 + kTerminalStep * (per_floor_ + 1);
    const Id plant_supply = addSingle({right, 0});
    const Id plant_return = addSingle({right, kReturnY});
    const Id vessel_joint = addSingle({0.2 * right, kReturnY});
    const Id suction = addSingle({0.4 * right, kReturnY});
    const Id discharge = addSingle({0.4 * right + 4, kReturnY});
    const Id foot = spots_[0].joint;
    double loss = spots_[0].need_pa;
    loss += addPipeRun({plant_supply, Side::kSingle}, {foot, Side::kSupply}, 30, {});
    loss += addPipeRun({foot, Side::kReturn}, {vessel_joint, Side::kSingle}, 10, {{0, kReturnY}});
    loss += addPipeRun({vessel_joint, Side::kSingle}, {suction, Side::kSingle}, 6, {});
    loss += addPipeRun({discharge, Side::kSingle}, {plant_return, Side::kSingle}, 12, {});
    loss += addPlant({plant_return, Side::kSingle}, {plant_supply, Side::kSingle}, {right + 3, kReturnY / 2});
    addPump({suction, Side::kSingle}, {discharge, Side::kSingle}, {0.4 * right + 2, kReturnY}, loss);
    const double highest_m = kFloorHeight * floors_ + 3;
    loop_.vessels.push_back({nextId(),
                             "V1",
                             {vessel_joint, Side::kSingle},
                             {0.2 * right, kReturnY + 2},
                             std::ceil(highest_m * kDensity * kGravity / 1000) + 50});
  }

  double addPlant(End from, End to, Point at) {
    Plant plant;
    plant.id = nextId();
    plant.tag = "Chiller";
    plant.from = from;
    plant.to = to;
    plant.at = at;
    plant.loss = {twoDecimals(spots_[0].flow_l_s), 40, 2};
    plant.minimum_flow_l_s = twoDecimals(0.2 * spots_[0].flow_l_s);
    plant.supply_c = 6;
    plant.return_c = 12;
    loop_.plants.push_back(plant);
    return 40e3;
  }

  void addPump(End from, End to, Point at, double loss_pa) {
    // Share of design flow, of design head, efficiency [%]: a curve of common shape. [invented]
    constexpr double kCurve[][3] = {{0, 1.25, 0}, {0.4, 1.21, 55}, {0.75, 1.11, 74}, {1, 1, 78}, {1.25, 0.86, 73}};
    const double flow = spots_[0].flow_l_s;
    const double head = kSpareHead * loss_pa / (kDensity * kGravity);
    Pump pump;
    pump.id = nextId();
    pump.tag = "P1";
    pump.from = from;
    pump.to = to;
    pump.at = at;
    for (const auto& [share, of_head, efficiency] : kCurve)
      pump.curve.push_back({twoDecimals(share * flow), twoDecimals(of_head * head), efficiency});
    pump.run_out_flow_l_s = pump.curve.back().flow_l_s;
    pump.motor_kw = std::ceil(1.3 * flow / 1000 * head * kDensity * kGravity / 0.75 / 1000);
    loop_.pumps.push_back(pump);
  }

  void addSensorAndControl() {
    const Spot& end = spots_[static_cast<std::size_t>(last_riser_end_)];
    Point at;
    for (const Joint& joint : loop_.joints)
      if (joint.id == end.joint) at = joint.at;
    Sensor sensor;
    sensor.id = nextId();
    sensor.tag = "dP1";
    sensor.high = {end.joint, Side::kSupply};
    sensor.low = {end.joint, Side::kReturn};
    sensor.at = {at.x_m - 3, at.y_m + 2};
    sensor.set_point_kpa = std::ceil(end.available_pa / 100) / 10;
    loop_.sensors.push_back(sensor);
    loop_.control.strategy = Strategy::kFieldSensor;
    loop_.control.sensors = {sensor.id};
  }

  void addLoadStates() {
    const auto add = [this](const std::string& name, double rest) -> LoadState& {
      LoadState state;
      state.id = nextId();
      state.name = name;
      state.rest_percent = rest;
      return loop_.load_states.emplace_back(state);
    };
    add("Design", 100);
    add("Half load", 50);
    add("Night", 15);
    LoadState& mixed = add("Every other building", 20);
    for (std::size_t i = 0; i < loop_.zones.size(); i += 2)
      mixed.demands.push_back({loop_.zones[i].id, DemandKind::kRequest, 90});
    LoadState& last = add("Last building alone", 0);
    last.demands.push_back({loop_.zones.back().id, DemandKind::kRequest, 100});
  }

  Loop loop_;
  std::vector<Spot> spots_;
  Id last_id_ = 0;
  Id ground_ = 0;
  int left_ = 0;
  int per_floor_ = 0;
  int floors_ = 0;
  int row_length_ = 0;
  int last_riser_end_ = 0;
};

}  // namespace

Loop campus(int terminals) {
  return Builder(std::clamp(terminals, 1, kMostCampusTerminals)).build();
}

}  // namespace ebbline::loop
