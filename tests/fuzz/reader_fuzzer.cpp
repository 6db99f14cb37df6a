// Any bytes are judged: read and written back equal, or refused with a remark.

#include <cstddef>
#include <cstdint>
#include <cstdlib>

#include "core/loop/file.h"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* bytes, std::size_t size) {
  namespace loop = ebbline::loop;
  const loop::Reading reading = loop::readLoop({reinterpret_cast<const char*>(bytes), size});
  for (const ebbline::text::Remark& remark : reading.remarks)
    if (ebbline::text::oneLine(remark).empty()) std::abort();
  if (!reading.usable()) {
    if (reading.remarks.empty()) std::abort();
    return 0;
  }
  const std::string text = loop::writeLoop(reading.loop);
  const loop::Reading again = loop::readLoop(text);
  if (!again.usable() || !(again.loop == reading.loop) || loop::writeLoop(again.loop) != text) std::abort();
  return 0;
}
