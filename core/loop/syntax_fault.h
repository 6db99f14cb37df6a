#pragma once
// From the parser's complaint to a sentence a user can act on.

#include <string>
#include <string_view>

#include "core/text/remark.h"

namespace ebbline::loop {

/// The remark for a parse error. `offset` is that of the offending byte or of the start of the offending token;
/// `complaint` is the library's own message; `pointer` is the place reached.
text::Remark syntaxFault(std::string_view text, std::size_t offset, std::string_view complaint, std::string pointer);

}  // namespace ebbline::loop
