#pragma once
// The symmetric system of a Newton round: node conductances, factorised as L D Lᵀ along a list of eliminations that is
// worked out once per network. Internal to core/network, tests and the benchmark.
//
// Why not Eigen's SimplicialLDLT itself: it copies and permutes the matrix and walks its elimination tree afresh in
// every factorisation. Here conductances are written where they are used. The order is Eigen's AMD, followed by a
// postorder of the elimination tree so that what is used together lies together.

#include <cstdint>
#include <vector>

#include "core/network/network.h"

namespace ebbline::network {

/// Unknowns are numbered in the order of elimination ("steps"); the datum node is the one past the last.
class LinearSystem {
 public:
  explicit LinearSystem(const Network& network);

  /// Number of unknowns.
  int size() const { return static_cast<int>(diagonal_.size()); }
  /// Step of a node; size() for the datum node.
  int step(int node) const { return step_[node]; }

  /// Sets all conductances to 0.
  void clear();
  /// Adds the conductance of an edge.
  void add(int edge, double conductance) {
    const Place& place = places_[edge];
    if (place.first >= 0) diagonal_[place.first] += conductance;
    if (place.second >= 0) diagonal_[place.second] += conductance;
    if (place.off >= 0) off_[place.off] -= conductance;
  }
  /// Ties an unknown to 0, where nothing else does: a part of the network without datum.
  void pin(int step) { diagonal_[step] = diagonal_[step] > 0 ? 2 * diagonal_[step] : 1; }

  /// Factorises in place; false when a pivot is not positive and finite. clear() must come before the next add().
  bool factorise();
  /// Solves for a right-hand side by steps; in place. REQUIRES: factorise() was true; right.size() >= size().
  void solve(std::vector<double>& right) const;

  /// Entries of L below the diagonal.
  int numEntries() const { return static_cast<int>(row_.size()); }

 private:
  struct Place {
    int first = -1;  // steps of the ends; −1: the datum, or both ends are one node
    int second = -1;
    int off = -1;  // entry of L, −1: none
  };
  void order(const Network& network);
  void findEntries(const Network& network);
  void listTargets();
  void placeEdges(const Network& network);
  void eliminateByList();
  void eliminateBySearch();
  int entry(int column, int row) const;

  std::vector<int> step_;    // of each node
  std::vector<int> parent_;  // elimination tree, by steps
  std::vector<int> first_;   // entries of column k: first_[k] … first_[k + 1]
  std::vector<int> row_;
  std::vector<std::int32_t> target_;  // where each product of a column goes: entry, or ~step for the diagonal
  bool listed_ = true;
  std::vector<Place> places_;
  std::vector<double> diagonal_;  // after factorise(): 1/d
  std::vector<double> off_;
};

}  // namespace ebbline::network
