#pragma once
// A Remark is what Ebbline has to say about something a user can cause: which message, how grave, where, with
// which particulars. Reader, compile, solver and findings share it. The words live in the catalogue beside it.

#include <cstdint>
#include <string>
#include <vector>

namespace ebbline::text {

/// How grave a remark is.
enum class Severity {
  kNote,     ///< Good to know; results stand.
  kCaution,  ///< Results stand, with a condition the user must know.
  kFault,    ///< The step cannot go on, or the numbers may not be used.
};

/// Every message by name. One line in codes/*.inc makes the enum value, its printed name, severity and words.
enum class Code : std::uint16_t {
#ifndef EBBLINE_SCAN_ONLY  // code scanners that read declarations only may not follow an include within an enum
#define EBBLINE_MESSAGE(constant, name, severity, words, remedy) constant,
#include "core/text/codes/all.inc"
#undef EBBLINE_MESSAGE
#endif
};

/// Where a remark points: into the file, at a thing of the loop, or both. Empty members mean "not known".
struct Place {
  std::string pointer;       ///< JSON pointer into the file, e.g. "/terminals/3/valve/kvs_m3h".
  int line = 0;              ///< Line of the file, from 1; 0 = not from a file.
  std::uint32_t id = 0;      ///< Id of the thing in the loop; 0 = none.
  std::string tag;           ///< Its tag as the user knows it.
};

/// One message with its particulars. Plain data: may be copied, stored and compared.
struct Remark {
  Code code;
  Place place;
  std::vector<std::string> arguments;  ///< Fill {0}, {1} … of the template; numbers already formatted.
};

/// Printed name of a code, e.g. "file-duplicate-key". Stable: scripts may rely on it.
const char* codeName(Code code);

/// Severity of a code.
Severity severityOf(Code code);

/// Number of codes in the catalogue.
int codeCount();

/// The code at position `index` of the catalogue. REQUIRES: 0 <= index < codeCount().
Code codeAt(int index);

/// Turns an English template into the reader's language; must keep the {n} marks. Empty function = English.
using Translate = std::string (*)(const char* english);

/// What happened, in one sentence without the place ("Kvs must be greater than 0; it is -2.").
std::string sentence(const Remark& remark, Translate translate = nullptr);

/// What to do about it, in one sentence; empty when there is nothing to do.
std::string remedy(const Remark& remark, Translate translate = nullptr);

/// Place in words: "line 12, /terminals/3/valve/kvs_m3h (T1-4)"; empty when the place is unknown.
std::string placeInWords(const Place& place);

/// Sentence, place and remedy in one line, as printed by the command line.
std::string oneLine(const Remark& remark, Translate translate = nullptr);

/// True if any remark is a fault.
bool anyFault(const std::vector<Remark>& remarks);

}  // namespace ebbline::text

/// Marks a string for the extraction of translations; does nothing at run time.
#define EBBLINE_TR(english) english
