#include "ui/canvas/crossings.h"

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <optional>

namespace ebbline::canvas {
namespace {

constexpr double kCell = 64;      // px; a few times the usual length of a piece
constexpr double kJoined = 3;     // px; lines that meet within this of an end are joined, not crossed
constexpr double kHalfGap = 5.5;  // px; with the square ends of the pieces about 8 px of ground remain
constexpr double kHalfGapLeg = 4;

/// One straight stretch of a line, before cutting.
struct Stretch {
  QPointF a, b;
  int line = 0;
  double along = 0;
};

/// A gap in a stretch, by distance from its start.
struct Gap {
  int stretch = 0;
  double from = 0, to = 0;
};

double length(QPointF v) {
  return std::hypot(v.x(), v.y());
}

std::vector<Stretch> stretchesOf(const std::vector<Line>& lines) {
  std::vector<Stretch> out;
  for (size_t i = 0; i < lines.size(); ++i) {
    double along = 0;
    for (size_t k = 1; k < lines[i].points.size(); ++k) {
      const QPointF a = lines[i].points[k - 1], b = lines[i].points[k];
      const double span = length(b - a);
      if (span < 0.01) continue;
      out.push_back({a, b, static_cast<int>(i), along});
      along += span;
    }
  }
  return out;
}

/// Whether the boxes of two stretches touch: almost all pairs of a cell do not.
bool near(const Stretch& p, const Stretch& q) {
  const auto apart = [](double a, double b, double c, double d) {
    return std::max(a, b) < std::min(c, d) || std::max(c, d) < std::min(a, b);
  };
  return !apart(p.a.x(), p.b.x(), q.a.x(), q.b.x()) && !apart(p.a.y(), p.b.y(), q.a.y(), q.b.y());
}

/// Distance along `under` at which `over` crosses it, if both go on beyond the place.
std::optional<double> crossing(const Stretch& under, const Stretch& over) {
  const QPointF u = under.b - under.a, v = over.b - over.a, w = over.a - under.a;
  const double cross = u.x() * v.y() - u.y() * v.x();
  if (std::abs(cross) < 1e-9) return std::nullopt;
  const double s = (w.x() * v.y() - w.y() * v.x()) / cross, t = (w.x() * u.y() - w.y() * u.x()) / cross;
  const double lu = length(u), lv = length(v);
  const bool inside = s * lu > kJoined && (1 - s) * lu > kJoined && t * lv > kJoined && (1 - t) * lv > kJoined;
  return inside ? std::optional<double>(s * lu) : std::nullopt;
}

using CellEntry = std::pair<std::uint64_t, int>;

std::vector<CellEntry> cellsOf(const std::vector<Stretch>& stretches) {
  std::vector<CellEntry> out;
  out.reserve(stretches.size() * 2);
  for (size_t i = 0; i < stretches.size(); ++i) {
    const QPointF a = stretches[i].a, b = stretches[i].b;
    const double x0 = std::min(a.x(), b.x()), x1 = std::max(a.x(), b.x());
    const double y0 = std::min(a.y(), b.y()), y1 = std::max(a.y(), b.y());
    const auto cell = [](double v) { return static_cast<std::int64_t>(std::floor(v / kCell)); };
    for (std::int64_t cx = cell(x0); cx <= cell(x1); ++cx)
      for (std::int64_t cy = cell(y0); cy <= cell(y1); ++cy)
        out.emplace_back((static_cast<std::uint64_t>(cx) << 32) ^ (static_cast<std::uint64_t>(cy) & 0xffffffffu),
                         static_cast<int>(i));
  }
  std::sort(out.begin(), out.end());
  return out;
}

class Crossings {
 public:
  Crossings(const std::vector<Line>& lines, const std::vector<Stretch>& stretches, double gap)
      : lines_(lines), stretches_(stretches), gap_(gap) {}

  std::vector<Gap> find() {
    const std::vector<CellEntry> cells = cellsOf(stretches_);
    for (size_t first = 0; first < cells.size();) {
      size_t last = first;
      while (last < cells.size() && cells[last].first == cells[first].first) ++last;
      for (size_t i = first; i < last; ++i)
        for (size_t k = i + 1; k < last; ++k) pair(cells[i].second, cells[k].second);
      first = last;
    }
    std::sort(gaps_.begin(), gaps_.end(), [](const Gap& a, const Gap& b) {
      return a.stretch != b.stretch ? a.stretch < b.stretch : a.from < b.from;
    });
    return std::move(gaps_);
  }

 private:
  void pair(int i, int k) {
    if (!near(stretches_[static_cast<size_t>(i)], stretches_[static_cast<size_t>(k)])) return;
    const Line &a = lines_[static_cast<size_t>(stretches_[static_cast<size_t>(i)].line)],
               &b = lines_[static_cast<size_t>(stretches_[static_cast<size_t>(k)].line)];
    const bool firstOver = a.over != b.over ? a.over : i > k;
    const int under = firstOver ? k : i, over = firstOver ? i : k;
    const auto place = crossing(stretches_[static_cast<size_t>(under)], stretches_[static_cast<size_t>(over)]);
    if (!place) return;
    const double half = gap_ * ((firstOver ? a : b).leg ? kHalfGapLeg : kHalfGap);
    gaps_.push_back({under, *place - half, *place + half});
  }

  const std::vector<Line>& lines_;
  const std::vector<Stretch>& stretches_;
  double gap_;
  std::vector<Gap> gaps_;
};

}  // namespace

std::vector<Piece> cutAtCrossings(const std::vector<Line>& lines, double gap) {
  const std::vector<Stretch> stretches = stretchesOf(lines);
  const std::vector<Gap> gaps = gap > 0 ? Crossings(lines, stretches, gap).find() : std::vector<Gap>();
  std::vector<Piece> out;
  out.reserve(stretches.size() + gaps.size());
  size_t next = 0;
  for (size_t i = 0; i < stretches.size(); ++i) {
    const Stretch& s = stretches[i];
    const double whole = length(s.b - s.a);
    const QPointF unit = (s.b - s.a) / whole;
    double from = 0;
    const int strand = lines[static_cast<size_t>(s.line)].strand;
    for (; next < gaps.size() && gaps[next].stretch == static_cast<int>(i); ++next) {
      if (gaps[next].from > from)
        out.push_back({s.a + unit * from, s.a + unit * gaps[next].from, strand, s.along + from});
      from = std::max(from, gaps[next].to);
    }
    if (from < whole) out.push_back({s.a + unit * from, s.b, strand, s.along + from});
  }
  return out;
}

}  // namespace ebbline::canvas
