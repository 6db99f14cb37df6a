#pragma once
// Tables of check values from tests/data.

#include <fstream>
#include <sstream>
#include <stdexcept>
#include <string>

#include "core/quantity/csv.h"

namespace ebbline::test {

/// tests/data/<name>.csv. The sources stand in its first lines.
inline quantity::CsvTable tableFile(const std::string& name) {
  const std::string path = std::string(EBBLINE_SOURCE_DIR) + "/tests/data/" + name + ".csv";
  std::ifstream file(path, std::ios::binary);
  if (!file) throw std::runtime_error("cannot open " + path);
  std::ostringstream text;
  text << file.rdbuf();
  return quantity::CsvTable(text.str());
}

}  // namespace ebbline::test
