#pragma once
// "Did you mean": the word of a list that needs the fewest edits.

#include <string_view>
#include <vector>

namespace ebbline::loop {

/// Word with the smallest edit distance (Levenshtein 1966, from memory) to `word`; "" for an empty list.
std::string_view nearestWord(std::string_view word, const std::vector<std::string_view>& words);

}  // namespace ebbline::loop
