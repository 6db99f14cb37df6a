#pragma once
// The .ebbline file: readable JSON, keys with units, stable ids and order. One field table (fields.h) drives reading,
// writing and the schema.

#include <cstddef>
#include <filesystem>
#include <memory>
#include <string>
#include <string_view>
#include <vector>

#include "core/loop/loop.h"
#include "core/text/remark.h"

namespace ebbline::loop {

class JsonTree;

/// Line of each JSON pointer of a file that was read. Cheap to copy.
class Lines {
 public:
  Lines() = default;
  explicit Lines(std::shared_ptr<const JsonTree> tree) : tree_(std::move(tree)) {}
  /// Line (from 1) of the value at `pointer`, or of its nearest ancestor in the file; 0 if nothing was read.
  int of(std::string_view pointer) const;

 private:
  std::shared_ptr<const JsonTree> tree_;
};

/// What reading gave. `loop` may be used only if usable(); all content faults are listed, not just the first.
struct Reading {
  Loop loop;
  std::vector<text::Remark> remarks;
  Lines lines;  ///< So that later remarks can name the line.
  bool usable() const { return !text::anyFault(remarks); }
};

/// Largest file read [bytes]; a larger one is refused before it is loaded.
inline constexpr std::size_t kMostFileBytes = std::size_t{128} * 1024 * 1024;
/// Deepest nesting read.
inline constexpr int kMostDepth = 64;
/// Most remarks listed about one file.
inline constexpr std::size_t kMostRemarks = 2000;

/// Reads the text of a file. Never throws, never crashes on any bytes; memory is bounded by a multiple of the size.
Reading readLoop(std::string_view text);

/// Reads a file from disk; size is checked first.
Reading readLoopFile(const std::filesystem::path& path);

/// The text of the file: the same loop always gives the same bytes, and readLoop gives the same loop back.
std::string writeLoop(const Loop& loop);

/// Writes beside the old file and renames, so that the file on disk is always whole. Empty = done.
std::vector<text::Remark> writeLoopFile(const Loop& loop, const std::filesystem::path& path);

/// JSON Schema (draft 2020-12 wording kept to draft 7) of the file, made from the same field table.
std::string schemaText();

/// JSON pointer of a thing, e.g. "/terminals/3", or "" when the id is unknown: joins remarks about ids to lines.
std::string pointerOf(const Loop& loop, Id id);

}  // namespace ebbline::loop
