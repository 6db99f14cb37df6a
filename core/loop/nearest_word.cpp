#include "core/loop/nearest_word.h"

#include <algorithm>
#include <limits>
#include <numeric>

namespace ebbline::loop {
namespace {

std::size_t editDistance(std::string_view a, std::string_view b) {
  std::vector<std::size_t> row(b.size() + 1);
  std::iota(row.begin(), row.end(), std::size_t{0});
  for (std::size_t i = 0; i < a.size(); ++i) {
    std::size_t diagonal = row[0];
    row[0] = i + 1;
    for (std::size_t j = 0; j < b.size(); ++j) {
      const std::size_t replaced = diagonal + (a[i] == b[j] ? 0 : 1);
      diagonal = row[j + 1];
      row[j + 1] = std::min({replaced, diagonal + 1, row[j] + 1});
    }
  }
  return row.back();
}

}  // namespace

std::string_view nearestWord(std::string_view word, const std::vector<std::string_view>& words) {
  const std::string_view start = word.substr(0, 64);  // keys are shorter; bounds the work
  std::string_view best;
  std::size_t least = std::numeric_limits<std::size_t>::max();
  for (const std::string_view candidate : words) {
    const std::size_t distance = editDistance(start, candidate);
    if (distance < least) {
      least = distance;
      best = candidate;
    }
  }
  return best;
}

}  // namespace ebbline::loop
