#pragma once
// Loops for tests of the document: one with every field set, and random ones.

#include <random>

#include "core/loop/change.h"
#include "core/loop/loop.h"

namespace ebbline::loop::test {

/// A small loop in which every field of every kind differs from its default.
Loop fullLoop();

/// A random loop: every field random within its limits, references random (they need not exist).
Loop randomLoop(std::mt19937_64& random);

/// A random change that can be applied to `loop`: puts, replacements, removals and settings.
Change randomChange(const Loop& loop, std::mt19937_64& random);

}  // namespace ebbline::loop::test
