#pragma once
// The look in one value: every colour, series, scale, type size, space and stroke, read from resources/look/tokens.json
// (compiled in; the file is the only place where a number of the look is written). Light or dark is a property of the
// value, never a global: the shell owns one ThemeHolder and hands it down; everything repaints on changed().

#include <QColor>
#include <QFont>
#include <QIcon>
#include <QObject>
#include <QPainterPath>
#include <QPalette>
#include <QString>
#include <QVector>
#include <array>
#include <vector>

class QApplication;
class QPainter;

namespace ebbline::theme {

enum class Mode { kLight, kDark };

/// Surfaces, inks and states. Text inks reach 4.5:1 on every surface, graphics 3:1 (held by a test).
struct Colours {
  QColor desk, sheet, panel, card, field;  ///< Surfaces: window ground, drawing and plot ground, page, cards, fields.
  QColor ink1, ink2, ink3, ink4;           ///< Text from strong to quiet; ink4 is for disabled marks only.
  QColor hairline, rule, grid;             ///< Row lines; axes and control borders; plot grid.
  QColor accent, accentHover, accentWash, onAccent, selection, focus;  ///< The hand, never the data.
  QColor under, underWash, onUnder;                                    ///< Under-supplied, wrong entry.
  QColor ok, okWash, caution;
  QColor pipe, pipeIdle;  ///< What is built; what has no flow.
  QColor paper;           ///< Printed page.
};

enum class Marker { kSquare, kTriangle, kDiamond, kCircle, kPlus, kCross, kRing, kTriangleDown, kBar };

/// One strategy in every plot and table: colour, dash and marker belong together.
struct Series {
  QString key;          ///< "dp_pump" …
  QString words;        ///< "constant DP at the pump" …
  QColor colour;        ///< Lines and markers, 3:1.
  QColor label;         ///< Text, 4.5:1.
  QVector<qreal> dash;  ///< On and off in px; empty = solid. QPen wants multiples of its width: see seriesPen().
  Marker marker = Marker::kSquare;
};

/// A published colour scale; the dark end is the small number in both themes and in print.
struct ColourScale {
  std::array<QColor, 11> stops;
  QColor at(double share) const;  ///< share 0…1, clamped; NaN gives the first stop.
};

enum class Text { kNote, kLabel, kBody, kStrong, kTitle, kFigure, kBig };

struct TextStyle {
  int px = 13;
  int line = 20;
  int weight = 400;
};

struct Space {
  int grid = 8, half = 4, pageMargin = 16, sectionGap = 24, row = 28, rowDense = 24, control = 28, toolbar = 40;
  int status = 28, hit = 24;
};

struct Stroke {
  double hairline = 1, axis = 1, grid = 1, series = 2, seriesChosen = 2.75, ghost = 1, symbol = 1.5, symbolBold = 2;
  double pipeMin = 1.25, pipeMax = 4.5, pipeGain = 3.25;
  QVector<qreal> returnDash;  ///< On and off in px.
  double pairGap = 9;         ///< Between centres of a paired run, px at every zoom.
};

struct Radius {
  int field = 3, button = 4, card = 6;
};

/// Milliseconds; all zero when the system asks for reduced motion.
struct Motion {
  int hover = 80, state = 120, card = 100, undoHighlight = 600, trailPoints = 24;
};

struct Theme {
  Mode mode = Mode::kLight;
  double textFactor = 1;    ///< 1.6 in present mode.
  double strokeFactor = 1;  ///< 1.5 in present mode.
  Colours colours;
  std::vector<Series> series;  ///< In the order of the tokens.
  ColourScale cividis;         ///< Ordered quantities: pressure, yearly energy.
  ColourScale viridis;         ///< Velocity and friction gradient on runs, maps.
  QStringList families;        ///< Lato, then its stand-ins.
  std::array<TextStyle, 7> type;
  Space space;
  Stroke stroke;
  Radius radius;
  Motion motion;

