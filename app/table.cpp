#include "app/table.h"

#include <algorithm>
#include <ostream>

#include <fmt/format.h>

namespace ebbline::app {
namespace {

std::size_t width(const std::string& text) {
  const auto is_start = [](char c) { return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U; };
  return static_cast<std::size_t>(std::count_if(text.begin(), text.end(), is_start));
}

}  // namespace

std::string head(const char* words, quantity::Quantity quantity, quantity::UnitSystem units) {
  return fmt::format("{}, {}", words, quantity::unitLabel(quantity, units));
}

std::string number(double base, quantity::Quantity quantity, quantity::UnitSystem units) {
  return quantity::format(base, quantity, units, quantity::Minus::kHyphen);
}

void Table::print(std::ostream& out) const {
  std::vector<std::size_t> widths(rows_.front().size(), 0);
  for (const auto& row : rows_)
    for (std::size_t c = 0; c < widths.size(); ++c) widths[c] = std::max(widths[c], width(row[c]));
  for (const auto& row : rows_) {
    std::string line;
    for (std::size_t c = 0; c < widths.size(); ++c) {
      const std::string gap(widths[c] - width(row[c]), ' ');
      const bool left = c < static_cast<std::size_t>(num_left_);
      line += left ? row[c] + gap : gap + row[c];
      line += "  ";
    }
    line.erase(line.find_last_not_of(' ') + 1);
    out << line << "\n";
  }
}

}  // namespace ebbline::app
