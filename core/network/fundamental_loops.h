#pragma once
// Spanning tree of each connected part of a network, and the loops its chords close. Hardy Cross corrects flows round
// these loops, and every solve reports its pressure residual round them.

#include <vector>

#include "core/network/network.h"

namespace ebbline::network {

/// One edge of a loop, and whether the loop runs along it (+1) or against it (−1).
struct LoopStep {
  int edge = 0;
  int sign = 1;
};

/// A loop that closes: its steps in order, each beginning where the one before ended.
using LoopPath = std::vector<LoopStep>;

/// Largest sum round a loop [Pa] and the chord closing it; edge −1: no loop was summed.
struct LoopSum {
  double largest_pa = 0;
  int edge = -1;
};

/// Whether an edge is bound to its own loss, or its control valve takes up what is left over.
enum class Hold : char {
  kFree,     ///< Loss as its law says.
  kAlong,    ///< Flow held at its limit along the edge: any larger drop along the edge is taken up.
  kAgainst,  ///< The same against the edge's direction.
  kShut,     ///< No flow: any difference is taken up.
};

/// Ranks of edges for the tree: a lower rank goes in first, kLeftOut never goes in and closes no loop (a shut edge).
inline constexpr int kLeftOut = -1;

/// Pipes, plant and pumps 0, edges with a terminal 1, so that terminals are chords wherever the tree allows it.
std::vector<int> terminalsLast(const Network& network);

/// Built once per network and set of shut edges; all arrays are in the order of the walk, so each use is one pass.
class FundamentalLoops {
 public:
  explicit FundamentalLoops(const Network& network) : FundamentalLoops(network, terminalsLast(network)) {}
  /// REQUIRES: one rank per edge, kLeftOut or ≥ 0. `network` must outlive the object.
  FundamentalLoops(const Network& network, const std::vector<int>& rank);

  /// Edges outside the tree, in the order of the network; each closes one loop.
  const std::vector<int>& chords() const { return chords_; }
  /// Number of parts that are not connected with each other.
  int numParts() const { return num_parts_; }
  /// Part of the network that a node belongs to, from 0.
  int partOf(int node) const { return part_[node]; }
  bool inTree(int edge) const { return in_tree_[edge] != 0; }

  /// The loop of chord number `chord`: along the chord, then back through the tree.
  LoopPath loop(int chord) const;

  /// Sets the flows of the tree edges so that flow is kept at every node, given the flows of chords and left-out
  /// edges and the draws. Returns the largest imbalance left at the root of a part [m³/s]: not 0 when the draws of
  /// that part do not add up.
  double setTreeFlows(std::vector<double>& edge_flow_m3s) const;

  /// Pressure of every node from the losses of the tree edges [Pa]: 0 at the root of its part (the datum in its own).
  void nodePressures(const std::vector<double>& edge_loss_pa, std::vector<double>& node_pressure_pa) const;

  /// Largest |sum of losses round a loop|. A chord that is held counts only where its loss is more than there is.
  /// Empty `hold` = all free, else one per edge. REQUIRES: held edges are chords or bridges.
  LoopSum largestSum(const std::vector<double>& edge_loss_pa, const std::vector<Hold>& hold) const;

 private:
  struct Link {
    int node = 0;    // reached over this link
    int parent = 0;  // from this node
    int edge = 0;
    int sign = 1;  // +1: the edge runs from parent to node
  };
  void grow(const std::vector<int>& rank);

  const Network* network_;
  std::vector<Link> links_;        // in the order of the walk, roots left out
  std::vector<int> link_of_node_;  // index in links_; −1 for roots
  std::vector<int> depth_;
  std::vector<int> part_;
  std::vector<char> in_tree_;
  std::vector<int> chords_;
  int num_parts_ = 0;
};

}  // namespace ebbline::network
