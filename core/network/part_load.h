#pragma once
// Part load as the window shows it: what each terminal is told, moved together by one hand, and one picture of it,
// solved from the picture before.

#include <memory>
#include <stop_token>
#include <vector>

#include "core/network/demand.h"
#include "core/network/results.h"
#include "core/network/solver.h"
#include "core/network/system_curve.h"

namespace ebbline::network {

/// Mean of the shares of `members` (indices in Network::terminals), weighted by design flow [%]; 0 for no members.
double meanPercent(const Network& network, const std::vector<Share>& shares, const std::vector<int>& members);

/// Moves `members` together until their mean is `percent`: below the old mean all shrink alike, above it all come
/// nearer to 100 % alike, so that no share leaves 0…100 and moving back from `base` restores every one.
std::vector<Share> movedTo(const Network& network, const std::vector<Share>& base, const std::vector<int>& members,
                           double percent);

/// Turns requests into the strokes at which the valves stand in `results`, so that nothing moves at the change, save
/// what a valve with seat leakage lets through when it was asked for less than that.
std::vector<Share> asPositions(const std::vector<Share>& shares, const Results& results);

/// Turns what each terminal is given into what it asks for, at most its design flow.
std::vector<Share> asLoads(const Network& network, const Results& results);

/// What stays while terminals move: the ground of the head–flow plot under one speed rule.
struct PartLoadGround {
  bool usable = false;
  std::string why;  ///< Reason when not usable.
  SpeedRule rule;
  double density_kg_m3 = 1000;
  double design_flow_m3s = 0;  ///< Sum of the terminals' design flows.
  HeadFlowPoint limits;        ///< Of the plot's axes.
  std::vector<HeadFlowCurve> pump_family;
  std::vector<EfficiencyLine> efficiency;
  HeadFlowCurve control;  ///< Empty: see control_why.
  std::string control_why;
  HeadFlowCurve design_load;  ///< The loop's curve with every terminal asking for its design flow.
  HeadFlowPoint design_point;
};

/// One answer with what is drawn from it.
struct PartLoadPicture {
  Request request;
  State state;
  Summary summary;         ///< usable() is checked before anything is drawn.
  Results results;         ///< Empty unless usable.
  HeadFlowCurve pump_now;  ///< Pump curve at the speed found.
  HeadFlowCurve loop_now;  ///< Traced with the valves where they are; empty when there is no flow but rounding.
  HeadFlowPoint operating;
  double delivered_m3s = 0;    ///< Sum over terminals.
  double delivered_share = 0;  ///< Of the design flow of all terminals.
  int under_supplied = 0;
  int first_under_supplied = -1;  ///< The one with the largest shortfall, index in terminals.
  double solve_ms = 0;            ///< Of the state alone, without the curves.
};

/// How the second method compares.
struct SecondOpinion {
  Summary first;
  Summary second;
  Difference difference;
  bool usable() const { return first.usable() && second.usable(); }
};

/// Both methods from their own cold starts.
SecondOpinion secondOpinion(const Network& network, const Request& request, std::stop_token stop = {});

/// Solves picture after picture of one network. Ordinary object, one thread at a time.
class PartLoadSolver {
 public:
  explicit PartLoadSolver(std::shared_ptr<const Network> network);

  /// REQUIRES: the network has at least one pump.
  PartLoadGround ground(const SpeedRule& rule, std::stop_token stop = {});
  /// Warm from the picture before; from the cold start when that fails.
  PartLoadPicture picture(const Request& request, const PartLoadGround& ground, std::stop_token stop = {});

  const Network& network() const { return *network_; }

 private:
  std::shared_ptr<const Network> network_;
  Solver solver_;
  Solver tracer_;
  State warm_;
};

}  // namespace ebbline::network
