#include "ui/canvas/labels.h"

#include <QFontMetricsF>
#include <QHash>
#include <algorithm>
#include <cmath>

namespace ebbline::canvas {
namespace {

/// Occupied places in a coarse grid, so that a thousand labels do not look at each other.
class Occupied {
 public:
  bool isFree(const QRectF& box) const {
    bool clear = true;
    visit(box, [&](std::uint64_t key) {
      const auto found = cells_.constFind(key);
      if (found == cells_.constEnd()) return;
      for (const QRectF& other : *found) clear = clear && !other.intersects(box);
    });
    return clear;
  }
  void add(const QRectF& box) {
    visit(box, [&](std::uint64_t key) { cells_[key].push_back(box); });
  }

 private:
  template <class F>
  void visit(const QRectF& box, F&& f) const {
    const auto cell = [](double v) { return static_cast<std::int64_t>(std::floor(v / 64)); };
    for (std::int64_t x = cell(box.left()); x <= cell(box.right()); ++x)
      for (std::int64_t y = cell(box.top()); y <= cell(box.bottom()); ++y)
        f((static_cast<std::uint64_t>(x) << 32) ^ (static_cast<std::uint64_t>(y) & 0xffffffffu));
  }
  QHash<quint64, std::vector<QRectF>> cells_;
};

constexpr double kClearance = 3;  // px between a shortfall and what stands beside it

struct Wish {
  Label label;
  std::vector<QPointF> centres;  ///< Middle of the baseline, best place first.
  double rank = 5;               ///< Small = important.
};

class Placer {
 public:
  Placer(const Geometry& geometry, const Dressing& dressing, const Topology& topology, const LoopPicture& picture,
         const theme::Theme& theme, const PaintOptions& options)
      : geometry_(geometry),
        dressing_(dressing),
        topology_(topology),
        picture_(picture),
        theme_(theme),
        options_(options) {
    const double full = theme.style(theme::Text::kNote).px * theme.textFactor;
    px_ = static_cast<int>(std::lround(full * std::min(1.0, geometry.symbolScale / 0.6)));
  }

  std::vector<Label> place() {
    if (px_ < kSmallestText) return {};
    for (const Mark& mark : geometry_.marks) {
      occupied_.add(solidBox(mark));
      wishFor(mark);
    }
    for (const Piece& piece : geometry_.pieces)
      lines_.add(QRectF(piece.a, piece.b).normalized().adjusted(-1, -1, 1, 1));
    if (options_.sizes) wishForSizes();
    std::stable_sort(wishes_.begin(), wishes_.end(), [](const Wish& a, const Wish& b) { return a.rank < b.rank; });
    std::vector<Label> out;
    for (Wish& wish : wishes_) settle(wish, out);
    return out;
  }

 private:
  double s() const { return geometry_.symbolScale; }

  QRectF solidBox(const Mark& mark) const {
    double half = 11 * mark.scale, tall = half;
    if (mark.part.kind == PartKind::kNote) half = tall = 9 * mark.scale;
    if (mark.part.kind == PartKind::kPlant) half = 34 * mark.scale, tall = (mark.portHalf + 12) * mark.scale;
    if (mark.part.kind == PartKind::kVessel) half = 9 * mark.scale, tall = 18 * mark.scale;
    return {mark.centre.x() - half, mark.centre.y() - tall, 2 * half, 2 * tall};
  }

  void wish(loop::Id id, const QString& text, std::vector<QPointF> centres, int weight, LabelInk ink, double rank) {
    if (text.isEmpty()) return;
    const bool chosen = id == picture_.selected && id != 0;
    Wish out{
        {id, text, {}, {}, px_, chosen ? 600 : weight, chosen && ink != LabelInk::kUnder ? LabelInk::kAccent : ink},
        std::move(centres),
        chosen ? 0 : rank};
    wishes_.push_back(std::move(out));
  }

  // Middle of the baseline for a text beside a place, its width known.
  QPointF right(QPointF edge, const QString& text, int weight) const {
    return edge + QPointF(width(text, px_, weight) / 2, 0);
  }

  double width(const QString& text, int px, int weight) const { return metrics(px, weight).horizontalAdvance(text); }

  const QFontMetricsF& metrics(int px, int weight) const {
    const int key = px * 1000 + weight;
    const auto found = metrics_.constFind(key);
    if (found != metrics_.constEnd()) return *found;
    Label label;
    label.px = px;
    label.weight = weight;
    return *metrics_.insert(key, QFontMetricsF(labelFont(label, theme_)));
  }

