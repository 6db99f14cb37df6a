#include <algorithm>
#include <charconv>
#include <cmath>

#include "core/loop/fields.h"
#include "core/loop/file.h"

namespace ebbline::loop {
namespace {

// Length of the UTF-8 character at the start of `text`; 0 if it is not one (RFC 3629).
std::size_t characterLength(std::string_view text) {
  const auto byte = [&text](std::size_t i) { return static_cast<unsigned char>(text[i]); };
  const auto follows = [&](std::size_t i, unsigned least, unsigned most) {
    return i < text.size() && byte(i) >= least && byte(i) <= most;
  };
  const unsigned lead = byte(0);
  if (lead < 0x80) return 1;
  if (lead >= 0xC2 && lead <= 0xDF) return follows(1, 0x80, 0xBF) ? 2 : 0;
  if (lead >= 0xE0 && lead <= 0xEF) {
    const bool second = follows(1, lead == 0xE0 ? 0xA0 : 0x80, lead == 0xED ? 0x9F : 0xBF);
    return second && follows(2, 0x80, 0xBF) ? 3 : 0;
  }
  if (lead >= 0xF0 && lead <= 0xF4) {
    const bool second = follows(1, lead == 0xF0 ? 0x90 : 0x80, lead == 0xF4 ? 0x8F : 0xBF);
    return second && follows(2, 0x80, 0xBF) && follows(3, 0x80, 0xBF) ? 4 : 0;
  }
  return 0;
}

/// Prints a loop along the field table.
class Printer {
 public:
  std::string text;

  template <class Struct>
  void object(const Struct& x, bool one_line);

  void value(double x, bool) {
    char buffer[40];
    // Zero has no sign in the file; what is not finite is refused by writeLoopFile before it gets here.
    const char* end = std::to_chars(buffer, buffer + sizeof buffer, x == 0 ? 0.0 : x).ptr;
    if (std::isfinite(x))
      text.append(buffer, static_cast<std::size_t>(end - buffer));
    else
      text += "null";
  }
  template <class Whole>
  requires(std::integral<Whole> && !std::same_as<Whole, bool>) void value(Whole x, bool) {
    char buffer[24];
    text.append(buffer, std::to_chars(buffer, buffer + sizeof buffer, x).ptr);
  }
  template <std::same_as<bool> Boolean>
  void value(Boolean x, bool) {
    text += x ? "true" : "false";
  }
  template <class Choice>
  requires std::is_enum_v<Choice>
  void value(Choice x, bool) {
    for (const auto& [choice, word] : words(Choice{}))
      if (choice == x) quoted(word);
  }
  void value(const std::string& x, bool) { quoted(x); }
  template <class T>
  void value(const std::optional<T>& x, bool one_line) {
    value(*x, one_line);
  }
  template <class Struct>
  requires kIsStruct<Struct>
  void value(const Struct& x, bool one_line) { object(x, one_line || kOnOneLine<Struct>); }
  template <class T>
  void value(const std::vector<T>& list, bool one_line) {
    list_(list, one_line || std::same_as<T, Id> || std::same_as<T, Point>);
  }
  void value(const Typed& typed, bool) {
    text += '{';
    const char* between = "";
    for (const auto& [key, as_typed] : typed) {
      text += between;
      between = ", ";
      quoted(key);
      text += ": ";
      quoted(as_typed);
    }
    text += '}';
  }

  void quoted(std::string_view words);
  void breakLine() {
    text += '\n';
    text.append(2 * static_cast<std::size_t>(depth_), ' ');
  }
  void deeper() { ++depth_; }
  void shallower() { --depth_; }

 private:
  template <class T>
  void list_(const std::vector<T>& list, bool one_line) {
    text += '[';
    ++depth_;
    for (std::size_t i = 0; i < list.size(); ++i) {
      if (i > 0) text += one_line ? ", " : ",";
      if (!one_line) breakLine();
      value(list[i], one_line);
    }
    --depth_;
    if (!one_line && !list.empty()) breakLine();
    text += ']';
  }

  int depth_ = 0;
};

/// Visits the fields of one object and prints those that are not left out.
template <class Struct>
class ObjectPrinter {
 public:
  ObjectPrinter(Printer& printer, const Struct& object, bool one_line)
      : printer_(printer), object_(object), one_line_(one_line) {}

  template <class Member>
  void operator()(const char* key, const Member& member, Need need, const char*, Limits = {}) {
    if (need == Need::kOptional && member == defaultOf(member)) return;
    this->key(key);
    printer_.value(member, one_line_);
  }

  void key(const char* key) {
    if (!first_) printer_.text += one_line_ ? ", " : ",";
    first_ = false;
    if (!one_line_) printer_.breakLine();
    printer_.text += '"';
    printer_.text += key;
    printer_.text += "\": ";
  }

 private:
  // The member of a default-constructed Struct that lies where `member` lies in the object.
  template <class Member>
  const Member& defaultOf(const Member& member) const {
    static const Struct kDefault{};
    const auto offset = reinterpret_cast<const char*>(&member) - reinterpret_cast<const char*>(&object_);
    return *reinterpret_cast<const Member*>(reinterpret_cast<const char*>(&kDefault) + offset);
  }

  Printer& printer_;
  const Struct& object_;
  bool one_line_;
  bool first_ = true;
};

template <class Struct>
void Printer::object(const Struct& x, bool one_line) {
  text += '{';
  ++depth_;
  ObjectPrinter<Struct> printer(*this, x, one_line);
  describe(printer, x);
  --depth_;
  if (!one_line) breakLine();
  text += '}';
}

void Printer::quoted(std::string_view words) {
  constexpr char kHex[] = "0123456789abcdef";
  text += '"';
  while (!words.empty()) {
    const char c = words.front();
    const std::size_t length = characterLength(words);
    if (c == '"' || c == '\\')
      (text += '\\') += c;
    else if (c == '\n')
      text += "\\n";
    else if (c == '\t')
      text += "\\t";
    else if (static_cast<unsigned char>(c) < 0x20)
      ((text += "\\u00") += kHex[c >> 4]) += kHex[c & 15];
    else if (length == 0)
      text += "\xEF\xBF\xBD";  // U+FFFD in place of a byte that is not UTF-8
    else
      text.append(words.substr(0, length));
    words.remove_prefix(std::max<std::size_t>(length, 1));
  }
  text += '"';
}

}  // namespace

std::string writeLoop(const Loop& loop) {
  Printer printer;
  printer.text.reserve(1024 + 700 * loop.terminals.size() + 250 * (loop.paired_runs.size() + loop.joints.size()));
  printer.text += "{";
  printer.deeper();
  ObjectPrinter<Loop> top(printer, loop, false);
  top.key("schema_version");
  printer.value(kSchemaVersion, true);
  describe(top, loop);
  printer.shallower();
  printer.text += "\n}\n";
  return std::move(printer.text);
}

}  // namespace ebbline::loop
