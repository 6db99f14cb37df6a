#pragma once
// Text that came from outside, made fit to stand in a remark.

#include <string>
#include <string_view>

namespace ebbline::quantity {

/// At most about 40 bytes of `typed`, cut between characters and marked with "…" when cut; control characters become
/// "?".
std::string shownInMessage(std::string_view typed);

}  // namespace ebbline::quantity
