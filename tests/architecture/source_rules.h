#pragma once
// The rules between modules, checked on the text of the sources.

#include <filesystem>
#include <string>
#include <vector>

namespace ebbline::test {

/// Every breach of the rules found in the tree under `root`, one sentence each: file, line, what is wrong.
std::vector<std::string> breachesIn(const std::filesystem::path& root);

}  // namespace ebbline::test
