#pragma once
// The laws once more, written from the equations alone and evaluated on the drawing, not on the compiled network: no
// line of core/part, core/catalogue or of the solvers is used. Slow and plain on purpose.

#include <string>

#include "core/loop/loop.h"
#include "core/network/solver.h"

namespace ebbline::test {

/// Darcy friction factor: 64/Re up to 2000, Colebrook (1939; 3.7 and 2.51) from 4000 by bisection.
/// Between them Ebbline's own blend as its header words it.
long double independentFriction(long double reynolds, long double relative_roughness);

/// How far a state is from being the answer, judged on the drawing.
struct Verdict {
  double flow = 0;      ///< Largest imbalance at an end / largest flow.
  double pressure = 0;  ///< Largest unmet sum round a loop of the drawing / pump pressure.
  double control = 0;   ///< Distance of the governing reading from its set-point / pump pressure; 0 at fixed speed.
  double excess = 0;  ///< Largest (flow − request)/largest flow of a requesting terminal, and flow through shut parts.
  std::string worst;  ///< Tag of the part closing the worst loop.
};

/// Judges `state` for the only load state of `loop`. REQUIRES: bores typed, fluid given, pump curves of 2 or 3
/// points: what randomLoop draws.
Verdict judge(const loop::Loop& loop, const network::Network& network, const network::State& state);

}  // namespace ebbline::test
