#include "tests/ui/canvas/trial_loop.h"

#include <map>
#include <string>

namespace ebbline::trial {
namespace {

using loop::End;
using loop::Id;
using loop::Side;

class Builder {
 public:
  Id joint(double x, double y, bool paired, Id level = 0) {
    loop_.joints.push_back({next_, "", paired, {x, y}, level, 0});
    return next_++;
  }
  void paired(Id from, Id to, const std::string& size) {
    loop::PairedRun run;
    run.id = next_++;
    run.tag = "R" + std::to_string(++runs_);
    run.from = from;
    run.to = to;
    run.pipe.size = size;
    loop_.paired_runs.push_back(run);
  }
  void single(End from, End to, std::vector<loop::Point> bends = {}) {
    loop::PipeRun run;
    run.id = next_++;
    run.from = from;
    run.to = to;
    run.bends = std::move(bends);
    loop_.pipe_runs.push_back(run);
  }
  Id next() { return next_++; }
  loop::Loop& loop() { return loop_; }

 private:
  loop::Loop loop_;
  Id next_ = 1;
  int runs_ = 0;
};

void addFloor(Builder& b, int floor, int perFloor, Id tee, double y, Id level) {
  Id before = tee;
  for (int i = 1; i <= perFloor; ++i) {
    const double x = 6 + 7.2 * i;
    const Id at = b.joint(x, y, true, level);
    b.paired(before, at, i == 1 ? "DN 50" : "DN 40");
    loop::Terminal terminal;
    terminal.id = b.next();
    terminal.tag = "T" + std::to_string(floor) + "-" + std::to_string(i);
    terminal.from = {at, Side::kSupply};
    terminal.to = {at, Side::kReturn};
    terminal.at = {x, y - 3.2};
    terminal.design_flow_l_s = 0.32 + 0.04 * ((i * 3 + floor) % 7);
    terminal.essential = floor == 3 && i == 3;
    b.loop().terminals.push_back(terminal);
    before = at;
  }
}

void addPlant(Builder& b, Id foot, double x0, double y0, int perFloor) {
  const double right = 6 + 7.2 * perFloor - 5;
  const Id out = b.joint(right - 3.4, y0, false), in = b.joint(right - 3.4, y0 - 5.2, false);
  const Id suction = b.joint(x0 + 14, y0 - 5.2, false), discharge = b.joint(x0 + 17, y0 - 5.2, false);
  const Id tank = b.joint(x0 + 5.5, y0 - 5.2, false);
  b.single({out, Side::kSingle}, {foot, Side::kSupply});
  b.single({foot, Side::kReturn}, {tank, Side::kSingle}, {{x0, y0 - 5.2}});
  b.single({tank, Side::kSingle}, {suction, Side::kSingle});
  b.single({discharge, Side::kSingle}, {in, Side::kSingle});
  loop::Pump pump;
  pump.id = b.next();
  pump.tag = "P1";
  pump.from = {suction, Side::kSingle};
  pump.to = {discharge, Side::kSingle};
  pump.at = {x0 + 15.5, y0 - 5.2};
  b.loop().pumps.push_back(pump);
  loop::Plant plant;
  plant.id = b.next();
  plant.tag = "Chiller";
  plant.from = {in, Side::kSingle};
  plant.to = {out, Side::kSingle};
  plant.at = {right, y0 - 2.6};
  plant.supply_c = 6;
  plant.return_c = 12;
  plant.minimum_flow_l_s = 2;
  b.loop().plants.push_back(plant);
  loop::Vessel vessel;
  vessel.id = b.next();
  vessel.at_end = {tank, Side::kSingle};
  vessel.at = {x0 + 5.5, y0 - 2.9};
  b.loop().vessels.push_back(vessel);
}

}  // namespace

loop::Loop building(int floors, int perFloor) {
  Builder b;
  const double x0 = 6, y0 = 0, step = 12.75;
  b.loop().project.title = "Trial building";
  b.loop().project.subject = "chilled water";
  const Id foot = b.joint(x0, y0, true);
  Id below = foot;
  for (int floor = 1; floor <= floors; ++floor) {
    const double y = y0 + 11.7 + step * (floor - 1);
    loop::Level level{b.next(), "Level " + std::to_string(floor), 4.0 * floor, y - 6.1};
    b.loop().levels.push_back(level);
    const Id tee = b.joint(x0, y, true, level.id);
    b.paired(below, tee, "DN 65");
    addFloor(b, floor, perFloor, tee, y, level.id);
    below = tee;
  }
  addPlant(b, foot, x0, y0, perFloor);
  loop::Sensor sensor;
  sensor.id = b.next();
  sensor.tag = "S1";
  const Id firstTee = b.loop().paired_runs.front().to;
  sensor.high = {firstTee, Side::kSupply};
  sensor.low = {firstTee, Side::kReturn};
  sensor.at = {x0 + 4, y0 + 11.7 - 3};
  sensor.set_point_kpa = 83;
  b.loop().sensors.push_back(sensor);
  return b.loop();
}

network::Results results(const loop::Loop& loop, double share) {
  network::Results out;
  std::map<Id, double> needed;  // flow that passes each paired joint towards its terminals
  std::map<Id, std::vector<const loop::PairedRun*>> leaving;
  for (const loop::PairedRun& run : loop.paired_runs) leaving[run.from].push_back(&run);
  int number = 0, perFloor = 0;
  for (const loop::Terminal& t : loop.terminals) perFloor += t.tag.rfind("T1-", 0) == 0 ? 1 : 0;
  for (const loop::Terminal& t : loop.terminals) {
    ++number;
    const bool shut = number % (2 * perFloor) == 0;
    const double requested = shut ? 0 : share * t.design_flow_l_s * 1e-3;
    const double shortfall = number == 1 ? 0.17 : number == 2 ? 0.08 : 0;
    const double delivered = requested * (1 - shortfall);
    out.terminals.push_back({t.id, t.tag, requested, delivered,
                             shortfall > 0 ? 1
                             : shut        ? 0
                                           : 0.35 + 0.05 * (number % 9),
                             53e3, 20e3, shortfall, shortfall > 0});
    out.parts.push_back({network::Element::Kind::kTerminal, t.id, Side::kSingle, t.tag, delivered, 53e3, 0, 0});
    needed[t.from.joint] += delivered;
  }
  // Runs were added from the plant outwards, so going backwards meets every outer run first.
  for (auto run = loop.paired_runs.rbegin(); run != loop.paired_runs.rend(); ++run)
    needed[run->from] += needed[run->to];
  std::map<Id, double> pressure{{loop.paired_runs.front().from, 60e3}};
  for (const loop::PairedRun& run : loop.paired_runs) {
    pressure[run.to] = pressure[run.from] - 1.4e3;
    for (const Side side : {Side::kSupply, Side::kReturn})
      out.parts.push_back({network::Element::Kind::kPipe, run.id, side, run.tag,
                           (side == Side::kSupply ? 1 : -1) * needed[run.to], 1e3, 0.8, 40 + 3e4 * needed[run.to]});
  }
  const double all = needed[loop.paired_runs.front().from];
  for (const loop::PipeRun& run : loop.pipe_runs)
    out.parts.push_back({network::Element::Kind::kPipe, run.id, Side::kSingle, run.tag, all, 1e3, 1.1, 180});
  for (const loop::Pump& pump : loop.pumps) {
    out.parts.push_back({network::Element::Kind::kPump, pump.id, Side::kSingle, pump.tag, all, -65e3, 0, 0});
    out.pumps.push_back({pump.id, pump.tag, 0.65, all, 6.6, 65e3, 680, 0.65, false});
  }
  for (const loop::Plant& plant : loop.plants)
    out.parts.push_back({network::Element::Kind::kPlant, plant.id, Side::kSingle, plant.tag, all, 8e3, 0, 0});
  for (const loop::Joint& joint : loop.joints) {
    if (joint.paired)
      for (const Side side : {Side::kSupply, Side::kReturn})
        out.ends.push_back(
            {{joint.id, side}, 0, side == Side::kSupply ? pressure[joint.id] : 60e3 - pressure[joint.id], 1e5, true});
    else
      out.ends.push_back({{joint.id, Side::kSingle}, 0, joint.at.y_m < -1 ? 0.0 : 62e3, 1e5, true});
  }
  return out;
}

}  // namespace ebbline::trial
