#include "ui/report/head_flow_picture.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include <QCoreApplication>
#include <QPainter>
#include <QPainterPath>

#include "ui/plot/ticks.h"
#include "ui/report/words.h"

namespace ebbline::report {
namespace {

using network::HeadFlowCurve;
using network::HeadFlowPoint;
using quantity::Quantity;
using quantity::UnitSystem;

constexpr double kLeftRoom = 40;   // px for numbers of the head axis
constexpr double kRightRoom = 70;  // px for the speeds at the ends of the pump curves
constexpr double kTopRoom = 26;
constexpr double kFootRoom = 36;

QString tr(const char* english) {
  return QCoreApplication::translate("report", english);
}

class Painting {
 public:
  Painting(QPainter& painter, const QRectF& box, const HeadFlowPicture& what, const theme::Theme& look,
           const QFont& font)
      : painter_(painter), what_(what), look_(look), font_(font) {
    strong_ = font;
    strong_.setWeight(QFont::DemiBold);
    area_ = box.adjusted(kLeftRoom, kTopRoom, -kRightRoom, -kFootRoom);
    const QPointF limits = shown(what.ground->limits);
    most_ = {plot::roundLimit(limits.x()), plot::roundLimit(limits.y())};
  }

  void paint() {
    axes();
    painter_.save();
    painter_.setClipRect(area_.adjusted(0, -1, 1, 0));
    curves();
    painter_.restore();
    marks();
    labels();
  }

 private:
  QPointF shown(const HeadFlowPoint& point) const {
    const double head = what_.units == UnitSystem::kSi
                            ? quantity::toShown(point.pressure_pa, Quantity::kPressure, what_.units)
                            : quantity::toShown(network::headMetres(point.pressure_pa, what_.ground->density_kg_m3),
                                                Quantity::kHead, what_.units);
    return {quantity::toShown(point.flow_m3s, Quantity::kFlow, what_.units), head};
  }
  QPointF place(QPointF value) const {
    return {area_.left() + value.x() / most_.x() * area_.width(),
            area_.bottom() - value.y() / most_.y() * area_.height()};
  }
  QPointF place(const HeadFlowPoint& point) const { return place(shown(point)); }

  void text(QPointF baseline, const QString& words, const QFont& font, const QColor& ink,
            Qt::Alignment alignment = Qt::AlignLeft) {
    theme::drawHaloText(painter_, baseline, words, font, ink, look_.colours.paper, alignment);
  }

  void curve(const HeadFlowCurve& line, const QPen& pen) {
    if (line.empty()) return;
    QPainterPath path(place(line.points.front()));
    for (const HeadFlowPoint& point : line.points) path.lineTo(place(point));
    painter_.strokePath(path, pen);
  }

  void axes() {
    const theme::Colours& ink = look_.colours;
    const double step_x = plot::tickStep(most_.x());
    const double step_y = plot::tickStep(most_.y());
    for (const double x : plot::ticksWithin(0, most_.x(), step_x)) {
      const QPointF foot = place(QPointF(x, 0));
      painter_.setPen(QPen(ink.grid, 0.75));
      painter_.drawLine(foot, QPointF(foot.x(), area_.top()));
      const bool behind_tag = std::abs(foot.x() - place(what_.picture->operating).x()) < 28;
      if (!behind_tag)
        text(foot + QPointF(0, 15), theme::numberText(x, plot::decimalsOf(step_x)), font_, ink.ink2, Qt::AlignHCenter);
    }
    for (const double y : plot::ticksWithin(0, most_.y(), step_y)) {
      const QPointF left = place(QPointF(0, y));
      const bool behind_tag = std::abs(left.y() - place(what_.picture->operating).y()) < 15;
      painter_.setPen(QPen(ink.grid, 0.75));
      painter_.drawLine(left, QPointF(area_.right(), left.y()));
      if (!behind_tag)
        text(left + QPointF(-7, 4), theme::numberText(y, plot::decimalsOf(step_y)), font_, ink.ink2, Qt::AlignRight);
    }
    painter_.setPen(QPen(ink.rule, 1));
    painter_.drawLine(area_.bottomLeft(), area_.bottomRight());
    const Quantity head = what_.units == UnitSystem::kSi ? Quantity::kPressure : Quantity::kHead;
    text(QPointF(area_.left() - 28, area_.top() - 12), tr("head, %1").arg(unitOf(head, what_.units)), font_, ink.ink2);
    text(QPointF(area_.right(), area_.bottom() + 31), tr("flow, %1").arg(unitOf(Quantity::kFlow, what_.units)), font_,
         ink.ink2, Qt::AlignRight);
  }

