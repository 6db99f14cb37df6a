#pragma once
// Flows and pressures of a network: semi-smooth Newton on node pressures, sparse LDLᵀ, symbolic factor kept.

#include <memory>
#include <optional>
#include <stop_token>
#include <string>
#include <vector>

#include "core/network/network.h"

namespace ebbline::network {

/// What one terminal is told: ask for a flow and throttle to it, or stand at a stroke.
struct TerminalDemand {
  loop::DemandKind kind = loop::DemandKind::kRequest;
  double flow_m3s = 0;  ///< kRequest: asked flow; 0 = shut both ways.
  double stroke = 1;    ///< kPosition: stroke 0…1.
};

/// Two taps whose pressure difference is measured [indices into Network::ends].
struct TapPair {
  int high = 0;
  int low = 0;
  double set_point_pa = 0;
  double high_bore_m = 0;  ///< For the velocity head at the tap; 0 = no correction.
  double low_bore_m = 0;
};

/// What sets the common speed of the pumps. The network knows rules, never a strategy's name.
struct SpeedRule {
  enum class Kind {
    kFixed,         ///< speed is given.
    kHoldPressure,  ///< lowest speed at which every tap pair is at or above its set-point, within the bounds.
  };
  Kind kind = Kind::kFixed;
  double speed = 1;  ///< kFixed: relative to reference speed.
  std::vector<TapPair> taps;
  double minimum_speed = 0.2;
  double maximum_speed = 1.0;
};

struct Request {
  std::vector<TerminalDemand> terminals;  ///< One per Network::terminals.
  SpeedRule speed;
};

/// Flows and pressures. Node pressures are total pressures relative to the datum node, without elevation.
struct State {
  std::vector<double> node_pressure_pa;
  std::vector<double> edge_flow_m3s;
  double speed = 1;
  // Warm-start memory of the solver; not part of the answer.
  std::vector<char> throttled;  ///< Per terminal: its valve is holding the requested flow.
  bool warm = false;
};

enum class Ended {
  kNotCalled,
  kConverged,     ///< Every residual within tolerance; the state is the answer.
  kNotConverged,  ///< Limit of rounds; the state is the last iterate, do not use it.
  kRefused,       ///< Nothing computed: the request cannot be met by any flow; see remark.
  kCancelled,     ///< Stop was asked for; the state is the last iterate, do not use it.
};

/// Which bound, if any, kept the speed from its rule.
enum class SpeedBound { kNone, kAtMinimum, kAtMaximum };

/// How a solve ended. Every caller checks usable() before drawing.
struct Summary {
  Ended ended = Ended::kNotCalled;
  std::string why = "not solved yet";
  int rounds = 0;
  double flow_residual = 0;  ///< Largest imbalance at a node / largest flow.
  int flow_residual_node = -1;
  double pressure_residual = 0;     ///< Largest sum round a fundamental loop / pump pressure.
  int pressure_residual_edge = -1;  ///< The edge closing that loop.
  SpeedBound bound = SpeedBound::kNone;
  int governing_tap = -1;  ///< kHoldPressure: the tap pair that sets the speed.
  std::optional<text::Remark> remark;
  bool usable() const { return ended == Ended::kConverged; }
};

/// Tolerances; each stands in the inequality named beside it.
struct Tolerance {
  double flow = 1e-10;      ///< |imbalance| ≤ flow · largest |q|
  double pressure = 1e-10;  ///< |loop sum| ≤ pressure · pump pressure
  int most_rounds = 60;
};

/// Solves one network again and again. Ordinary object, one per thread; keeps the symbolic factor between calls.
class Solver {
 public:
  explicit Solver(const Network& network, Tolerance tolerance = {});  ///< `network` must outlive the solver.
  ~Solver();
  Solver(Solver&&) noexcept;
  Solver& operator=(Solver&&) noexcept;

  /// Solves `request`. A warm `state` is used as the start; an empty or cold one gives the standard cold start, so
  /// that equal requests give bit-identical answers.
  Summary solve(const Request& request, State& state, std::stop_token stop = {});

 private:
  struct Work;
  std::unique_ptr<Work> work_;
};

/// The second method: Hardy Cross (1936) loop corrections from its own starting flows, same laws, never from Newton's
/// answer.
class HardyCross {
 public:
  explicit HardyCross(const Network& network);
  ~HardyCross();
  Summary solve(const Request& request, State& state, std::stop_token stop = {});

 private:
  struct Work;
  std::unique_ptr<Work> work_;
};

/// Largest difference of edge flows between two states, relative to the largest flow, and the edge where it is.
struct Difference {
  double relative = 0;
  int edge = -1;
};
Difference largestDifference(const State& a, const State& b);

}  // namespace ebbline::network
