#include "ui/report/words.h"

#include <algorithm>
#include <cmath>

#include <QCoreApplication>

namespace ebbline::report {
namespace {

using quantity::Quantity;

QString tr(const char* english) {
  return QCoreApplication::translate("report", english);
}

QString of(const std::string& text) {
  return QString::fromStdString(text);
}

QString percent(double value, int decimals = 0) {
  return theme::numberText(value, decimals);
}

const study::SweepRow* rowNearest(const ReportContent& content, double load) {
  const study::SweepRow* best = nullptr;
  for (const study::SweepRow& row : content.rows) {
    if (!row.summary.usable()) continue;
    if (!best || std::abs(row.load_percent - load) < std::abs(best->load_percent - load)) best = &row;
  }
  return best;
}

int rowsShort(const ReportContent& content) {
  return static_cast<int>(std::count_if(content.rows.begin(), content.rows.end(), [](const study::SweepRow& row) {
    return row.summary.usable() && row.num_under_supplied > 0;
  }));
}

// " The pump runs at 71 % speed on 0.57 kW, against 1.85 kW at design load."
QString pumpSentence(const ReportContent& content) {
  const network::PumpResult& pump = content.picture->results.pumps.front();
  const QString speed = percent(100 * pump.speed);
  const study::SweepRow* full = rowNearest(content, 100);
  if (!full || full->shaft_power_w <= 0) return tr(" The pump runs at %1 % speed.").arg(speed);
  double power = 0;
  for (const network::PumpResult& one : content.picture->results.pumps) power += one.shaft_power_w;
  return tr(" The pump runs at %1 % speed on %2, against %3 at design load.")
      .arg(speed, shownWithUnit(power, Quantity::kPower, content.units),
           shownWithUnit(full->shaft_power_w, Quantity::kPower, content.units));
}

Headline shortInPicture(const ReportContent& content) {
  const network::PartLoadPicture& picture = *content.picture;
  const auto& worst = picture.results.terminals.at(static_cast<std::size_t>(picture.first_under_supplied));
  Headline headline;
  headline.bad = true;
  headline.figure = QString::number(picture.under_supplied);
  headline.strong = picture.under_supplied == 1 ? tr("terminal does not get the flow it asks for")
                                                : tr("terminals do not get the flow they ask for");
  headline.words =
      tr("In the state drawn, with %1. %2 misses most: it asks for %3 and gets %4.")
          .arg(of(content.strategy), of(worst.tag), shownWithUnit(worst.requested_m3s, Quantity::kFlow, content.units),
               shownWithUnit(worst.delivered_m3s, Quantity::kFlow, content.units));
  QStringList essential;
  for (std::size_t t = 0; t < picture.results.terminals.size(); ++t)
    if (picture.results.terminals[t].under_supplied && content.loop->terminals[t].essential)
      essential << of(picture.results.terminals[t].tag);
  if (!essential.isEmpty()) headline.words += tr(" Essential and short: %1.").arg(essential.join(QStringLiteral(", ")));
  headline.words += pumpSentence(content);
  return headline;
}

Headline shortInTable(const ReportContent& content) {
  Headline headline;
  headline.bad = true;
  headline.figure = QString::number(rowsShort(content));
  headline.unit = tr("of %1").arg(content.rows.size());
  headline.strong = tr("loads of the table leave a terminal short");
  headline.words = tr("With %1. In the state drawn every terminal gets the flow it asks for; the table names, for each "
                      "load, the terminal that misses most.")
                       .arg(of(content.strategy));
  return headline;
}

}  // namespace

QString unitOf(Quantity quantity, quantity::UnitSystem units) {
  const std::string_view label = quantity::unitLabel(quantity, units);
  return QString::fromUtf8(label.data(), static_cast<qsizetype>(label.size()));
}

QString shownNumber(double base, Quantity quantity, quantity::UnitSystem units) {
  return of(quantity::format(base, quantity, units));
}

QString shownWithUnit(double base, Quantity quantity, quantity::UnitSystem units) {
  return of(quantity::formatWithUnit(base, quantity, units));
}

QString questionOf(const ReportContent& content) {
  if (!content.question.empty()) return of(content.question);
  return tr("Can the pump slow down when rooms are closed,\nand will every room still be served?");
}

Headline headlineOf(const ReportContent& content) {
  if (content.picture->under_supplied > 0) return shortInPicture(content);
  if (rowsShort(content) > 0) return shortInTable(content);
  Headline headline;
  const study::SweepRow* full = rowNearest(content, 100);
  const study::SweepRow* half = rowNearest(content, 50);
  if (!full || !half || full == half) return headline;
  const bool power = full->shaft_power_w > 0;
  const double before = power ? full->shaft_power_w : full->pressure_pa;
  const double after = power ? half->shaft_power_w : half->pressure_pa;
  const Quantity quantity = power ? Quantity::kPower : Quantity::kPressure;
  headline.figure = percent(100 * (1 - after / before));
  headline.unit = QStringLiteral("%");
  headline.strong = power ? tr("less pump power at half load than at design load")
                          : tr("less pump pressure at half load than at design load");
  headline.words =
      tr("From %1 to %2 at %3 % of design flow, with %4. Every terminal gets the flow it asks for in the state "
         "drawn and at each load of the table. States not listed are not covered.")
          .arg(shownWithUnit(before, quantity, content.units), shownWithUnit(after, quantity, content.units),
               percent(half->load_percent), of(content.strategy));
  return headline;
}

QString assumedOf(const ReportContent& content) {
  const loop::Loop& loop = *content.loop;
  QStringList said;
  QString fluid = tr("water");
  if (loop.fluid.kind == loop::FluidKind::kEthyleneGlycol || loop.fluid.kind == loop::FluidKind::kPropyleneGlycol)
    fluid =
        tr("water with %1 % %2 by mass")
            .arg(percent(loop.fluid.glycol_mass_percent),
                 loop.fluid.kind == loop::FluidKind::kEthyleneGlycol ? tr("ethylene glycol") : tr("propylene glycol"));
  if (loop.fluid.kind == loop::FluidKind::kGiven) fluid = tr("a fluid given by its properties");
  said << tr("Steady state; %1 at %2.")
              .arg(fluid, shownWithUnit(loop.fluid.temperature_c, Quantity::kTemperature, content.units));
  said << tr("Each terminal throttles to the flow it asks for and is fully open below that.");
  said << tr("In the table every terminal asks for the same share of its design flow.");
  if (loop.pumps.size() > 1) said << tr("All pumps run at one common speed.");
  said << tr("Pipes as new; valve, coil and pump data as given in the file. Buoyancy and leakage are left out.");
  return said.join(QLatin1Char(' '));
}

QString minimumFlowSentence(const ReportContent& content) {
  double minimum = 0;
  QString tag;
  for (const loop::Plant& plant : content.loop->plants)
    if (plant.minimum_flow_l_s && *plant.minimum_flow_l_s > minimum) {
      minimum = *plant.minimum_flow_l_s;
      tag = of(plant.tag);
    }
  if (minimum <= 0) return {};
  const double least = quantity::fileToBase(minimum, Quantity::kFlow);
  const QString words = shownWithUnit(least, Quantity::kFlow, content.units);
  for (const study::SweepRow& row : content.rows)
    if (row.summary.usable() && row.flow_m3s < least)
      return tr("At %1 % load and below, %2 gets less than its minimum of %3: a bypass or another stop is needed.")
          .arg(percent(row.load_percent), tag, words);
  return tr("Keep %1 above its minimum of %2.").arg(tag, words);
}

QString cautionOf(const ReportContent& content) {
  const loop::Loop& loop = *content.loop;
  QStringList said;
  said << tr(
      "Estimate for engineering judgement: check against local codes and the makers' data, and have a licensed "
      "engineer sign what is built.");
  const QString minimum = minimumFlowSentence(content);
  if (!minimum.isEmpty()) said << minimum;
  QStringList essential;
  for (const loop::Terminal& terminal : loop.terminals)
    if (terminal.essential) essential << of(terminal.tag);
  if (!essential.isEmpty()) said << tr("Essential, never to run short: %1.").arg(essential.join(QStringLiteral(", ")));
  if (loop.control.strategy != loop::Strategy::kConstantSpeed)
    said << tr("If the sensor fails, hold a fallback speed, never zero.");
  said << tr(
      "Try a lower set-point only at steady load near design, with plant flow watched and the old value written "
      "down.");
  for (const loop::Plant& plant : loop.plants)
    if (plant.kind == loop::PlantKind::kBoiler) {
      said << tr("A boiler needs flow while it runs on after stopping.");
      break;
    }
  if (loop.fluid.kind == loop::FluidKind::kEthyleneGlycol) said << tr("Ethylene glycol is toxic.");
  said << tr("Relief, expansion, water treatment and freeze protection are outside this report.");
  return said.join(QLatin1Char(' '));
}

QString pictureTitle(const ReportContent& content) {
  return tr("The loop in the state “%1”: %2 % of design flow")
      .arg(of(content.state_name), percent(100 * content.picture->delivered_share));
}

QString footLeft(const ReportContent& content) {
  return tr("Ebbline %1 · %2 · state: %3 · %4")
      .arg(QStringLiteral(EBBLINE_VERSION), of(content.file_name), of(content.state_name), of(content.strategy));
}

QString footRight(const ReportContent& content) {
  const QString second = content.method_difference
                             ? tr("second method %1").arg(theme::residualText(*content.method_difference))
                             : tr("second method not available");
  return tr("flow residual %1 · %2").arg(theme::residualText(content.picture->summary.flow_residual), second);
}

}  // namespace ebbline::report