  void wishFor(const Mark& mark) {
    const loop::Loop& loop = *picture_.loop;
    const auto index = static_cast<size_t>(mark.part.index);
    const auto tag = [](const auto& part) { return QString::fromStdString(part.tag); };
    if (mark.part.kind == PartKind::kTerminal) wishForTerminal(mark);
    if (mark.part.kind == PartKind::kPlant) wishForPlant(mark);
    if (mark.part.kind == PartKind::kPump) wishForInline(mark, pumpWords(loop.pumps[index]), 600, 3);
    if (mark.part.kind == PartKind::kValve) wishForInline(mark, tag(loop.valves[index]), 400, 6);
    if (mark.part.kind == PartKind::kSensor) wishBeside(mark, tag(loop.sensors[index]), 4);
    if (mark.part.kind == PartKind::kVessel) wishBeside(mark, tag(loop.vessels[index]), 4);
    if (mark.part.kind == PartKind::kNote)
      wishBeside(mark, QString::fromStdString(loop.notes[index].text).section('\n', 0, 0).left(60), 8);
  }

  QString pumpWords(const loop::Pump& pump) const {
    const QString tag = QString::fromStdString(pump.tag);
    if (!picture_.results) return tag;
    for (const network::PumpResult& result : picture_.results->pumps)
      if (result.id == pump.id) return QObject::tr("%1  %2 % speed").arg(tag, theme::numberText(100 * result.speed, 0));
    return tag;
  }

  // Beside the triangle where terminals stand far enough apart, else past the tag: all in one way, so that rows read
  // evenly. The greater the shortfall, the earlier it gets a place.
  void wishForShortfall(const Mark& mark, double shortfall) {
    const QString text = shortfallText(shortfall);
    const double half = 11 * mark.scale, wide = width(text, px_, 600), flag = 20 * mark.scale + 3;
    const QPointF c = mark.centre, edge(c.x() + flag, c.y() - 9.3 * mark.scale + 0.35 * px_);
    const QPointF beside = edge + QPointF(wide / 2, 0), left(c.x() - half - 4 - wide / 2, edge.y());
    const double tag = options_.tags ? 1.25 * px_ : 0;
    const QPointF below(c.x(), c.y() + half + 1.15 * px_ + tag), above(c.x(), c.y() - half - 0.35 * px_ - tag);
    const QPointF pastTag = mark.above ? above : below, opposite = mark.above ? below : above;
    const double spacing = topology_.terminalSpacing_m() * geometry_.scale;
    const bool roomy = spacing <= 0 || spacing >= flag + wide + half + 2 * kClearance;
    const std::vector<QPointF> places =
        roomy ? std::vector{beside, pastTag, left, opposite} : std::vector{pastTag, beside, left, opposite};
    wish(mark.id, text, places, 600, LabelInk::kUnder, 2 - std::clamp(shortfall, 0.0, 1.0));
  }

  void wishForTerminal(const Mark& mark) {
    const TerminalLook& look = dressing_.terminals[static_cast<size_t>(mark.part.index)];
    const QString tag = QString::fromStdString(picture_.loop->terminals[static_cast<size_t>(mark.part.index)].tag);
    const QPointF c = mark.centre;
    const double half = 11 * mark.scale;
    if (look.under) wishForShortfall(mark, look.shortfall);
    if (!options_.tags) return;
    const double wide = width(tag, px_, 400) / 2 + 4;
    const QPointF below(c.x(), c.y() + half + 1.15 * px_), above(c.x(), c.y() - half - 0.35 * px_);
    const QPointF right(c.x() + half + wide, c.y() + half - 2), left(c.x() - half - wide, c.y() + half - 2);
    const std::vector<QPointF> places{mark.above ? above : below, right, left};
    wish(mark.id, tag, places, look.under ? 600 : 400, look.under ? LabelInk::kUnder : LabelInk::kQuiet,
         look.under ? 2.5 : 5);
  }

  void wishForPlant(const Mark& mark) {
    if (!options_.tags) return;
    const loop::Plant& plant = picture_.loop->plants[static_cast<size_t>(mark.part.index)];
    std::vector<std::pair<QString, int>> lines{{QString::fromStdString(plant.tag), 600}};
    const auto format = [this](double file, quantity::Quantity of) {
      return QString::fromStdString(quantity::formatWithUnit(quantity::fileToBase(file, of), of, picture_.units));
    };
    const auto bare = [this](double file, quantity::Quantity of) {
      const double value = quantity::toShown(quantity::fileToBase(file, of), of, picture_.units);
      return theme::numberText(value, std::abs(value - std::round(value)) < 0.05 ? 0 : 1);
    };
    if (plant.supply_c && plant.return_c)
      lines.emplace_back(
          bare(*plant.supply_c, quantity::Quantity::kTemperature) + " / " +
              bare(*plant.return_c, quantity::Quantity::kTemperature) + " " +
              QString::fromUtf8(quantity::unitLabel(quantity::Quantity::kTemperature, picture_.units).data()),
          400);
    if (plant.minimum_flow_l_s)
      lines.emplace_back(QObject::tr("min %1").arg(format(*plant.minimum_flow_l_s, quantity::Quantity::kFlow)), 400);
    const double side = mark.quarterTurns == 2 ? -1 : 1;
    double y = mark.centre.y() - (mark.portHalf + 12) * mark.scale + 18;
    for (const auto& [text, weight] : lines) {
      const double half = width(text, px_, weight) / 2;
      wish(plant.id, text, {{mark.centre.x() + side * (34 * mark.scale + 10 + half), y}}, weight,
           weight == 600 ? LabelInk::kStrong : LabelInk::kPlain, 3);
      y += 1.4 * px_;
    }
  }

