// compile: what becomes of the drawing, and what it refuses. Every refusal names the thing.

#include <cmath>
#include <functional>
#include <limits>

#include <gtest/gtest.h>

#include "core/network/solver.h"
#include "tests/support/closed_form_loop.h"

namespace ebbline::network {
namespace {

using loop::End;
using loop::Loop;
using loop::Side;
using text::Code;

constexpr double kNan = std::numeric_limits<double>::quiet_NaN();

bool says(const Compiled& compiled, Code code, loop::Id id) {
  for (const text::Remark& remark : compiled.remarks)
    if (remark.code == code && remark.place.id == id) return true;
  return false;
}

std::string all(const Compiled& compiled) {
  std::string lines;
  for (const text::Remark& remark : compiled.remarks) lines += text::oneLine(remark) + "\n";
  return lines;
}

struct Fault {
  const char* what;
  Code code;
  loop::Id id;
  std::function<void(Loop&)> seed;
};

loop::Pipe sizedPipe() {
  loop::Pipe pipe;
  pipe.length_m = 10;
  pipe.series = "steel-en10255-medium";
  pipe.size = "DN 50";
  return pipe;
}

std::vector<Fault> faults() {
  const loop::Id run = 201;
  const loop::Id terminal = 302;
  const loop::Id plant = test::kClosedFormPlant;
  const loop::Id pump = test::kClosedFormPump;
  const loop::Id sensor = test::kClosedFormSensor;
  const auto pipe = [](auto change) {
    return [change](Loop& l) {
      l.paired_runs[0].pipe = sizedPipe();
      change(l.paired_runs[0].pipe);
    };
  };
  return {
      {"unknown series", Code::kCatalogueUnknownSeries, run, pipe([](loop::Pipe& p) { p.series = "lead"; })},
      {"unknown size", Code::kCatalogueUnknownSize, run, pipe([](loop::Pipe& p) { p.size = "DN 51"; })},
      {"unknown fitting", Code::kCatalogueUnknownFitting, run, pipe([](loop::Pipe& p) {
         p.fittings.push_back({"knot", 1});
       })},
      {"no size", Code::kSolvePipeNoSize, run, pipe([](loop::Pipe& p) { p.series = p.size = ""; })},
      {"zero length", Code::kSolveNotPositive, run, pipe([](loop::Pipe& p) { p.length_m = 0; })},
      {"negative bore", Code::kSolveNotPositive, run, pipe([](loop::Pipe& p) { p.bore_mm = -5; })},
      {"length not a number", Code::kSolveNotFinite, run, pipe([](loop::Pipe& p) { p.length_m = kNan; })},
      {"rough as a brush", Code::kSolveRoughnessTooLarge, run, pipe([](loop::Pipe& p) { p.roughness_mm = 40; })},
      {"negative K", Code::kSolveNegative, run, pipe([](loop::Pipe& p) { p.extra_k = -1; })},
      {"loss without flow", Code::kSolveLossWithoutFlow, run,
       [](Loop& l) {
         l.paired_runs[0].pipe.known_loss = loop::KnownLoss{0, 5, 2};
       }},
      {"exponent below 1", Code::kSolveExponent, run,
       [](Loop& l) {
         l.paired_runs[0].pipe.known_loss = loop::KnownLoss{1, 5, 0.5};
       }},
      {"run to nowhere", Code::kSolveOpenEnd, run, [](Loop& l) { l.paired_runs[0].to = 0; }},
      {"no such joint", Code::kLoopNoSuchJoint, run, [](Loop& l) { l.paired_runs[0].to = 999; }},
      {"paired run to a single joint", Code::kLoopRunNeedsPair, run,
       [](Loop& l) { l.paired_runs[0].to = test::kClosedFormBetween; }},
      {"run onto itself", Code::kLoopSameEnds, run, [](Loop& l) { l.paired_runs[0].to = l.paired_runs[0].from; }},
      {"open terminal", Code::kSolveOpenEnd, terminal, [](Loop& l) { l.terminals[1].to = {}; }},
      {"side missing", Code::kLoopSideMissing, terminal,
       [](Loop& l) {
         l.terminals[1].to = {test::kClosedFormBetween, Side::kReturn};
       }},
      {"side not named", Code::kLoopSideNotNamed, terminal,
       [](Loop& l) {
         l.terminals[1].to = {test::kClosedFormNode[1], Side::kSingle};
       }},
      {"supply to supply", Code::kSolveSameSide, terminal,
       [](Loop& l) {
         l.terminals[1].to = {test::kClosedFormNode[2], Side::kSupply};
       }},
      {"terminal onto itself", Code::kLoopSameEnds, terminal, [](Loop& l) { l.terminals[1].to = l.terminals[1].from; }},
      {"no Kvs", Code::kSolveNotPositive, terminal, [](Loop& l) { l.terminals[1].valve.kvs_m3h = 0; }},
      {"negative design flow", Code::kSolveNegative, terminal, [](Loop& l) { l.terminals[1].design_flow_l_s = -1; }},
      {"presetting 0", Code::kSolveNotPositive, terminal,
       [](Loop& l) { l.terminals[1].balancing->presetting_kv_m3h = 0; }},
      {"rangeability 1", Code::kSolveRangeability, terminal, [](Loop& l) { l.terminals[1].valve.rangeability = 1; }},
      {"leaks all", Code::kSolveLeakage, terminal, [](Loop& l) { l.terminals[1].valve.leakage_percent = 100; }},
      {"table too short", Code::kSolveTableShort, terminal,
       [](Loop& l) { l.terminals[1].valve.characteristic = loop::Characteristic::kTable; }},
      {"table falls", Code::kSolveTableOrder, terminal,
       [](Loop& l) {
         l.terminals[1].valve.characteristic = loop::Characteristic::kTable;
         l.terminals[1].valve.table = {{0, 0}, {50, 60}, {100, 40}};
       }},
      {"no such zone", Code::kLoopNoSuchZone, terminal, [](Loop& l) { l.terminals[1].zone = 77; }},
      {"no such level", Code::kLoopNoSuchLevel, test::kClosedFormNode[0], [](Loop& l) { l.joints[2].level = 77; }},
      {"no plant", Code::kLoopEmpty, 0,
       [](Loop& l) {
         loop::PipeRun bare;
         bare.id = 900;
         bare.from = l.plants[0].from;
         bare.to = l.plants[0].to;
         bare.pipe = sizedPipe();
         l.pipe_runs.push_back(bare);
         l.plants.clear();
       }},
      {"no pump", Code::kLoopEmpty, 0, [](Loop& l) { l.pumps.clear(); }},
      {"no terminal", Code::kLoopEmpty, 0, [](Loop& l) { l.terminals.clear(); }},
      {"plant loss negative", Code::kSolveNegative, plant, [](Loop& l) { l.plants[0].loss.loss_kpa = -3; }},
      {"pump curve short", Code::kSolveCurveShort, pump, [](Loop& l) { l.pumps[0].curve.resize(1); }},
      {"pump flows do not rise", Code::kSolveCurveOrder, pump, [](Loop& l) { l.pumps[0].curve[2].flow_l_s = 4; }},
      {"pump without head", Code::kSolveCurveNoHead, pump, [](Loop& l) { l.pumps[0].curve[0].head_m = 0; }},
      {"efficiency above 100", Code::kSolveEfficiencyRange, pump,
       [](Loop& l) { l.pumps[0].curve[1].efficiency_percent = 140; }},
      {"speed bounds crossed", Code::kSolveSpeedBounds, pump, [](Loop& l) { l.pumps[0].minimum_speed_percent = 120; }},
      {"two vessels", Code::kSolveTwoVessels, 702,
       [](Loop& l) {
         l.vessels.push_back(l.vessels[0]);
         l.vessels[1].id = 702;
       }},
      {"island", Code::kSolveIsland, 901,
       [](Loop& l) {
         for (const loop::Id id : {801U, 802U}) {
           loop::Joint joint;
           joint.id = id;
           l.joints.push_back(joint);
         }
         loop::PairedRun lonely;
         lonely.id = 901;
         lonely.from = 801;
         lonely.to = 802;
         lonely.pipe = sizedPipe();
         l.paired_runs.push_back(lonely);
       }},
      {"unknown sensor in control", Code::kLoopNoSuchSensor, 0,
       [](Loop& l) {
         l.control.strategy = loop::Strategy::kFieldSensor;
         l.control.sensors = {12345};
       }},
      {"sensor without set-point", Code::kSolveNoSetPoint, sensor,
       [](Loop& l) {
         l.control.strategy = loop::Strategy::kFieldSensor;
         l.sensors[0].set_point_kpa.reset();
       }},
      {"no sensor", Code::kSolveNoSensor, 0,
       [](Loop& l) {
         l.control.strategy = loop::Strategy::kFieldSensor;
         l.control.sensors.clear();
       }},
      {"sensor at nothing", Code::kSolveNothingThere, sensor,
       [](Loop& l) {
         loop::Joint joint;
         joint.id = 850;
         l.joints.push_back(joint);
         l.sensors[0].high = {850, Side::kSupply};
       }},
      {"headers without set-point", Code::kSolveNoSetPoint, 0,
       [](Loop& l) {
         l.control.strategy = loop::Strategy::kDpHeaders;
         l.control.set_point_kpa.reset();
       }},
      {"headers not named", Code::kSolveOpenEnd, 0,
       [](Loop& l) {
         l.control.strategy = loop::Strategy::kDpHeaders;
         l.control.header_supply.reset();
       }},
      {"speed 0", Code::kSolveNotPositive, 0, [](Loop& l) { l.control.speed_percent = 0; }},
      {"fluid without density", Code::kSolveFluidIncomplete, 0, [](Loop& l) { l.fluid.density_kg_m3.reset(); }},
      {"frozen", Code::kFluidFrozen, 0,
       [](Loop& l) {
         l.fluid.kind = loop::FluidKind::kEthyleneGlycol;
         l.fluid.glycol_mass_percent = 10;
         l.fluid.temperature_c = -20;
       }},
      {"joint twice", Code::kLoopIdTwice, test::kClosedFormNode[0], [](Loop& l) { l.joints.push_back(l.joints[2]); }},
  };
}

TEST(Compile, SoundLoopHasNoFault) {
  const Compiled compiled = compile(test::closedFormLoop());
  EXPECT_TRUE(compiled.usable()) << all(compiled);
}

TEST(Compile, EveryRefusalNamesTheThing) {
  for (const Fault& fault : faults()) {
    Loop loop = test::closedFormLoop();
    fault.seed(loop);
    const Compiled compiled = compile(loop);
    EXPECT_FALSE(compiled.usable()) << fault.what;
    EXPECT_TRUE(says(compiled, fault.code, fault.id)) << fault.what << "\n" << all(compiled);
    for (const text::Remark& remark : compiled.remarks) EXPECT_FALSE(text::sentence(remark).empty());
  }
}

TEST(Compile, CautionsAndNotesLetTheLoopBeSolved) {
  Loop loop = test::closedFormLoop();
  loop.pumps[0].curve[1].head_m = 20;  // above the first reading
  loop.fluid.kind = loop::FluidKind::kWater;
  loop.fluid.temperature_c = 80;
  loop.joints[5].above_level_m = 30;
  loop.pumps[0].curve[2].efficiency_percent.reset();
  loop::PipeRun bypass;
  bypass.id = 900;
  bypass.from = {test::kClosedFormNode[3], Side::kSupply};
  bypass.to = {test::kClosedFormNode[3], Side::kReturn};
  bypass.pipe = sizedPipe();
  bypass.pipe.bore_mm = 10;
  bypass.pipe.series = bypass.pipe.size = "";
  loop.pipe_runs.push_back(bypass);
  const Compiled compiled = compile(loop);
  EXPECT_TRUE(compiled.usable()) << all(compiled);
  EXPECT_TRUE(says(compiled, Code::kSolveCurveRises, test::kClosedFormPump));
  EXPECT_TRUE(says(compiled, Code::kSolveEfficiencyPartly, test::kClosedFormPump));
  EXPECT_TRUE(says(compiled, Code::kSolveSupplyToReturn, 900));
  EXPECT_TRUE(says(compiled, Code::kSolveRoughnessAssumed, 900));
  EXPECT_TRUE(says(compiled, Code::kSolveBuoyancy, 0));
  EXPECT_TRUE(says(compiled, Code::kSolveBoils, test::kClosedFormNode[3])) << all(compiled);
}

TEST(Compile, BoilsOnlyWhereThePressureIsTooLow) {
  Loop loop = test::closedFormLoop();
  loop.fluid.kind = loop::FluidKind::kWater;
  loop.fluid.temperature_c = 80;
  loop.vessels[0].fill_kpa = 400;
  loop.joints[5].above_level_m = 30;
  EXPECT_FALSE(says(compile(loop), Code::kSolveBoils, test::kClosedFormNode[3]));
}

TEST(Compile, ChainsAreLumpedAndTheirEndsKept) {
  Loop loop = test::closedFormLoop();
  const Compiled compiled = compile(loop);
  const Network& network = compiled.network;
  // Nodes 1 to 3 are tees, node 4 carries the sensor, the pump has two ends; only the header supply is inner.
  EXPECT_EQ(network.num_nodes, 10);
  loop.sensors.clear();
  const Network lumped = compile(loop).network;
  EXPECT_EQ(lumped.num_nodes, 8);  // node 4 is inner now
  EXPECT_EQ(lumped.ends.size(), 11U);
  int inner = 0;
  for (const EndPlace& place : lumped.ends) {
    inner += place.node < 0;
    if (place.node < 0) {
      EXPECT_GE(place.edge, 0);
      const Edge& edge = lumped.edges[place.edge];
      EXPECT_GE(place.element, edge.first_element);
      EXPECT_LT(place.element, edge.first_element + edge.num_elements - 1);
    }
  }
  EXPECT_EQ(inner, 3);
  EXPECT_EQ(lumped.datum_node, lumped.num_nodes - 1);
}

TEST(Compile, AnyNumbersGiveARemarkOrANetworkNeverACrash) {
  for (const double value : {0.0, -1.0, 1e308, -1e308, 1e-320, kNan, std::numeric_limits<double>::infinity()}) {
    for (int which = 0; which < 12; ++which) {
      Loop loop = test::closedFormLoop();
      loop.paired_runs[0].pipe = sizedPipe();
      double* const place[] = {&loop.paired_runs[0].pipe.length_m,
                               &loop.paired_runs[0].pipe.extra_k,
                               &loop.paired_runs[0].pipe.fittings_allowance_percent,
                               &loop.terminals[0].coil.loss_kpa,
                               &loop.terminals[0].coil.flow_l_s,
                               &loop.terminals[0].valve.kvs_m3h,
                               &loop.plants[0].loss.exponent,
                               &loop.pumps[0].curve[1].flow_l_s,
                               &loop.pumps[0].curve[1].head_m,
                               &loop.joints[1].above_level_m,
                               &loop.vessels[0].fill_kpa,
                               &loop.terminals[0].design_flow_l_s};
      *place[which] = value;
      const Compiled compiled = compile(loop);
      if (!compiled.usable()) continue;
      State state;
      Request request;
      request.terminals.assign(4, {loop::DemandKind::kRequest, 0.001, 1});
      const Summary summary = Solver(compiled.network).solve(request, state);
      if (!summary.usable()) {
        EXPECT_TRUE(summary.remark) << which << " " << value;
        continue;
      }
      for (const double flow : state.edge_flow_m3s) EXPECT_TRUE(std::isfinite(flow)) << which << " " << value;
    }
  }
}

}  // namespace
}  // namespace ebbline::network
