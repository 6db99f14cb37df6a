#include "core/loop/syntax_fault.h"

#include <algorithm>
#include <array>
#include <cctype>
#include <utility>

#include "core/loop/json_tree.h"

namespace ebbline::loop {
namespace {

using text::Code;

/// Where the parser stopped and what stands there.
struct Spot {
  std::string_view text;
  std::size_t offset = 0;  ///< Of the offending byte or of the start of the offending token.
  std::string_view complaint;

  bool says(std::string_view words) const { return complaint.find(words) != std::string_view::npos; }
  bool atEnd() const { return offset >= text.size(); }
  char here() const { return atEnd() ? '\0' : text[offset]; }

  // First byte of the word around the spot.
  std::size_t wordStart() const {
    std::size_t start = std::min(offset, text.size());
    while (start > 0 && isWordByte(text[start - 1])) --start;
    return start;
  }
  std::string_view word() const {
    const std::size_t start = wordStart();
    std::size_t end = start;
    while (end < text.size() && isWordByte(text[end])) ++end;
    return text.substr(start, end - start);
  }
  static bool isWordByte(char c) {
    return std::isalnum(static_cast<unsigned char>(c)) != 0 || c == '_' || c == '+' || c == '-' || c == '.';
  }
  // Last byte before the spot that is not blank.
  char before() const {
    for (std::size_t i = std::min(offset, text.size()); i-- > 0;)
      if (std::isspace(static_cast<unsigned char>(text[i])) == 0) return text[i];
    return '\0';
  }
};

int lineAt(std::string_view text, std::size_t offset) {
  const std::string_view passed = text.substr(0, std::min(offset, text.size()));
  return 1 + static_cast<int>(std::count(passed.begin(), passed.end(), '\n'));
}

// Counted in characters, from 1: continuation bytes of UTF-8 do not count.
std::size_t columnAt(std::string_view text, std::size_t offset) {
  std::size_t column = 1;
  for (std::size_t i = std::min(offset, text.size()); i-- > 0 && text[i] != '\n';)
    if ((static_cast<unsigned char>(text[i]) & 0xC0U) != 0x80U) ++column;
  return column;
}

/// The library's names of tokens in plain words.
std::string inPlainWords(std::string_view token) {
  constexpr std::array<std::pair<std::string_view, std::string_view>, 15> kWords = {{
      {"end of input", "the end of the file"},
      {"string literal", "a text in double quotes"},
      {"number literal", "a number"},
      {"object key", "a key in double quotes"},
      {"'[', '{', or a literal", "a value"},
      {"true literal", "the word true"},
      {"false literal", "the word false"},
      {"null literal", "the word null"},
      {"'['", "an opening bracket ["},
      {"']'", "a comma or a closing bracket ]"},
      {"'{'", "an opening brace"},
      {"'}'", "a comma or a closing brace"},
      {"':'", "a colon"},
      {"','", "a comma"},
      {"literal", "a value"},
  }};
  for (const auto& [name, words] : kWords)
    if (token.starts_with(name)) return std::string(words);
  return "a value";
}

std::string wordsAfter(const Spot& spot, std::string_view mark) {
  const std::size_t at = spot.complaint.rfind(mark);
  return at == std::string_view::npos ? "a value" : inPlainWords(spot.complaint.substr(at + mark.size()));
}

std::string found(const Spot& spot) {
  switch (spot.here()) {
    case '}':
      return "a closing brace";
    case ']':
      return "a closing bracket ]";
    case ',':
      return "a comma";
    default:
      return wordsAfter(spot, "unexpected ");
  }
}

Code literalFault(const Spot& spot) {
  const char start = spot.wordStart() < spot.text.size() ? spot.text[spot.wordStart()] : '\0';
  if (spot.here() == '/' || spot.here() == '#' || spot.before() == '/') return Code::kFileComment;
  if (spot.here() == '\'') return Code::kFileSingleQuote;
  if (std::isdigit(static_cast<unsigned char>(start)) != 0 || start == '+' || start == '.') return Code::kFileBadNumber;
  return Code::kFileUnknownWord;
}

Code codeFor(const Spot& spot) {
  if (spot.says("ill-formed UTF-8")) return Code::kFileNotUtf8;
  if (spot.says("missing closing quote")) return Code::kFileUnclosedText;
  if (spot.says("control character")) return Code::kFileControlCharacter;
  if (spot.says("invalid string")) return Code::kFileBadEscape;
  if (spot.says("invalid number")) return Code::kFileBadNumber;
  if (spot.says("invalid literal")) {
    const bool ascii = static_cast<unsigned char>(spot.here()) < 0x80;
    return ascii ? literalFault(spot) : Code::kFileUnknownWord;
  }
  if (spot.says("unexpected end of input")) return Code::kFileTruncated;
  if (spot.says("expected end of input")) return Code::kFileAfterEnd;
  if ((spot.here() == '}' || spot.here() == ']') && spot.before() == ',') return Code::kFileTrailingComma;
  const bool ends_a_member = spot.says("expected ']'") || spot.says("expected '}'");
  if (ends_a_member && spot.here() != '}' && spot.here() != ']' && spot.here() != ':') return Code::kFileMissingComma;
  return Code::kFileSyntax;
}

std::vector<std::string> argumentsFor(Code code, const Spot& spot, const std::string& column) {
  switch (code) {
    case Code::kFileSyntax:
      return {column, found(spot), wordsAfter(spot, "expected ")};
    case Code::kFileTruncated:
      return {wordsAfter(spot, "expected ")};
    case Code::kFileBadNumber:
    case Code::kFileUnknownWord:
      return {column, excerpt(spot.word())};
    default:
      return {column};
  }
}

}  // namespace

text::Remark syntaxFault(std::string_view text, std::size_t offset, std::string_view complaint, std::string pointer) {
  const Spot spot{text, offset, complaint};
  text::Remark remark;
  remark.code = codeFor(spot);
  remark.place.pointer = std::move(pointer);
  remark.place.line = lineAt(text, offset);
  remark.arguments = argumentsFor(remark.code, spot, std::to_string(columnAt(text, offset)));
  return remark;
}

}  // namespace ebbline::loop
