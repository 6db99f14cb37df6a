#pragma once
// Parts of a loop as CSV for spreadsheets: comma-separated, point as decimal mark, units in the column names.

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "core/loop/loop.h"

namespace ebbline::app {

/// Tables that can be asked for: terminals, runs, valves, pumps, joints, states.
std::vector<std::string> csvTableNames();

/// The table as text, one line of column names first; nothing for an unknown name.
std::optional<std::string> csvTable(const loop::Loop& loop, std::string_view name);

}  // namespace ebbline::app
