#include "ui/canvas/facts.h"

#include <QCoreApplication>
#include <QStringList>
#include <algorithm>

#include "ui/canvas/labels.h"

namespace ebbline::canvas {
namespace {

using quantity::Quantity;

QString words(const char* text) {
  return QCoreApplication::translate("LoopCanvas", text);
}

class Teller {
 public:
  Teller(const Topology& topology, const LoopPicture& picture) : topology_(topology), picture_(picture) {}

  Facts tell(loop::Id id) {
    const PartRef* part = topology_.part(id);
    if (!part) return {};
    const loop::Loop& loop = *picture_.loop;
    const auto i = static_cast<size_t>(part->index);
    switch (part->kind) {
      case PartKind::kPairedRun:
        pairedRun(loop.paired_runs[i]);
        break;
      case PartKind::kPipeRun:
        pipeRun(loop.pipe_runs[i]);
        break;
      case PartKind::kTerminal:
        terminal(loop.terminals[i]);
        break;
      case PartKind::kPlant:
        plant(loop.plants[i]);
        break;
      case PartKind::kPump:
        pump(loop.pumps[i]);
        break;
      case PartKind::kValve:
        valve(loop.valves[i]);
        break;
      case PartKind::kSensor:
        sensor(loop.sensors[i]);
        break;
      case PartKind::kVessel:
        vessel(loop.vessels[i]);
        break;
      case PartKind::kNote:
        facts_.title = QString::fromStdString(loop.notes[i].text);
        break;
    }
    return std::move(facts_);
  }

 private:
  QString with(double base, Quantity of) const {
    return QString::fromStdString(quantity::formatWithUnit(base, of, picture_.units));
  }
  void add(const char* name, const QString& value, bool under = false) {
    facts_.lines.push_back({words(name), value, under});
  }
  void title(const std::string& tag, const char* kind) {
    facts_.title = tag.empty() ? words(kind) : words(kind) + " " + QString::fromStdString(tag);
  }

  const network::PartResult* result(loop::Id id, loop::Side side) const {
    if (!picture_.results) return nullptr;
    const auto& parts = picture_.results->parts;
    const auto found = std::find_if(parts.begin(), parts.end(), [&](const network::PartResult& r) {
      return r.id == id && (side == loop::Side::kSingle || r.side == side);
    });
    return found == parts.end() ? nullptr : &*found;
  }

  const network::EndResult* end(const loop::End& of) const {
    if (!picture_.results) return nullptr;
    const auto& ends = picture_.results->ends;
    const auto found = std::find_if(ends.begin(), ends.end(), [&](const network::EndResult& r) { return r.end == of; });
    return found == ends.end() ? nullptr : &*found;
  }

  void flowFacts(const network::PartResult* found) {
    if (!found) return;
    add(QT_TRANSLATE_NOOP("LoopCanvas", "flow"), with(std::abs(found->flow_m3s), Quantity::kFlow));
    if (found->velocity_ms != 0)
      add(QT_TRANSLATE_NOOP("LoopCanvas", "velocity"), with(std::abs(found->velocity_ms), Quantity::kVelocity));
    if (found->gradient_pa_m != 0)
      add(QT_TRANSLATE_NOOP("LoopCanvas", "gradient"), with(std::abs(found->gradient_pa_m), Quantity::kGradient));
  }

  void pressureFact(const loop::End& at) {
    const network::EndResult* found = end(at);
    if (!found) return;
    if (!found->determined)
      add(QT_TRANSLATE_NOOP("LoopCanvas", "pressure"), words(QT_TRANSLATE_NOOP("LoopCanvas", "cut off")));
    else if (found->gauge_pa)
      add(QT_TRANSLATE_NOOP("LoopCanvas", "gauge pressure"), with(*found->gauge_pa, Quantity::kPressure));
    else
      add(QT_TRANSLATE_NOOP("LoopCanvas", "relative pressure"), with(found->pressure_pa, Quantity::kPressure));
  }

  void pairedRun(const loop::PairedRun& run) {
    title(run.tag, QT_TRANSLATE_NOOP("LoopCanvas", "paired run"));
    if (!run.pipe.size.empty()) facts_.title += " · " + QString::fromStdString(run.pipe.size);
    flowFacts(result(run.id, loop::Side::kSupply));
    const network::EndResult *high = end({run.to, loop::Side::kSupply}), *low = end({run.to, loop::Side::kReturn});
    if (high && low && high->determined && low->determined)
      add(QT_TRANSLATE_NOOP("LoopCanvas", "pressure across its end"),
          with(high->pressure_pa - low->pressure_pa, Quantity::kPressure));
    noResult();
  }

  void pipeRun(const loop::PipeRun& run) {
    title(run.tag, QT_TRANSLATE_NOOP("LoopCanvas", "pipe run"));
    if (!run.pipe.size.empty()) facts_.title += " · " + QString::fromStdString(run.pipe.size);
    flowFacts(result(run.id, loop::Side::kSingle));
    pressureFact(run.to);
    noResult();
  }