  bool dark() const { return mode == Mode::kDark; }
  const TextStyle& style(Text text) const { return type[static_cast<size_t>(text)]; }
  QFont font(Text text) const;                       ///< In pixels, scaled by textFactor.
  QFont font(Text text, int weight) const;           ///< Same size, other weight (600 = chosen row, direct label).
  const Series& seriesOf(const QString& key) const;  ///< REQUIRES: a key of the tokens.
};

/// Reads the compiled-in tokens. Throws std::logic_error if the file in the program is damaged.
Theme makeTheme(Mode mode);

/// The theme for the printed page: light inks on paper, sizes of print in points.
Theme printTheme();

/// Text of the compiled-in tokens.json.
QByteArray tokensJson();

/// Owned by the shell, handed to every widget that paints. Not a singleton.
class ThemeHolder : public QObject {
  Q_OBJECT
 public:
  explicit ThemeHolder(Mode mode, QObject* parent = nullptr);
  const Theme& theme() const { return theme_; }
  void setMode(Mode mode);
  void setPresenting(bool presenting);  ///< Type × 1.6, strokes × 1.5.

 signals:
  void changed();

 private:
  void rebuild();
  Theme theme_;
  Mode mode_;
  bool presenting_ = false;
};

// ---- the whole application
// -------------------------------------------------------------------------------------------

QPalette palette(const Theme& theme);
/// One sheet for the whole program. Widgets choose a look by these dynamic properties:
///   "look" on QPushButton/QToolButton: "primary", "quiet" (text only), "pill" (checkable), "tool" (left bar, icon over
///   word) "look" on QLabel: "title", "note", "quiet" (ink2), "strong", "figure", "big", "under", "ok", "caution"
///   "look" on QFrame/QWidget: "sheet", "panel", "card", "strip" (status strip), "bar" (top bar), "rule" (1 px line)
///   "wrong" = true on QLineEdit and spin boxes: border in `under`.
QString styleSheet(const Theme& theme);
void applyTheme(QApplication& application, const Theme& theme);  ///< Font, palette and sheet.

// ---- drawing helpers
// -------------------------------------------------------------------------------------------------

/// Pen of a series; chosen = 2.75 px. Dash converted to multiples of the width.
QPen seriesPen(const Series& series, const Theme& theme, bool chosen = false);
QPen dashedPen(const QColor& colour, double width, const QVector<qreal>& dashPx);  ///< dash in px.
void drawMarker(QPainter& painter, Marker marker, QPointF centre, const QColor& colour, const QColor& ground,
                double size = 7);
/// The short line with its marker that stands before a strategy's name in a table (24 × 10 px); faded = not drawn in
/// the plot.
void drawSeriesSample(QPainter& painter, const QRectF& box, const Series& series, const Theme& theme,
                      bool faded = false);
/// Text with a halo of the ground (4 px), so that a line behind it does not touch it. `at` = baseline start.
void drawHaloText(QPainter& painter, QPointF baseline, const QString& text, const QFont& font, const QColor& ink,
                  const QColor& ground, Qt::Alignment alignment = Qt::AlignLeft);

enum class Icon {
  kUndo,
  kRedo,
  kSun,
  kMoon,
  kPresent,
  kChevronRight,
  kChevronLeft,
  kChevronDown,
  kTick,
  kWarning,
  kSearch,
  kCross,
  kPlus,
  kSelect,
  kOpen,
  kSave,
  kPlay,
  kPause
};
QPainterPath iconPath(Icon icon);  ///< Centred on 0,0 in a 16-unit square; stroke 1.5, round ends, no fill.
void drawIcon(QPainter& painter, Icon icon, QPointF centre, const QColor& ink, double scale = 1);
QIcon icon(Icon icon, const Theme& theme);  ///< ink2; disabled ink4; 16 px (crisp at any device ratio).

// ---- numbers
// ---------------------------------------------------------------------------------------------------------

/// Fixed decimals, thin space between thousands, true minus; not a number → en dash.
QString numberText(double value, int decimals);
/// About `figures` significant figures without exponent: 0.0123, 4.85, 163, 8 818.
QString roundedText(double value, int figures = 3);
/// "3e-13": one figure, as the status strip shows residuals.
QString residualText(double value);
inline const QChar kThinSpace(0x2009);
inline const QChar kMinus(0x2212);
inline const QChar kEnDash(0x2013);

/// WCAG 2 contrast ratio of two opaque colours, 1…21.
double contrast(const QColor& a, const QColor& b);

}  // namespace ebbline::theme
