#pragma once
// From the command line to a loop that can be solved: file or sample, load state, strategy, set-point, single
// terminals.

#include <optional>
#include <string>
#include <vector>

#include "app/verb.h"
#include "core/loop/file.h"
#include "core/network/network.h"
#include "core/network/solver.h"

namespace ebbline::app {

/// Options shared by check, solve, sweep and report. Texts as typed; they are understood in openLoop.
struct LoopOptions {
  std::string file;
  std::string strategy;
  std::string set_point;
  std::string speed;
  std::vector<std::string> sensors;
  // Of one state only:
  std::string state;
  std::string load;
  std::vector<std::string> requests;
  std::vector<std::string> positions;
};
void addControlOptions(CLI::App& verb, LoopOptions& options);
void addStateOptions(CLI::App& verb, LoopOptions& options);

/// A loop read, changed as the options say, and compiled.
struct OpenedLoop {
  std::string name;  ///< File name without folder, as reports and headings show it.
  loop::Loop loop;
  network::Network network;
  std::vector<text::Remark> remarks;  ///< Of reader and compile, with lines.
  int exit_code = kDone;              ///< Not kDone: loop or network may not be used; remarks say why.
};

/// Reads a file or, when there is none of that name, a sample. Remarks are not printed.
loop::Reading readFileOrSample(const std::string& file, int& exit_code);

OpenedLoop openLoop(const LoopOptions& options, quantity::UnitSystem units);

/// The request of the options' one state, or the remark that refuses it.
tl::expected<network::Request, text::Remark> requestOf(const OpenedLoop& opened, const LoopOptions& options);

/// Name of the options' state for headings: the load state's, "60 % of design flow", "design load".
std::string stateName(const LoopOptions& options);

/// Strategy in words, with what sets it: "field sensor S1, 50 kPa".
std::string controlInWords(const loop::Loop& loop, quantity::UnitSystem units);

/// Strategy as the command line writes it: "dp-pump".
std::string strategyName(loop::Strategy strategy);

}  // namespace ebbline::app