  void terminal(const loop::Terminal& t) {
    title(t.tag, QT_TRANSLATE_NOOP("LoopCanvas", "terminal"));
    if (t.essential) facts_.title += " · " + words(QT_TRANSLATE_NOOP("LoopCanvas", "essential"));
    const network::TerminalResult* found = nullptr;
    if (picture_.results)
      for (const network::TerminalResult& r : picture_.results->terminals)
        if (r.id == t.id) found = &r;
    if (!found) {
      add(QT_TRANSLATE_NOOP("LoopCanvas", "design flow"),
          with(quantity::fileToBase(t.design_flow_l_s, Quantity::kFlow), Quantity::kFlow));
      return;
    }
    const QString short_ = found->under_supplied ? "  (" + shortfallText(found->shortfall) + ")" : QString();
    add(QT_TRANSLATE_NOOP("LoopCanvas", "delivered"), with(found->delivered_m3s, Quantity::kFlow) + short_,
        found->under_supplied);
    add(QT_TRANSLATE_NOOP("LoopCanvas", "requested"), with(found->requested_m3s, Quantity::kFlow));
    add(QT_TRANSLATE_NOOP("LoopCanvas", "pressure across it"), with(found->available_pa, Quantity::kPressure));
    add(QT_TRANSLATE_NOOP("LoopCanvas", "valve open"), theme::numberText(100 * found->stroke, 0) + QChar(0xa0) + "%");
  }

  void plant(const loop::Plant& p) {
    const char* kind = p.kind == loop::PlantKind::kChiller  ? QT_TRANSLATE_NOOP("LoopCanvas", "chiller")
                       : p.kind == loop::PlantKind::kBoiler ? QT_TRANSLATE_NOOP("LoopCanvas", "boiler")
                                                            : QT_TRANSLATE_NOOP("LoopCanvas", "heat exchanger");
    title(p.tag, kind);
    partFacts(p.id);
    if (p.minimum_flow_l_s)
      add(QT_TRANSLATE_NOOP("LoopCanvas", "minimum flow"),
          with(quantity::fileToBase(*p.minimum_flow_l_s, Quantity::kFlow), Quantity::kFlow));
    noResult();
  }

  void partFacts(loop::Id id) {
    const network::PartResult* found = result(id, loop::Side::kSingle);
    flowFacts(found);
    if (found) add(QT_TRANSLATE_NOOP("LoopCanvas", "pressure drop"), with(found->loss_pa, Quantity::kPressure));
  }

  void pump(const loop::Pump& p) {
    title(p.tag, QT_TRANSLATE_NOOP("LoopCanvas", "pump"));
    if (picture_.results)
      for (const network::PumpResult& r : picture_.results->pumps) {
        if (r.id != p.id) continue;
        add(QT_TRANSLATE_NOOP("LoopCanvas", "flow"), with(r.flow_m3s, Quantity::kFlow));
        add(QT_TRANSLATE_NOOP("LoopCanvas", "head"), with(r.pressure_pa, Quantity::kPressure));
        add(QT_TRANSLATE_NOOP("LoopCanvas", "speed"), theme::numberText(100 * r.speed, 0) + QChar(0xa0) + "%");
        if (r.shaft_power_w > 0)
          add(QT_TRANSLATE_NOOP("LoopCanvas", "shaft power"), with(r.shaft_power_w, Quantity::kPower));
      }
    noResult();
  }

  void valve(const loop::Valve& v) {
    title(v.tag, QT_TRANSLATE_NOOP("LoopCanvas", "valve"));
    partFacts(v.id);
    noResult();
  }

  void sensor(const loop::Sensor& s) {
    title(s.tag, QT_TRANSLATE_NOOP("LoopCanvas", "sensor"));
    const network::EndResult *high = end(s.high), *low = end(s.low);
    if (high && low && high->gauge_pa && low->gauge_pa && high->determined && low->determined)
      add(QT_TRANSLATE_NOOP("LoopCanvas", "reads about"),
          with(high->pressure_pa - low->pressure_pa, Quantity::kPressure));
    if (s.set_point_kpa)
      add(QT_TRANSLATE_NOOP("LoopCanvas", "set-point"),
          with(quantity::fileToBase(*s.set_point_kpa, Quantity::kPressure), Quantity::kPressure));
  }

  void vessel(const loop::Vessel& v) {
    title(v.tag, QT_TRANSLATE_NOOP("LoopCanvas", "vessel"));
    add(QT_TRANSLATE_NOOP("LoopCanvas", "gauge pressure"),
        with(quantity::fileToBase(v.fill_kpa, Quantity::kPressure), Quantity::kPressure));
  }

  void noResult() {
    if (facts_.lines.empty() && !picture_.results) add(QT_TRANSLATE_NOOP("LoopCanvas", "not solved"), {});
    if (facts_.lines.size() > 4) facts_.lines.resize(4);
  }

  const Topology& topology_;
  const LoopPicture& picture_;
  Facts facts_;
};

}  // namespace

QString Facts::sentence() const {
  QStringList parts;
  for (const Fact& line : lines) parts << (line.value.isEmpty() ? line.name : line.name + " " + line.value);
  return parts.isEmpty() ? title : title + ": " + parts.join(", ");
}

Facts factsOf(loop::Id id, const Topology& topology, const LoopPicture& picture) {
  return Teller(topology, picture).tell(id);
}

}  // namespace ebbline::canvas
