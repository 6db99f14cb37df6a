#include "resources/data_table.h"

namespace ebbline::resources {

// Defined in the file that embed_tables.cmake writes.
struct EmbeddedTable {
  std::string_view name;
  std::string_view text;
};
extern const EmbeddedTable kEmbeddedTables[];
extern const int kNumEmbeddedTables;

std::string_view dataTable(std::string_view name) {
  for (int i = 0; i < kNumEmbeddedTables; ++i)
    if (kEmbeddedTables[i].name == name) return kEmbeddedTables[i].text;
  return {};
}

const std::vector<std::string_view>& dataTableNames() {
  static const std::vector<std::string_view> names = [] {
    std::vector<std::string_view> list;
    for (int i = 0; i < kNumEmbeddedTables; ++i) list.push_back(kEmbeddedTables[i].name);
    return list;
  }();
  return names;
}

}  // namespace ebbline::resources
