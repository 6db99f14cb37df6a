#include "ui/plot/head_flow_plot.h"

#include <cmath>

#include "ui/plot/ticks.h"

namespace ebbline::plot {

using quantity::Quantity;
using quantity::UnitSystem;

namespace {

QString unitText(Quantity quantity, UnitSystem units) {
  const std::string_view label = quantity::unitLabel(quantity, units);
  return QString::fromUtf8(label.data(), static_cast<qsizetype>(label.size()));
}

QString percentText(double share) {
  return theme::numberText(100 * share, 0);
}

}  // namespace

HeadFlowPlot::HeadFlowPlot(const theme::ThemeHolder& holder, QWidget* parent) : Plot(holder, parent) {
  setCrosshair(true);
  setTitles(tr("Head and flow"), {});
  setAxes({tr("flow"), 0, 1}, {tr("head"), 0, 1});
  setState(PlotState::kEmpty, tr("No loop yet"));
}

void HeadFlowPlot::setUnits(UnitSystem units) {
  if (units == units_) return;
  units_ = units;
  drawGround();
  drawPicture();
}

void HeadFlowPlot::setGround(const network::PartLoadGround& ground, const QString& seriesKey, const QString& strategy,
                             const QString& controlWords) {
  ground_ = ground;
  seriesKey_ = seriesKey;
  strategy_ = strategy;
  controlWords_ = controlWords;
  trailPoints_.clear();
  drawGround();
}

void HeadFlowPlot::setPicture(const network::PartLoadPicture& picture) {
  if (!picture.summary.usable()) {
    hasPicture_ = false;
    const QString why =
        QString::fromStdString(picture.summary.remark ? text::sentence(*picture.summary.remark) : picture.summary.why);
    return setState(PlotState::kWithheld, tr("Not drawn: the numbers may not be used. %1").arg(why));
  }
  hasPicture_ = true;
  pumpNow_ = picture.pump_now;
  loopNow_ = picture.loop_now;
  operating_ = picture.operating;
  underSupplied_ = picture.under_supplied;
  if (trailPoints_.empty() || !(trailPoints_.back() == operating_)) trailPoints_.push_back(operating_);
  const auto most = static_cast<std::size_t>(look().motion.trailPoints);
  if (trailPoints_.size() > most) trailPoints_.erase(trailPoints_.begin());
  if (state() != PlotState::kIdle) setState(PlotState::kIdle);
  drawPicture();
}

void HeadFlowPlot::restyle() {
  Plot::restyle();
  drawGround();
  drawPicture();
}

QPointF HeadFlowPlot::shown(const network::HeadFlowPoint& point) const {
  const double flow = quantity::toShown(point.flow_m3s, Quantity::kFlow, units_);
  // The trade tells pump head as pressure in SI and as height of fluid in IP (common practice).
  const double head =
      units_ == UnitSystem::kSi
          ? quantity::toShown(point.pressure_pa, Quantity::kPressure, units_)
          : quantity::toShown(network::headMetres(point.pressure_pa, ground_.density_kg_m3), Quantity::kHead, units_);
  return {flow, head};
}

std::vector<QPointF> HeadFlowPlot::shown(const network::HeadFlowCurve& curve) const {
  std::vector<QPointF> points;
  points.reserve(curve.points.size());
  for (const network::HeadFlowPoint& point : curve.points) points.push_back(shown(point));
  return points;
}

void HeadFlowPlot::drawGround() {
  const theme::Colours& colours = look().colours;
  setTitles(tr("Head and flow"), strategy_);
  clearLines();
  if (ground_.pump_family.empty()) return;
  const QPointF limits = shown(ground_.limits);
  setAxes({tr("flow, %1").arg(unitText(Quantity::kFlow, units_)), 0, roundLimit(limits.x())},
          {tr("head, %1").arg(unitText(units_ == UnitSystem::kSi ? Quantity::kPressure : Quantity::kHead, units_)), 0,
           roundLimit(limits.y())});
  int number = 0;
  for (const network::EfficiencyLine& line : ground_.efficiency) {
    const QString percent = percentText(line.efficiency);
    setLine({QStringLiteral("efficiency%1").arg(number), tr("pump efficiency %1 %").arg(percent),
             number == 0 ? percent + QStringLiteral(" %") : percent, LabelAt::kUpperEnd, 1, QPen(colours.ink4, 1),
             colours.ink3, 400, true, shown(line.curve)});
    ++number;
  }
  for (std::size_t i = 0; i < ground_.pump_family.size(); ++i) {
    const network::HeadFlowCurve& curve = ground_.pump_family[i];
    const QString percent = percentText(curve.speed) + QStringLiteral(" %");
    setLine({QStringLiteral("pump%1").arg(i), tr("pump at %1 speed").arg(percent),
             i == 0 ? tr("%1 speed").arg(percent) : percent, LabelAt::kRightEnd, 5 - static_cast<int>(i % 2),
             QPen(colours.ink2, 1.25), colours.ink2, 400, true, shown(curve)});
  }
  setLine({QStringLiteral("pumpNow"),
           tr("pump now"),
           {},
           LabelAt::kNone,
           0,
           QPen(colours.ink1, look().stroke.series),
           colours.ink1,
           600,
           true,
           {}});
  setLine({QStringLiteral("design"), tr("loop at design load"), tr("design load"), LabelAt::kUpperEnd, 7,
           theme::dashedPen(colours.ink1, 1.5, {6, 4}), colours.ink1, 600, true, shown(ground_.design_load)});
  setLine({QStringLiteral("loopNow"),
           tr("loop now"),
           tr("loop now"),
           LabelAt::kUpperEnd,
           9,
           QPen(colours.ink1, look().stroke.series),
           colours.ink1,
           600,
           true,
           {}});
  const theme::Series& series = look().seriesOf(seriesKey_);
  setLine({QStringLiteral("control"), controlWords_, controlWords_, LabelAt::kStart, 8,
           theme::seriesPen(series, look(), true), series.label, 600, true, shown(ground_.control)});
  if (!hasPicture_ && !ground_.usable)
    setState(PlotState::kWithheld,
             tr("Not drawn: no design state to draw. %1").arg(QString::fromStdString(ground_.why)));
}

void HeadFlowPlot::drawPicture() {
  if (!hasPicture_ || ground_.pump_family.empty()) return;
  const theme::Colours& colours = look().colours;
  const QString speed = percentText(pumpNow_.speed) + QStringLiteral(" %");
  setLine({QStringLiteral("pumpNow"), tr("pump now, %1 speed").arg(speed), tr("now %1").arg(speed), LabelAt::kRightEnd,
           6, QPen(colours.ink1, look().stroke.series), colours.ink1, 600, true, shown(pumpNow_)});
  setLine({QStringLiteral("loopNow"), tr("loop now"), tr("loop now"), LabelAt::kUpperEnd, 9,
           QPen(colours.ink1, look().stroke.series), colours.ink1, 600, true, shown(loopNow_)});
  clearTrail();
  for (const network::HeadFlowPoint& point : trailPoints_) addTrailPoint(shown(point));
  const theme::Series& series = look().seriesOf(seriesKey_);
  std::vector<Mark> marks;
  if (ground_.usable)
    marks.push_back({QStringLiteral("design"),
                     tr("design load"),
                     Mark::Shape::kRing,
                     shown(ground_.design_point),
                     series.colour,
                     series.marker,
                     {}});
  Mark operating{QStringLiteral("operating"), tr("operating point"), Mark::Shape::kOperating,
                 shown(operating_),           series.colour,         series.marker,
                 {{tr("speed"), speed}}};
  if (underSupplied_ > 0) operating.more.emplace_back(tr("under-supplied"), QString::number(underSupplied_));
  marks.push_back(std::move(operating));
  setMarks(std::move(marks));
  setTags(shown(operating_));
}

}  // namespace ebbline::plot
