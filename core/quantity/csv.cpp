#include "core/quantity/csv.h"

#include <charconv>
#include <stdexcept>

#include <fmt/format.h>

namespace ebbline::quantity {
namespace {

std::vector<std::string> cellsOf(std::string_view line) {
  std::vector<std::string> cells;
  while (true) {
    const std::size_t comma = line.find(',');
    cells.emplace_back(line.substr(0, comma));
    if (comma == std::string_view::npos) return cells;
    line.remove_prefix(comma + 1);
  }
}

}  // namespace

CsvTable::CsvTable(std::string_view text) {
  while (!text.empty()) {
    const std::size_t end = text.find('\n');
    std::string_view line = text.substr(0, end);
    text.remove_prefix(end == std::string_view::npos ? text.size() : end + 1);
    if (line.ends_with('\r')) line.remove_suffix(1);
    if (line.empty()) continue;
    if (line.starts_with('#')) {
      line.remove_prefix(line.starts_with("# ") ? 2 : 1);
      source_ += (source_.empty() ? "" : " ") + std::string(line);
    } else if (columns_.empty()) {
      columns_ = cellsOf(line);
    } else {
      rows_.push_back(cellsOf(line));
      if (rows_.back().size() != columns_.size())
        throw std::logic_error(fmt::format("table row \"{}\" has not {} cells", line, columns_.size()));
    }
  }
  if (columns_.empty()) throw std::logic_error("table without column names");
}

bool CsvTable::hasColumn(std::string_view column) const {
  for (const std::string& name : columns_)
    if (name == column) return true;
  return false;
}

std::size_t CsvTable::columnIndex(std::string_view column) const {
  for (std::size_t i = 0; i < columns_.size(); ++i)
    if (columns_[i] == column) return i;
  throw std::logic_error(fmt::format("table without column \"{}\"", column));
}

const std::string& CsvTable::text(int row, std::string_view column) const {
  return rows_.at(static_cast<std::size_t>(row)).at(columnIndex(column));
}

double CsvTable::number(int row, std::string_view column) const {
  const std::string& cell = text(row, column);
  const char* start = cell.data() + (cell.starts_with('+') ? 1 : 0);  // from_chars knows no plus
  double value = 0;
  const auto result = std::from_chars(start, cell.data() + cell.size(), value);
  if (cell.empty() || result.ec != std::errc() || result.ptr != cell.data() + cell.size())
    throw std::logic_error(fmt::format("table cell \"{}\" of column \"{}\" is not a number", cell, column));
  return value;
}

}  // namespace ebbline::quantity
