#pragma once
// What is known of one drawn thing, for the hover card and for screen readers.

#include <QString>
#include <vector>

#include "ui/canvas/loop_picture.h"
#include "ui/canvas/topology.h"

namespace ebbline::canvas {

struct Fact {
  QString name, value;
  bool under = false;
};

struct Facts {
  QString title;            ///< Tag, or the kind of thing.
  std::vector<Fact> lines;  ///< At most four.
  QString sentence() const;
};

Facts factsOf(loop::Id id, const Topology& topology, const LoopPicture& picture);

}  // namespace ebbline::canvas