  void curves() {
    const theme::Colours& ink = look_.colours;
    for (const network::EfficiencyLine& line : what_.ground->efficiency) curve(line.curve, QPen(ink.ink4, 0.75));
    for (const HeadFlowCurve& line : what_.ground->pump_family) curve(line, QPen(ink.ink2, 1));
    curve(what_.picture->pump_now, QPen(ink.ink1, 2));
    curve(what_.ground->design_load, theme::dashedPen(ink.ink1, 1.25, {6, 4}));
    curve(what_.picture->loop_now, QPen(ink.ink1, 2));
    curve(what_.ground->control, theme::seriesPen(series(), look_, true));
  }

  void marks() {
    const theme::Colours& ink = look_.colours;
    const QPointF now = place(what_.picture->operating);
    painter_.setPen(theme::dashedPen(ink.ink1, 1, {2, 3}));
    painter_.drawLine(now, QPointF(now.x(), area_.bottom()));
    painter_.drawLine(now, QPointF(area_.left(), now.y()));
    ring(place(what_.ground->design_point), 4.5, 1.5, ink.ink1);
    ring(now, 6, 2.25, ink.ink1);
    painter_.setPen(Qt::NoPen);
    painter_.setBrush(series().colour);
    painter_.drawEllipse(now, 2.25, 2.25);
    painter_.setBrush(Qt::NoBrush);
    const QPointF value = shown(what_.picture->operating);
    tag(QPointF(area_.left() - 4, now.y()), theme::roundedText(value.y()), Qt::AlignRight);
    tag(QPointF(now.x(), area_.bottom() + 11), theme::roundedText(value.x()), Qt::AlignHCenter);
  }

  void ring(QPointF centre, double radius, double width, const QColor& ink) {
    painter_.setPen(QPen(ink, width));
    painter_.setBrush(look_.colours.paper);
    painter_.drawEllipse(centre, radius, radius);
    painter_.setBrush(Qt::NoBrush);
  }

  void tag(QPointF at, const QString& words, Qt::Alignment alignment) {
    const double width = QFontMetricsF(strong_).horizontalAdvance(words) + 10;
    const double left = alignment & Qt::AlignRight ? at.x() - width : at.x() - width / 2;
    const QRectF box(left, at.y() - 8, width, 16);
    painter_.setPen(Qt::NoPen);
    painter_.setBrush(look_.colours.ink1);
    painter_.drawRoundedRect(box, 2, 2);
    painter_.setBrush(Qt::NoBrush);
    painter_.setFont(strong_);
    painter_.setPen(look_.colours.paper);
    painter_.drawText(box, Qt::AlignCenter, words);
  }

  // Takes the place if nothing stands there yet; labels are asked in order of importance.
  bool free(const QRectF& box) {
    for (const QRectF& other : taken_)
      if (other.intersects(box)) return false;
    taken_.push_back(box);
    return true;
  }

