#pragma once
// The sample loops of samples/, compiled into the program so that they are always at hand.

#include <string_view>
#include <vector>

namespace ebbline::resources {

/// Text of a sample by its file name without ".ebbline"; empty if there is none. Lives as long as the program.
std::string_view sampleText(std::string_view name);

/// Names of all samples in the order they are offered: office, school, laboratory, closed-form.
const std::vector<std::string_view>& sampleNames();

}  // namespace ebbline::resources