  void wishForInline(const Mark& mark, const QString& text, int weight, int rank) {
    if (!options_.tags) return;
    const QPointF c = mark.centre;
    const bool upright = mark.quarterTurns % 2 != 0;
    const double half = 12 * mark.scale;
    const QPointF above(c.x(), c.y() - half - 4), below(c.x(), c.y() + half + 1.1 * px_);
    const QPointF beside = right({c.x() + half + 4, c.y() + 0.35 * px_}, text, weight);
    wish(mark.id, text, upright ? std::vector{beside, above} : std::vector{above, below}, weight, LabelInk::kPlain,
         rank);
  }

  void wishBeside(const Mark& mark, const QString& text, int rank) {
    if (!options_.tags) return;
    const QPointF c = mark.centre;
    const double half = 10 * mark.scale;
    wish(mark.id, text,
         {right({c.x() + half + 5, c.y() + 0.35 * px_}, text, 400),
          {c.x(), c.y() + half + 1.1 * px_},
          {c.x(), c.y() - half - 4}},
         400, LabelInk::kPlain, rank);
  }

  // A size is written where it begins: at a riser, or where the run before has another.
  bool sizeBegins(const loop::PairedRun& run) const {
    for (const PartRef& part : topology_.at(run.from)) {
      if (part.kind != PartKind::kPairedRun) continue;
      const loop::PairedRun& other = picture_.loop->paired_runs[static_cast<size_t>(part.index)];
      const loop::Joint *a = topology_.joint(other.from), *b = topology_.joint(other.to);
      if (other.to == run.from && other.pipe.size == run.pipe.size && a && b && std::abs(a->at.y_m - b->at.y_m) < 1e-6)
        return false;
    }
    return true;
  }

  void wishForSizes() {
    for (const Piece& piece : geometry_.pieces) {
      const Strand& strand = geometry_.strands[static_cast<size_t>(piece.strand)];
      const bool level = std::abs(piece.a.y() - piece.b.y())<0.5, longEnough = std::abs(piece.a.x() - piece.b.x())> 40;
      if (strand.kind != PartKind::kPairedRun || !strand.isReturn || !level || !longEnough || piece.along > 1) continue;
      const PartRef* part = topology_.part(strand.id);
      if (!part) continue;
      const loop::PairedRun& run = picture_.loop->paired_runs[static_cast<size_t>(part->index)];
      if (sizeBegins(run))
        wish(strand.id, QString::fromStdString(run.pipe.size), {{(piece.a.x() + piece.b.x()) / 2, piece.a.y() - 7}},
             400, LabelInk::kQuiet, 7);
    }
  }

  void settle(Wish& wish, std::vector<Label>& out) {
    Label& label = wish.label;
    const double wide = width(label.text, label.px, label.weight);
    // A shortfall has to be told: it may stand on a line, with its halo, rather than not at all.
    const bool mayCross = label.ink == LabelInk::kUnder;
    for (const bool onLines : {false, true}) {
      if (onLines && !mayCross) return;
      for (const QPointF& centre : wish.centres) {
        label.baseline = centre - QPointF(wide / 2, 0);
        label.box = QRectF(label.baseline.x() - 1, label.baseline.y() - 0.78 * label.px, wide + 2, 0.98 * label.px);
        const double clearance = mayCross && !onLines ? kClearance : 0;
        if (!occupied_.isFree(label.box.adjusted(-clearance, 0, clearance, 0))) continue;
        if (!onLines && !lines_.isFree(label.box)) continue;
        occupied_.add(label.box);
        out.push_back(std::move(label));
        return;
      }
    }
  }

  const Geometry& geometry_;
  const Dressing& dressing_;
  const Topology& topology_;
  const LoopPicture& picture_;
  const theme::Theme& theme_;
  const PaintOptions& options_;
  int px_ = 11;
  mutable QHash<int, QFontMetricsF> metrics_;
  Occupied occupied_;  ///< Symbols and labels already set.
  Occupied lines_;
  std::vector<Wish> wishes_;
};

}  // namespace

std::vector<Label> placeLabels(const Geometry& geometry, const Dressing& dressing, const Topology& topology,
                               const LoopPicture& picture, const theme::Theme& theme, const PaintOptions& options) {
  return Placer(geometry, dressing, topology, picture, theme, options).place();
}

QFont labelFont(const Label& label, const theme::Theme& theme) {
  QFont font = theme.font(theme::Text::kNote, label.weight);
  font.setPixelSize(label.px);
  return font;
}

QString shortfallText(double shortfall) {
  const double percent = 100 * shortfall;
  return theme::numberText(-percent, percent < 0.95 ? 1 : 0) + QChar(0x00a0) + "%";
}

}  // namespace ebbline::canvas
