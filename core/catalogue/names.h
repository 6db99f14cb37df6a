#pragma once
// Comparing and listing names for remarks; private to core/catalogue.

#include <string>
#include <string_view>
#include <vector>

namespace ebbline::catalogue {

/// The name without spaces and in lower case: "DN 50" and "dn50" are the same size.
std::string comparable(std::string_view name);

/// "a, b, c".
std::string listed(const std::vector<std::string>& names);

}  // namespace ebbline::catalogue
