#include "core/loop/json_tree.h"

#include <algorithm>
#include <charconv>
#include <iterator>
#include <unordered_set>

#include <nlohmann/json.hpp>

#include "core/loop/file.h"
#include "core/loop/syntax_fault.h"

namespace ebbline::loop {
namespace {

/// What the reading head has passed.
struct Head {
  std::uint32_t line = 1;
  bool just_passed_break = false;
};

/// Bytes of the text; counts lines as the parser passes them.
class CountingIterator {
 public:
  using iterator_category = std::input_iterator_tag;
  using value_type = char;
  using difference_type = std::ptrdiff_t;
  using pointer = const char*;
  using reference = const char&;
  CountingIterator(const char* at, Head* head) : at_(at), head_(head) {}
  reference operator*() const { return *at_; }
  CountingIterator& operator++() {
    head_->just_passed_break = *at_ == '\n';
    head_->line += head_->just_passed_break;
    ++at_;
    return *this;
  }
  CountingIterator operator++(int) {
    CountingIterator before = *this;
    ++*this;
    return before;
  }
  bool operator==(const CountingIterator& other) const { return at_ == other.at_; }
  bool operator!=(const CountingIterator& other) const { return at_ != other.at_; }

 private:
  const char* at_;
  Head* head_;
};

}  // namespace

/// Receives the parser's events and grows the tree.
class TreeBuilder {
 public:
  using number_integer_t = nlohmann::json::number_integer_t;
  using number_unsigned_t = nlohmann::json::number_unsigned_t;
  using number_float_t = nlohmann::json::number_float_t;
  using string_t = nlohmann::json::string_t;
  using binary_t = nlohmann::json::binary_t;

  TreeBuilder(std::string_view text, const Head& head, JsonTree& tree, std::vector<text::Remark>& remarks)
      : text_(text), head_(head), tree_(tree), remarks_(remarks) {
    // Written files have a value per 15 bytes or so; reserving costs nothing until it is used.
    tree_.nodes_.reserve(std::min(text.size() / 8 + 16, kMostValues));
    tree_.pool_.reserve(text.size());
  }

  bool null() { return add(JsonTree::Kind::kNull, head_.line); }
  bool boolean(bool value) { return addNumber(JsonTree::Kind::kBoolean, value ? 1 : 0, head_.line); }
  bool number_integer(number_integer_t value) { return addNumber(static_cast<double>(value)); }
  bool number_unsigned(number_unsigned_t value) { return addNumber(static_cast<double>(value)); }
  bool number_float(number_float_t value, const string_t&) { return addNumber(value); }
  bool binary(binary_t&) { return false; }

  bool string(string_t& value) {
    const auto start = static_cast<std::uint32_t>(tree_.pool_.size());
    if (!add(JsonTree::Kind::kText, head_.line)) return false;
    tree_.pool_ += value;
    tree_.nodes_.back().first = start;
    tree_.nodes_.back().count = static_cast<std::uint32_t>(value.size());
    return true;
  }

  bool key(string_t& value) {
    key_ = static_cast<std::uint32_t>(tree_.pool_.size());
    key_size_ = static_cast<std::uint32_t>(value.size());
    key_line_ = head_.line;
    tree_.pool_ += value;
    return true;
  }

  bool start_object(std::size_t) { return open(JsonTree::Kind::kObject); }
  bool start_array(std::size_t) { return open(JsonTree::Kind::kList); }

  bool end_object() {
    reportDuplicates();
    open_.pop_back();
    return true;
  }

  bool end_array() {
    JsonTree::Node& list = tree_.nodes_[open_.back().node];
    const std::uint32_t first = list.first;
    list.first = static_cast<std::uint32_t>(tree_.items_.size());
    for (std::uint32_t i = first; i != JsonTree::kNone; i = tree_.nodes_[i].next) tree_.items_.push_back(i);
    open_.pop_back();
    return true;
  }

