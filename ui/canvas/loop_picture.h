#pragma once
// What a picture of the loop shows, and the one function that paints it: the window and the printed report use the
// same.

#include <QRectF>

#include "core/loop/loop.h"
#include "core/network/results.h"
#include "core/quantity/quantity.h"
#include "ui/theme/theme.h"

class QPainter;

namespace ebbline::canvas {

/// Which result colours the runs. kNone: everything in ink.
enum class ColourBy { kNone, kPressure, kGradient };

/// Everything a picture depends on besides the look. Borrowed: loop and results must outlive the call.
struct LoopPicture {
  const loop::Loop* loop = nullptr;
  const network::Results* results = nullptr;  ///< Null: nothing solved; runs keep one weight and no marks are set.
  quantity::UnitSystem units = quantity::UnitSystem::kSi;
  ColourBy colourBy = ColourBy::kNone;
  loop::Id selected = 0;  ///< Drawn in the accent; 0 = none.
};

/// What to set down beside the pipes.
struct PaintOptions {
  bool levels = true;           ///< Datum lines with names.
  bool elevations = false;      ///< Height under each level's name.
  bool tags = true;             ///< Terminals, plant, pumps, sensors.
  bool sizes = false;           ///< Pipe size at the start of each branch.
  bool key = true;              ///< Line weights (and the colour scale) at the foot.
  double largestSymbol = 1.25;  ///< Symbols never grow beyond this share of their drawn size.
};

/// Paints the loop fitted into `box`, every line and letter as vectors. Coordinates of the painter are taken as px (in
/// a report: scale the painter so that one unit is 1/96 inch or whatever the weight of lines asks for).
void paintLoop(QPainter& painter, const QRectF& box, const LoopPicture& picture, const theme::Theme& theme,
               const PaintOptions& options = {});

/// Height over width that a picture of this loop wants, for laying out a page.
double wantedAspect(const loop::Loop& loop);

}  // namespace ebbline::canvas
