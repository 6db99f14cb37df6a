#pragma once
// One loop compiled and solved from the cold start, the loops of the folder samples, and a drawn curve
// read off between its points.

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <filesystem>
#include <string>
#include <vector>

#include "core/loop/file.h"
#include "core/network/demand.h"
#include "core/network/results.h"
#include "core/network/solver.h"
#include "core/network/system_curve.h"

namespace ebbline::test {

struct SampleLoop {
  std::string name;
  loop::Loop loop;
};

inline std::vector<SampleLoop> sampleLoops() {
  std::vector<std::filesystem::path> files;
  for (const auto& entry : std::filesystem::directory_iterator(std::filesystem::path(EBBLINE_SOURCE_DIR) / "samples"))
    if (entry.path().extension() == ".ebbline") files.push_back(entry.path());
  std::sort(files.begin(), files.end());
  std::vector<SampleLoop> samples;
  for (const auto& file : files) {
    loop::Reading reading = loop::readLoopFile(file);
    EXPECT_TRUE(reading.usable()) << file;
    samples.push_back({file.stem().string(), std::move(reading.loop)});
  }
  EXPECT_GE(samples.size(), 4U);
  return samples;
}

/// nullptr (every terminal asks for its design flow) and each load state of the document.
inline std::vector<const loop::LoadState*> loadStates(const loop::Loop& loop) {
  std::vector<const loop::LoadState*> states{nullptr};
  for (const loop::LoadState& state : loop.load_states) states.push_back(&state);
  return states;
}

inline std::string nameOf(const loop::LoadState* state) {
  return state ? state->name : "design";
}

inline network::Network networkOf(const loop::Loop& loop) {
  network::Compiled compiled = network::compile(loop);
  for (const text::Remark& remark : compiled.remarks)
    if (text::severityOf(remark.code) == text::Severity::kFault) ADD_FAILURE() << text::oneLine(remark);
  return std::move(compiled.network);
}

struct SolvedState {
  network::Request request;
  network::State state;
  network::Summary summary;
  network::Results results;
};

inline SolvedState solvedFor(const network::Network& network, network::Request request) {
  SolvedState solved;
  solved.request = std::move(request);
  solved.summary = network::Solver(network).solve(solved.request, solved.state);
  EXPECT_TRUE(solved.summary.usable()) << solved.summary.why;
  if (solved.summary.usable()) solved.results = network::resultsOf(network, solved.request, solved.state);
  return solved;
}

/// Pressure of the curve as it is drawn, by straight lines; NaN outside.
inline double drawnAt(const network::HeadFlowCurve& curve, double flow_m3s) {
  for (std::size_t i = 1; i < curve.points.size(); ++i) {
    const network::HeadFlowPoint& a = curve.points[i - 1];
    const network::HeadFlowPoint& b = curve.points[i];
    if (flow_m3s < a.flow_m3s || flow_m3s > b.flow_m3s || a.flow_m3s == b.flow_m3s) continue;
    return a.pressure_pa + (b.pressure_pa - a.pressure_pa) * (flow_m3s - a.flow_m3s) / (b.flow_m3s - a.flow_m3s);
  }
  return std::nan("");
}

}  // namespace ebbline::test
