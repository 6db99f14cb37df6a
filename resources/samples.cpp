#include "resources/samples.h"

namespace ebbline::resources {

// Defined in the file that embed_samples.cmake writes.
struct EmbeddedSample {
  std::string_view name;
  std::string_view text;
};
extern const EmbeddedSample kEmbeddedSamples[];
extern const int kNumEmbeddedSamples;

std::string_view sampleText(std::string_view name) {
  for (int i = 0; i < kNumEmbeddedSamples; ++i)
    if (kEmbeddedSamples[i].name == name) return kEmbeddedSamples[i].text;
  return {};
}

const std::vector<std::string_view>& sampleNames() {
  static const std::vector<std::string_view> names = [] {
    std::vector<std::string_view> list;
    for (int i = 0; i < kNumEmbeddedSamples; ++i) list.push_back(kEmbeddedSamples[i].name);
    return list;
  }();
  return names;
}

}  // namespace ebbline::resources
