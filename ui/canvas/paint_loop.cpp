#include <QPainter>

#include "ui/canvas/loop_picture.h"
#include "ui/canvas/painting.h"
#include "ui/canvas/view.h"

namespace ebbline::canvas {

void paintLoop(QPainter& painter, const QRectF& box, const LoopPicture& picture, const theme::Theme& theme,
               const PaintOptions& options) {
  const Topology topology(*picture.loop);
  const View view = fitView(*picture.loop, topology, box, theme, options, picture.colourBy);
  const Geometry geometry =
      makeGeometry(*picture.loop, topology, view.scale, {theme.stroke.pairGap, options.largestSymbol, false});
  Dresser dresser;
  const Dressing& dressing = dresser.dress(geometry, topology, picture, theme);
  const std::vector<Label> labels = placeLabels(geometry, dressing, topology, picture, theme, options);
  ScenePainter(painter, {geometry, dressing, labels, picture, theme, options}, box, view.origin, nullptr).paint();
}

}  // namespace ebbline::canvas
