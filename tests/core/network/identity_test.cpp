// What must hold for every loop whatever its numbers: run on every sample, every load state, and a campus of 60.

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <cstring>
#include <filesystem>
#include <map>
#include <random>
#include <string>
#include <utility>
#include <vector>

#include "core/loop/campus.h"
#include "core/loop/file.h"
#include "core/network/demand.h"
#include "core/network/edge_law.h"
#include "core/network/fundamental_loops.h"
#include "core/network/results.h"
#include "core/network/solver.h"
#include "tests/support/seed.h"

namespace ebbline::network {
namespace {

struct Sample {
  std::string name;
  loop::Loop loop;
};

std::vector<Sample> readSamples() {
  std::vector<Sample> samples;
  std::vector<std::filesystem::path> files;
  for (const auto& entry : std::filesystem::directory_iterator(std::filesystem::path(EBBLINE_SOURCE_DIR) / "samples"))
    if (entry.path().extension() == ".ebbline") files.push_back(entry.path());
  std::sort(files.begin(), files.end());
  for (const auto& file : files) {
    loop::Reading reading = loop::readLoopFile(file);
    for (const text::Remark& remark : reading.remarks)
      if (text::severityOf(remark.code) == text::Severity::kFault)
        ADD_FAILURE() << file << ": " << text::oneLine(remark);
    samples.push_back({file.stem().string(), reading.loop});
  }
  samples.push_back({"campus of 60", loop::campus(60)});
  return samples;
}

const std::vector<Sample>& samples() {
  static const std::vector<Sample> read = readSamples();
  return read;
}

// One loop compiled and solved from the cold start under one load state (nullptr: design).
struct Solved {
  Network network;
  Request request;
  State state;
  Summary summary;
  Results results;
};

void solveInto(const loop::Loop& loop, const loop::LoadState* load, Solved& solved) {
  Compiled compiled = compile(loop);
  for (const text::Remark& remark : compiled.remarks)
    if (text::severityOf(remark.code) == text::Severity::kFault) ADD_FAILURE() << text::oneLine(remark);
  ASSERT_TRUE(compiled.usable());
  solved.network = std::move(compiled.network);
  solved.request = requestOf(loop, solved.network, load);
  Solver solver(solved.network);
  solved.summary = solver.solve(solved.request, solved.state);
  ASSERT_TRUE(solved.summary.usable()) << solved.summary.why;
  solved.results = resultsOf(solved.network, solved.request, solved.state);
}

std::vector<const loop::LoadState*> loadsOf(const loop::Loop& loop) {
  std::vector<const loop::LoadState*> loads{nullptr};
  for (const loop::LoadState& state : loop.load_states) loads.push_back(&state);
  return loads;
}

double largestFlow(const State& state) {
  double largest = 0;
  for (double q : state.edge_flow_m3s) largest = std::max(largest, std::abs(q));
  return largest;
}

using PartKey = std::pair<loop::Id, int>;

std::map<PartKey, const PartResult*> partsById(const Results& results) {
  std::map<PartKey, const PartResult*> parts;
  for (const PartResult& part : results.parts) parts[{part.id, static_cast<int>(part.side)}] = &part;
  return parts;
}

// Everything told of one loop equals what is told of the other, thing by thing; the run `turned` has its sign changed.
void expectSame(const Solved& a, const Solved& b, loop::Id turned, const std::string& what) {
  constexpr double kSame = 1e-9;
  const double flow = kSame * std::max(largestFlow(a.state), 1e-12);
  const double pressure = kSame * std::max(1.0, EdgeLaws(a.network).pumpPressure(1));
  const auto parts = partsById(b.results);
  ASSERT_EQ(a.results.parts.size(), b.results.parts.size()) << what;
  for (const PartResult& part : a.results.parts) {
    const auto other = parts.find({part.id, static_cast<int>(part.side)});
    ASSERT_NE(other, parts.end()) << what << ": " << part.tag;
    const double sign = part.id == turned ? -1 : 1;
    EXPECT_NEAR(part.flow_m3s, sign * other->second->flow_m3s, flow) << what << ": flow of " << part.tag;
    EXPECT_NEAR(part.loss_pa, sign * other->second->loss_pa, pressure) << what << ": loss of " << part.tag;
  }
  std::map<loop::Id, const TerminalResult*> terminals;
  for (const TerminalResult& t : b.results.terminals) terminals[t.id] = &t;
  for (const TerminalResult& t : a.results.terminals) {
    ASSERT_TRUE(terminals.count(t.id)) << what;
    EXPECT_NEAR(t.delivered_m3s, terminals[t.id]->delivered_m3s, flow) << what << ": " << t.tag;
    EXPECT_NEAR(t.available_pa, terminals[t.id]->available_pa, pressure) << what << ": " << t.tag;
  }
  EXPECT_NEAR(a.state.speed, b.state.speed, kSame) << what;
}

TEST(Identity, FlowIsKeptAtEveryDrawnEnd) {
  for (const Sample& sample : samples())
    for (const loop::LoadState* load : loadsOf(sample.loop)) {
      Solved solved;
      ASSERT_NO_FATAL_FAILURE(solveInto(sample.loop, load, solved)) << sample.name;
      const auto parts = partsById(solved.results);
      std::map<std::pair<loop::Id, int>, double> balance;
      const auto pass = [&](loop::Id id, loop::Side side, loop::End from, loop::End to) {
        const auto part = parts.find({id, static_cast<int>(side)});
        ASSERT_NE(part, parts.end()) << sample.name << ": nothing is told of " << id;
        balance[{from.joint, static_cast<int>(from.side)}] -= part->second->flow_m3s;
        balance[{to.joint, static_cast<int>(to.side)}] += part->second->flow_m3s;
      };
      using loop::Side;
      for (const auto& run : sample.loop.paired_runs)
        for (Side side : {Side::kSupply, Side::kReturn}) pass(run.id, side, {run.from, side}, {run.to, side});
      for (const auto& run : sample.loop.pipe_runs) pass(run.id, Side::kSingle, run.from, run.to);
      for (const auto& t : sample.loop.terminals) pass(t.id, Side::kSingle, t.from, t.to);
      for (const auto& plant : sample.loop.plants) pass(plant.id, Side::kSingle, plant.from, plant.to);
      for (const auto& pump : sample.loop.pumps) pass(pump.id, Side::kSingle, pump.from, pump.to);
      for (const auto& valve : sample.loop.valves) pass(valve.id, Side::kSingle, valve.from, valve.to);
      for (const auto& [end, left] : balance)
        EXPECT_NEAR(left, 0, 1e-9 * largestFlow(solved.state)) << sample.name << ", joint " << end.first;
    }
}

TEST(Identity, LossesSumToNothingRoundEveryLoop) {
  for (const Sample& sample : samples())
    for (const loop::LoadState* load : loadsOf(sample.loop)) {
      Solved solved;
      ASSERT_NO_FATAL_FAILURE(solveInto(sample.loop, load, solved)) << sample.name;
      EdgeLaws laws(solved.network, solved.request);
      const double speed_squared = solved.state.speed * solved.state.speed;
      std::vector<double> loss(solved.network.edges.size());
      std::vector<Hold> hold(loss.size(), Hold::kFree);
      std::vector<int> rank = terminalsLast(solved.network);
      for (int e = 0; e < laws.numEdges(); ++e) {
        const double q = solved.state.edge_flow_m3s[e];
        loss[e] = laws.shut(e) ? 0 : laws.evaluate(e, q, speed_squared).loss_pa;
        if (laws.shut(e)) rank[e] = kLeftOut;
        if (q >= (1 - 1e-9) * laws.limit(e)) hold[e] = Hold::kAlong;
      }
      const FundamentalLoops loops(solved.network, rank);
      const double pump = laws.pumpPressure(speed_squared);
      EXPECT_LE(loops.largestSum(loss, hold).largest_pa, 1e-9 * pump) << sample.name;
      EXPECT_LE(solved.summary.flow_residual, 1e-9) << sample.name;
      EXPECT_LE(solved.summary.pressure_residual, 1e-9) << sample.name;
    }
}

TEST(Identity, HardyCrossAgreesOnEverySample) {
  for (const Sample& sample : samples())
    for (const loop::LoadState* load : loadsOf(sample.loop)) {
      Solved solved;
      ASSERT_NO_FATAL_FAILURE(solveInto(sample.loop, load, solved)) << sample.name;
      State second;
      HardyCross method(solved.network);
      const Summary summary = method.solve(solved.request, second);
      ASSERT_TRUE(summary.usable()) << sample.name << ": " << summary.why << ", " << summary.pressure_residual;
      EXPECT_LE(largestDifference(solved.state, second).relative, 1e-6)
          << sample.name << ", " << (load ? load->name : "design");
      EXPECT_NEAR(solved.state.speed, second.speed, 1e-6) << sample.name;
    }
}

TEST(Identity, ReversingARunFlipsItsSignOnly) {
  for (const Sample& sample : samples()) {
    const loop::LoadState* load = loadsOf(sample.loop).back();
    Solved before;
    ASSERT_NO_FATAL_FAILURE(solveInto(sample.loop, load, before)) << sample.name;
    for (std::size_t i = 0; i < sample.loop.paired_runs.size(); ++i) {
      loop::Loop turned = sample.loop;
      std::swap(turned.paired_runs[i].from, turned.paired_runs[i].to);
      Solved after;
      ASSERT_NO_FATAL_FAILURE(solveInto(turned, load, after)) << sample.name;
      expectSame(before, after, turned.paired_runs[i].id, sample.name + ", run " + turned.paired_runs[i].tag);
    }
    for (std::size_t i = 0; i < sample.loop.pipe_runs.size(); ++i) {
      loop::Loop turned = sample.loop;
      std::swap(turned.pipe_runs[i].from, turned.pipe_runs[i].to);
      Solved after;
      ASSERT_NO_FATAL_FAILURE(solveInto(turned, load, after)) << sample.name;
      expectSame(before, after, turned.pipe_runs[i].id, sample.name + ", run " + turned.pipe_runs[i].tag);
    }
  }
}

template <class Things>
void shuffle(Things& things, std::mt19937_64& dice) {
  std::shuffle(things.begin(), things.end(), dice);
}

TEST(Identity, OrderOfPartsInTheFileDoesNotMatter) {
  std::mt19937_64 dice(test::seed());
  for (const Sample& sample : samples())
    for (const loop::LoadState* load : loadsOf(sample.loop)) {
      Solved before;
      ASSERT_NO_FATAL_FAILURE(solveInto(sample.loop, load, before)) << sample.name;
      loop::Loop mixed = sample.loop;
      shuffle(mixed.joints, dice);
      shuffle(mixed.paired_runs, dice);
      shuffle(mixed.pipe_runs, dice);
      shuffle(mixed.terminals, dice);
      shuffle(mixed.plants, dice);
      shuffle(mixed.pumps, dice);
      shuffle(mixed.valves, dice);
      shuffle(mixed.sensors, dice);
      shuffle(mixed.zones, dice);
      Solved after;
      ASSERT_NO_FATAL_FAILURE(solveInto(mixed, load, after)) << sample.name;
      expectSame(before, after, 0, sample.name + " in another order");
    }
}

bool sameBits(const std::vector<double>& a, const std::vector<double>& b) {
  return a.size() == b.size() && (a.empty() || std::memcmp(a.data(), b.data(), a.size() * sizeof(double)) == 0);
}

TEST(Identity, TwoColdSolvesAreBitIdentical) {
  for (const Sample& sample : samples())
    for (const loop::LoadState* load : loadsOf(sample.loop)) {
      Solved first;
      ASSERT_NO_FATAL_FAILURE(solveInto(sample.loop, load, first)) << sample.name;
      // Once by the same solver after it did something else, once by a new one.
      Solver used(first.network);
      State scratch;
      used.solve(requestOf(sample.loop, first.network, nullptr), scratch);
      State again;
      ASSERT_TRUE(used.solve(first.request, again).usable());
      EXPECT_TRUE(sameBits(first.state.edge_flow_m3s, again.edge_flow_m3s)) << sample.name;
      EXPECT_TRUE(sameBits(first.state.node_pressure_pa, again.node_pressure_pa)) << sample.name;
      EXPECT_EQ(std::memcmp(&first.state.speed, &again.speed, sizeof(double)), 0) << sample.name;
      Solved second;
      ASSERT_NO_FATAL_FAILURE(solveInto(sample.loop, load, second)) << sample.name;
      EXPECT_TRUE(sameBits(first.state.edge_flow_m3s, second.state.edge_flow_m3s)) << sample.name;
      EXPECT_TRUE(sameBits(first.state.node_pressure_pa, second.state.node_pressure_pa)) << sample.name;
    }
}

TEST(Identity, WarmStartGivesTheColdAnswer) {
  for (const Sample& sample : samples()) {
    const auto loads = loadsOf(sample.loop);
    State warm;
    for (const loop::LoadState* load : loads) {
      Solved cold;
      ASSERT_NO_FATAL_FAILURE(solveInto(sample.loop, load, cold)) << sample.name;
      Solver solver(cold.network);
      ASSERT_TRUE(solver.solve(cold.request, warm).usable()) << sample.name;
      EXPECT_LE(largestDifference(cold.state, warm).relative, 1e-9) << sample.name;
      EXPECT_NEAR(cold.state.speed, warm.speed, 1e-9) << sample.name;
      Request half = cold.request;  // from a far state back
      for (TerminalDemand& demand : half.terminals) demand.flow_m3s *= 0.3, demand.stroke *= 0.5;
      solver.solve(half, warm);
      ASSERT_TRUE(solver.solve(cold.request, warm).usable()) << sample.name;
      EXPECT_LE(largestDifference(cold.state, warm).relative, 1e-9) << sample.name << " back from part load";
    }
  }
}

}  // namespace
}  // namespace ebbline::network
