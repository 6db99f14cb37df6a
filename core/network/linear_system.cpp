#include "core/network/linear_system.h"

#include <algorithm>
#include <cmath>

#include <Eigen/OrderingMethods>
#include <Eigen/SparseCore>

namespace ebbline::network {

namespace {

/// Most products written out one by one; a denser network (large meshes) finds its targets while eliminating.
constexpr std::int64_t kMostTargets = 20'000'000;

using Lists = std::vector<std::vector<int>>;

/// Neighbours of each unknown under a numbering of the nodes; the datum (number = count) is left out.
Lists neighbours(const Network& network, const std::vector<int>& number, int count) {
  Lists lists(count);
  for (const Edge& edge : network.edges) {
    const int a = number[edge.from];
    const int b = number[edge.to];
    if (a == b || a == count || b == count) continue;
    lists[a].push_back(b);
    lists[b].push_back(a);
  }
  for (std::vector<int>& list : lists) {
    std::sort(list.begin(), list.end());
    list.erase(std::unique(list.begin(), list.end()), list.end());
  }
  return lists;
}

/// Numbers of the nodes as they come, the datum last.
std::vector<int> asTheyCome(const Network& network) {
  std::vector<int> number(network.num_nodes);
  for (int node = 0; node < network.num_nodes; ++node) number[node] = node < network.datum_node ? node : node - 1;
  number[network.datum_node] = network.num_nodes - 1;
  return number;
}

/// Position of each unknown in Eigen's approximate minimum degree order.
std::vector<int> minimumDegree(const Lists& lists) {
  const int n = static_cast<int>(lists.size());
  std::vector<Eigen::Triplet<double>> entries;
  for (int k = 0; k < n; ++k) {
    entries.emplace_back(k, k, 1.0);
    for (const int j : lists[k]) entries.emplace_back(j, k, 1.0);
  }
  Eigen::SparseMatrix<double> pattern(n, n);
  pattern.setFromTriplets(entries.begin(), entries.end());
  Eigen::PermutationMatrix<Eigen::Dynamic, Eigen::Dynamic, int> inverse;
  Eigen::AMDOrdering<int>()(pattern, inverse);
  std::vector<int> position(n);
  for (int k = 0; k < n; ++k) position[inverse.indices()[k]] = k;
  return position;
}

/// Elimination tree (Liu 1986, with compressed paths; from memory).
std::vector<int> eliminationTree(const Lists& lists) {
  const int n = static_cast<int>(lists.size());
  std::vector<int> parent(n, -1);
  std::vector<int> ancestor(n, -1);
  for (int k = 0; k < n; ++k)
    for (int j : lists[k]) {
      while (j >= 0 && j < k) {
        const int next = ancestor[j];
        ancestor[j] = k;
        if (next < 0) parent[j] = k;
        j = next;
      }
    }
  return parent;
}

/// Position of each unknown when children come just before their parents.
std::vector<int> postorder(const std::vector<int>& parent) {
  const int n = static_cast<int>(parent.size());
  std::vector<int> first_child(n + 1, -1);
  std::vector<int> next_sibling(n, -1);
  for (int k = n - 1; k >= 0; --k) {
    const int p = parent[k] < 0 ? n : parent[k];
    next_sibling[k] = first_child[p];
    first_child[p] = k;
  }
  std::vector<int> position(n);
  std::vector<int> stack;
  int count = 0;
  for (int root = first_child[n]; root >= 0; root = next_sibling[root]) {
    stack.push_back(root);
    while (!stack.empty()) {
      const int k = stack.back();
      if (first_child[k] >= 0) {
        stack.push_back(first_child[k]);
        first_child[k] = -1;
        continue;
      }
      position[k] = count++;
      stack.pop_back();
      if (!stack.empty() && next_sibling[k] >= 0) stack.push_back(next_sibling[k]);
    }
  }
  return position;
}

}  // namespace

LinearSystem::LinearSystem(const Network& network) {
  if (network.num_nodes == 0) return;
  order(network);
  findEntries(network);
  listTargets();
  placeEdges(network);
}

void LinearSystem::order(const Network& network) {
  const int n = network.num_nodes - 1;
  diagonal_.assign(n, 0.0);
  step_ = asTheyCome(network);
  for (int pass = network.ordered ? 2 : 0; pass < 2 && n > 0; ++pass) {
    const Lists lists = neighbours(network, step_, n);
    const std::vector<int> position = pass == 0 ? minimumDegree(lists) : postorder(eliminationTree(lists));
    for (int& step : step_)
      if (step < n) step = position[step];
  }
}

/// Rows of each column of L: those of the matrix and of the columns whose parent it is.
void LinearSystem::findEntries(const Network& network) {
  const int n = size();
  Lists rows = neighbours(network, step_, n);
  parent_ = eliminationTree(rows);
  for (int k = 0; k < n; ++k) rows[k].erase(rows[k].begin(), std::upper_bound(rows[k].begin(), rows[k].end(), k));
  first_.assign(1, 0);
  std::vector<int> merged;
  for (int k = 0; k < n; ++k) {
    row_.insert(row_.end(), rows[k].begin(), rows[k].end());
    first_.push_back(static_cast<int>(row_.size()));
    if (parent_[k] < 0) continue;
    std::vector<int>& up = rows[parent_[k]];
    merged.clear();
    std::set_union(up.begin(), up.end(), rows[k].begin() + 1, rows[k].end(), std::back_inserter(merged));
    up = merged;
    std::vector<int>().swap(rows[k]);
  }
  off_.assign(row_.size(), 0.0);
}

int LinearSystem::entry(int column, int row) const {
  const auto begin = row_.begin() + first_[column];
  const auto end = row_.begin() + first_[column + 1];
  return static_cast<int>(std::lower_bound(begin, end, row) - row_.begin());
}

void LinearSystem::listTargets() {
  std::int64_t count = 0;
  for (int k = 0; k < size(); ++k) {
    const std::int64_t rows = first_[k + 1] - first_[k];
    count += rows * (rows + 1) / 2;
  }
  listed_ = count <= kMostTargets;
  if (!listed_) return;
  target_.reserve(count);
  for (int k = 0; k < size(); ++k)
    for (int a = first_[k]; a < first_[k + 1]; ++a) {
      target_.push_back(~row_[a]);
      for (int b = a + 1; b < first_[k + 1]; ++b) target_.push_back(entry(row_[a], row_[b]));
    }
}

void LinearSystem::placeEdges(const Network& network) {
  const int n = size();
  for (const Edge& edge : network.edges) {
    Place place;
    const int a = step_[edge.from];
    const int b = step_[edge.to];
    if (a != b) {
      place.first = a < n ? a : -1;
      place.second = b < n ? b : -1;
      if (a < n && b < n) place.off = entry(std::min(a, b), std::max(a, b));
    }
    places_.push_back(place);
  }
}

void LinearSystem::clear() {
  std::fill(diagonal_.begin(), diagonal_.end(), 0.0);
  std::fill(off_.begin(), off_.end(), 0.0);
}

void LinearSystem::eliminateByList() {
  const std::int32_t* target = target_.data();
  const int n = size();
  for (int k = 0; k < n; ++k) {
    const double inverse = 1 / diagonal_[k];
    diagonal_[k] = inverse;
    const int end = first_[k + 1];
    for (int a = first_[k]; a < end; ++a) {
      const double below = off_[a];
      const double factor = below * inverse;
      diagonal_[~*target++] -= factor * below;
      for (int b = a + 1; b < end; ++b) off_[*target++] -= factor * off_[b];
      off_[a] = factor;
    }
  }
}

void LinearSystem::eliminateBySearch() {
  for (int k = 0; k < size(); ++k) {
    const double inverse = 1 / diagonal_[k];
    diagonal_[k] = inverse;
    const int end = first_[k + 1];
    for (int a = first_[k]; a < end; ++a) {
      const double factor = off_[a] * inverse;
      diagonal_[row_[a]] -= factor * off_[a];
      int at = first_[row_[a]];  // rows of both columns rise, and this column's are among the other's
      for (int b = a + 1; b < end; ++b) {
        while (row_[at] != row_[b]) ++at;
        off_[at] -= factor * off_[b];
      }
      off_[a] = factor;
    }
  }
}

bool LinearSystem::factorise() {
  listed_ ? eliminateByList() : eliminateBySearch();
  bool sound = true;
  for (const double inverse : diagonal_) sound = sound && inverse > 0 && inverse < 1e300;
  return sound;
}

void LinearSystem::solve(std::vector<double>& right) const {
  const int n = size();
  for (int k = 0; k < n; ++k) {
    const double value = right[k];
    if (value == 0) continue;  // most of a column that answers to the pumps alone
    for (int a = first_[k]; a < first_[k + 1]; ++a) right[row_[a]] -= off_[a] * value;
    right[k] = value * diagonal_[k];
  }
  for (int k = n - 1; k >= 0; --k) {
    double value = right[k];
    for (int a = first_[k]; a < first_[k + 1]; ++a) value -= off_[a] * right[row_[a]];
    right[k] = value;
  }
}

}  // namespace ebbline::network