  bool parse_error(std::size_t position, const std::string& token, const nlohmann::detail::exception& error) {
    if (error.id == 406)  // a number beyond the range of a double
      fault(text::Code::kFileNumberTooLarge, {excerpt(token)}, numberLine());
    else
      remarks_.push_back(syntaxFault(text_, offsetOf(position, token, error.what()), error.what(), pointerHere()));
    return false;
  }

 private:
  struct Open {
    std::uint32_t node;
    std::uint32_t last = JsonTree::kNone;
  };

  // Complaints about a whole token point at its start, those about a byte at that byte. For brackets, commas and
  // colons the library's token text holds what stands before them as well, but they are one byte long.
  std::size_t offsetOf(std::size_t position, const std::string& token, std::string_view complaint) const {
    const auto says = [complaint](const char* words) { return complaint.find(words) != std::string_view::npos; };
    if (says("unexpected end of input")) return text_.size();
    const bool long_token = says("unexpected ") && !says("unexpected '");
    const std::size_t back = long_token ? std::max<std::size_t>(token.size(), 1) : 1;
    return position > back ? position - back : 0;
  }

  // The parser has read one byte past a number when it reports it.
  std::uint32_t numberLine() const { return head_.line - (head_.just_passed_break ? 1 : 0); }
  bool inObject() const { return !open_.empty() && tree_.nodes_[open_.back().node].kind == JsonTree::Kind::kObject; }

  bool addNumber(double value) { return addNumber(JsonTree::Kind::kNumber, value, numberLine()); }
  bool addNumber(JsonTree::Kind kind, double value, std::uint32_t line) {
    if (!add(kind, line)) return false;
    tree_.nodes_.back().number = value;
    return true;
  }

  bool add(JsonTree::Kind kind, std::uint32_t line) {
    if (tree_.nodes_.size() >= kMostValues) {
      fault(text::Code::kFileTooManyValues, {std::to_string(kMostValues)}, line);
      return false;
    }
    const auto index = static_cast<std::uint32_t>(tree_.nodes_.size());
    JsonTree::Node node;
    node.kind = kind;
    node.line = line;
    if (inObject()) {
      node.key = key_;
      node.key_size = key_size_;
      node.line = key_line_;
    }
    tree_.nodes_.push_back(node);
    if (!open_.empty()) hang(index);
    return true;
  }

  void hang(std::uint32_t index) {
    Open& parent = open_.back();
    JsonTree::Node& container = tree_.nodes_[parent.node];
    (parent.last == JsonTree::kNone ? container.first : tree_.nodes_[parent.last].next) = index;
    parent.last = index;
    ++container.count;
  }

  bool open(JsonTree::Kind kind) {
    if (static_cast<int>(open_.size()) >= kMostDepth) {
      fault(text::Code::kFileTooDeep, {std::to_string(kMostDepth)}, head_.line);
      return false;
    }
    if (!add(kind, head_.line)) return false;
    open_.push_back({static_cast<std::uint32_t>(tree_.nodes_.size() - 1)});
    return true;
  }

  void reportDuplicates() {
    const JsonTree::Node& object = tree_.nodes_[open_.back().node];
    constexpr std::uint32_t kFewKeys = 24;
    std::unordered_set<std::string_view> many;
    for (std::uint32_t i = object.first; i != JsonTree::kNone; i = tree_.nodes_[i].next) {
      const std::string_view key = tree_.keyOf(tree_.nodes_[i]);
      const bool again = object.count > kFewKeys ? !many.insert(key).second : standsBefore(object.first, i, key);
      if (again) reportDuplicate(i, key);
    }
  }

  bool standsBefore(std::uint32_t first, std::uint32_t until, std::string_view key) const {
    for (std::uint32_t i = first; i != until; i = tree_.nodes_[i].next)
      if (tree_.keyOf(tree_.nodes_[i]) == key) return true;
    return false;
  }

