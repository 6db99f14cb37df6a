#include <algorithm>
#include <charconv>
#include <cmath>
#include <cstring>

#include "core/loop/check.h"
#include "core/loop/fields.h"
#include "core/loop/file.h"
#include "core/loop/json_tree.h"
#include "core/loop/nearest_word.h"

namespace ebbline::loop {
namespace {

using Node = JsonTree::Node;
using text::Code;

std::string shortest(double value) {
  char buffer[40];
  return {buffer, std::to_chars(buffer, buffer + sizeof buffer, value).ptr};
}

const char* kindInWords(JsonTree::Kind kind) {
  switch (kind) {
    case JsonTree::Kind::kNull:
      return "null";
    case JsonTree::Kind::kBoolean:
      return "true or false";
    case JsonTree::Kind::kNumber:
      return "a number";
    case JsonTree::Kind::kText:
      return "a text";
    case JsonTree::Kind::kList:
      return "a list";
    case JsonTree::Kind::kObject:
      return "an object";
  }
  return "";
}

/// The keys a struct knows, for suggestions.
struct KeyCollector {
  std::vector<std::string_view> keys;
  template <class Member>
  void operator()(const char* key, const Member&, Need, const char*, Limits = {}) {
    keys.emplace_back(key);
  }
};

/// Fills a Loop from the tree along the field table and notes every fault with its pointer and line.
class Decoder {
 public:
  Decoder(const JsonTree& tree, std::vector<text::Remark>& remarks) : tree_(tree), remarks_(remarks) {}

  template <class Struct>
  void object(const Node& node, Struct& into);

  // One overload per kind of value; `limits` apply to the numbers in it.
  void value(const Node& node, double& into, const Limits& limits) {
    if (expect(node, JsonTree::Kind::kNumber) && within(node, limits)) into = node.number == 0 ? 0 : node.number;
  }
  template <class Whole>
  requires(std::integral<Whole> && !std::same_as<Whole, bool>) void value(const Node& node, Whole& into,
                                                                          const Limits& limits) {
    if (!expect(node, JsonTree::Kind::kNumber)) return;
    if (node.number != std::floor(node.number))
      fault(Code::kFileNotWhole, node, {here(), shortest(node.number)});
    else if (within(node, limits))
      into = static_cast<Whole>(node.number);
  }
  void value(const Node& node, bool& into, const Limits&) {
    if (expect(node, JsonTree::Kind::kBoolean)) into = node.number != 0;
  }
  void value(const Node& node, std::string& into, const Limits&) {
    if (expect(node, JsonTree::Kind::kText)) into = tree_.textOf(node);
  }
  template <class Choice>
  requires std::is_enum_v<Choice>
  void value(const Node& node, Choice& into, const Limits&) {
    if (!expect(node, JsonTree::Kind::kText)) return;
    std::string allowed;
    for (const auto& [choice, word] : words(Choice{})) {
      if (word == tree_.textOf(node)) {
        into = choice;
        return;
      }
      allowed += (allowed.empty() ? "" : ", ") + std::string(word);
    }
    fault(Code::kFileUnknownChoice, node, {here(), excerpt(tree_.textOf(node)), allowed});
  }
  template <class T>
  void value(const Node& node, std::optional<T>& into, const Limits& limits) {
    value(node, into.emplace(), limits);
  }
  template <class T>
  void value(const Node& node, std::vector<T>& into, const Limits& limits) {
    if (!expect(node, JsonTree::Kind::kList)) return;
    into.resize(node.count);
    for (std::uint32_t i = 0; i < node.count && room(); ++i) {
      path_.push_back({nullptr, i});
      value(tree_.node(tree_.itemOf(node, i)), into[i], limits);
      path_.pop_back();
    }
  }
  void value(const Node& node, Typed& into, const Limits&) {
    if (!expect(node, JsonTree::Kind::kObject)) return;
    for (std::uint32_t i = node.first; i != JsonTree::kNone && room(); i = tree_.node(i).next) {
      const std::string key(tree_.keyOf(tree_.node(i)));
      path_.push_back({key.c_str(), 0});
      std::string typed;
      value(tree_.node(i), typed, {});
      if (!into.contains(key)) into[key] = typed;
      path_.pop_back();
    }
  }
  template <class Struct>
  requires kIsStruct<Struct>
  void value(const Node& node, Struct& into, const Limits&) {
    if (expect(node, JsonTree::Kind::kObject)) object(node, into);
  }

