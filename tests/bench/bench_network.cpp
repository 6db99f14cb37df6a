// The same cases under Google Benchmark, for profiles and single numbers: bench_network --benchmark_filter=warm.

#include <benchmark/benchmark.h>

#include <map>
#include <memory>

#include "tests/bench/cases.h"

namespace ebbline::bench {
namespace {

Case& caseOf(int terminals) {
  static std::map<int, std::unique_ptr<Case>> cases;
  std::unique_ptr<Case>& made = cases[terminals];
  if (!made) made = std::make_unique<Case>(terminals);
  return *made;
}

void run(benchmark::State& state, void (Case::*step)(), Move which) {
  Case& c = caseOf(static_cast<int>(state.range(0)));
  for (auto _ : state) {
    state.PauseTiming();
    c.move(which);
    state.ResumeTiming();
    (c.*step)();
  }
  state.counters["us_per_terminal"] = benchmark::Counter(static_cast<double>(state.iterations()) * c.terminals() * 1e-6,
                                                         benchmark::Counter::kIsRate | benchmark::Counter::kInvert);
}

void sizes(benchmark::internal::Benchmark* b) {
  for (int n : {10, 100, 1000, 10000, 50000}) b->Arg(n);
  b->Unit(benchmark::kMicrosecond);
}

BENCHMARK_CAPTURE(run, factorisation, &Case::stepFactor, Move::kOne)->Apply(sizes);
BENCHMARK_CAPTURE(run, cold, &Case::stepCold, Move::kAll)->Apply(sizes);
BENCHMARK_CAPTURE(run, warm_one_valve, &Case::stepWarm, Move::kOne)->Apply(sizes);
BENCHMARK_CAPTURE(run, warm_all_valves, &Case::stepWarm, Move::kAll)->Apply(sizes);
BENCHMARK_CAPTURE(run, warm_pressure_held, &Case::stepWarmHeld, Move::kAll)->Apply(sizes);
BENCHMARK_CAPTURE(run, warm_requests, &Case::stepWarmRequests, Move::kAll)->Apply(sizes);
BENCHMARK_CAPTURE(run, klu_cold, &Case::stepKluCold, Move::kAll)->Apply(sizes);
BENCHMARK_CAPTURE(run, klu_warm_all_valves, &Case::stepKluWarm, Move::kAll)->Apply(sizes);
BENCHMARK_CAPTURE(run, kinsol_warm_all_valves, &Case::stepKinsolWarm, Move::kAll)->Apply(sizes);

}  // namespace
}  // namespace ebbline::bench

BENCHMARK_MAIN();