  void reportDuplicate(std::uint32_t node, std::string_view key) {
    if (remarks_.size() >= kMostRemarks) return;
    text::Place place;
    place.pointer = pointerTo(open_.size() - 1) + "/" + pointerEscaped(key);
    place.line = static_cast<int>(tree_.nodes_[node].line);
    remarks_.push_back({text::Code::kFileDuplicateKey, place, {excerpt(key)}});
  }

  // Pointer of the open container at this depth of the stack.
  std::string pointerTo(std::size_t depth) const {
    std::string pointer;
    for (std::size_t d = 1; d <= depth; ++d) {
      const JsonTree::Node& parent = tree_.nodes_[open_[d - 1].node];
      const JsonTree::Node& node = tree_.nodes_[open_[d].node];
      pointer += "/" + (parent.kind == JsonTree::Kind::kObject ? pointerEscaped(tree_.keyOf(node))
                                                               : std::to_string(parent.count - 1));
    }
    return pointer;
  }

  std::string pointerHere() const { return open_.empty() ? "" : pointerTo(open_.size() - 1); }

  void fault(text::Code code, std::vector<std::string> arguments, std::uint32_t line) {
    text::Place place;
    place.pointer = pointerHere();
    if (!open_.empty()) {
      const JsonTree::Node& parent = tree_.nodes_[open_.back().node];
      place.pointer += "/" + (inObject() ? pointerEscaped(std::string_view(tree_.pool_).substr(key_, key_size_))
                                         : std::to_string(parent.count));
    }
    place.line = static_cast<int>(line);
    remarks_.push_back({code, place, std::move(arguments)});
  }

  std::string_view text_;
  const Head& head_;
  JsonTree& tree_;
  std::vector<text::Remark>& remarks_;
  std::vector<Open> open_;
  std::uint32_t key_ = 0;
  std::uint32_t key_size_ = 0;
  std::uint32_t key_line_ = 0;
};

bool parseJson(std::string_view text, JsonTree& tree, std::vector<text::Remark>& remarks) {
  Head head;
  TreeBuilder builder(text, head, tree, remarks);
  return nlohmann::json::sax_parse(CountingIterator(text.data(), &head),
                                   CountingIterator(text.data() + text.size(), &head), &builder);
}

std::uint32_t JsonTree::nearest(std::string_view pointer) const {
  if (nodes_.empty()) return kNone;
  std::uint32_t at = 0;
  while (!pointer.empty()) {
    pointer.remove_prefix(1);
    const std::string_view step = pointer.substr(0, pointer.find('/'));
    pointer.remove_prefix(step.size());
    const Node& node = nodes_[at];
    std::uint32_t found = kNone;
    if (node.kind == Kind::kList) {
      std::uint32_t i = 0;
      const auto end = std::from_chars(step.data(), step.data() + step.size(), i).ptr;
      if (end == step.data() + step.size() && i < node.count) found = itemOf(node, i);
    } else if (node.kind == Kind::kObject) {
      found = node.first;
      while (found != kNone && pointerEscaped(keyOf(nodes_[found])) != step) found = nodes_[found].next;
    }
    if (found == kNone) return at;
    at = found;
  }
  return at;
}

std::string pointerEscaped(std::string_view key) {
  std::string escaped;
  for (const char c : key.substr(0, 200)) {
    if (c == '~')
      escaped += "~0";
    else if (c == '/')
      escaped += "~1";
    else
      escaped += c;
  }
  return escaped;
}

std::string excerpt(std::string_view text) {
  constexpr std::size_t kMost = 60;
  const bool cut = text.size() > kMost;
  std::size_t end = cut ? kMost : text.size();
  while (cut && end > 0 && (static_cast<unsigned char>(text[end]) & 0xC0U) == 0x80U) --end;  // whole characters
  std::string shown(text.substr(0, end));
  std::replace_if(
      shown.begin(), shown.end(), [](unsigned char c) { return c < 0x20 || c == 0x7F; }, ' ');
  return cut ? shown + "…" : shown;
}

}  // namespace ebbline::loop
