#pragma once
// A State told in the user's things: what flows through each pipe, what each terminal gets, what the pump does.

#include <optional>
#include <string>
#include <vector>

#include "core/network/solver.h"

namespace ebbline::network {

/// Pressure at one end of the drawing.
struct EndResult {
  loop::End end;
  double elevation_m = 0;
  double pressure_pa = 0;             ///< Total, relative to the datum, without elevation.
  std::optional<double> gauge_pa;     ///< Static gauge pressure; absent without a vessel.
  bool determined = true;             ///< False: cut off behind shut parts, no pressure can be told.
};

/// Flow through one drawn pipe, plant, pump or valve.
struct PartResult {
  Element::Kind kind = Element::Kind::kPipe;
  loop::Id id = 0;
  loop::Side side = loop::Side::kSingle;
  std::string tag;
  double flow_m3s = 0;         ///< Positive in the drawn direction (from → to).
  double loss_pa = 0;          ///< Drop of total pressure in the drawn direction; negative for a pump.
  double velocity_ms = 0;      ///< 0 where the part has no bore.
  double gradient_pa_m = 0;    ///< Friction of the straight pipe per metre; 0 where it has no length.
};

struct TerminalResult {
  loop::Id id = 0;
  std::string tag;
  double requested_m3s = 0;      ///< Under a given position: its design flow.
  double delivered_m3s = 0;
  double stroke = 0;             ///< Of the control valve, 0…1.
  double available_pa = 0;       ///< Across the whole terminal.
  double valve_pa = 0;           ///< Across its control valve.
  double shortfall = 0;          ///< (requested − delivered)/requested where a request is not met, else 0.
  bool under_supplied = false;   ///< Shortfall beyond 0.1 %.
};

struct PumpResult {
  loop::Id id = 0;
  std::string tag;
  double speed = 0;              ///< Relative to reference.
  double flow_m3s = 0;
  double head_m = 0;
  double pressure_pa = 0;
  double shaft_power_w = 0;      ///< 0 when the curve has no efficiency.
  double efficiency = 0;
  bool beyond_data = false;      ///< Operating point past the last reading of its curve.
};

struct Results {
  std::vector<EndResult> ends;            ///< Order of Network::ends.
  std::vector<PartResult> parts;          ///< Order of Network::elements.
  std::vector<TerminalResult> terminals;  ///< Order of Network::terminals.
  std::vector<PumpResult> pumps;          ///< Order of Network::pumps.
  std::vector<double> tap_pressure_pa;    ///< Per tap pair of the request: what it reads.
};

/// REQUIRES: `state` was solved for `request` on `network`.
Results resultsOf(const Network& network, const Request& request, const State& state);

}  // namespace ebbline::network
