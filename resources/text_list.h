#pragma once
// Files compiled in as text, found by name. Filled by resources/embed_texts.cmake.

#include <string_view>
#include <vector>

namespace ebbline::resources {

struct EmbeddedText {
  std::string_view name;  ///< File name without ending.
  std::string_view text;
};

struct TextList {
  const EmbeddedText* texts = nullptr;
  int count = 0;

  /// The text of a name; empty when there is none.
  std::string_view find(std::string_view name) const {
    for (int i = 0; i < count; ++i)
      if (texts[i].name == name) return texts[i].text;
    return {};
  }
  std::vector<std::string_view> names() const {
    std::vector<std::string_view> list;
    list.reserve(count);
    for (int i = 0; i < count; ++i) list.push_back(texts[i].name);
    return list;
  }
};

}  // namespace ebbline::resources
