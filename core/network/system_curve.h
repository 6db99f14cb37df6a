#pragma once
// Curves in the head–flow plane of one pump, ready to be drawn: pump curves by the affinity laws, the loop's own curve
// traced by solving, the path a control rule takes, lines of equal pump efficiency. Head is told as pressure [Pa].

#include <optional>
#include <stop_token>
#include <vector>

#include "core/network/results.h"
#include "core/network/solver.h"

namespace ebbline::network {

/// One point of the head–flow plane.
struct HeadFlowPoint {
  double flow_m3s = 0;
  double pressure_pa = 0;
  bool operator==(const HeadFlowPoint&) const = default;
};

/// Head of the fluid itself [m] that stands for a pressure.
double headMetres(double pressure_pa, double density_kg_m3);

/// A line of the head–flow plane, flows not falling. `speed` is relative to reference where one speed holds, else 0.
struct HeadFlowCurve {
  double speed = 0;
  std::vector<HeadFlowPoint> points;
  bool empty() const { return points.empty(); }
};

/// Pump curve at one relative speed, from zero flow to the last reading of its data (or until the head is used up).
/// REQUIRES: speed > 0, num_points >= 2.
HeadFlowCurve pumpCurve(const PumpLaw& pump, double density_kg_m3, double speed, int num_points = 32);

/// Pump curves at maximum speed and at each lower round 10 % down to the minimum speed, fastest first.
std::vector<HeadFlowCurve> pumpFamily(const PumpLaw& pump, double density_kg_m3);

/// Lines of equal efficiency between two speeds. By the affinity laws efficiency is kept along Q ~ n, H ~ n².
struct EfficiencyLine {
  double efficiency = 0;  ///< 0…1
  HeadFlowCurve curve;    ///< From the lowest to the highest speed.
};
/// Empty when the pump has no efficiency data. At most `most` lines at round percentages, peak side included.
std::vector<EfficiencyLine> efficiencyLines(const PumpLaw& pump, double density_kg_m3, int most = 8);

/// The request with each terminal's control valve frozen at the stroke found in `results`; a terminal asked for
/// nothing stays shut.
/// REQUIRES: `results` belong to `request`.
Request frozenAt(const Request& request, const Results& results);

/// How the tracing of curves ended; `curve` is empty unless usable.
struct Traced {
  HeadFlowCurve curve;
  Summary summary;  ///< Of the last solve done.
  bool usable() const { return summary.usable() && !curve.empty(); }
};

/// The loop's own curve as one pump sees it: valves stay where they are, the speed is varied, each point is a solve.
/// Between solved points Δp/q² is taken linear in q, which is exact where it is constant and within the drawn line
/// else. The curve starts at zero flow and ends near `top_pressure_pa`, which may lie beyond the pump's top speed.
/// REQUIRES: `state` and `results` belong to `request` and were usable; num_solves >= 2.
Traced systemCurve(Solver& solver, const Network& network, const Request& request, const State& state,
                   const Results& results, double top_pressure_pa, int pump = 0, int num_solves = 5,
                   std::stop_token stop = {});

/// The path of the operating point under the request's speed rule when every terminal asks for the same share of its
/// design flow, from all to nearly nothing. Each point is a solve from the one before.
Traced controlPath(Solver& solver, const Network& network, const SpeedRule& rule, int pump = 0, int num_solves = 14,
                   std::stop_token stop = {});

/// Limits of the plane that hold every state of this pump: the largest flow and pressure worth showing.
HeadFlowPoint planeLimits(const PumpLaw& pump, double density_kg_m3, const HeadFlowPoint& design);

}  // namespace ebbline::network
