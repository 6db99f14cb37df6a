#include <cmath>
#include <numeric>

#include "core/network/newton.h"

namespace ebbline::network {

namespace {

int rootOf(std::vector<int>& parent, int i) {
  while (parent[i] != i) i = parent[i] = parent[parent[i]];
  return i;
}

}  // namespace

/// True if no terminal can cut anything off: then parts never need to be looked for.
bool Newton::alwaysConnected() const {
  std::vector<int> parent(system_.size() + 1);
  std::iota(parent.begin(), parent.end(), 0);
  int num_parts = static_cast<int>(parent.size());
  for (int e = 0; e < static_cast<int>(rows_.size()); ++e) {
    if (laws_.alwaysShut(e) || laws_.terminal(e) >= 0) continue;
    const int a = rootOf(parent, rows_[e].from);
    const int b = rootOf(parent, rows_[e].to);
    if (a == b) continue;
    parent[a] = b;
    --num_parts;
  }
  return num_parts == 1;
}

/// Ties one node of every part that held and shut edges cut off from the datum; its level is then not determined, its
/// flows are. If what is held does not balance over such a part, the terminals that bring (or take) too much are
/// opened: one of them gets less than it asks for. False and refused when there is none.
bool Newton::findParts() {
  const int n = system_.size();
  std::vector<int> parent(n + 1);
  std::vector<double> gain(n + 1);
  for (int attempt = 0;; ++attempt) {
    std::iota(parent.begin(), parent.end(), 0);
    for (const Row& row : rows_)
      if (row.standing == Standing::kOpen) parent[rootOf(parent, row.from)] = rootOf(parent, row.to);
    std::fill(gain.begin(), gain.end(), 0.0);
    for (int k = 0; k < n; ++k) gain[rootOf(parent, k)] -= draw_[k];
    for (const Row& row : rows_) {
      if (row.standing != Standing::kHeld) continue;
      gain[rootOf(parent, row.to)] += row.flow;
      gain[rootOf(parent, row.from)] -= row.flow;
    }
    const int datum_part = rootOf(parent, n);
    const double negligible = 1e-12 * reference_flow_;
    int opened = 0;
    for (int e = 0; e < static_cast<int>(rows_.size()); ++e) {
      if (rows_[e].standing != Standing::kHeld) continue;
      const int to = rootOf(parent, rows_[e].to);
      const int from = rootOf(parent, rows_[e].from);
      if (to == from) continue;
      const bool too_much = to != datum_part && gain[to] > negligible;
      const bool too_little = from != datum_part && gain[from] < -negligible;
      if (!too_much && !too_little) continue;
      openEdge(e, limit_[rows_[e].terminal]);
      ++opened;
    }
    if (opened > 0) continue;
    pinned_.clear();
    for (int k = 0; k < n; ++k) {
      if (rootOf(parent, k) != k && parent[k] != k) continue;
      if (k == datum_part) continue;
      if (std::abs(gain[k]) > negligible) {
        text::Remark remark{text::Code::kSolveDrawUnbalanced, {}, {}};
        for (const EndPlace& end : network_.ends)
          if (end.node >= 0 && system_.step(end.node) == k) remark.place.id = end.end.joint;
        refuse(std::move(remark));
        return false;
      }
      pinned_.push_back(k);
    }
    return true;
  }
}

}  // namespace ebbline::network
