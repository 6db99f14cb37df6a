#include "app/loop_source.h"

#include <algorithm>
#include <array>
#include <filesystem>

#include <fmt/format.h>
#include <CLI/CLI.hpp>

#include "core/network/demand.h"
#include "resources/samples.h"

namespace ebbline::app {
namespace {

using loop::Strategy;
using quantity::Quantity;
using text::Code;
using text::Remark;
template <class T>
using Expected = tl::expected<T, Remark>;

struct StrategyWord {
  Strategy strategy;
  const char* name;
  const char* words;
};
constexpr std::array kStrategies = {
    StrategyWord{Strategy::kConstantSpeed, "constant-speed", "constant speed"},
    StrategyWord{Strategy::kDpPump, "dp-pump", "constant DP at the pump"},
    StrategyWord{Strategy::kDpHeaders, "dp-headers", "constant DP at the headers"},
    StrategyWord{Strategy::kFieldSensor, "field-sensor", "field sensor"},
};

template <class List>
std::vector<std::string> tagsOf(const List& things) {
  std::vector<std::string> tags;
  for (const auto& thing : things) tags.push_back(thing.tag);
  return tags;
}

Expected<Strategy> strategyOf(std::string name) {
  std::replace(name.begin(), name.end(), '_', '-');
  std::vector<std::string> names;
  for (const StrategyWord& word : kStrategies) {
    if (name == word.name) return word.strategy;
    names.emplace_back(word.name);
  }
  return tl::unexpected(remark(Code::kCommandUnknownStrategy, {name, listed(names)}));
}

std::optional<Remark> chooseSensors(loop::Loop& loop, const std::vector<std::string>& tags) {
  if (loop.sensors.empty()) return remark(Code::kCommandNoSensor);
  if (tags.empty()) {  // those of the file, or else all
    if (loop.control.sensors.empty())
      for (const loop::Sensor& sensor : loop.sensors) loop.control.sensors.push_back(sensor.id);
    return std::nullopt;
  }
  loop.control.sensors.clear();
  for (const std::string& tag : tags) {
    const auto found =
        std::find_if(loop.sensors.begin(), loop.sensors.end(), [&](const loop::Sensor& s) { return s.tag == tag; });
    if (found == loop.sensors.end())
      return remark(Code::kCommandUnknownTag, {tag, "sensor", listed(tagsOf(loop.sensors))});
    loop.control.sensors.push_back(found->id);
  }
  return std::nullopt;
}

std::optional<Remark> applySetPoint(loop::Loop& loop, const std::string& text, quantity::UnitSystem units) {
  if (loop.control.strategy == Strategy::kConstantSpeed) return remark(Code::kCommandSetPointUnused);
  const Expected<double> kpa = quantity::parseToFileUnit(text, Quantity::kPressure, units);
  if (!kpa) return kpa.error();
  if (loop.control.strategy != Strategy::kFieldSensor) {
    loop.control.set_point_kpa = *kpa;
    return std::nullopt;
  }
  for (loop::Sensor& sensor : loop.sensors)
    if (std::find(loop.control.sensors.begin(), loop.control.sensors.end(), sensor.id) != loop.control.sensors.end())
      sensor.set_point_kpa = *kpa;
  return std::nullopt;
}

// What the strategy needs and the file may lack.
std::optional<Remark> missingForStrategy(const loop::Loop& loop) {
  const loop::Control& control = loop.control;
  const Remark no_set_point = remark(Code::kCommandNoSetPoint, {strategyName(control.strategy)});
  if (control.strategy == Strategy::kDpHeaders && !(control.header_supply && control.header_return))
    return remark(Code::kCommandNoHeaders);
  if (control.strategy == Strategy::kDpPump || control.strategy == Strategy::kDpHeaders) {
    if (!control.set_point_kpa) return no_set_point;
  }
  if (control.strategy != Strategy::kFieldSensor) return std::nullopt;
  for (const loop::Sensor& sensor : loop.sensors)
    if (std::find(control.sensors.begin(), control.sensors.end(), sensor.id) != control.sensors.end() &&
        !sensor.set_point_kpa)
      return no_set_point;
  return std::nullopt;
}

std::optional<Remark> applyControl(loop::Loop& loop, const LoopOptions& options, quantity::UnitSystem units) {
  if (!options.strategy.empty()) {
    const Expected<Strategy> strategy = strategyOf(options.strategy);
    if (!strategy) return strategy.error();
    loop.control.strategy = *strategy;
  } else if (!options.speed.empty()) {
    loop.control.strategy = Strategy::kConstantSpeed;
  } else if (!options.sensors.empty()) {
    loop.control.strategy = Strategy::kFieldSensor;
  }
  if (loop.control.strategy == Strategy::kFieldSensor)
    if (auto reason = chooseSensors(loop, options.sensors)) return reason;
  if (!options.speed.empty()) {
    if (loop.control.strategy != Strategy::kConstantSpeed)
      return remark(Code::kCommandSpeedUnused, {strategyName(loop.control.strategy)});
    const Expected<double> percent = quantity::parseToFileUnit(options.speed, Quantity::kPercent, units);
    if (!percent) return percent.error();
    loop.control.speed_percent = *percent;
  }
  if (!options.set_point.empty())
    if (auto reason = applySetPoint(loop, options.set_point, units)) return reason;
  const bool asked = !options.strategy.empty() || !options.sensors.empty();
  return asked ? missingForStrategy(loop) : std::nullopt;
}

void nameLines(std::vector<Remark>& remarks, const loop::Loop& loop, const loop::Lines& lines) {
  for (Remark& one : remarks) {
    if (one.place.pointer.empty() && one.place.id != 0) one.place.pointer = loop::pointerOf(loop, one.place.id);
    if (one.place.line == 0 && !one.place.pointer.empty()) one.place.line = lines.of(one.place.pointer);
  }
}

struct Share {
  std::string tag;
  double percent = 0;
};

Expected<double> shareOf(const std::string& text, const std::string& whole) {
  const Expected<double> percent = quantity::parseToFileUnit(text, Quantity::kPercent);
  if (!percent || !(*percent >= 0 && *percent <= 100)) return tl::unexpected(remark(Code::kCommandBadShare, {whole}));
  return *percent;
}

Expected<Share> taggedShare(const std::string& text) {
  const std::size_t equals = text.rfind('=');
  if (equals == std::string::npos || equals == 0) return tl::unexpected(remark(Code::kCommandBadShare, {text}));
  const Expected<double> percent = shareOf(text.substr(equals + 1), text);
  if (!percent) return tl::unexpected(percent.error());
  return Share{text.substr(0, equals), *percent};
}

// Terminals a tag stands for: one terminal, or all of the zone of that name.
std::vector<std::size_t> membersOf(const OpenedLoop& opened, const std::string& tag) {
  std::vector<std::size_t> members;
  for (std::size_t t = 0; t < opened.network.terminals.size(); ++t) {
    const network::TerminalLaw& terminal = opened.network.terminals[t];
    const bool in_zone = terminal.zone >= 0 && opened.loop.zones[static_cast<std::size_t>(terminal.zone)].name == tag;
    if (terminal.tag == tag || in_zone) members.push_back(t);
  }
  return members;
}

std::optional<Remark> applyShares(const OpenedLoop& opened, const std::vector<std::string>& texts,
                                  loop::DemandKind kind, network::Request& request) {
  for (const std::string& text : texts) {
    const Expected<Share> share = taggedShare(text);
    if (!share) return share.error();
    const std::vector<std::size_t> members = membersOf(opened, share->tag);
    if (members.empty())
      return remark(Code::kCommandUnknownTag, {share->tag, "terminal or zone", listed(tagsOf(opened.loop.terminals))});
    for (const std::size_t t : members) {
      network::TerminalDemand& demand = request.terminals[t];
      demand.kind = kind;
      demand.flow_m3s = share->percent / 100 * opened.network.terminals[t].design_flow_m3s;
      demand.stroke = share->percent / 100;
    }
  }
  return std::nullopt;
}

const loop::LoadState* findState(const loop::Loop& loop, const std::string& name) {
  for (const loop::LoadState& state : loop.load_states)
    if (state.name == name) return &state;
  return nullptr;
}

}  // namespace

void addControlOptions(CLI::App& verb, LoopOptions& options) {
  verb.add_option("FILE", options.file, "A .ebbline file, or the name of a sample")->required();
  verb.add_option("--strategy", options.strategy,
                  "What sets the speed: constant-speed, dp-pump, dp-headers, field-sensor (else as the file says)");
  verb.add_option("--set-point", options.set_point, "Set-point of that strategy, e.g. 50kPa or 7psi");
  verb.add_option("--speed", options.speed, "Pump speed in percent of reference speed, under constant speed");
  verb.add_option("--sensor", options.sensors, "Tag of a sensor to hold; may be given again (else as the file says)");
}

void addStateOptions(CLI::App& verb, LoopOptions& options) {
  verb.add_option("--state", options.state,
                  "Load state of the file by name (else every terminal asks for design flow)");
  verb.add_option("--load", options.load, "Every terminal asks for this percentage of its design flow");
  verb.add_option("--request", options.requests, "TAG=PERCENT: this terminal or zone asks for a share of design flow");
  verb.add_option("--position,--open", options.positions,
                  "TAG=PERCENT: the control valve of this terminal or zone stands at this stroke");
}

loop::Reading readFileOrSample(const std::string& file, int& exit_code) {
  std::error_code ignored;
  const std::string_view sample = resources::sampleText(file);
  const bool is_sample = !sample.empty() && !std::filesystem::exists(file, ignored);
  loop::Reading reading = is_sample ? loop::readLoop(sample) : loop::readLoopFile(file);
  exit_code = kDone;
  if (!reading.usable()) exit_code = kFaulty;
  for (const Remark& one : reading.remarks)
    if (one.code == Code::kFileCannotOpen) exit_code = kNoAccess;
  return reading;
}

OpenedLoop openLoop(const LoopOptions& options, quantity::UnitSystem units) {
  OpenedLoop opened;
  opened.name = std::filesystem::path(options.file).filename().string();
  loop::Reading reading = readFileOrSample(options.file, opened.exit_code);
  opened.remarks = std::move(reading.remarks);
  opened.loop = std::move(reading.loop);
  if (opened.exit_code != kDone) return opened;
  if (const auto reason = applyControl(opened.loop, options, units)) {
    opened.remarks.push_back(*reason);
    opened.exit_code = kUsage;
    return opened;
  }
  network::Compiled compiled = network::compile(opened.loop);
  nameLines(compiled.remarks, opened.loop, reading.lines);
  opened.remarks.insert(opened.remarks.end(), compiled.remarks.begin(), compiled.remarks.end());
  if (!compiled.usable()) opened.exit_code = kFaulty;
  opened.network = std::move(compiled.network);
  return opened;
}

Expected<network::Request> requestOf(const OpenedLoop& opened, const LoopOptions& options) {
  const loop::LoadState* state = nullptr;
  if (!options.state.empty()) {
    state = findState(opened.loop, options.state);
    std::vector<std::string> names;
    for (const loop::LoadState& one : opened.loop.load_states) names.push_back(one.name);
    if (state == nullptr) return tl::unexpected(remark(Code::kCommandUnknownState, {options.state, listed(names)}));
  }
  network::Request request = network::requestOf(opened.loop, opened.network, state);
  if (!options.load.empty()) {
    const Expected<double> percent = shareOf(options.load, options.load);
    if (!percent) return tl::unexpected(remark(Code::kCommandBadLoads, {options.load}));
    for (std::size_t t = 0; t < request.terminals.size(); ++t) {
      request.terminals[t].kind = loop::DemandKind::kRequest;
      request.terminals[t].flow_m3s = *percent / 100 * opened.network.terminals[t].design_flow_m3s;
    }
  }
  if (auto reason = applyShares(opened, options.requests, loop::DemandKind::kRequest, request))
    return tl::unexpected(*reason);
  if (auto reason = applyShares(opened, options.positions, loop::DemandKind::kPosition, request))
    return tl::unexpected(*reason);
  return request;
}

std::string stateName(const LoopOptions& options) {
  std::string name = options.state.empty() ? "design load" : options.state;
  if (!options.load.empty()) name = options.load + " % of design flow";
  if (!options.requests.empty() || !options.positions.empty()) name += ", changed";
  return name;
}

std::string strategyName(Strategy strategy) {
  for (const StrategyWord& word : kStrategies)
    if (word.strategy == strategy) return word.name;
  return "";
}

std::string controlInWords(const loop::Loop& loop, quantity::UnitSystem units) {
  std::string words;
  for (const StrategyWord& word : kStrategies)
    if (word.strategy == loop.control.strategy) words = word.words;
  const auto pressure = [&](double kpa) {
    return quantity::formatWithUnit(quantity::fileToBase(kpa, Quantity::kPressure), Quantity::kPressure, units);
  };
  if (loop.control.strategy == Strategy::kConstantSpeed)
    return words + fmt::format(", {:g} %", loop.control.speed_percent);
  if (loop.control.strategy != Strategy::kFieldSensor)
    return loop.control.set_point_kpa ? words + ", " + pressure(*loop.control.set_point_kpa) : words;
  for (const loop::Sensor& sensor : loop.sensors)
    if (std::find(loop.control.sensors.begin(), loop.control.sensors.end(), sensor.id) != loop.control.sensors.end())
      words += " " + sensor.tag + (sensor.set_point_kpa ? ", " + pressure(*sensor.set_point_kpa) : "");
  return words;
}

}  // namespace ebbline::app
