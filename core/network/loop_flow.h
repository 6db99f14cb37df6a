#pragma once
// Flows of one network at one speed by loop corrections: the inner part of Hardy Cross.

#include <limits>
#include <stop_token>
#include <vector>

#include "core/network/edge_law.h"
#include "core/network/fundamental_loops.h"

namespace ebbline::network {

/// Loss and slope of every edge at the flows where they were taken.
struct EdgeLosses {
  std::vector<double> loss_pa;
  std::vector<double> slope_pa_s_m3;
};

/// Correction of one loop [m³/s]: minus the sum of losses round it over the sum of their slopes. Cross, H. (1936),
/// "Analysis of flow in networks of conduits or conductors", Univ. Illinois Bulletin 286, from memory; the slope
/// stands for n·h/q, which it equals for a power law.
double loopCorrection(const LoopPath& loop, const EdgeLosses& losses);

/// One round as textbooks print it: all loops corrected together, each from the old flows. Returns the corrections
/// and adds them to the flows.
std::vector<double> roundTogether(const std::vector<LoopPath>& loops, const EdgeLosses& losses,
                                  std::vector<double>& edge_flow_m3s);

/// Corrects flows loop by loop until every loop sum is small. Keeps its flows between calls as the next start.
class LoopFlow {
 public:
  /// REQUIRES: `network` and `laws` outlive the object.
  LoopFlow(const Network& network, EdgeLaws& laws, std::vector<double> start_m3s);

  struct End {
    bool converged = false;
    int rounds = 0;
    LoopSum worst;
  };
  /// Rounds until no loop sum exceeds the tolerance times the pumps' pressure (without pumps: the largest loss).
  End run(double speed_squared, double relative_tolerance, int most_rounds, const std::stop_token& stop);

  /// Imbalance that no tree flow can take up [m³/s]: the draws of some part do not add up.
  double unbalanced() const { return unbalanced_m3s_; }
  const std::vector<double>& flows() const { return flow_; }
  const EdgeLosses& losses() const { return losses_; }
  const FundamentalLoops& loops() const { return loops_; }
  std::vector<Hold> holds() const;

 private:
  static std::vector<int> ranks(const Network& network, const EdgeLaws& laws, const std::vector<char>& late);
  bool limited(int edge) const { return laws_->limit(edge) < std::numeric_limits<double>::infinity(); }
  void findPaths();
  void takeLosses();
  void takeLoss(int edge);
  double withinLimits(const LoopPath& path, double correction, const std::vector<double>& flow) const;
  double correctionOf(double sum, double slope) const;
  void roundOneByOne();
  void roundOnTangents();
  void moveBlockedToChords();

  const Network* network_;
  EdgeLaws* laws_;
  std::vector<char> late_;  // edges put into the tree last, because they stood at their limit
  FundamentalLoops loops_;
  std::vector<LoopPath> paths_;
  std::vector<double> flow_;
  EdgeLosses losses_;
  double speed_squared_ = 1;
  double largest_flow_ = 0;
  double unbalanced_m3s_ = 0;
};

}  // namespace ebbline::network
