#pragma once
// The command line: `ebbline VERB …`. Numbers are locale-free; verbs other than open and report construct no
// Q…Application.

#include <iosfwd>
#include <string>
#include <vector>

namespace ebbline::app {

/// Exit codes, the same for every verb; printed by `ebbline --help`.
enum ExitCode : int {
  kDone = 0,       ///< Done, results may be used.
  kFaulty = 1,     ///< The loop or its file has faults; each is printed with its line.
  kUsage = 2,      ///< The command was not understood.
  kNotUsable = 3,  ///< The solver gave no usable answer; the reason is printed.
  kNoAccess = 4,   ///< A file cannot be read or written.
  kOwnFault = 5,   ///< A fault of Ebbline itself; please report it.
};

/// Where a run writes. Results go to `out`, everything said about them to `err`.
struct Streams {
  std::ostream& out;
  std::ostream& err;
};

/// Runs one command, without the program's name, and returns its exit code. Never throws.
int run(const std::vector<std::string>& arguments, Streams streams);

}  // namespace ebbline::app
