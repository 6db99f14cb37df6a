#include <QFontMetricsF>
#include <QPainter>
#include <algorithm>
#include <cmath>

#include "ui/canvas/painting.h"

namespace ebbline::canvas {
namespace {

constexpr double kMargin = 20, kFoot = 18, kSample = 32;

QString keyText(double value) {
  const int decimals = value >= 1 ? 0 : std::min(6, static_cast<int>(std::ceil(-std::log10(value) - 1e-9)));
  return theme::numberText(value, decimals);
}

QString unitOf(quantity::Quantity of, quantity::UnitSystem units) {
  const std::string_view label = quantity::unitLabel(of, units);
  return QString::fromUtf8(label.data(), static_cast<qsizetype>(label.size()));
}

QString weightHead(quantity::UnitSystem units) {
  return QObject::tr("flow, %1").arg(unitOf(quantity::Quantity::kFlow, units));
}

}  // namespace

std::vector<double> keyFlows(double most) {
  std::vector<double> out;
  if (!(most > 0) || !std::isfinite(most)) return out;
  double power = std::pow(10.0, std::floor(std::log10(most) + 1e-9));
  std::vector<double> falling;
  for (int decade = 0; decade < 3; ++decade, power /= 10)
    for (const double factor : {5.0, 2.0, 1.0})
      if (factor * power <= most * (1 + 1e-9)) falling.push_back(factor * power);
  // Largest three, then two steps further down: weights far enough apart to be told from each other.
  for (const size_t i : {0u, 1u, 2u, 4u})
    if (i < falling.size()) out.push_back(falling[i]);
  std::reverse(out.begin(), out.end());
  return out;
}

double ScenePainter::weightKeyWidth(const std::vector<double>& flows) const {
  const QFontMetricsF metrics(scene_.theme.font(theme::Text::kNote));
  double width = metrics.horizontalAdvance(weightHead(scene_.picture.units)) + 10;
  for (const double flow : flows) width += kSample + 6 + metrics.horizontalAdvance(keyText(flow)) + 14;
  return width - 14;
}

// Scale at the left, weights at the right of one strip; in a narrow picture the weights stand a row higher. The strip
// hides what is drawn under it, and says so with a hairline.
void ScenePainter::foot() {
  const theme::Theme& theme = scene_.theme;
  const std::vector<double> flows =
      keyFlows(quantity::toShown(scene_.dressing.designFlow_m3s, quantity::Quantity::kFlow, scene_.picture.units));
  const bool legend = scene_.dressing.scale.valid;
  const double keyWidth = weightKeyWidth(flows), row = 24 * theme.textFactor;
  const bool above = legend && legendBar().right() + 30 > view_.right() - kMargin - keyWidth;
  const double top = (legend ? legendBar().top() - row : view_.bottom() - kFoot - row) - (above ? row : 0);
  painter_.fillRect(QRectF(QPointF(view_.left(), top), view_.bottomRight()), theme.colours.sheet);
  if (scene_.geometry.bounds.translated(origin_).bottom() > top) {
    painter_.setPen(QPen(theme.colours.hairline, theme.stroke.hairline));
    painter_.drawLine(QPointF(view_.left(), std::floor(top) + 0.5), QPointF(view_.right(), std::floor(top) + 0.5));
  }
  if (legend) colourLegend();
  if (!flows.empty() && keyWidth <= view_.width() - 2 * kMargin)
    weightKey(above ? top + row - 4 : view_.bottom() - kFoot);
}

// "flow, L/s — 0.5 — 2 — 5 — 10", right foot, each number behind a line of the weight that flow has.
void ScenePainter::weightKey(double y) {
  const theme::Theme& theme = scene_.theme;
  const double design = scene_.dressing.designFlow_m3s;
  const auto units = scene_.picture.units;
  const std::vector<double> flows = keyFlows(quantity::toShown(design, quantity::Quantity::kFlow, units));
  const QFont font = theme.font(theme::Text::kNote);
  const QFontMetricsF metrics(font);
  double x = view_.right() - kMargin - weightKeyWidth(flows);
  painter_.setFont(font);
  painter_.setPen(theme.colours.ink3);
  painter_.drawText(QPointF(x, y), weightHead(units));
  x += metrics.horizontalAdvance(weightHead(units)) + 10;
  for (const double flow : flows) {
    const double weight = theme.strokeFactor *
                          weightOf(quantity::fromShown(flow, quantity::Quantity::kFlow, units), design, theme.stroke);
    strokeLines({QLineF(x, y - 4, x + kSample, y - 4)}, theme.colours.pipe, weight, false);
    painter_.setPen(theme.colours.ink3);
    painter_.drawText(QPointF(x + kSample + 6, y), keyText(flow));
    x += kSample + 6 + metrics.horizontalAdvance(keyText(flow)) + 14;
  }
}

QRectF ScenePainter::legendBar() const {
  const QFontMetricsF metrics(scene_.theme.font(theme::Text::kNote));
  const double width = std::clamp(view_.width() * 0.36, 120.0, 320.0), height = 9;
  return {view_.left() + kMargin, view_.bottom() - kFoot - metrics.height() - height + 4, width, height};
}

// The scale docked at the left foot, numbers under it on round values, the quantity and its unit above.
void ScenePainter::colourLegend() {
  const Scale& scale = scene_.dressing.scale;
  if (!scale.valid) return;
  const theme::Theme& theme = scene_.theme;
  const QFont font = theme.font(theme::Text::kNote);
  const QFontMetricsF metrics(font);
  const QRectF bar = legendBar();
  const theme::ColourScale& colours = scene_.picture.colourBy == ColourBy::kPressure ? theme.cividis : theme.viridis;
  QLinearGradient gradient(bar.topLeft(), bar.topRight());
  for (size_t i = 0; i < colours.stops.size(); ++i)
    gradient.setColorAt(static_cast<double>(i) / static_cast<double>(colours.stops.size() - 1), colours.stops[i]);
  painter_.setPen(QPen(theme.colours.ink2, 1));
  painter_.setBrush(gradient);
  painter_.drawRect(bar);
  painter_.setFont(font);
  painter_.setPen(theme.colours.ink2);
  painter_.drawText(QPointF(bar.left(), bar.top() - 6), scale.words);
  painter_.setPen(theme.colours.ink3);
  for (double value = scale.low; value <= scale.high + scale.step / 2; value += scale.step) {
    const QString text = theme::numberText(value, scale.decimals);
    const double x = bar.left() + bar.width() * (value - scale.low) / (scale.high - scale.low);
    painter_.drawLine(QPointF(x, bar.bottom()), QPointF(x, bar.bottom() + 3));
    painter_.drawText(QPointF(x - metrics.horizontalAdvance(text) / 2, bar.bottom() + 3 + metrics.ascent()), text);
  }
}

}  // namespace ebbline::canvas
