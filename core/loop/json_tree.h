#pragma once
// JSON text as a flat tree that knows the line of every value. One pass, no recursion, depth and number of values
// limited, duplicate keys found.

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "core/text/remark.h"

namespace ebbline::loop {

/// Most values (numbers, texts, lists, objects) read from one file: bounds the memory.
inline constexpr std::size_t kMostValues = 8'000'000;

class JsonTree {
 public:
  enum class Kind : std::uint8_t { kNull, kBoolean, kNumber, kText, kList, kObject };
  static constexpr std::uint32_t kNone = 0xffffffff;

  struct Node {
    double number = 0;            ///< kNumber: value. kBoolean: 0 or 1.
    std::uint32_t line = 0;       ///< Line of the file, from 1, where the value (for members: the key) starts.
    std::uint32_t key = 0;        ///< Members of objects: start of the key in the pool …
    std::uint32_t key_size = 0;   ///< … and its length.
    std::uint32_t next = kNone;   ///< Next member or item.
    std::uint32_t first = kNone;  ///< kObject: first member. kList: start in the items. kText: start in the pool.
    std::uint32_t count = 0;      ///< Members, items or bytes.
    Kind kind = Kind::kNull;
  };

  const Node& node(std::uint32_t index) const { return nodes_[index]; }
  std::size_t size() const { return nodes_.size(); }
  std::string_view keyOf(const Node& node) const { return std::string_view(pool_).substr(node.key, node.key_size); }
  std::string_view textOf(const Node& node) const { return std::string_view(pool_).substr(node.first, node.count); }
  /// Index of item i of a list.
  std::uint32_t itemOf(const Node& list, std::uint32_t i) const { return items_[list.first + i]; }
  /// Node at a JSON pointer, or of its nearest ancestor that is there; kNone for an empty tree.
  std::uint32_t nearest(std::string_view pointer) const;

 private:
  friend class TreeBuilder;
  std::vector<Node> nodes_;
  std::vector<std::uint32_t> items_;
  std::string pool_;
};

/// Parses `text` (UTF-8 without byte order mark) into `tree`. Appends the first syntax fault, and every duplicate key.
/// Returns false if there was a syntax fault; the tree must not be used then.
bool parseJson(std::string_view text, JsonTree& tree, std::vector<text::Remark>& remarks);

/// `key` with "~" and "/" escaped as in a JSON pointer (RFC 6901).
std::string pointerEscaped(std::string_view key);

/// Text cut to a length fit for a message, without control characters.
std::string excerpt(std::string_view text);

}  // namespace ebbline::loop
