#pragma once
// What the picture needs to know of how the loop hangs together, worked out once per loop: which ends meet where, which
// single pipes belong to the return, how far apart the terminals stand. Topology of the drawing only, no physics.

#include <map>
#include <unordered_map>
#include <vector>

#include "core/loop/loop.h"

namespace ebbline::canvas {

enum class PartKind { kPairedRun, kPipeRun, kTerminal, kPlant, kPump, kValve, kSensor, kVessel, kNote };

/// A thing of the loop by kind and place in its list.
struct PartRef {
  PartKind kind = PartKind::kNote;
  int index = 0;
};

struct EndLess {
  bool operator()(const loop::End& a, const loop::End& b) const {
    return a.joint != b.joint ? a.joint < b.joint : a.side < b.side;
  }
};

class Topology {
 public:
  explicit Topology(const loop::Loop& loop);

  const loop::Joint* joint(loop::Id id) const;
  const PartRef* part(loop::Id id) const;
  /// Parts that meet at a joint (sensors and vessels are taps and counted apart).
  const std::vector<PartRef>& at(loop::Id joint) const;
  /// How many flow-carrying parts meet at one end.
  int connections(const loop::End& end) const;
  /// True if the water at this end is on its way back to the plant.
  bool isReturn(const loop::End& end) const;
  double designFlow_m3s() const { return designFlow_m3s_; }
  /// Distance at which terminals typically stand from each other [m]; 0 with fewer than two.
  double terminalSpacing_m() const { return terminalSpacing_m_; }

 private:
  void connect(const loop::End& end, PartRef part);
  void indexParts();
  void markReturn();
  void measureSpacing();

  const loop::Loop& loop_;
  std::unordered_map<loop::Id, int> joints_;
  std::unordered_map<loop::Id, PartRef> parts_;
  std::unordered_map<loop::Id, std::vector<PartRef>> meeting_;
  std::map<loop::End, int, EndLess> connections_;
  std::map<loop::End, bool, EndLess> return_;
  double designFlow_m3s_ = 0;
  double terminalSpacing_m_ = 0;
};

}  // namespace ebbline::canvas
