#pragma once
// What every verb needs: how it is registered, how it speaks.

#include <functional>
#include <string>
#include <vector>

#include "app/cli.h"
#include "core/quantity/quantity.h"
#include "core/text/remark.h"

namespace CLI {
class App;
}

namespace ebbline::app {

/// Shared by the verbs of one run. A verb's callback sets `chosen`; it is called after parsing has succeeded.
struct Context {
  Streams streams;
  std::function<int()> chosen;
};

// Each adds its verb to the command line.
void addOpen(CLI::App& app, Context& context);
void addCheck(CLI::App& app, Context& context);
void addSolve(CLI::App& app, Context& context);
void addSweep(CLI::App& app, Context& context);
void addReport(CLI::App& app, Context& context);
void addConvert(CLI::App& app, Context& context);
void addSample(CLI::App& app, Context& context);

/// Adds --json and --units to a verb.
struct OutputOptions {
  bool json = false;
  bool ip = false;
  quantity::UnitSystem units() const { return ip ? quantity::UnitSystem::kIp : quantity::UnitSystem::kSi; }
};
void addOutputOptions(CLI::App& verb, OutputOptions& options);

/// One remark, ready to be returned as the reason of a refusal.
text::Remark remark(text::Code code, std::vector<std::string> arguments = {});

/// Prints remarks to err, one a line, faults first: "fault: line 12, …".
void printRemarks(const std::vector<text::Remark>& remarks, Streams streams);

/// Prints one remark and returns the exit code.
int refuse(const text::Remark& reason, int exit_code, Streams streams);

/// Names in one line: "A, B, C", the first twelve and "… (n more)".
std::string listed(const std::vector<std::string>& names);

/// Writes a text to a file and says so; makes the folder if needed. Returns the exit code.
int writeText(const std::string& text, const std::string& file, Streams streams);

}  // namespace ebbline::app
