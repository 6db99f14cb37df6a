#include <array>

#include <fmt/args.h>
#include <fmt/format.h>

#include "core/text/remark.h"

namespace ebbline::text {
namespace {

struct Entry {
  const char* name;
  Severity severity;
  const char* words;
  const char* remedy;
};

[[maybe_unused]] constexpr auto kNote = Severity::kNote;
constexpr auto kCaution = Severity::kCaution;
constexpr auto kFault = Severity::kFault;

constexpr std::array kEntries = {
#define EBBLINE_MESSAGE(constant, name, severity, words, remedy) Entry{name, severity, words, remedy},
#include "core/text/codes/all.inc"
#undef EBBLINE_MESSAGE
};

const Entry& entryOf(Code code) { return kEntries.at(static_cast<std::size_t>(code)); }

std::string fill(const char* english, const Remark& remark, Translate translate) {
  const std::string words = translate ? translate(english) : english;
  fmt::dynamic_format_arg_store<fmt::format_context> store;
  for (const std::string& argument : remark.arguments) store.push_back(argument);
  // A missing argument must never turn a message into a crash: show the template instead.
  try {
    return fmt::vformat(words, store);
  } catch (const fmt::format_error&) {
    return words;
  }
}

}  // namespace

const char* codeName(Code code) { return entryOf(code).name; }
Severity severityOf(Code code) { return entryOf(code).severity; }
int codeCount() { return static_cast<int>(kEntries.size()); }
Code codeAt(int index) { return static_cast<Code>(index); }

std::string sentence(const Remark& remark, Translate translate) {
  return fill(entryOf(remark.code).words, remark, translate);
}

std::string remedy(const Remark& remark, Translate translate) {
  return fill(entryOf(remark.code).remedy, remark, translate);
}

std::string placeInWords(const Place& place) {
  std::string words;
  const auto add = [&words](const std::string& part) { words += (words.empty() ? "" : ", ") + part; };
  if (place.line > 0) add(fmt::format("line {}", place.line));
  if (!place.pointer.empty()) add(place.pointer);
  if (!place.tag.empty()) add(place.tag);
  return words;
}

std::string oneLine(const Remark& remark, Translate translate) {
  const std::string where = placeInWords(remark.place);
  const std::string what_to_do = remedy(remark, translate);
  std::string line = where.empty() ? "" : where + ": ";
  line += sentence(remark, translate);
  if (!what_to_do.empty()) line += " " + what_to_do;
  return line;
}

bool anyFault(const std::vector<Remark>& remarks) {
  for (const Remark& remark : remarks)
    if (severityOf(remark.code) == Severity::kFault) return true;
  return false;
}

}  // namespace ebbline::text