  void fault(Code code, const Node& node, std::vector<std::string> arguments) {
    if (!room()) return;
    text::Place place;
    place.pointer = pointer();
    place.line = static_cast<int>(node.line);
    remarks_.push_back({code, place, std::move(arguments)});
  }
  bool room() const { return remarks_.size() < kMostRemarks; }

 private:
  template <class Struct>
  friend class ObjectReader;

  struct Step {
    const char* key;  ///< nullptr: an item of a list.
    std::uint32_t index;
  };

  bool expect(const Node& node, JsonTree::Kind kind) {
    if (node.kind == kind) return true;
    fault(Code::kFileWrongType, node, {here(), kindInWords(kind), kindInWords(node.kind)});
    return false;
  }

  bool within(const Node& node, const Limits& limits) {
    const std::string is = shortest(node.number);
    if (limits.above && node.number <= limits.least)
      fault(Code::kFileNotAbove, node, {here(), shortest(limits.least), is});
    else if (node.number < limits.least)
      fault(Code::kFileBelowLimit, node, {here(), shortest(limits.least), is});
    else if (node.number > limits.most)
      fault(Code::kFileAboveLimit, node, {here(), shortest(limits.most), is});
    else
      return true;
    return false;
  }

  // The last key of the path: what a sentence calls the value.
  std::string here() const {
    for (std::size_t i = path_.size(); i-- > 0;)
      if (path_[i].key) return excerpt(path_[i].key);
    return "The file";
  }

  std::string pointer() const {
    std::string words;
    for (const Step& step : path_) words += "/" + (step.key ? pointerEscaped(step.key) : std::to_string(step.index));
    return words;
  }

  const JsonTree& tree_;
  std::vector<text::Remark>& remarks_;
  std::vector<Step> path_;
};

/// Visits the fields of one object. Members usually stand in table order, so the search starts after the last hit.
template <class Struct>
class ObjectReader {
 public:
  ObjectReader(Decoder& decoder, const Node& node) : decoder_(decoder), node_(node), cursor_(node.first) {}

  template <class Member>
  void operator()(const char* key, Member& member, Need need, const char*, const Limits& limits = {}) {
    const std::uint32_t at = find(key);
    if (at == JsonTree::kNone) {
      if (need == Need::kRequired) missing(key);
      return;
    }
    ++matched_;
    cursor_ = decoder_.tree_.node(at).next;
    decoder_.path_.push_back({key, 0});
    decoder_.value(decoder_.tree_.node(at), member, limits);
    decoder_.path_.pop_back();
  }

  void reportUnknown(Struct& object, bool is_top) {
    if (matched_ + (is_top ? 1U : 0U) == node_.count) return;
    KeyCollector known;
    describe(known, object);
    if (is_top) known.keys.emplace_back("schema_version");
    for (std::uint32_t i = node_.first; i != JsonTree::kNone && decoder_.room(); i = decoder_.tree_.node(i).next) {
      const std::string key(decoder_.tree_.keyOf(decoder_.tree_.node(i)));
      if (std::find(known.keys.begin(), known.keys.end(), key) != known.keys.end()) continue;
      decoder_.path_.push_back({key.c_str(), 0});
      decoder_.fault(Code::kFileUnknownKey, decoder_.tree_.node(i),
                     {excerpt(key), name(), std::string(nearestWord(key, known.keys))});
      decoder_.path_.pop_back();
    }
  }

