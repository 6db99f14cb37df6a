#pragma once
// A Change is the only way a Loop changes: a value that can be applied, undone, stored and sent.

#include <string>
#include <variant>
#include <vector>

#include <tl/expected.hpp>

#include "core/loop/loop.h"
#include "core/text/remark.h"

namespace ebbline::loop {

/// Any one thing of a loop that has an id.
using Thing = std::variant<Level, Zone, Joint, PairedRun, PipeRun, Terminal, Plant, Pump, Valve, Sensor, Vessel,
                           LoadState, Note, Underlay>;

/// Puts `thing` in place of the one of the same kind and id; if there is none, inserts it before position
/// `index` of its list (past the end = at the end).
struct Put {
  Thing thing;
  std::size_t index = static_cast<std::size_t>(-1);
  bool operator==(const Put&) const = default;
};

/// Takes the thing with this id away.
struct Remove {
  Id id = 0;
  bool operator==(const Remove&) const = default;
};

/// Sets what belongs to the loop as a whole.
struct PutProject {
  Project project;
  bool operator==(const PutProject&) const = default;
};
struct PutFluid {
  Fluid fluid;
  bool operator==(const PutFluid&) const = default;
};
struct PutControl {
  Control control;
  bool operator==(const PutControl&) const = default;
};

using Step = std::variant<Put, Remove, PutProject, PutFluid, PutControl>;

/// Steps done together, with the name the user sees in the undo list ("Move valve").
struct Change {
  std::string name;
  std::vector<Step> steps;
  bool operator==(const Change&) const = default;
};

/// Applies the steps in order and returns the change that takes them back exactly, order of the lists included.
/// If a step cannot be done (an id missing, an id in use by another kind) nothing is changed and the remark says
/// which.
tl::expected<Change, text::Remark> apply(Loop& loop, const Change& change);

/// True if applying the change would leave the loop as it is.
bool changesNothing(const Loop& loop, const Change& change);

/// Id of a thing of any kind.
Id idOf(const Thing& thing);

/// Smallest id greater than all in use.
Id nextFreeId(const Loop& loop);

}  // namespace ebbline::loop
