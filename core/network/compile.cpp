#include "core/network/compile_draft.h"

namespace ebbline::network {

Compiled compile(const loop::Loop& loop) {
  Draft draft;
  draft.loop = &loop;
  draftPoints(draft);
  draftFluid(draft);
  draftParts(draft);
  draftMachines(draft);
  keepTaps(draft);
  if (!text::anyFault(draft.remarks)) checkConnections(draft);
  if (!text::anyFault(draft.remarks)) {
    noteHeights(draft);
    lump(draft);
  }
  return {std::move(draft.network), std::move(draft.remarks)};
}

}  // namespace ebbline::network
