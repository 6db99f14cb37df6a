#include <filesystem>
#include <fstream>
#include <set>
#include <sstream>
#include <string>

#include <gtest/gtest.h>

#include "core/quantity/csv.h"
#include "resources/data_table.h"

namespace ebbline::resources {
namespace {

TEST(DataTable, EveryFileIsCompiledInByteForByte) {
  std::set<std::string> names;
  for (const auto& entry : std::filesystem::directory_iterator(EBBLINE_SOURCE_DIR "/resources/data")) {
    if (entry.path().extension() != ".csv") continue;
    std::ifstream file(entry.path(), std::ios::binary);
    std::ostringstream text;
    text << file.rdbuf();
    names.insert(entry.path().stem().string());
    EXPECT_EQ(dataTable(entry.path().stem().string()), text.str()) << entry.path();
  }
  EXPECT_GE(names.size(), 14U);
  EXPECT_EQ(dataTableNames().size(), names.size());
}

TEST(DataTable, EveryTableReadsAndNamesItsSource) {
  for (const std::string_view name : dataTableNames()) {
    const quantity::CsvTable table(dataTable(name));
    EXPECT_GT(table.numRows(), 0) << name;
    const bool marked =
        table.source().find("[published") != std::string::npos || table.source().find("[memory") != std::string::npos;
    EXPECT_TRUE(marked) << name;
  }
}

TEST(DataTable, UnknownNameIsEmpty) {
  EXPECT_TRUE(dataTable("no such table").empty());
}

}  // namespace
}  // namespace ebbline::resources
