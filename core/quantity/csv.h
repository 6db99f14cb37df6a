#pragma once
// The plain tables compiled into the program: comma-separated, first lines starting with # name source and mark,
// then one line of column names.

#include <string>
#include <string_view>
#include <vector>

namespace ebbline::quantity {

/// A table as read. Broken tables are broken builds: the accessors throw std::logic_error naming what is missing.
class CsvTable {
 public:
  /// REQUIRES: `text` has a header line and as many cells in each row as in the header.
  explicit CsvTable(std::string_view text);

  int numRows() const { return static_cast<int>(rows_.size()); }
  /// The comment lines without their "# ", joined by spaces: where the numbers come from.
  const std::string& source() const { return source_; }
  const std::vector<std::string>& columns() const { return columns_; }
  bool hasColumn(std::string_view column) const;
  /// Cell as text.
  const std::string& text(int row, std::string_view column) const;
  /// Cell as number.
  double number(int row, std::string_view column) const;
  /// True if the cell is empty.
  bool isEmpty(int row, std::string_view column) const { return text(row, column).empty(); }

 private:
  std::size_t columnIndex(std::string_view column) const;

  std::string source_;
  std::vector<std::string> columns_;
  std::vector<std::vector<std::string>> rows_;
};

}  // namespace ebbline::quantity
