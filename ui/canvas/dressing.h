#pragma once
// Results put on the geometry: how heavy and of what colour each line is, what stands at each terminal. Nothing is
// computed here that the results do not say.

#include <QRgb>
#include <vector>

#include "ui/canvas/geometry.h"
#include "ui/canvas/loop_picture.h"

namespace ebbline::canvas {

struct StrandLook {
  double width = 2;
  QRgb colour = 0;
  bool idle = false;      ///< Solved, and nothing flows.
  bool outlined = false;  ///< Carries a scale colour, so it needs its outline.
  bool selected = false;
  int pen = 0;  ///< Index in Dressing::pens.
};

/// Lines of one look are painted together.
struct LinePen {
  double width = 2;
  QRgb colour = 0;
  bool dashed = false;
  bool leg = false;
  bool outlined = false;
  bool operator==(const LinePen&) const = default;
};

struct TerminalLook {
  bool known = false;
  bool idle = false;
  bool under = false;
  double stroke = 0;  ///< 0…1.
  double shortfall = 0;
};

/// Bounds of the coloured quantity on round numbers, in the unit shown.
struct Scale {
  bool valid = false;
  double low = 0, high = 1, step = 0.25;
  int decimals = 0;
  QString words;  ///< "pressure above the vessel, kPa".
};

struct Dressing {
  std::vector<StrandLook> strands;
  std::vector<LinePen> pens;            ///< Back to front.
  std::vector<TerminalLook> terminals;  ///< Order of Loop::terminals.
  Scale scale;
  bool solved = false;
  double designFlow_m3s = 0;
};

/// Weight of a run by its flow: the rule of the tokens.
double weightOf(double flow_m3s, double designFlow_m3s, const theme::Stroke& stroke);

/// Keeps which result belongs to which line, so that dressing again costs one pass.
class Dresser {
 public:
  const Dressing& dress(const Geometry& geometry, const Topology& topology, const LoopPicture& picture,
                        const theme::Theme& theme);

 private:
  struct Found {
    int part = -1, terminal = -1, from = -1, to = -1;
  };
  void match(const Geometry& geometry, const network::Results& results);
  bool matches(const Geometry& geometry, const network::Results& results) const;
  double flowOf(size_t strand, const network::Results& results) const;
  bool valueOf(size_t strand, const LoopPicture& picture, double& value) const;
  Scale scaleOf(const Geometry& geometry, const LoopPicture& picture) const;
  void dressTerminals(const LoopPicture& picture);
  void collectPens(const Geometry& geometry);

  std::vector<Found> found_;
  std::vector<int> terminalResult_;
  Dressing out_;
};

/// Low, high and step on 1-2-4-5 numbers covering [low, high] with 3 to 6 steps.
Scale roundScale(double low, double high);

}  // namespace ebbline::canvas
