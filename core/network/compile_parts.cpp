#include <cmath>

#include "core/catalogue/fitting.h"
#include "core/catalogue/pipe.h"
#include "core/network/compile_draft.h"
#include "core/part/valve.h"

namespace ebbline::network {

using loop::Side;
using text::Code;

namespace {

constexpr double kMetresPerMillimetre = 1e-3;
constexpr double kCubicMetresPerLitre = 1e-3;
constexpr double kPaPerKpa = 1000;
constexpr double kSteelRoughness = 0.045e-3;  // m, new commercial steel [common practice]

/// Remarks of the catalogue get the place of the pipe.
void sayOf(Draft& draft, text::Remark remark, loop::Id id, const std::string& tag) {
  remark.place.id = id;
  remark.place.tag = tag;
  draft.remarks.push_back(std::move(remark));
}

struct Section {
  double bore_m = 0;
  double roughness_m = -1;  // < 0: not known
};

/// Inside diameter and roughness from what is typed, and else from the tables; bore 0 after a remark.
Section sectionOf(Draft& draft, const loop::Pipe& pipe, loop::Id id, const std::string& tag) {
  Section section;
  if (pipe.bore_mm) {
    if (!needPositive(draft, *pipe.bore_mm, "the bore", id, tag)) return {};
    section.bore_m = *pipe.bore_mm * kMetresPerMillimetre;
    if (const catalogue::PipeSeries* series = catalogue::findSeries(pipe.series))
      section.roughness_m = series->sizes.front().roughness_m;
  } else if (pipe.series.empty() && pipe.size.empty()) {
    draft.say(Code::kSolvePipeNoSize, id, tag);
    return {};
  } else {
    auto size = catalogue::pipeSize(pipe.series, pipe.size);
    if (!size) {
      sayOf(draft, std::move(size.error()), id, tag);
      return {};
    }
    section = {size->bore_m, size->roughness_m};
  }
  if (pipe.roughness_mm) {
    if (!needNotNegative(draft, *pipe.roughness_mm, "the roughness", id, tag)) return {};
    section.roughness_m = *pipe.roughness_mm * kMetresPerMillimetre;
  }
  if (section.roughness_m < 0) {
    section.roughness_m = kSteelRoughness;
    draft.say(Code::kSolveRoughnessAssumed, id, tag, {shown(kSteelRoughness / kMetresPerMillimetre)});
  }
  if (section.roughness_m > 0.5 * section.bore_m) {
    draft.say(Code::kSolveRoughnessTooLarge, id, tag);
    return {};
  }
  return section;
}

double fittingsOf(Draft& draft, const loop::Pipe& pipe, double bore_m, loop::Id id, const std::string& tag) {
  double sum = 0;
  for (const loop::Fitting& fitting : pipe.fittings) {
    if (!needNotNegative(draft, fitting.count, "the number of fittings", id, tag)) continue;
    auto k = catalogue::fittingK(fitting.kind, bore_m);
    if (!k)
      sayOf(draft, std::move(k.error()), id, tag);
    else
      sum += fitting.count * *k;
  }
  return sum;
}

}  // namespace

bool addKnownLoss(Draft& draft, Element& element, const loop::KnownLoss& loss, const char* name, loop::Id id,
                  const std::string& tag) {
  if (!needNotNegative(draft, loss.loss_kpa, name, id, tag)) return false;
  if (!needNotNegative(draft, loss.flow_l_s, "the flow of the known loss", id, tag)) return false;
  if (loss.loss_kpa == 0) return true;
  if (loss.flow_l_s == 0) {
    draft.say(Code::kSolveLossWithoutFlow, id, tag, {shown(loss.loss_kpa)});
    return false;
  }
  if (!(loss.exponent >= 1 && loss.exponent <= 3)) {
    draft.say(Code::kSolveExponent, id, tag, {shown(loss.exponent)});
    return false;
  }
  const double coefficient =
      part::powerCoefficient(loss.loss_kpa * kPaPerKpa, loss.flow_l_s * kCubicMetresPerLitre, loss.exponent);
  if (!std::isfinite(coefficient)) {
    draft.say(Code::kSolveNotFinite, id, tag, {name});
    return false;
  }
  if (element.num_powers == 0) element.first_power = static_cast<int>(draft.network.powers.size());
  draft.network.powers.push_back({coefficient, loss.exponent});
  ++element.num_powers;
  return true;
}

void addPipeLaws(Draft& draft, Element& element, const loop::Pipe& pipe, loop::Id id, const std::string& tag) {
  if (pipe.known_loss) {
    addKnownLoss(draft, element, *pipe.known_loss, "the known loss", id, tag);
    if (pipe.bore_mm && needPositive(draft, *pipe.bore_mm, "the bore", id, tag))
      element.bore_m = *pipe.bore_mm * kMetresPerMillimetre;
    return;
  }
  if (!needPositive(draft, pipe.length_m, "the length", id, tag)) return;
  if (!needNotNegative(draft, pipe.extra_k, "the loss coefficient", id, tag)) return;
  if (!needNotNegative(draft, pipe.fittings_allowance_percent, "the allowance for fittings", id, tag)) return;
  const Section section = sectionOf(draft, pipe, id, tag);
  if (section.bore_m <= 0) return;
  PipeLaw law;
  law.length_m = pipe.length_m * (1 + pipe.fittings_allowance_percent / 100);
  law.bore_m = section.bore_m;
  law.roughness_m = section.roughness_m;
  law.loss_k = pipe.extra_k + fittingsOf(draft, pipe, section.bore_m, id, tag);
  element.first_pipe = static_cast<int>(draft.network.pipes.size());
  element.num_pipes = 1;
  if (element.kind == Element::Kind::kPipe) element.bore_m = section.bore_m;
  draft.network.pipes.push_back(law);
}

void addLink(Draft& draft, const Element& element, int from, int to, const std::string& tag) {
  if (from < 0 || to < 0) return;
  if (from == to) {
    draft.say(Code::kLoopSameEnds, element.id, tag, {"this part"});
    return;
  }
  ++draft.points[from].degree;
  ++draft.points[to].degree;
  draft.links.push_back({from, to, static_cast<int>(draft.network.elements.size()), tag});
  draft.network.elements.push_back(element);
}

namespace {

int pairedJoint(Draft& draft, loop::Id joint, const loop::PairedRun& run, const char* which) {
  if (joint == 0) {
    draft.say(Code::kSolveOpenEnd, run.id, run.tag, {which});
    return -1;
  }
  const auto found = draft.joint_of.find(joint);
  if (found == draft.joint_of.end()) {
    draft.say(Code::kLoopNoSuchJoint, run.id, run.tag, {which, std::to_string(joint)});
    return -1;
  }
  const loop::Joint& there = draft.loop->joints[found->second];
  if (there.paired) return draft.first_point[found->second];
  draft.say(Code::kLoopRunNeedsPair, run.id, run.tag, {there.tag.empty() ? std::to_string(joint) : there.tag});
  return -1;
}

void addPairedRun(Draft& draft, const loop::PairedRun& run) {
  const int from = pairedJoint(draft, run.from, run, "the beginning of the run");
  const int to = pairedJoint(draft, run.to, run, "the end of the run");
  if (from >= 0 && from == to) {
    draft.say(Code::kLoopSameEnds, run.id, run.tag, {"the run"});
    return;
  }
  Element supply;
  supply.id = run.id;
  supply.side = Side::kSupply;
  addPipeLaws(draft, supply, run.pipe, run.id, run.tag);
  Element back;
  back.id = run.id;
  back.side = Side::kReturn;
  addPipeLaws(draft, back, run.return_pipe ? *run.return_pipe : run.pipe, run.id, run.tag);
  if (from < 0 || to < 0) return;
  // Drawn direction of both is from → to; the return's water runs the other way, so its flow is negative there.
  addLink(draft, supply, from, to, run.tag);
  addLink(draft, back, from + 1, to + 1, run.tag);
}

bool joinsSides(const loop::End& from, const loop::End& to) {
  return (from.side == Side::kSupply && to.side == Side::kReturn) ||
         (from.side == Side::kReturn && to.side == Side::kSupply);
}

}  // namespace

void draftParts(Draft& draft) {
  for (const loop::PairedRun& run : draft.loop->paired_runs) addPairedRun(draft, run);
  for (const loop::PipeRun& run : draft.loop->pipe_runs) {
    Element element;
    element.id = run.id;
    addPipeLaws(draft, element, run.pipe, run.id, run.tag);
    const int from = draft.pointOf(run.from, run.id, run.tag, "the beginning of the pipe");
    const int to = draft.pointOf(run.to, run.id, run.tag, "the end of the pipe");
    if (from >= 0 && to >= 0 && joinsSides(run.from, run.to)) draft.say(Code::kSolveSupplyToReturn, run.id, run.tag);
    addLink(draft, element, from, to, run.tag);
  }
}

}  // namespace ebbline::network
