#pragma once
// Starts the window: the one door for the program's main.

#include <optional>
#include <string>

#include "core/quantity/quantity.h"

namespace ebbline::shell {

/// Runs the window on a file, on a sample by its name, or on the first sample when `file` is empty, until it is
/// closed. Without `units` those of the last time are kept. Returns the exit code of the event loop, or kNoDisplay.
/// REQUIRES: no Q…Application exists yet.
int runWindow(const std::string& file, std::optional<quantity::UnitSystem> units = {});

/// Returned when no display can be reached.
inline constexpr int kNoDisplay = 69;

}  // namespace ebbline::shell
