#pragma once
// What the field table cannot say: ids, references and values that must agree with each other.

#include <vector>

#include "core/loop/loop.h"
#include "core/text/remark.h"

namespace ebbline::loop {

/// Everything wrong or doubtful in the content of a loop, in file order, each with JSON pointer, id and tag (no line).
/// Faults are what no drawing may contain (ids used twice, references to nothing); cautions include all that must be
/// completed before solving, so that an unfinished drawing can be kept in a file. At most kMostRemarks are listed.
std::vector<text::Remark> checkContent(const Loop& loop);

}  // namespace ebbline::loop
