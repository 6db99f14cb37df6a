#include "core/quantity/shown.h"

namespace ebbline::quantity {

std::string shownInMessage(std::string_view typed) {
  constexpr std::size_t kMost = 40;
  std::size_t end = typed.size();
  if (end > kMost) {
    end = kMost;
    // Bytes 10xxxxxx continue a character: never cut before one.
    while (end > 0 && (static_cast<unsigned char>(typed[end]) & 0xC0U) == 0x80U) --end;
  }
  std::string shown(typed.substr(0, end));
  for (char& c : shown)
    if (static_cast<unsigned char>(c) < 0x20 || c == 0x7F) c = '?';
  return end < typed.size() ? shown + "…" : shown;
}

}  // namespace ebbline::quantity
