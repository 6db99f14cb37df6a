#include "tests/support/closed_form_loop.h"

#include <cmath>
#include <string>

namespace ebbline::test {

namespace {

using loop::End;
using loop::Side;

constexpr double kSegment[] = {0.25, 0.25, 0.5, 1.5};
constexpr double kCoil = 7.5;
constexpr double kValve = 5;
constexpr double kPresetting[] = {5.75, 3.5, 1.5, 0};

/// Kv [m³/h] of Δp = r Q² in kPa and L/s: 100 kPa at 3.6 √(100/r) m³/h.
double kvOf(double r) { return 3.6 * std::sqrt(100 / r); }

void addJoint(loop::Loop& made, loop::Id id, bool paired, double x) {
  loop::Joint joint;
  joint.id = id;
  joint.tag = "J" + std::to_string(id);
  joint.paired = paired;
  joint.at = {x, 0};
  made.joints.push_back(joint);
}

void addBranch(loop::Loop& made, int i, bool balanced) {
  addJoint(made, kClosedFormNode[i], true, 10.0 * (i + 1));
  loop::PairedRun run;
  run.id = 200 + static_cast<loop::Id>(i) + 1;
  run.tag = "S" + std::to_string(i + 1);
  run.from = i == 0 ? kClosedFormHeader : kClosedFormNode[i - 1];
  run.to = kClosedFormNode[i];
  run.pipe.length_m = 10;
  run.pipe.known_loss = loop::KnownLoss{1, kSegment[i] / 2, 2};
  made.paired_runs.push_back(run);
  loop::Terminal terminal;
  terminal.id = kClosedFormTerminal[i];
  terminal.tag = "T" + std::to_string(i + 1);
  terminal.from = {kClosedFormNode[i], Side::kSupply};
  terminal.to = {kClosedFormNode[i], Side::kReturn};
  terminal.design_flow_l_s = 2;
  terminal.coil = {1, kCoil, 2};
  terminal.valve.kvs_m3h = kvOf(kValve);
  if (balanced && kPresetting[i] > 0) terminal.balancing = loop::BalancingValve{30, kvOf(kPresetting[i])};
  made.terminals.push_back(terminal);
}

void addPump(loop::Loop& made, double maximum_speed_percent) {
  constexpr double kGravity = 9.80665;
  loop::Pump pump;
  pump.id = kClosedFormPump;
  pump.tag = "P1";
  pump.from = {kClosedFormHeader, Side::kReturn};
  pump.to = {kClosedFormBetween, Side::kSingle};
  for (const double flow : {0.0, 5.0, 10.0}) {
    const double x = flow / 8.5;
    pump.curve.push_back({flow, (160 - 0.484375 * flow * flow) / kGravity, 75 * (2 * x - x * x)});
  }
  pump.minimum_speed_percent = 10;
  pump.maximum_speed_percent = maximum_speed_percent;
  made.pumps.push_back(pump);
}

}  // namespace

loop::Loop closedFormLoop(const ClosedForm& wanted) {
  loop::Loop made;
  made.fluid.kind = loop::FluidKind::kGiven;
  made.fluid.density_kg_m3 = 1000;
  made.fluid.viscosity_mpa_s = 1;
  made.fluid.heat_capacity_kj_kgk = 4.2;
  addJoint(made, kClosedFormHeader, true, 0);
  addJoint(made, kClosedFormBetween, false, -5);
  for (int i = 0; i < 4; ++i) addBranch(made, i, wanted.balanced);
  addPump(made, wanted.maximum_speed_percent);
  loop::Plant plant;
  plant.id = kClosedFormPlant;
  plant.tag = "C1";
  plant.from = {kClosedFormBetween, Side::kSingle};
  plant.to = {kClosedFormHeader, Side::kSupply};
  plant.loss = {1, 0.625, 2};
  made.plants.push_back(plant);
  loop::Sensor sensor;
  sensor.id = kClosedFormSensor;
  sensor.tag = "DP1";
  sensor.high = {kClosedFormNode[3], Side::kSupply};
  sensor.low = {kClosedFormNode[3], Side::kReturn};
  sensor.set_point_kpa = wanted.set_point_kpa;
  made.sensors.push_back(sensor);
  loop::Vessel vessel;
  vessel.id = 701;
  vessel.tag = "EX1";
  vessel.at_end = {kClosedFormHeader, Side::kReturn};
  made.vessels.push_back(vessel);
  made.control.strategy = wanted.strategy;
  made.control.set_point_kpa = wanted.set_point_kpa;
  made.control.header_supply = End{kClosedFormHeader, Side::kSupply};
  made.control.header_return = End{kClosedFormHeader, Side::kReturn};
  made.control.sensors = {kClosedFormSensor};
  return made;
}

}  // namespace ebbline::test