 private:
  static std::string name() {
    if constexpr (kIsStruct<Struct>) return std::string("a ") + NameOf<Struct>::kValue;
    return "the loop";
  }

  std::uint32_t find(const char* key) const {
    for (std::uint32_t i = cursor_; i != JsonTree::kNone; i = decoder_.tree_.node(i).next)
      if (decoder_.tree_.keyOf(decoder_.tree_.node(i)) == key) return i;
    for (std::uint32_t i = node_.first; i != cursor_; i = decoder_.tree_.node(i).next)
      if (decoder_.tree_.keyOf(decoder_.tree_.node(i)) == key) return i;
    return JsonTree::kNone;
  }

  void missing(const char* key) {
    decoder_.path_.push_back({key, 0});
    decoder_.fault(Code::kFileMissingKey, node_, {key, name()});
    decoder_.path_.pop_back();
  }

  Decoder& decoder_;
  const Node& node_;
  std::uint32_t cursor_;
  std::uint32_t matched_ = 0;
};

template <class Struct>
void Decoder::object(const Node& node, Struct& into) {
  ObjectReader<Struct> reader(*this, node);
  describe(reader, into);
  reader.reportUnknown(into, path_.empty());
}

/// Brings a tree of an older version to the next one. One entry per version, oldest first; version 1 is the first.
struct Migration {
  int from;
  void (*apply)(JsonTree& tree);
};
constexpr std::array<Migration, 0> kMigrations{};

text::Remark remarkAt(Code code, const std::string& pointer, std::uint32_t line, std::vector<std::string> arguments) {
  text::Place place;
  place.pointer = pointer;
  place.line = static_cast<int>(line);
  return {code, place, std::move(arguments)};
}

// False: the version does not allow reading on.
bool settleVersion(JsonTree& tree, std::vector<text::Remark>& remarks) {
  const std::string ours = std::to_string(kSchemaVersion);
  const std::uint32_t at = tree.nearest("/schema_version");
  const Node& node = tree.node(at);
  if (at == 0) {
    remarks.push_back(remarkAt(Code::kFileVersionMissing, "/schema_version", node.line, {ours}));
    return false;
  }
  const bool number = node.kind == JsonTree::Kind::kNumber;
  if (!number || node.number != std::floor(node.number) || node.number < 1) {
    const std::string is = number ? shortest(node.number) : kindInWords(node.kind);
    remarks.push_back(remarkAt(Code::kFileVersionWrong, "/schema_version", node.line, {is, ours}));
    return false;
  }
  if (node.number > kSchemaVersion) {
    remarks.push_back(remarkAt(Code::kFileVersionNewer, "/schema_version", node.line, {shortest(node.number), ours}));
    return false;
  }
  for (const Migration& step : kMigrations)
    if (step.from >= node.number) step.apply(tree);
  return true;
}

// Faults of the bytes as a whole, before parsing. Strips a byte order mark.
bool settleEncoding(std::string_view& text, std::vector<text::Remark>& remarks) {
  if (text.starts_with("\xFF\xFE") || text.starts_with("\xFE\xFF")) {
    remarks.push_back(remarkAt(Code::kFileUtf16, "", 1, {}));
    return false;
  }
  if (text.starts_with("\xEF\xBB\xBF")) {
    remarks.push_back(remarkAt(Code::kFileByteOrderMark, "", 1, {}));
    text.remove_prefix(3);
  }
  if (const std::size_t nul = text.find('\0'); nul != std::string_view::npos) {
    const std::string_view passed = text.substr(0, nul);
    const auto line = 1 + std::count(passed.begin(), passed.end(), '\n');
    const std::size_t start = passed.rfind('\n');  // npos + 1 = 0
    remarks.push_back(
        remarkAt(Code::kFileNulByte, "", static_cast<std::uint32_t>(line), {std::to_string(nul - (start + 1) + 1)}));
    return false;
  }
  if (text.find_first_not_of(" \t\r\n") == std::string_view::npos) {
    remarks.push_back(remarkAt(Code::kFileEmpty, "", 1, {}));
    return false;
  }
  return true;
}

bool liesIn(std::string_view pointer, std::string_view outer) {
  return pointer.starts_with(outer) && (pointer.size() == outer.size() || pointer[outer.size()] == '/');
}

// The lists whose things a remark about a reference looks into.
std::vector<std::string_view> listsBehind(Code code) {
  switch (code) {
    case Code::kLoopNoSuchJoint:
    case Code::kLoopSideMissing:
    case Code::kLoopSideNotNamed:
    case Code::kLoopRunNeedsPair:
      return {"/joints"};
    case Code::kLoopNoSuchLevel:
      return {"/levels"};
    case Code::kLoopNoSuchZone:
      return {"/zones"};
    case Code::kLoopNoSuchSensor:
      return {"/sensors"};
    case Code::kLoopNoSuchTarget:
      return {"/terminals", "/zones"};
    default:
      return {};
  }
}

// True if the content remark may only follow from a value that could not be read: one fault shall not draw many.
bool followsFrom(const text::Remark& remark, const text::Remark& unread) {
  if (liesIn(remark.place.pointer, unread.place.pointer) || liesIn(unread.place.pointer, remark.place.pointer))
    return true;
  for (const std::string_view list : listsBehind(remark.code))
    if (liesIn(unread.place.pointer, list)) return true;
  return false;
}

void addContentRemarks(const Loop& loop, const JsonTree& tree, std::vector<text::Remark>& remarks) {
  std::vector<text::Remark> unread;
  for (const text::Remark& remark : remarks)
    if (text::severityOf(remark.code) == text::Severity::kFault) unread.push_back(remark);
  for (text::Remark& remark : checkContent(loop)) {
    if (remarks.size() >= kMostRemarks) return;
    const auto cause = [&remark](const text::Remark& fault) { return followsFrom(remark, fault); };
    if (std::any_of(unread.begin(), unread.end(), cause)) continue;
    remark.place.line = static_cast<int>(tree.node(tree.nearest(remark.place.pointer)).line);
    remarks.push_back(std::move(remark));
  }
}

void readTree(JsonTree& tree, Reading& reading) {
  if (tree.node(0).kind != JsonTree::Kind::kObject) {
    const std::string is = kindInWords(tree.node(0).kind);
    reading.remarks.push_back(remarkAt(Code::kFileNotAnObject, "", tree.node(0).line, {is}));
    return;
  }
  if (!settleVersion(tree, reading.remarks)) return;
  Decoder decoder(tree, reading.remarks);
  decoder.object(tree.node(0), reading.loop);

  addContentRemarks(reading.loop, tree, reading.remarks);
}

}  // namespace

Reading readLoop(std::string_view text) {
  Reading reading;
  if (text.size() > kMostFileBytes) {
    const std::string most = std::to_string(kMostFileBytes);
    reading.remarks.push_back(remarkAt(Code::kFileTooLarge, "", 0, {std::to_string(text.size()), most}));
    return reading;
  }
  if (!settleEncoding(text, reading.remarks)) return reading;
  auto tree = std::make_shared<JsonTree>();
  if (parseJson(text, *tree, reading.remarks)) readTree(*tree, reading);
  if (reading.remarks.size() >= kMostRemarks)
    reading.remarks.push_back(remarkAt(Code::kFileMoreFaults, "", 0, {std::to_string(kMostRemarks)}));
  reading.lines = Lines(std::move(tree));
  return reading;
}

int Lines::of(std::string_view pointer) const {
  if (!tree_) return 0;
  const std::uint32_t node = tree_->nearest(pointer);
  return node == JsonTree::kNone ? 0 : static_cast<int>(tree_->node(node).line);
}

}  // namespace ebbline::loop
