#include "tests/support/random_loop.h"

#include <algorithm>
#include <cmath>
#include <random>
#include <utility>
#include <vector>

namespace ebbline::test {
namespace {

using loop::End;
using loop::Id;
using loop::Side;

constexpr double kDensity = 998.0;  // invented, near water
constexpr double kPaPerKpa = 1000.0;
constexpr double kGravity = 9.80665;

// Draws its own numbers from the bits, so that any standard library gives the same loops.
class Dice {
 public:
  explicit Dice(std::uint64_t seed) : bits_(seed) {}
  double between(double low, double high) {
    return low + (high - low) * static_cast<double>(bits_() >> 11) * 0x1.0p-53;
  }
  double logBetween(double low, double high) { return std::exp(between(std::log(low), std::log(high))); }
  bool chance(double probability) { return between(0, 1) < probability; }
  int below(int count) { return std::min(count - 1, static_cast<int>(between(0, count))); }

 private:
  std::mt19937_64 bits_;
};

// Makes one loop. Joint 0 holds the headers; joint k hangs from an earlier one, so that the tree is sound by order.
class Maker {
 public:
  explicit Maker(std::uint64_t seed) : dice_(seed) {}
  RandomLoop make();

 private:
  Id next() { return ++last_id_; }
  Id addJoint(bool paired);
  End end(int joint, Side side) const { return {joint_id_[joint], side}; }
  void plantTerminals(int num_terminals);
  void growTree(int num_joints);
  void growReverseReturn(int num_joints);
  void addRing();
  void addSource();
  void addTerminals();
  void addShutBranch(int joint);
  void chooseControl();
  void addSensor(int joint);
  void chooseLoads();
  loop::Pipe pipe(double flow_l_s);
  loop::Terminal terminal(int joint, double flow_l_s);
  void addPipe(End from, End to, double flow_l_s);
  void addPump(const loop::Pump& like);

