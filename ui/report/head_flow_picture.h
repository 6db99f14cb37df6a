#pragma once
// Head against flow on paper: pump curves, the loop's curve now and at design load, the control's path, operating
// point.

#include "core/network/part_load.h"
#include "core/quantity/quantity.h"
#include "ui/theme/theme.h"

class QPainter;

namespace ebbline::report {

struct HeadFlowPicture {
  const network::PartLoadGround* ground = nullptr;
  const network::PartLoadPicture* picture = nullptr;
  QString series_key;
  QString control_words;  ///< Direct label of the control's path.
  quantity::UnitSystem units = quantity::UnitSystem::kSi;
};

/// Paints into `box`, axis numbers and titles included, all as vectors. `font` is that of labels.
void paintHeadFlow(QPainter& painter, const QRectF& box, const HeadFlowPicture& picture, const theme::Theme& theme,
                   const QFont& font);

}  // namespace ebbline::report
