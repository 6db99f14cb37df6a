#include "ui/theme/theme.h"

#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>
#include <algorithm>
#include <cmath>
#include <stdexcept>

namespace ebbline::theme {
namespace {

// The names are those of the tokens, so that a colour is written once there and named once here.
struct Named {
  const char* name;
  QColor Colours::*field;
};

constexpr Named kNamed[] = {{"desk", &Colours::desk},
                            {"sheet", &Colours::sheet},
                            {"panel", &Colours::panel},
                            {"card", &Colours::card},
                            {"field", &Colours::field},
                            {"ink1", &Colours::ink1},
                            {"ink2", &Colours::ink2},
                            {"ink3", &Colours::ink3},
                            {"ink4", &Colours::ink4},
                            {"hairline", &Colours::hairline},
                            {"rule", &Colours::rule},
                            {"grid", &Colours::grid},
                            {"accent", &Colours::accent},
                            {"accentHover", &Colours::accentHover},
                            {"accentWash", &Colours::accentWash},
                            {"onAccent", &Colours::onAccent},
                            {"selection", &Colours::selection},
                            {"focus", &Colours::focus},
                            {"under", &Colours::under},
                            {"underWash", &Colours::underWash},
                            {"onUnder", &Colours::onUnder},
                            {"ok", &Colours::ok},
                            {"okWash", &Colours::okWash},
                            {"caution", &Colours::caution},
                            {"pipe", &Colours::pipe},
                            {"pipeIdle", &Colours::pipeIdle},
                            {"paper", &Colours::paper}};

[[noreturn]] void damaged(const QString& what) {
  throw std::logic_error("look tokens: " + what.toStdString());
}

QJsonObject object(const QJsonObject& in, const char* key) {
  const QJsonValue value = in[QLatin1String(key)];
  if (!value.isObject()) damaged(QString("no object \"%1\"").arg(key));
  return value.toObject();
}

QJsonArray array(const QJsonObject& in, const char* key) {
  const QJsonValue value = in[QLatin1String(key)];
  if (!value.isArray()) damaged(QString("no list \"%1\"").arg(key));
  return value.toArray();
}

double number(const QJsonObject& in, const char* key) {
  const QJsonValue value = in[QLatin1String(key)];
  if (!value.isDouble()) damaged(QString("no number \"%1\"").arg(key));
  return value.toDouble();
}

int whole(const QJsonObject& in, const char* key) {
  return static_cast<int>(std::lround(number(in, key)));
}

QColor colour(const QJsonValue& value) {
  const QColor read(value.toString());
  if (!read.isValid()) damaged("\"" + value.toString() + "\" is no colour");
  return read;
}

QVector<qreal> lengths(const QJsonArray& list) {
  QVector<qreal> out;
  for (const QJsonValue& value : list) out.append(value.toDouble());
  return out;
}

Marker markerOf(const QString& name) {
  static constexpr std::pair<const char*, Marker> kNames[] = {
      {"square", Marker::kSquare},   {"triangle", Marker::kTriangle},
      {"diamond", Marker::kDiamond}, {"circle", Marker::kCircle},
      {"plus", Marker::kPlus},       {"cross", Marker::kCross},
      {"ring", Marker::kRing},       {"triangleDown", Marker::kTriangleDown},
      {"bar", Marker::kBar}};
  for (const auto& [word, marker] : kNames)
    if (name == QLatin1String(word)) return marker;
  damaged("unknown marker \"" + name + "\"");
}

Colours coloursOf(const QJsonObject& in) {
  Colours out;
  for (const Named& each : kNamed) out.*each.field = colour(in[QLatin1String(each.name)]);
  return out;
}

std::vector<Series> seriesOf(const QJsonArray& list) {
  std::vector<Series> out;
  for (const QJsonValue& value : list) {
    const QJsonObject one = value.toObject();
    out.push_back({one["key"].toString(), one["words"].toString(), colour(one["colour"]), colour(one["label"]),
                   lengths(array(one, "dash")), markerOf(one["marker"].toString())});
  }
  return out;
}

ColourScale scaleOf(const QJsonObject& in) {
  const QJsonArray stops = array(in, "stops");
  ColourScale out;
  if (stops.size() != static_cast<qsizetype>(out.stops.size())) damaged("a scale needs 11 stops");
  for (size_t i = 0; i < out.stops.size(); ++i) out.stops[i] = colour(stops[static_cast<qsizetype>(i)]);
  return out;
}

std::array<TextStyle, 7> typeOf(const QJsonArray& list) {
  std::array<TextStyle, 7> out;
  if (list.size() != static_cast<qsizetype>(out.size())) damaged("the type scale needs 7 sizes");
  for (size_t i = 0; i < out.size(); ++i) {
    const QJsonObject one = list[static_cast<qsizetype>(i)].toObject();
    out[i] = {whole(one, "px"), whole(one, "line"), whole(one, "weight")};
  }
  return out;
}

Space spaceOf(const QJsonObject& in) {
  Space out;
  out.grid = whole(in, "grid");
  out.half = whole(in, "half");
  out.pageMargin = whole(in, "page_margin");
  out.sectionGap = whole(in, "section_gap");
  out.row = whole(in, "row");
  out.rowDense = whole(in, "row_dense");
  out.control = whole(in, "control");
  out.toolbar = whole(in, "toolbar");
  out.status = whole(in, "status");
  out.hit = whole(in, "hit");
  return out;
}

Stroke strokeOf(const QJsonObject& in) {
  Stroke out;
  out.hairline = number(in, "hairline");
  out.axis = number(in, "axis");
  out.grid = number(in, "grid");
  out.series = number(in, "series");
  out.seriesChosen = number(in, "series_chosen");
  out.ghost = number(in, "ghost");
  out.symbol = number(in, "symbol");
  out.symbolBold = number(in, "symbol_bold");
  const QJsonObject pipe = object(in, "pipe");
  out.pipeMin = number(pipe, "min");
  out.pipeMax = number(pipe, "max");
  out.pipeGain = out.pipeMax - out.pipeMin;  // the token's rule reaches the upper bound just at design flow
  out.returnDash = lengths(array(pipe, "return_dash"));
  return out;
}

Motion motionOf(const QJsonObject& in) {
  Motion out;
  out.hover = whole(in, "hover_ms");
  out.state = whole(in, "state_ms");
  out.card = whole(in, "card_in_ms");
  out.undoHighlight = whole(in, "undo_highlight_ms");
  out.trailPoints = whole(in, "trail_points");
  return out;
}

}  // namespace

QColor ColourScale::at(double share) const {
  const double last = static_cast<double>(stops.size() - 1);
  const double place = std::isnan(share) ? 0 : std::clamp(share, 0.0, 1.0) * last;
  const auto low = std::min(static_cast<size_t>(place), stops.size() - 2);
  const double rest = place - static_cast<double>(low);
  const QColor &a = stops[low], &b = stops[low + 1];
  const auto mix = [rest](int from, int to) { return static_cast<int>(std::lround(from + rest * (to - from))); };
  return {mix(a.red(), b.red()), mix(a.green(), b.green()), mix(a.blue(), b.blue())};
}

QFont Theme::font(Text text) const {
  return font(text, style(text).weight);
}

QFont Theme::font(Text text, int weight) const {
  QFont out(families);
  out.setPixelSize(std::max(1, static_cast<int>(std::lround(style(text).px * textFactor))));
  out.setWeight(static_cast<QFont::Weight>(weight));
  out.setHintingPreference(QFont::PreferNoHinting);  // even spacing, and the same widths on paper
  return out;
}

const Series& Theme::seriesOf(const QString& key) const {
  const auto found = std::find_if(series.begin(), series.end(), [&](const Series& s) { return s.key == key; });
  if (found == series.end()) damaged("no series \"" + key + "\"");
  return *found;
}

Theme makeTheme(Mode mode) {
  QJsonParseError fault;
  const QJsonObject tokens = QJsonDocument::fromJson(tokensJson(), &fault).object();
  if (fault.error != QJsonParseError::NoError) damaged(fault.errorString());
  const char* name = mode == Mode::kDark ? "dark" : "light";
  Theme out;
  out.mode = mode;
  out.colours = coloursOf(object(object(object(tokens, "themes"), name), "colour"));
  out.series = seriesOf(array(object(object(tokens, "series"), name), "order"));
  out.cividis = scaleOf(object(object(tokens, "scales"), "cividis"));
  out.viridis = scaleOf(object(object(tokens, "scales"), "viridis"));
  const QJsonObject type = object(tokens, "type");
  out.families << type["family"].toString();
  for (const QJsonValue& each : array(type, "fallback")) out.families << each.toString();
  out.type = typeOf(array(type, "scale"));
  out.space = spaceOf(object(tokens, "space"));
  out.stroke = strokeOf(object(tokens, "stroke"));
  const QJsonObject radius = object(tokens, "radius");
  out.radius = {whole(radius, "field"), whole(radius, "button"), whole(radius, "card")};
  out.motion = motionOf(object(tokens, "motion"));
  return out;
}

Theme printTheme() {
  Theme out = makeTheme(Mode::kLight);
  out.colours.sheet = out.colours.panel = out.colours.card = out.colours.paper;
  return out;
}

ThemeHolder::ThemeHolder(Mode mode, QObject* parent) : QObject(parent), theme_(makeTheme(mode)), mode_(mode) {}

void ThemeHolder::setMode(Mode mode) {
  if (mode == mode_) return;
  mode_ = mode;
  rebuild();
}

void ThemeHolder::setPresenting(bool presenting) {
  if (presenting == presenting_) return;
  presenting_ = presenting;
  rebuild();
}

void ThemeHolder::rebuild() {
  theme_ = makeTheme(mode_);
  if (presenting_) {
    theme_.textFactor = QJsonDocument::fromJson(tokensJson())["type"]["present_factor"].toDouble(1.6);
    theme_.strokeFactor = 1.5;  // look.md, "Present mode"
  }
  emit changed();
}

}  // namespace ebbline::theme