  Dice dice_;
  RandomLoop made_;
  Id last_id_ = 0;
  std::vector<Id> joint_id_;
  std::vector<int> parent_;                         // of each paired joint; -1 for the headers
  std::vector<std::vector<double>> terminal_flow_;  // of each paired joint [L/s]
  std::vector<double> below_l_s_;                   // design flow of each joint with all that hangs from it
  double gradient_pa_m_ = 200;
  double mean_length_m_ = 10;
  double mains_kpa_ = 50;  // roughly, headers to the last joint and back
  bool known_losses_ = false;
  bool reverse_return_ = false;
};

Id Maker::addJoint(bool paired) {
  loop::Joint joint;
  joint.id = next();
  joint.tag = "J" + std::to_string(joint.id);
  joint.paired = paired;
  joint.at = {dice_.between(0, 100), dice_.between(0, 30)};
  joint.above_level_m = dice_.chance(0.3) ? dice_.between(-5, 20) : 0;
  made_.loop.joints.push_back(joint);
  return joint.id;
}

loop::Pipe Maker::pipe(double flow_l_s) {
  loop::Pipe made;
  made.length_m = mean_length_m_ * dice_.between(0.3, 1.7);
  const double gradient = gradient_pa_m_ * dice_.between(0.5, 1.6);
  if (known_losses_ || dice_.chance(0.05)) {
    made.known_loss = loop::KnownLoss{flow_l_s, gradient * made.length_m / kPaPerKpa,
                                      dice_.chance(0.5) ? 2.0 : dice_.between(1.7, 2.0)};
    return made;
  }
  const double flow = flow_l_s / 1000;
  const double f = 0.025;  // common practice: fair first guess of the friction factor
  made.bore_mm = 1000 * std::pow(8 * f * kDensity * flow * flow / (9.8696 * gradient), 0.2);
  made.roughness_mm = dice_.chance(0.2) ? 0.0 : dice_.between(0.002, 0.15);
  if (dice_.chance(0.3)) made.extra_k = dice_.between(0, 6);
  if (dice_.chance(0.3)) made.fittings_allowance_percent = dice_.between(0, 60);
  return made;
}

// Chooses where terminals stand: every joint without followers gets one, so that no end is open.
void Maker::plantTerminals(int num_terminals) {
  const int joints = static_cast<int>(parent_.size());
  terminal_flow_.assign(joints, {});
  std::vector<char> followed(joints, 0);
  for (int k = 1; k < joints; ++k) followed[parent_[k]] = 1;
  if (reverse_return_) followed[1] = 0;  // its return pipe begins there
  const double scale = dice_.logBetween(0.05, 2.0);
  const auto flow = [&] { return scale * dice_.between(0.3, 1.5); };
  int left = num_terminals;
  for (int k = 0; k < joints; ++k)
    if (!followed[k]) terminal_flow_[k].push_back(flow()), --left;
  for (; left > 0; --left) terminal_flow_[joints == 1 ? 0 : 1 + dice_.below(joints - 1)].push_back(flow());
  below_l_s_.assign(joints, 0);
  for (int k = joints - 1; k >= 0; --k) {
    for (double q : terminal_flow_[k]) below_l_s_[k] += q;
    if (k > 0) below_l_s_[parent_[k]] += below_l_s_[k];
  }
}

void Maker::growTree(int num_joints) {
  std::vector<int> depth(num_joints, 0);
  const double straight = dice_.between(0.3, 1.0);
  for (int k = 1; k < num_joints; ++k) {
    const int parent = dice_.chance(straight) ? k - 1 : dice_.below(k);
    parent_.push_back(parent);
    depth[k] = depth[parent] + 1;
  }
  const int deepest = *std::max_element(depth.begin(), depth.end());
  mean_length_m_ = mains_kpa_ * kPaPerKpa / (2.0 * std::max(1, deepest) * gradient_pa_m_);
}

void Maker::growReverseReturn(int num_joints) {
  for (int k = 1; k < num_joints; ++k) parent_.push_back(k - 1);
  mean_length_m_ = mains_kpa_ * kPaPerKpa / (num_joints * gradient_pa_m_);
}

void Maker::addPipe(End from, End to, double flow_l_s) {
  loop::PipeRun run;
  run.id = next();
  run.tag = "R" + std::to_string(run.id);
  run.from = from;
  run.to = to;
  run.pipe = pipe(flow_l_s);
  if (dice_.chance(0.3)) std::swap(run.from, run.to);
  made_.loop.pipe_runs.push_back(run);
}

// A paired run between two joints of the tree that are not neighbours.
void Maker::addRing() {
  const int joints = static_cast<int>(parent_.size());
  const int a = 1 + dice_.below(joints - 1);
  const int b = 1 + dice_.below(joints - 1);
  if (a == b) return;
  loop::PairedRun run;
  run.id = next();
  run.tag = "X" + std::to_string(run.id);
  run.from = joint_id_[a];
  run.to = joint_id_[b];
  run.pipe = pipe(0.5 * std::max(below_l_s_[a], below_l_s_[b]));
  made_.loop.paired_runs.push_back(run);
  made_.kind = "ring";
}

loop::Terminal Maker::terminal(int joint, double flow_l_s) {
  loop::Terminal t;
  t.id = next();
  t.tag = "T" + std::to_string(t.id);
  t.from = end(joint, Side::kSupply);
  t.to = end(joint, Side::kReturn);
  t.design_flow_l_s = flow_l_s;
  t.coil = {flow_l_s, dice_.between(4, 30), dice_.chance(0.6) ? 2.0 : dice_.between(1.7, 2.0)};
  const double m3h = flow_l_s * 3.6;
  const auto kvFor = [&](double drop_kpa) { return m3h / std::sqrt(drop_kpa / 100); };
  t.valve.kvs_m3h = kvFor(dice_.logBetween(3, 50));
  if (dice_.chance(0.3)) t.valve.characteristic = loop::Characteristic::kLinear;
  t.valve.rangeability = dice_.chance(0.5) ? 50 : dice_.between(20, 100);
  if (dice_.chance(0.3)) t.valve.leakage_percent = dice_.chance(0.5) ? 0.1 : 0.01;
  if (dice_.chance(0.3)) t.strainer_kv_m3h = kvFor(dice_.between(1, 5));
  if (dice_.chance(0.5)) {
    t.balancing = loop::BalancingValve{kvFor(dice_.between(2, 5)), {}};
    if (dice_.chance(0.7)) t.balancing->presetting_kv_m3h = kvFor(dice_.between(5, 40));
  }
  if (dice_.chance(0.3)) t.branch = pipe(flow_l_s), t.branch->length_m = dice_.between(1, 12);
  return t;
}

void Maker::addTerminals() {
  for (std::size_t k = 0; k < terminal_flow_.size(); ++k)
    for (double flow : terminal_flow_[k]) made_.loop.terminals.push_back(terminal(static_cast<int>(k), flow));
}

void Maker::addPump(const loop::Pump& like) {
  loop::Pump pump = like;
  pump.id = next();
  pump.tag = "P" + std::to_string(pump.id);
  made_.loop.pumps.push_back(pump);
}

// Plant and pump between the return and the supply header.
void Maker::addSource() {
  const double design = below_l_s_[0];
  const Id between = addJoint(false);
  loop::Plant plant;
  plant.id = next();
  plant.tag = "C1";
  plant.from = end(0, Side::kReturn);
  plant.to = {between, Side::kSingle};
  plant.loss = {design, dice_.between(5, 50), dice_.chance(0.7) ? 2.0 : 1.8};
  made_.loop.plants.push_back(plant);
  loop::Pump pump;
  pump.from = {between, Side::kSingle};
  pump.to = end(0, Side::kSupply);
  const int count = dice_.chance(0.15) ? 2 : 1;
  const double needed_kpa = plant.loss.loss_kpa + mains_kpa_ + 45;
  const double head = dice_.between(0.6, 1.5) * needed_kpa * kPaPerKpa / (kDensity * kGravity);
  const double flow = design / count * dice_.between(0.7, 1.3);
  const double rise = dice_.between(1.05, 1.5);
  pump.curve = {{0, rise * head, {}}, {flow, head, {}}};
  if (dice_.chance(0.5)) pump.curve.insert(pump.curve.begin() + 1, {0.5 * flow, head * (0.3 + 0.7 * rise), {}});
  pump.minimum_speed_percent = dice_.between(15, 40);
  for (int i = 0; i < count; ++i) addPump(pump);
  if (count > 1) made_.kind += ", two pumps";
  loop::Vessel vessel;
  vessel.id = next();
  vessel.at_end = dice_.chance(0.5) ? plant.from : plant.to;
  if (dice_.chance(0.8)) made_.loop.vessels.push_back(vessel);
}

// A terminal behind isolating valves, one or both of them shut.
void Maker::addShutBranch(int joint) {
  const Id supply = addJoint(false);
  const Id back = addJoint(false);
  loop::Terminal t = terminal(joint, dice_.between(0.05, 0.5));
  t.from = {supply, Side::kSingle};
  t.to = {back, Side::kSingle};
  const int shut = dice_.below(3);
  const auto valve = [&](End from, End to, bool closed) {
    loop::Valve v;
    v.id = next();
    v.tag = "V" + std::to_string(v.id);
    v.from = from;
    v.to = to;
    v.kvs_m3h = t.design_flow_l_s * 3.6 / std::sqrt(0.02);
    v.opening_percent = closed ? 0 : 100;
    if (dice_.chance(0.3)) std::swap(v.from, v.to);
    made_.loop.valves.push_back(v);
  };
  valve(end(joint, Side::kSupply), t.from, shut != 1);
  valve(t.to, end(joint, Side::kReturn), shut != 0);
  made_.loop.terminals.push_back(t);
  made_.kind += ", shut branch";
}

void Maker::addSensor(int joint) {
  loop::Sensor sensor;
  sensor.id = next();
  sensor.tag = "D" + std::to_string(sensor.id);
  sensor.high = end(joint, Side::kSupply);
  sensor.low = end(joint, Side::kReturn);
  sensor.set_point_kpa = dice_.between(15, 70);
  sensor.high_bore_mm = sensor.low_bore_mm =
      std::max(20.0, 25 * std::sqrt(below_l_s_[joint])) * dice_.between(0.9, 2.0);
  made_.loop.sensors.push_back(sensor);
  made_.loop.control.sensors.push_back(sensor.id);
}

void Maker::chooseControl() {
  loop::Control& control = made_.loop.control;
  const int choice = dice_.below(6);
  if (choice <= 1) {
    control.strategy = loop::Strategy::kConstantSpeed;
    control.speed_percent = dice_.chance(0.5) ? 100 : dice_.between(40, 100);
  } else if (choice == 2) {
    control.strategy = loop::Strategy::kDpPump;
    control.set_point_kpa = dice_.between(40, 150);
  } else if (choice == 3) {
    control.strategy = loop::Strategy::kDpHeaders;
    control.set_point_kpa = dice_.between(30, 120);
    control.header_supply = end(0, Side::kSupply);
    control.header_return = end(0, Side::kReturn);
  } else {
    control.strategy = loop::Strategy::kFieldSensor;
    const int joints = static_cast<int>(parent_.size());
    addSensor(joints - 1);
    if (joints > 2 && dice_.chance(0.3)) addSensor(dice_.below(joints - 1));
  }
}

void Maker::chooseLoads() {
  loop::LoadState state;
  state.id = next();
  state.name = "random";
  const int mode = dice_.below(3);  // requests, positions, mixed
  const double level = dice_.between(5, 100);
  for (const loop::Terminal& t : made_.loop.terminals) {
    loop::Demand demand;
    demand.of = t.id;
    const bool position = mode == 1 || (mode == 2 && dice_.chance(0.5));
    demand.kind = position ? loop::DemandKind::kPosition : loop::DemandKind::kRequest;
    demand.percent = std::min(100.0, level * dice_.between(0.4, 1.6));
    if (dice_.chance(0.1)) demand.percent = 0;
    if (dice_.chance(0.1)) demand.percent = 100;
    state.demands.push_back(demand);
  }
  made_.kind += mode == 0 ? ", requests" : mode == 1 ? ", positions" : ", mixed";
  made_.loop.load_states.push_back(state);
}

RandomLoop Maker::make() {
  made_.loop.project.title = "Random loop (invented)";
  loop::Fluid& fluid = made_.loop.fluid;
  fluid.kind = loop::FluidKind::kGiven;
  fluid.density_kg_m3 = kDensity;
  fluid.viscosity_mpa_s = dice_.between(0.35, 3.0);
  fluid.heat_capacity_kj_kgk = 4.19;
  known_losses_ = dice_.chance(0.35);
  reverse_return_ = dice_.chance(0.2);
  gradient_pa_m_ = dice_.between(80, 350);
  mains_kpa_ = dice_.between(5, 120);
  const int terminals = static_cast<int>(std::lround(dice_.logBetween(2, 120)));
  const int joints = 1 + std::max(1, terminals / (1 + dice_.below(3)));
  made_.kind = reverse_return_ ? "reverse return" : "tree";
  for (int k = 0; k < joints; ++k) joint_id_.push_back(addJoint(true));
  parent_.push_back(-1);
  reverse_return_ ? growReverseReturn(joints) : growTree(joints);
  plantTerminals(terminals);
  for (int k = 1; k < joints; ++k) {
    if (reverse_return_) {
      addPipe(end(k - 1, Side::kSupply), end(k, Side::kSupply), below_l_s_[k]);
      if (k > 1) addPipe(end(k - 1, Side::kReturn), end(k, Side::kReturn), below_l_s_[0] - below_l_s_[k]);
      continue;
    }
    loop::PairedRun run;
    run.id = next();
    run.tag = "R" + std::to_string(run.id);
    run.from = joint_id_[parent_[k]];
    run.to = joint_id_[k];
    run.pipe = pipe(below_l_s_[k]);
    if (dice_.chance(0.2)) run.return_pipe = pipe(below_l_s_[k]);
    if (dice_.chance(0.3)) std::swap(run.from, run.to);
    made_.loop.paired_runs.push_back(run);
  }
  if (reverse_return_) addPipe(end(joints - 1, Side::kReturn), end(0, Side::kReturn), below_l_s_[0]);
  if (!reverse_return_ && joints > 2 && dice_.chance(0.45))
    for (int rings = 1 + dice_.below(3); rings > 0; --rings) addRing();
  addTerminals();
  addSource();
  if (dice_.chance(0.25)) addShutBranch(dice_.below(joints));
  chooseControl();
  chooseLoads();
  return std::move(made_);
}

}  // namespace

RandomLoop randomLoop(std::uint64_t seed, int number) {
  const std::uint64_t mixed =
      (seed + 1) * 0x9E3779B97F4A7C15ULL ^ static_cast<std::uint64_t>(number) * 0xD1B54A32D192ED03ULL;
  return Maker(mixed).make();
}

}  // namespace ebbline::test
