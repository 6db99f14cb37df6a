#include "resources/samples.h"

#include "resources/text_list.h"

namespace ebbline::resources {

extern const TextList kEmbeddedSamples;  // made at build time

std::string_view sampleText(std::string_view name) {
  return kEmbeddedSamples.find(name);
}

const std::vector<std::string_view>& sampleNames() {
  static const std::vector<std::string_view> names = kEmbeddedSamples.names();
  return names;
}

}  // namespace ebbline::resources
