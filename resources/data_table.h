#pragma once
// The data tables of resources/data, compiled into the program so that it never depends on where it is installed.

#include <string_view>
#include <vector>

namespace ebbline::resources {

/// Text of a table by its file name without ".csv", e.g. dataTable("roughness"); lines starting with # name the source
/// and the mark. Empty if there is no such table. The text lives as long as the program.
std::string_view dataTable(std::string_view name);

/// Names of all tables, sorted.
const std::vector<std::string_view>& dataTableNames();

}  // namespace ebbline::resources
