#include <QFontMetricsF>
#include <QPainter>
#include <algorithm>
#include <cmath>

#include "ui/canvas/painting.h"

namespace ebbline::canvas {
namespace {

constexpr double kMargin = 20, kFoot = 18;

QString keyText(double value) {
  const int decimals = value >= 1 ? 0 : std::min(6, static_cast<int>(std::ceil(-std::log10(value) - 1e-9)));
  return theme::numberText(value, decimals);
}

QString unitOf(quantity::Quantity of, quantity::UnitSystem units) {
  const std::string_view label = quantity::unitLabel(of, units);
  return QString::fromUtf8(label.data(), static_cast<qsizetype>(label.size()));
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

// "flow, L/s — 0.5 — 2 — 5 — 10", right foot, each number behind a line of the weight that flow has.
void ScenePainter::weightKey() {
  const theme::Theme& theme = scene_.theme;
  const double design = scene_.dressing.designFlow_m3s;
  const auto units = scene_.picture.units;
  const std::vector<double> flows = keyFlows(quantity::toShown(design, quantity::Quantity::kFlow, units));
  if (flows.empty()) return;
  const QFont font = theme.font(theme::Text::kNote);
  const QFontMetricsF metrics(font);
  const QString head = QObject::tr("flow, %1").arg(unitOf(quantity::Quantity::kFlow, units));
  double width = metrics.horizontalAdvance(head) + 10;
  for (const double flow : flows) width += 32 + 6 + metrics.horizontalAdvance(keyText(flow)) + 14;
  const double y = view_.bottom() - kFoot;
  double x = view_.right() - kMargin - width + 14;
  if (width > view_.width() - 2 * kMargin) return;
  const QRectF ground(x - 8, y - metrics.ascent() - 2, width + 4, metrics.height() + 6);
  painter_.fillRect(ground, theme.colours.sheet);
  painter_.setFont(font);
  painter_.setPen(theme.colours.ink3);
  painter_.drawText(QPointF(x, y), head);
  x += metrics.horizontalAdvance(head) + 10;
  for (const double flow : flows) {
    const double weight = theme.strokeFactor *
                          weightOf(quantity::fromShown(flow, quantity::Quantity::kFlow, units), design, theme.stroke);
    strokeLines({QLineF(x, y - 4, x + 32, y - 4)}, theme.colours.pipe, weight, false);
    painter_.setPen(theme.colours.ink3);
    painter_.drawText(QPointF(x + 38, y), keyText(flow));
    x += 38 + metrics.horizontalAdvance(keyText(flow)) + 14;
  }
}

// The scale docked at the left foot, numbers under it on round values, the quantity and its unit above.
void ScenePainter::colourLegend() {
  const Scale& scale = scene_.dressing.scale;
  if (!scale.valid) return;
  const theme::Theme& theme = scene_.theme;
  const QFont font = theme.font(theme::Text::kNote);
  const QFontMetricsF metrics(font);
  const double width = std::clamp(view_.width() * 0.36, 120.0, 320.0), height = 9;
  const QRectF bar(view_.left() + kMargin, view_.bottom() - kFoot - metrics.height() - height, width, height);
  painter_.fillRect(QRectF(view_.left() + 4, bar.top() - metrics.height() - 10, width + 40,
                           view_.bottom() - bar.top() + metrics.height() + 4), theme.colours.sheet);
  const theme::ColourScale& colours =
      scene_.picture.colourBy == ColourBy::kPressure ? theme.cividis : theme.viridis;
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
