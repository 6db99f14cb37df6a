#include "ui/canvas/dressing.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <map>
#include <unordered_map>

namespace ebbline::canvas {
namespace {

using quantity::Quantity;

std::uint64_t keyOf(loop::Id id, loop::Side side) {
  return (static_cast<std::uint64_t>(id) << 2) | static_cast<std::uint64_t>(side);
}

QRgb rgb(const QColor& colour) {
  return colour.rgba();
}

constexpr double kNoFlow = 1e-7;  // of design flow: below this a run is drawn as one without flow

constexpr int kShades = 128;  // of a scale: finer than can be told apart, few enough to share pens

std::vector<QRgb> shadesOf(const theme::Theme& theme, ColourBy by) {
  const theme::ColourScale& scale = by == ColourBy::kPressure ? theme.cividis : theme.viridis;
  std::vector<QRgb> out;
  for (int i = 0; i <= kShades; ++i) out.push_back(rgb(scale.at(static_cast<double>(i) / kShades)));
  return out;
}

double shown(ColourBy by, double value, quantity::UnitSystem units) {
  return quantity::toShown(value, by == ColourBy::kPressure ? Quantity::kPressure : Quantity::kGradient, units);
}

}  // namespace

double weightOf(double flow_m3s, double designFlow_m3s, const theme::Stroke& stroke) {
  if (!(designFlow_m3s > 0)) return stroke.pipeMin;
  const double share = std::sqrt(std::abs(flow_m3s) / designFlow_m3s);
  return std::clamp(stroke.pipeMin + stroke.pipeGain * share, stroke.pipeMin, stroke.pipeMax);
}

// Of a scale, measured in the range it has to cover: beyond that too much of it is empty.
constexpr double kMostCovered = 4.0 / 3;

Scale roundScale(double low, double high) {
  Scale out;
  if (!std::isfinite(low) || !std::isfinite(high)) return out;
  if (high - low < 1e-9 * std::max(1.0, std::abs(high))) high = low + std::max(1e-3, std::abs(low) * 0.01);
  const double span = high - low, power = std::pow(10.0, std::floor(std::log10(span / 4)));
  const auto covered = [&](double step) {
    return (std::ceil(high / step - 1e-9) - std::floor(low / step + 1e-9)) * step;
  };
  double step = 0;
  int decimals = 0;
  const auto take = [&](double factor) {
    step = factor * power;
    decimals =
        std::max(0, static_cast<int>(-std::floor(std::log10(step) + 1e-9)) + (factor == 2.5 && step < 10 ? 1 : 0));
  };
  // The usual step cuts the range into about four. Where a little on one side of zero would open a whole empty step,
  // the step of at most six that leaves least empty is taken.
  for (const double factor : {1.0, 2.0, 4.0, 5.0, 10.0})
    if (factor * power >= span / 4 * (1 - 1e-9)) {
      take(factor);
      break;
    }
  if (covered(step) > kMostCovered * span)
    for (const double factor : {10.0, 5.0, 4.0, 2.5, 2.0, 1.0})
      if (covered(factor * power) <= 6.01 * factor * power && covered(factor * power) < covered(step) * (1 - 1e-9))
        take(factor);
  out.valid = true;
  out.step = step;
  out.low = std::floor(low / step + 1e-9) * step;
  out.high = std::ceil(high / step - 1e-9) * step;
  out.decimals = decimals;
  return out;
}

bool Dresser::matches(const Geometry& geometry, const network::Results& results) const {
  if (found_.size() != geometry.strands.size()) return false;
  for (size_t i = 0; i < found_.size(); ++i) {
    const Found& f = found_[i];
    const Strand& strand = geometry.strands[i];
    if (f.part >= 0 &&
        (f.part >= static_cast<int>(results.parts.size()) ||
         results.parts[static_cast<size_t>(f.part)].id != strand.id ||
         (strand.kind == PartKind::kPairedRun && results.parts[static_cast<size_t>(f.part)].side != strand.side)))
      return false;
    if (f.from >= static_cast<int>(results.ends.size()) || f.to >= static_cast<int>(results.ends.size())) return false;
    if (f.from >= 0 && !(results.ends[static_cast<size_t>(f.from)].end == strand.from)) return false;
    if (f.to >= 0 && !(results.ends[static_cast<size_t>(f.to)].end == strand.to)) return false;
    if (f.part < 0 || f.from < 0 || f.to < 0) return false;  // something was missing: look again
  }
  return true;
}

void Dresser::match(const Geometry& geometry, const network::Results& results) {
  if (matches(geometry, results)) return;
  std::unordered_map<std::uint64_t, int> parts;
  std::map<loop::End, int, EndLess> ends;
  for (size_t i = 0; i < results.parts.size(); ++i) {
    const network::PartResult& part = results.parts[i];
    parts[keyOf(part.id, part.side)] = static_cast<int>(i);
    parts.emplace(keyOf(part.id, loop::Side::kSingle), static_cast<int>(i));
  }
  for (size_t i = 0; i < results.ends.size(); ++i) ends[results.ends[i].end] = static_cast<int>(i);
  found_.assign(geometry.strands.size(), {});
  for (size_t i = 0; i < found_.size(); ++i) {
    const Strand& strand = geometry.strands[i];
    const auto side = strand.kind == PartKind::kPairedRun ? strand.side : loop::Side::kSingle;
    const auto part = parts.find(keyOf(strand.id, side));
    const auto from = ends.find(strand.from), to = ends.find(strand.to);
    found_[i] = {part == parts.end() ? -1 : part->second, -1, from == ends.end() ? -1 : from->second,
                 to == ends.end() ? -1 : to->second};
  }
}

double Dresser::flowOf(size_t strand, const network::Results& results) const {
  const int part = found_[strand].part;
  return part < 0 ? 0 : results.parts[static_cast<size_t>(part)].flow_m3s;
}

// Pressure or gradient of a line, in the unit shown; false if the results do not tell it.
bool Dresser::valueOf(size_t strand, const LoopPicture& picture, double& value) const {
  const Found& f = found_[strand];
  const network::Results& results = *picture.results;
  if (picture.colourBy == ColourBy::kGradient) {
    if (f.part < 0) return false;
    const network::PartResult& part = results.parts[static_cast<size_t>(f.part)];
    if (part.kind != network::Element::Kind::kPipe) return false;
    value = shown(picture.colourBy, std::abs(part.gradient_pa_m), picture.units);
    return true;
  }
  if (f.from < 0 || f.to < 0) return false;
  const network::EndResult &a = results.ends[static_cast<size_t>(f.from)], &b = results.ends[static_cast<size_t>(f.to)];
  if (!a.determined || !b.determined) return false;
  value = shown(picture.colourBy, (a.pressure_pa + b.pressure_pa) / 2, picture.units);
  return true;
}

Scale Dresser::scaleOf(const Geometry& geometry, const LoopPicture& picture) const {
  double low = std::numeric_limits<double>::infinity(), high = -low;
  for (size_t i = 0; i < geometry.strands.size(); ++i) {
    double value = 0;
    if (!valueOf(i, picture, value)) continue;
    low = std::min(low, value);
    high = std::max(high, value);
  }
  if (low > high) return {};
  if (picture.colourBy == ColourBy::kGradient) low = 0;
  Scale scale = roundScale(low, high);
  const auto unit = [&](Quantity quantity) {
    const std::string_view label = quantity::unitLabel(quantity, picture.units);
    return QString::fromUtf8(label.data(), static_cast<qsizetype>(label.size()));
  };
  scale.words = picture.colourBy == ColourBy::kPressure
                    ? (picture.loop->vessels.empty() ? QObject::tr("relative pressure, %1")
                                                     : QObject::tr("pressure above the vessel, %1"))
                          .arg(unit(Quantity::kPressure))
                    : QObject::tr("friction gradient, %1").arg(unit(Quantity::kGradient));
  return scale;
}

void Dresser::dressTerminals(const LoopPicture& picture) {
  const auto& terminals = picture.loop->terminals;
  out_.terminals.assign(terminals.size(), {});
  if (!picture.results) return;
  const auto& results = picture.results->terminals;
  std::unordered_map<loop::Id, size_t> byId;
  for (size_t i = 0; i < terminals.size(); ++i) {
    size_t at = i;  // the usual order is that of the loop
    if (at >= results.size() || results[at].id != terminals[i].id) {
      if (byId.empty())
        for (size_t k = 0; k < results.size(); ++k) byId[results[k].id] = k;
      const auto found = byId.find(terminals[i].id);
      if (found == byId.end()) continue;
      at = found->second;
    }
    const network::TerminalResult& r = results[at];
    const bool idle = std::abs(r.delivered_m3s) <= kNoFlow * out_.designFlow_m3s;
    out_.terminals[i] = {true, idle && !r.under_supplied, r.under_supplied, std::clamp(r.stroke, 0.0, 1.0),
                         r.shortfall};
  }
}

// Widths go in steps of an eighth of a px, so that a loop needs some dozens of pens and not one per pipe.
void Dresser::collectPens(const Geometry& geometry) {
  std::unordered_map<std::uint64_t, int> known;
  out_.pens.clear();
  for (size_t i = 0; i < out_.strands.size(); ++i) {
    StrandLook& look = out_.strands[i];
    const Strand& strand = geometry.strands[i];
    const int eighths = static_cast<int>(std::lround(look.width * 8));
    const std::uint64_t key = (static_cast<std::uint64_t>(eighths) << 35) | (std::uint64_t{strand.isReturn} << 34) |
                              (std::uint64_t{strand.leg} << 33) | (std::uint64_t{look.outlined} << 32) | look.colour;
    const auto [found, fresh] = known.try_emplace(key, static_cast<int>(out_.pens.size()));
    if (fresh) out_.pens.push_back({eighths / 8.0, look.colour, strand.isReturn, strand.leg, look.outlined});
    look.pen = found->second;
  }
}

const Dressing& Dresser::dress(const Geometry& geometry, const Topology& topology, const LoopPicture& picture,
                               const theme::Theme& theme) {
  out_.designFlow_m3s = topology.designFlow_m3s();
  out_.solved = picture.results != nullptr;
  out_.scale = {};
  if (picture.results) match(geometry, *picture.results);
  const bool coloured = picture.results && picture.colourBy != ColourBy::kNone;
  if (coloured) out_.scale = scaleOf(geometry, picture);
  const std::vector<QRgb> shades = coloured ? shadesOf(theme, picture.colourBy) : std::vector<QRgb>();
  const QRgb pipe = rgb(theme.colours.pipe), idle = rgb(theme.colours.pipeIdle), accent = rgb(theme.colours.accent);
  out_.strands.resize(geometry.strands.size());
  for (size_t i = 0; i < geometry.strands.size(); ++i) {
    const Strand& strand = geometry.strands[i];
    StrandLook& look = out_.strands[i];
    look = {(strand.leg ? 1.5 : 2) * theme.strokeFactor, pipe, false, false,
            strand.id == picture.selected && strand.id != 0};
    if (picture.results) {
      const double flow = flowOf(i, *picture.results);
      look.idle = std::abs(flow) <= kNoFlow * out_.designFlow_m3s;
      look.width =
          theme.strokeFactor * (look.idle ? theme.stroke.pipeMin : weightOf(flow, out_.designFlow_m3s, theme.stroke));
      if (look.idle) look.colour = idle;
      double value = 0;
      if (coloured && out_.scale.valid && !look.idle && valueOf(i, picture, value)) {
        const double share = (value - out_.scale.low) / (out_.scale.high - out_.scale.low);
        look.colour = shades[share > 0 ? static_cast<size_t>(std::lround(kShades * std::min(share, 1.0))) : 0];
        look.outlined = true;
        look.width = std::max(look.width, strand.leg ? 2.0 : 2.5);
      }
    }
    if (look.selected && !look.outlined) look.colour = accent;
  }
  collectPens(geometry);
  dressTerminals(picture);
  return out_;
}

}  // namespace ebbline::canvas