  void label(QPointF baseline, const QString& words, const QFont& font, const QColor& ink,
             Qt::Alignment alignment = Qt::AlignLeft) {
    const double width = QFontMetricsF(font).horizontalAdvance(words);
    double left = baseline.x();
    if (alignment & Qt::AlignRight) left -= width;
    if (alignment & Qt::AlignHCenter) left -= width / 2;
    const QRectF box(left - 3, baseline.y() - 11, width + 6, 15);
    if (!free(box)) return;
    painter_.fillRect(box, look_.colours.paper);
    text(baseline, words, font, ink, alignment);
  }

  // Last point of a line that still lies within the plot.
  std::optional<QPointF> upperEnd(const HeadFlowCurve& line) const {
    std::optional<QPointF> end;
    for (const HeadFlowPoint& point : line.points) {
      const QPointF at = place(point);
      if (at.y() >= area_.top() - 0.5 && at.x() <= area_.right() + 0.5) end = at;
    }
    return end;
  }

  void labels() {
    const theme::Colours& ink = look_.colours;
    const QPointF now = place(what_.picture->operating);
    taken_.emplace_back(now - QPointF(9, 9), QSizeF(18, 18));
    if (const auto end = upperEnd(what_.picture->loop_now))
      label(*end + QPointF(5, 2), tr("loop now"), strong_, ink.ink1);
    if (const auto end = upperEnd(what_.ground->design_load))
      label(*end + QPointF(-6, -4), tr("design load"), strong_, ink.ink1, Qt::AlignRight);
    if (!what_.ground->control.empty()) controlLabel();
    const QString now_speed = theme::numberText(100 * what_.picture->pump_now.speed, 0);
    if (const auto end = upperEnd(what_.picture->pump_now))
      label(*end + QPointF(5, 4), tr("now %1 %").arg(now_speed), strong_, ink.ink1);
    bool first = true;
    for (const HeadFlowCurve& line : what_.ground->pump_family) {
      const QString speed = theme::numberText(100 * line.speed, 0);
      if (const auto end = upperEnd(line))
        label(*end + QPointF(5, 4), first ? tr("%1 % speed").arg(speed) : tr("%1 %").arg(speed), font_, ink.ink2);
      first = false;
    }
    first = true;
    for (const network::EfficiencyLine& line : what_.ground->efficiency) {
      const QString share = theme::numberText(100 * line.efficiency, 0);
      if (const auto end = upperEnd(line.curve))
        label(*end + QPointF(0, -4), first ? tr("%1 % efficient").arg(share) : share, font_, ink.ink3,
              Qt::AlignHCenter);
      first = false;
    }
  }

  // At the start of the path, over it or under it, or near its end: the first place that is free.
  void controlLabel() {
    const std::vector<HeadFlowPoint>& points = what_.ground->control.points;
    const QPointF start = place(points.front());
    const QPointF late = place(points[points.size() * 3 / 4]);
    const double width = QFontMetricsF(strong_).horizontalAdvance(what_.control_words);
    for (const QPointF& at : {start + QPointF(4, 18), start + QPointF(4, -9), late + QPointF(8, 16)}) {
      const QRectF box(at.x() - 3, at.y() - 11, width + 6, 15);
      const bool crossed = std::any_of(what_.picture->pump_now.points.begin(), what_.picture->pump_now.points.end(),
                                       [&](const HeadFlowPoint& point) { return box.contains(place(point)); });
      if (crossed || std::abs(box.center().y() - place(what_.picture->operating).y()) < 10) continue;
      return label(at, what_.control_words, strong_, series().label);
    }
  }

  const theme::Series& series() const { return look_.seriesOf(what_.series_key); }

  QPainter& painter_;
  const HeadFlowPicture& what_;
  const theme::Theme& look_;
  QFont font_, strong_;
  QRectF area_;
  QPointF most_;
  std::vector<QRectF> taken_;
};

}  // namespace

void paintHeadFlow(QPainter& painter, const QRectF& box, const HeadFlowPicture& picture, const theme::Theme& theme,
                   const QFont& font) {
  Painting(painter, box, picture, theme, font).paint();
}

}  // namespace ebbline::report
