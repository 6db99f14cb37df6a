#pragma once
// A loop closed step by step: what flow, head, speed and power follow, and who falls short. Every row is solved from
// the standard cold start, so rows are bit-identical whatever the number of threads.

#include <optional>
#include <stop_token>
#include <string>
#include <vector>

#include "core/network/results.h"
#include "core/network/solver.h"

namespace ebbline::study {

/// Which terminals close first as the load falls.
enum class ClosingOrder {
  kTogether,   ///< Every terminal asks for the same share of its design flow.
  kFarFirst,   ///< The farthest along the supply pipes close first, one after another.
  kNearFirst,  ///< The nearest close first.
};

struct SweepOptions {
  std::vector<double> loads_percent = {100, 90, 80, 70, 60, 50, 40, 30, 20, 10};  ///< Of design flow of the loop.
  ClosingOrder order = ClosingOrder::kTogether;
  bool named_states = false;   ///< Sweep the load states of the document instead of loads_percent.
  bool second_method = false;  ///< Solve each row by Hardy Cross as well.
};

/// One load state solved. Numbers other than name and load may be used only if summary.usable().
struct SweepRow {
  std::string name;         ///< Load state of the document; empty for a closing step.
  double load_percent = 0;  ///< Flow asked for, of the design flow of all terminals.
  network::Summary summary;
  double requested_m3s = 0;  ///< Sum over terminals.
  double delivered_m3s = 0;  ///< Sum over terminals.
  double flow_m3s = 0;       ///< Through the pump; of several, the sum.
  double pressure_pa = 0;    ///< Pump pressure; of several, hydraulic power over flow.
  double head_m = 0;         ///< The same as metres of the fluid.
  double speed = 0;          ///< Relative to reference.
  double shaft_power_w = 0;  ///< 0 when no pump has an efficiency curve.
  double efficiency = 0;     ///< Hydraulic over shaft power; 0 when unknown.
  bool beyond_data = false;  ///< A pump runs past the last reading of its curve.
  int num_under_supplied = 0;
  double worst_shortfall = 0;               ///< 0…1, of the terminal that misses most of its request.
  std::string worst_terminal;               ///< Its tag; empty when every request is met.
  bool essential_short = false;             ///< An essential terminal is among the under-supplied.
  std::optional<double> method_difference;  ///< Newton against Hardy Cross, relative to the largest flow; absent =
                                            ///< not asked for, or the second method did not converge.
};

/// Order in which terminals close, as indices into Network::terminals: nearest first along the supply pipes.
/// Distance is that of the drawn pipes from the pumps' discharge without passing a terminal; equal distances keep
/// the order of the document.
std::vector<int> nearestFirst(const loop::Loop& loop, const network::Network& network);

/// What each terminal asks for at one load [%] of the loop's design flow.
std::vector<network::TerminalDemand> demandsAt(const network::Network& network, double load_percent, ClosingOrder order,
                                               const std::vector<int>& nearest_first);

/// Solves every row, in parallel. Rows stand in the order asked for; a row that could not be solved says so in its
/// summary and the others stand. After a stop the rows not reached say kCancelled.
/// REQUIRES: `network` was compiled from `loop` without a fault.
std::vector<SweepRow> sweep(const loop::Loop& loop, const network::Network& network, const SweepOptions& options = {},
                            const std::stop_token& stop = {});

/// One row for a request already made: the same solve and sums, for callers that show a single state.
SweepRow solveRow(const network::Network& network, const network::Request& request, bool second_method,
                  const std::stop_token& stop = {});

}  // namespace ebbline::study
