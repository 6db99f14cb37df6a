// One table of what the solver costs, by one command: bench_table [--sizes=10,100,...] [--seconds=S].
// All methods are interleaved in one process, since a machine may slow down for whole minutes; medians are compared.
// Time is that of the thread on the processor: on a loaded machine wall time would charge long calls with what others
// do meanwhile, and spare short ones.
// Ends with 1 when a "must" is missed.

#include <fmt/core.h>

#include <algorithm>
#include <chrono>
#include <cstdlib>
#include <ctime>
#include <functional>
#include <map>
#include <string>
#include <string_view>
#include <vector>

#include "tests/bench/cases.h"

namespace ebbline::bench {
namespace {

using Clock = std::chrono::steady_clock;

double threadMicroseconds() {
  timespec now{};
  clock_gettime(CLOCK_THREAD_CPUTIME_ID, &now);
  return 1e6 * static_cast<double>(now.tv_sec) + 1e-3 * static_cast<double>(now.tv_nsec);
}

struct Timed {
  std::string name;
  std::function<void(Case&)> before;  // not timed
  std::function<void(Case&)> step;
  int every = 1;            // slow comparisons are run in one of so many turns
  bool repeatable = false;  // may be done several times in one timing, so that the clock does not count
};

std::vector<Timed> whatIsTimed() {
  const auto all = [](Case& c) { c.move(Move::kAll); };
  const auto none = [](Case&) {};
  return {
      {"F", none, &Case::stepFactor, 1, true},
      {"warm all", all, &Case::stepWarm, 1, false},
      {"klu warm", none, &Case::stepKluWarm, 1, false},
      {"held", none, &Case::stepWarmHeld, 1, false},
      {"requests", none, &Case::stepWarmRequests, 1, false},
      {"kinsol warm", none, &Case::stepKinsolWarm, 4, false},
      {"cold", none, &Case::stepCold, 1, false},
      {"klu cold", none, &Case::stepKluCold, 2, false},
      {"warm one", [](Case& c) { c.move(Move::kOne); }, &Case::stepWarm, 1, false},
  };
}

double median(std::vector<double> values) {
  if (values.empty()) return 0;
  std::nth_element(values.begin(), values.begin() + static_cast<long>(values.size() / 2), values.end());
  return values[values.size() / 2];
}

// What was taken, microseconds: by name, one entry a turn (0 where it was left out of that turn).
class Taken {
 public:
  void add(const std::string& name, double microseconds) { taken_[name].push_back(microseconds); }
  double median(const std::string& name) const {
    std::vector<double> values;
    for (double value : taken_.at(name))
      if (value > 0) values.push_back(value);
    return bench::median(values);
  }
  // Median over turns of a/b, each pair measured within one turn.
  double ratio(const std::string& a, const std::string& b) const {
    std::vector<double> ratios;
    for (std::size_t turn = 0; turn < taken_.at(a).size(); ++turn)
      if (taken_.at(a)[turn] > 0 && taken_.at(b)[turn] > 0) ratios.push_back(taken_.at(a)[turn] / taken_.at(b)[turn]);
    return bench::median(ratios);
  }

