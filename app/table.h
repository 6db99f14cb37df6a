#pragma once
// Plain-text tables for people.

#include <iosfwd>
#include <string>
#include <vector>

#include "core/quantity/quantity.h"

namespace ebbline::app {

/// Head of a column of a quantity: "flow, L/s".
std::string head(const char* words, quantity::Quantity quantity, quantity::UnitSystem units);
/// A cell of it, from the base unit; a plain hyphen as minus, so that it can be pasted anywhere.
std::string number(double base, quantity::Quantity quantity, quantity::UnitSystem units);

/// Columns aligned by what they hold: the first `num_left` to the left, the rest to the right. Width counts characters,
/// not bytes.
class Table {
 public:
  Table(std::vector<std::string> heads, int num_left = 1) : rows_{std::move(heads)}, num_left_(num_left) {}
  /// REQUIRES: as many cells as heads.
  void add(std::vector<std::string> cells) { rows_.push_back(std::move(cells)); }
  bool empty() const { return rows_.size() <= 1; }
  void print(std::ostream& out) const;

 private:
  std::vector<std::vector<std::string>> rows_;
  int num_left_;
};

}  // namespace ebbline::app
