#include "ui/canvas/painting.h"

#include <QPainter>
#include <algorithm>
#include <cmath>

namespace ebbline::canvas {
namespace {

constexpr double kLevelMargin = 16;
constexpr double kTinySymbol = 0.3;  // below this a terminal is a filled square

double length(QPointF v) {
  return std::hypot(v.x(), v.y());
}

}  // namespace

void SymbolPixmaps::use(double deviceRatio) {
  if (deviceRatio == ratio_) return;
  ratio_ = deviceRatio;
  clear();
}

void SymbolPixmaps::clear() {
  terminals_.clear();
  halos_.clear();
}

void SymbolPixmaps::drawHaloText(QPainter& painter, QPointF baseline, const QString& text, const QFont& font,
                                 const QColor& ink, const QColor& ground) {
  constexpr int kMost = 4000;  // figures change while a slider moves
  constexpr int kRim = 3;
  if (halos_.size() > kMost) halos_.clear();
  const QFontMetricsF metrics(font);
  const int rise = static_cast<int>(std::ceil(metrics.ascent())) + kRim;
  QPixmap& halo = halos_[text + QChar(0) + font.key()];
  if (halo.isNull()) {
    const int wide = static_cast<int>(std::ceil(metrics.horizontalAdvance(text))) + 2 * kRim;
    halo = QPixmap(QSize(wide, rise + static_cast<int>(std::ceil(metrics.descent())) + kRim) * ratio_);
    halo.setDevicePixelRatio(ratio_);
    halo.fill(Qt::transparent);
    QPainter inside(&halo);
    theme::drawHaloText(inside, QPointF(kRim, rise), text, font, ground, ground);
  }
  painter.drawPixmap(QPointF(std::round(baseline.x()) - kRim, std::round(baseline.y()) - rise), halo);
  painter.setFont(font);
  painter.setPen(ink);
  painter.drawText(baseline, text);
}

void SymbolPixmaps::drawTerminal(QPainter& painter, QPointF centre, double scale, const QColor& ink,
                                 const QColor& ground, double width) {
  if (scale != scale_) {
    terminals_.clear();
    scale_ = scale;
  }
  const int side = 2 * static_cast<int>(std::ceil(11 * scale + width)) + 1;  // odd: the centre is a pixel's middle
  QPixmap& picture = terminals_[ink.rgba()];
  if (picture.isNull()) {
    picture = QPixmap(QSize(side, side) * ratio_);
    picture.setDevicePixelRatio(ratio_);
    picture.fill(Qt::transparent);
    QPainter inside(&picture);
    inside.setRenderHint(QPainter::Antialiasing);
    drawStrokes(inside, strokesOf(Symbol::kTerminal), {side / 2.0, side / 2.0}, scale, 0, ink, ground, width);
  }
  painter.drawPixmap(centre - QPointF(side / 2.0, side / 2.0), picture);
}

ScenePainter::ScenePainter(QPainter& painter, const Scene& scene, const QRectF& view, QPointF origin,
                           ScreenAids* screen)
    : painter_(painter), scene_(scene), view_(view), origin_(origin), screen_(screen) {
  visible_ = view.translated(-origin).adjusted(-60, -60, 60, 60);
}

void ScenePainter::paint() {
  painter_.save();
  painter_.setClipRect(view_, Qt::IntersectClip);
  painter_.setRenderHint(QPainter::Antialiasing);
  if (scene_.options.levels) levels();
  painter_.translate(origin_);
  selectionBand();
  lines();
  tapsAndDots();
  marks();
  openEnds();
  words();
  painter_.translate(-origin_);
  if (scene_.options.levels) levelNames();
  if (scene_.options.key && scene_.dressing.solved) foot();
  painter_.restore();
}

void ScenePainter::levels() {
  const theme::Theme& theme = scene_.theme;
  painter_.setPen(QPen(theme.colours.hairline, theme.stroke.hairline));
  for (const loop::Level& level : scene_.picture.loop->levels) {
    double y = origin_.y() - level.line_y_m * scene_.geometry.scale;
    if (screen_) y = std::floor(y) + 0.5;
    painter_.drawLine(QPointF(view_.left() + kLevelMargin, y), QPointF(view_.right() - kLevelMargin + 4, y));
  }
}

// Last, with a halo: however far the drawing is moved, the names stand at the left and can be read.
void ScenePainter::levelNames() {
  const theme::Theme& theme = scene_.theme;
  double above = -1e9;  // baseline of the name above; levels closer than a line of text go without
  std::vector<const loop::Level*> levels;
  for (const loop::Level& level : scene_.picture.loop->levels) levels.push_back(&level);
  std::sort(levels.begin(), levels.end(), [](auto a, auto b) { return a->line_y_m > b->line_y_m; });
  for (const loop::Level* level : levels) {
    const double y = origin_.y() - level->line_y_m * scene_.geometry.scale;
    if (y < view_.top() || y > view_.bottom() + 20 || y - above < 14 * theme.textFactor) continue;
    above = y;
    const auto words = [&](double baseline, const QString& text, int weight) {
      haloText({view_.left() + kLevelMargin, baseline}, text, theme.font(theme::Text::kNote, weight),
               theme.colours.ink3);
    };
    words(y - 6, QString::fromStdString(level->name), 600);
    if (!scene_.options.elevations) continue;
    const QString height = QString::fromStdString(
        quantity::formatWithUnit(level->elevation_m, quantity::Quantity::kLength, scene_.picture.units));
    words(y + 16, (level->elevation_m > 0 ? "+" : "") + height, 400);
  }
}

void ScenePainter::selectionBand() {
  for (const Piece& piece : scene_.geometry.pieces) {
    const StrandLook& look = scene_.dressing.strands[static_cast<size_t>(piece.strand)];
    if (!look.selected || scene_.geometry.strands[static_cast<size_t>(piece.strand)].leg) continue;
    strokeLines({QLineF(piece.a, piece.b)}, scene_.theme.colours.selection, look.width + 9, true);
  }
}

void ScenePainter::fillBox(const QRectF& box, const QColor& colour) {
  if (!screen_) {
    painter_.fillRect(box, colour);
    return;
  }
  screen_->rects.setTransform(painter_.deviceTransform());
  screen_->rects.fill(box, colour.rgba());
}

void ScenePainter::haloText(QPointF baseline, const QString& text, const QFont& font, const QColor& ink) {
  if (screen_)
    screen_->pixmaps.drawHaloText(painter_, baseline, text, font, ink, scene_.theme.colours.sheet);
  else
    theme::drawHaloText(painter_, baseline, text, font, ink, scene_.theme.colours.sheet);
}

// Level and upright lines straight into the pixels; the few others are left to the painter.
void ScenePainter::fillLines(const std::vector<QLineF>& lines, const QColor& colour, double width, bool square) {
  constexpr double kStraight = 1e-6;
  const double half = width / 2, cap = square ? half : 0;
  const QRgb ink = colour.rgba();
  std::vector<QLineF> slanted;
  screen_->rects.setTransform(painter_.deviceTransform());
  for (const QLineF& line : lines) {
    const double x0 = std::min(line.x1(), line.x2()), x1 = std::max(line.x1(), line.x2());
    const double y0 = std::min(line.y1(), line.y2()), y1 = std::max(line.y1(), line.y2());
    if (y1 - y0 < kStraight)
      screen_->rects.fill({QPointF(x0 - cap, y0 - half), QPointF(x1 + cap, y0 + half)}, ink);
    else if (x1 - x0 < kStraight)
      screen_->rects.fill({QPointF(x0 - half, y0 - cap), QPointF(x0 + half, y1 + cap)}, ink);
    else
      slanted.push_back(line);
  }
  if (slanted.empty()) return;
  painter_.setPen(QPen(colour, width, Qt::SolidLine, square ? Qt::SquareCap : Qt::FlatCap, Qt::MiterJoin));
  painter_.drawLines(slanted.data(), static_cast<int>(slanted.size()));
}

void ScenePainter::strokeLines(const std::vector<QLineF>& lines, const QColor& colour, double width, bool square) {
  if (lines.empty()) return;
  if (screen_) {
    fillLines(lines, colour, width, square);
    return;
  }
  painter_.setPen(QPen(colour, width, Qt::SolidLine, square ? Qt::SquareCap : Qt::FlatCap, Qt::MiterJoin));
  painter_.drawLines(lines.data(), static_cast<int>(lines.size()));
}

// Dashes are laid as short lines: a pen's own dashes cost ten times as much on the screen. A line long enough begins
// and ends with half a dash, so that corners close and joins do not show; short ones share one rhythm over the sheet.
void ScenePainter::addDashes(const Piece& piece, bool leg, double width, std::vector<QLineF>& out) const {
  const QVector<qreal>& rule = scene_.theme.stroke.returnDash;
  const double size = leg ? 0.6 : 1;
  double on = rule[0] * size, off = rule[1] * size;
  const QPointF unit = (piece.b - piece.a) / length(piece.b - piece.a);
  double whole = length(piece.b - piece.a), phase = 0;
  QPointF start = piece.a;
  if (whole >= 3 * (on + off) || leg) {
    const double fit = whole / (std::max(1.0, std::round(whole / (on + off))) * (on + off));
    on *= fit;
    off *= fit;
    phase = on / 2;
    if (!leg) {  // half the weight further at both ends closes the corners
      start -= unit * (width / 2);
      whole += width;
      phase -= width / 2;
    }
  } else {
    const double place = start.x() * std::abs(unit.x()) + start.y() * std::abs(unit.y());
    const bool backwards = unit.x() + unit.y() < 0;
    phase = std::fmod(backwards ? -place : place, on + off);
    if (phase < 0) phase += on + off;
  }
  // Only what can be seen: a riser may be ten thousand px long.
  const double reach = visible_.width() + visible_.height();
  const double middle = unit.x() * (visible_.center().x() - start.x()) + unit.y() * (visible_.center().y() - start.y());
  const double first = std::max(0.0, std::floor((middle - reach + phase) / (on + off)));
  for (double from = first * (on + off) - phase; from < std::min(whole, middle + reach); from += on + off) {
    const double a = std::max(0.0, from), b = std::min(whole, from + on);
    if (b > a) out.emplace_back(start + unit * a, start + unit * b);
  }
}

void ScenePainter::lines() {
  const Dressing& dressing = scene_.dressing;
  std::vector<std::vector<QLineF>> byPen(dressing.pens.size());
  for (const Piece& piece : scene_.geometry.pieces) {
    const QRectF box = QRectF(piece.a, piece.b).normalized().adjusted(-1, -1, 1, 1);
    if (!box.intersects(visible_)) continue;
    const int pen = dressing.strands[static_cast<size_t>(piece.strand)].pen;
    const LinePen& look = dressing.pens[static_cast<size_t>(pen)];
    std::vector<QLineF>& lines = byPen[static_cast<size_t>(pen)];
    if (look.dashed)
      addDashes(piece, look.leg, look.width, lines);
    else
      lines.emplace_back(piece.a, piece.b);
  }
  const double rim = 2 * scene_.theme.strokeFactor;
  for (const bool outline : {true, false})
    for (size_t i = 0; i < byPen.size(); ++i) {
      const LinePen& pen = dressing.pens[i];
      if (outline && pen.outlined) strokeLines(byPen[i], scene_.theme.colours.ink2, pen.width + rim, !pen.dashed);
      if (!outline) strokeLines(byPen[i], QColor::fromRgba(pen.colour), pen.width, !pen.dashed);
    }
}

void ScenePainter::tapsAndDots() {
  const theme::Theme& theme = scene_.theme;
  const loop::Id selected = scene_.picture.selected;
  for (const Tap& tap : scene_.geometry.taps) {
    const QColor ink = tap.id == selected ? theme.colours.accent : theme.colours.pipe;
    strokeLines({QLineF(tap.a, tap.b)}, ink, 1.25 * theme.strokeFactor, false);
  }
  painter_.setPen(Qt::NoPen);
  for (const Dot& dot : scene_.geometry.dots) {
    if (!visible_.contains(dot.at)) continue;
    const bool idle = dot.strand >= 0 && scene_.dressing.strands[static_cast<size_t>(dot.strand)].idle;
    const QColor& ink = idle ? theme.colours.pipeIdle : theme.colours.pipe;
    const double radius = dot.radius * theme.strokeFactor;
    if (radius < 1.4) {  // too small to be seen round, and a rectangle costs a tenth
      fillBox(QRectF(dot.at - QPointF(radius, radius), QSizeF(2 * radius, 2 * radius)), ink);
      continue;
    }
    painter_.setBrush(ink);
    painter_.drawEllipse(dot.at, radius, radius);
  }
}

QColor ScenePainter::inkOf(const Mark& mark) const {
  const theme::Colours& c = scene_.theme.colours;
  if (mark.part.kind == PartKind::kTerminal) {
    const TerminalLook& look = scene_.dressing.terminals[static_cast<size_t>(mark.part.index)];
    if (look.under) return c.under;
    if (mark.id == scene_.picture.selected) return c.accent;
    return look.known && look.idle ? c.pipeIdle : c.pipe;
  }
  if (mark.id == scene_.picture.selected) return c.accent;
  const bool idle = mark.strand >= 0 && scene_.dressing.strands[static_cast<size_t>(mark.strand)].idle;
  return idle ? c.pipeIdle : c.pipe;
}

void ScenePainter::marks() {
  for (const Mark& each : scene_.geometry.marks)
    if (visible_.intersects(each.box)) mark(each);
}

void ScenePainter::mark(const Mark& mark) {
  const theme::Theme& theme = scene_.theme;
  const bool chosen = mark.id == scene_.picture.selected && mark.id != 0;
  if (chosen) {
    const double half = 11 * mark.scale + 3;
    const QRectF ring = mark.part.kind == PartKind::kTerminal
                            ? QRectF(mark.centre - QPointF(half, half), QSizeF(2 * half, 2 * half))
                            : mark.box.adjusted(-3, -3, 3, 3);
    painter_.setPen(QPen(theme.colours.accent, 2));
    painter_.setBrush(theme.colours.accentWash);
    painter_.drawRoundedRect(ring, theme.radius.button, theme.radius.button);
  }
  if (mark.part.kind == PartKind::kTerminal) {
    terminal(mark);
    return;
  }
  const QColor ink = inkOf(mark), ground = theme.colours.sheet;
  const double width = theme.strokeFactor * (chosen ? 4.0 / 3 : 1);
  if (mark.part.kind == PartKind::kPlant)
    drawStrokes(painter_, plantStrokes(mark.symbol, mark.portHalf), mark.centre, mark.scale, mark.quarterTurns, ink,
                ground, width);
  else
    drawStrokes(painter_, strokesOf(mark.symbol), mark.centre, mark.scale, mark.quarterTurns, ink, ground, width);
  if (mark.symbol == Symbol::kSensor && mark.scale > 0.45) {
    QFont font = theme.font(theme::Text::kNote, 600);
    font.setPixelSize(std::max(kSmallestText, static_cast<int>(std::lround(11 * mark.scale))));
    painter_.setFont(font);
    painter_.setPen(ink);
    painter_.drawText(mark.box, Qt::AlignCenter, QString::fromUtf8("Δp"));
  }
}

void ScenePainter::smallTerminal(const Mark& mark) {
  const double half = std::max(1.5, 11 * mark.scale);
  fillBox(QRectF(mark.centre.x() - half, mark.centre.y() - half, 2 * half, 2 * half), inkOf(mark));
}

void ScenePainter::terminal(const Mark& mark) {
  if (mark.scale < kTinySymbol) {
    smallTerminal(mark);
    return;
  }
  const theme::Theme& theme = scene_.theme;
  const TerminalLook& look = scene_.dressing.terminals[static_cast<size_t>(mark.part.index)];
  const QColor ink = inkOf(mark), ground = theme.colours.sheet;
  const QPointF c = mark.centre;
  const double s = mark.scale;
  if (screen_)
    screen_->pixmaps.drawTerminal(painter_, c, s, ink, ground, theme.strokeFactor);
  else
    drawStrokes(painter_, strokesOf(Symbol::kTerminal), c, s, 0, ink, ground, theme.strokeFactor);
  if (look.known) {
    const QRectF bar(c.x() - 8 * s, c.y() + 5.6 * s, 16 * s, 2.8 * s);
    fillBox(bar, theme.colours.hairline);
    fillBox(QRectF(bar.topLeft(), QSizeF(bar.width() * look.stroke, bar.height())), ink);
  }
  if (scene_.picture.loop->terminals[static_cast<size_t>(mark.part.index)].essential)
    drawStrokes(painter_, strokesOf(Symbol::kEssential), c + QPointF(-11.3, -9.5) * s, 0.87 * s, 0, theme.colours.pipe,
                ground, theme.strokeFactor);
  if (look.under) {
    const QPointF place = c + QPointF(12, -9.3) * s;
    drawStrokes(painter_, strokesOf(Symbol::kUnderSupplied), place, 1.4 * s, 0, ground, ground);
    drawStrokes(painter_, strokesOf(Symbol::kUnderSupplied), place, 1.1 * s, 0, theme.colours.under, ground);
  }
}

void ScenePainter::openEnds() {
  const double size = std::clamp(scene_.geometry.symbolScale, 0.3, 1.0);
  for (const QPointF& at : scene_.geometry.openEnds)
    if (visible_.contains(at))
      drawStrokes(painter_, strokesOf(Symbol::kOpenEnd), at, size, 0, scene_.theme.colours.under,
                  scene_.theme.colours.sheet);
}

bool ScenePainter::onLevelLine(const Label& label) const {
  if (!scene_.options.levels) return false;
  const auto& levels = scene_.picture.loop->levels;
  return std::any_of(levels.begin(), levels.end(), [&](const loop::Level& level) {
    const double y = -level.line_y_m * scene_.geometry.scale;
    return y > label.box.top() - 2 && y < label.box.bottom() + 2;
  });
}

void ScenePainter::words() {
  const theme::Colours& c = scene_.theme.colours;
  for (const Label& label : scene_.labels) {
    if (!visible_.intersects(label.box)) continue;
    const QColor ink = label.ink == LabelInk::kStrong   ? c.ink1
                       : label.ink == LabelInk::kPlain  ? c.ink2
                       : label.ink == LabelInk::kUnder  ? c.under
                       : label.ink == LabelInk::kAccent ? c.accent
                                                        : c.ink3;
    if (label.ink == LabelInk::kUnder || onLevelLine(label)) {
      haloText(label.baseline, label.text, labelFont(label, scene_.theme), ink);
      continue;
    }
    painter_.setFont(labelFont(label, scene_.theme));
    painter_.setPen(ink);
    painter_.drawText(label.baseline, label.text);
  }
}

}  // namespace ebbline::canvas