 private:
  std::map<std::string, std::vector<double>> taken_;
};

Taken measure(Case& c, double seconds) {
  constexpr int kLeastTurns = 5;
  constexpr int kMostTurns = 400;
  const std::vector<Timed> timed = whatIsTimed();
  Taken taken;
  const auto begin = Clock::now();
  for (int turn = 0; turn < kMostTurns; ++turn) {
    if (turn >= kLeastTurns && std::chrono::duration<double>(Clock::now() - begin).count() > seconds) break;
    for (const Timed& what : timed) {
      if (turn % what.every != 0) {
        taken.add(what.name, 0);
        continue;
      }
      what.before(c);
      const int repeats = what.repeatable ? 1 + 2000 / c.terminals() : 1;
      const double start = threadMicroseconds();
      for (int i = 0; i < repeats; ++i) what.step(c);
      taken.add(what.name, (threadMicroseconds() - start) / repeats);
    }
  }
  return taken;
}

// A row of the targets: the ratio found against what it must be and what it may reach.
bool target(const char* what, double found, double must, double reach, bool more_is_better) {
  const auto met = [&](double limit) { return more_is_better ? found >= limit : found <= limit; };
  fmt::print("| {:<58} | {:>8.2f} | {} {:>5.2f} | {} {:>5.2f} | {:<7} |\n", what, found, more_is_better ? "≥" : "≤",
             must, more_is_better ? "≥" : "≤", reach,
             met(reach)  ? "reached"
             : met(must) ? "met"
                         : "MISSED");
  return met(must);
}

std::vector<int> sizesFrom(std::string_view list) {
  std::vector<int> sizes;
  while (!list.empty()) {
    sizes.push_back(std::atoi(std::string(list).c_str()));
    const auto comma = list.find(',');
    list = comma == std::string_view::npos ? std::string_view{} : list.substr(comma + 1);
  }
  return sizes;
}

void printSize(const Case& c, const Taken& t) {
  const auto in_f = [&](const char* name) { return t.ratio(name, "F"); };
  fmt::print(
      "| {:>6} | {:>6} | {:>9.1f} | {:>5.1f} {:>5.1f} {:>5.1f} | {:>5.1f} {:>5.1f} | {:>6.1f} {:>6.1f} | {:>6.1f} | "
      "{:>6.3f} | {:>2} | {:.0e} |\n",
      c.terminals(), c.nodes(), t.median("F"), in_f("cold"), in_f("warm one"), in_f("warm all"), in_f("held"),
      in_f("requests"), in_f("klu cold"), in_f("klu warm"), in_f("kinsol warm"), t.median("warm all") / c.terminals(),
      c.warmRounds(), c.disagreement());
}

int run(const std::vector<int>& sizes, double seconds) {
  fmt::print(
      "F = one numeric Eigen SimplicialLDLT factorisation of the lumped node matrix; all other times in F.\n\n"
      "| termin | nodes  |      F µs |  cold   one   all |  held  req. | KLU c. KLU w. | KINSOL | µs/ter | r. | "
      "diff. |\n|---|---|---|---|---|---|---|---|---|---|\n");
  std::map<int, Taken> all;
  for (int terminals : sizes) {
    Case c(terminals);
    const Taken& t = all[terminals] = measure(c, seconds);
    c.move(Move::kAll);
    c.stepWarm();
    c.stepKluWarm();
    c.stepKinsolWarm();
    printSize(c, t);
    std::fflush(stdout);
  }
  double warm = 0, klu = 1e300, kinsol = 1e300, held = 0, requests = 0;
  for (const auto& [terminals, t] : all) {
    if (terminals < 100) continue;
    warm = std::max(warm, t.ratio("warm all", "F"));
    klu = std::min(klu, t.ratio("klu warm", "warm all"));
    held = std::max(held, t.ratio("held", "warm all"));
    requests = std::max(requests, t.ratio("requests", "warm all"));
    if (terminals >= 1000) kinsol = std::min(kinsol, t.ratio("kinsol warm", "warm all"));
  }
  fmt::print(
      "\n| what (worst of the sizes above, N ≥ 100)                   |    found |    must |   reach | verdict |\n"
      "|---|---|---|---|---|\n");
  bool good = target("warm solve, all valves moved, in F", warm, 16, 7, false);
  good &= target("hand-written Newton on KLU / ours, warm", klu, 1.2, 3, true);
  if (kinsol < 1e300) good &= target("KINSOL + KLU / ours, warm, N ≥ 1,000", kinsol, 9, 30, true);
  if (all.count(1000) && all.count(50000))
    good &= target("microseconds a terminal, 50,000 against 1,000",
                   all[50000].median("warm all") / 50000 / (all[1000].median("warm all") / 1000), 1.3, 1.15, false);
  good &= target("pressure set-point against fixed speed", held, 1.25, 1.1, false);
  good &= target("requested loads against given positions", requests, 2, 1.2, false);
  return good ? 0 : 1;
}

}  // namespace
}  // namespace ebbline::bench

int main(int argc, char** argv) {
  std::vector<int> sizes = {10, 100, 1000, 10000, 50000};
  double seconds = 4;
  for (int i = 1; i < argc; ++i) {
    const std::string_view word = argv[i];
    if (word.rfind("--sizes=", 0) == 0) sizes = ebbline::bench::sizesFrom(word.substr(8));
    if (word.rfind("--seconds=", 0) == 0) seconds = std::atof(argv[i] + 10);
  }
  return ebbline::bench::run(sizes, seconds);
}
