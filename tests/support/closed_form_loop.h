#pragma once
// A branched loop that can be solved by hand: two-pipe direct return, four terminals, every loss quadratic.
// [computed; the design's own check case] In L/s and kPa, Δp = r Q²: plant 0.625, mains (supply and return together)
// 0.25, 0.25, 0.5, 1.5, each terminal coil 7.5 + open control valve 5 + balancing valve. 2 L/s each by design, which needs
// 129 kPa at the pump. Pump 160 n² − 0.484375 Q², efficiency 0.75 (2x − x²) with x = Q/8.5.

#include "core/loop/loop.h"

namespace ebbline::test {

/// Ids of the loop.
inline constexpr loop::Id kClosedFormHeader = 100;    ///< Joint: supply after the plant, return before the pump.
inline constexpr loop::Id kClosedFormNode[] = {101, 102, 103, 104};
inline constexpr loop::Id kClosedFormBetween = 105;   ///< Single joint between pump and plant.
inline constexpr loop::Id kClosedFormTerminal[] = {301, 302, 303, 304};
inline constexpr loop::Id kClosedFormPlant = 401;
inline constexpr loop::Id kClosedFormPump = 501;
inline constexpr loop::Id kClosedFormSensor = 601;    ///< Across node 4.

struct ClosedForm {
  bool balanced = true;  ///< Presettings 5.75, 3.5, 1.5 and none; false: open, without loss.
  loop::Strategy strategy = loop::Strategy::kConstantSpeed;
  double set_point_kpa = 129;
  double maximum_speed_percent = 100;
};

loop::Loop closedFormLoop(const ClosedForm& wanted = {});

}  // namespace ebbline::test
