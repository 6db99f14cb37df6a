#pragma once
// Head against flow of the pump: its curves by speed, the loop's own curve now and at design load, the path of the
// control, the operating point with its trail.

#include "core/network/part_load.h"
#include "core/quantity/quantity.h"
#include "ui/plot/plot.h"

namespace ebbline::plot {

class HeadFlowPlot : public Plot {
  Q_OBJECT
 public:
  explicit HeadFlowPlot(const theme::ThemeHolder& holder, QWidget* parent = nullptr);

  void setUnits(quantity::UnitSystem units);
  /// What stays while a slider moves; sets the axes. `seriesKey` names the strategy's series in the tokens, `strategy`
  /// is the second line of the title, `controlWords` the direct label of the control's path.
  void setGround(const network::PartLoadGround& ground, const QString& seriesKey, const QString& strategy,
                 const QString& controlWords);
  /// What moves. An answer that may not be used withholds the picture and says why.
  void setPicture(const network::PartLoadPicture& picture);

 protected:
  void restyle() override;

 private:
  QPointF shown(const network::HeadFlowPoint& point) const;
  std::vector<QPointF> shown(const network::HeadFlowCurve& curve) const;
  void drawGround();
  void drawPicture();

  quantity::UnitSystem units_ = quantity::UnitSystem::kSi;
  network::PartLoadGround ground_;
  QString seriesKey_ = QStringLiteral("constant_speed");
  QString strategy_, controlWords_;
  // What is drawn of the last picture; the states and results themselves are not kept.
  bool hasPicture_ = false;
  network::HeadFlowCurve pumpNow_, loopNow_;
  network::HeadFlowPoint operating_;
  int underSupplied_ = 0;
  std::vector<network::HeadFlowPoint> trailPoints_;
};

}  // namespace ebbline::plot
