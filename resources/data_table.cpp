#include "resources/data_table.h"

#include "resources/text_list.h"

namespace ebbline::resources {

extern const TextList kEmbeddedTables;  // made at build time

std::string_view dataTable(std::string_view name) {
  return kEmbeddedTables.find(name);
}

const std::vector<std::string_view>& dataTableNames() {
  static const std::vector<std::string_view> names = kEmbeddedTables.names();
  return names;
}

}  // namespace ebbline::resources
