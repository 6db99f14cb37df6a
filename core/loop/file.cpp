#include "core/loop/file.h"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <cmath>
#include <cstring>
#include <system_error>

#include "core/loop/fields.h"

namespace ebbline::loop {
namespace {

using text::Code;

/// A file descriptor that closes itself.
class OpenFile {
 public:
  explicit OpenFile(int descriptor) : descriptor_(descriptor) {}
  ~OpenFile() {
    if (descriptor_ >= 0) ::close(descriptor_);
  }
  OpenFile(const OpenFile&) = delete;
  OpenFile& operator=(const OpenFile&) = delete;
  int descriptor() const { return descriptor_; }
  bool isOpen() const { return descriptor_ >= 0; }
  bool close() { return ::close(std::exchange(descriptor_, -1)) == 0; }

 private:
  int descriptor_;
};

std::string reasonInWords(int error) {
  return std::system_category().message(error);
}

Reading refused(Code code, std::vector<std::string> arguments) {
  Reading reading;
  reading.remarks.push_back({code, {}, std::move(arguments)});
  return reading;
}

/// Notes every number of the loop that is not finite.
class FiniteCheck {
 public:
  explicit FiniteCheck(std::vector<text::Remark>& remarks) : remarks_(remarks) {}
  template <class Member>
  void operator()(const char* key, const Member& member, Need, const char*, Limits = {}) {
    const std::size_t length = pointer_.size();
    pointer_ += std::string("/") + key;
    visit(member, key);
    pointer_.resize(length);
  }

 private:
  template <class T>
  void visit(const T& x, const char* key) {
    if constexpr (std::same_as<T, double>) {
      if (!std::isfinite(x)) {
        text::Place place;
        place.pointer = pointer_;
        remarks_.push_back({Code::kFileNumberNotFinite, place, {key}});
      }
    } else if constexpr (kIsOptional<T>) {
      if (x) visit(*x, key);
    } else if constexpr (kIsVector<T>) {
      const std::size_t length = pointer_.size();
      for (std::size_t i = 0; i < x.size() && remarks_.size() < kMostRemarks; ++i) {
        pointer_ += "/" + std::to_string(i);
        visit(x[i], key);
        pointer_.resize(length);
      }
    } else if constexpr (kIsStruct<T>) {
      describe(*this, x);
    }
  }

  std::vector<text::Remark>& remarks_;
  std::string pointer_;
};

// Empty = done, otherwise why not.
std::string writeAll(int descriptor, std::string_view bytes) {
  while (!bytes.empty()) {
    const ssize_t written = ::write(descriptor, bytes.data(), bytes.size());
    if (written < 0 && errno == EINTR) continue;
    if (written < 0) return reasonInWords(errno);
    bytes.remove_prefix(static_cast<std::size_t>(written));
  }
  return {};
}

// Makes the new name last through a power cut; a folder that cannot be synced is no reason to fail.
void syncFolder(const std::filesystem::path& folder) {
  const OpenFile open(::open(folder.c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC));
  if (open.isOpen()) ::fsync(open.descriptor());
}

// Writes a temporary neighbour of `path` and renames it over `path`. Empty = done, otherwise why not.
std::string replaceFile(const std::filesystem::path& path, std::string_view bytes) {
  const std::filesystem::path folder = path.has_parent_path() ? path.parent_path() : std::filesystem::path(".");
  std::string name = (folder / ("." + path.filename().string() + ".XXXXXX")).string();
  OpenFile open(::mkostemp(name.data(), O_CLOEXEC));
  if (!open.isOpen()) return reasonInWords(errno);
  struct stat old {};
  const mode_t mode = ::stat(path.c_str(), &old) == 0 ? (old.st_mode & 0777U) : 0644U;
  std::string reason = writeAll(open.descriptor(), bytes);
  if (reason.empty() && ::fchmod(open.descriptor(), mode) != 0) reason = reasonInWords(errno);
  if (reason.empty() && ::fsync(open.descriptor()) != 0) reason = reasonInWords(errno);
  if (!open.close() && reason.empty()) reason = reasonInWords(errno);
  if (reason.empty() && ::rename(name.c_str(), path.c_str()) != 0) reason = reasonInWords(errno);
  if (!reason.empty())
    ::unlink(name.c_str());
  else
    syncFolder(folder);
  return reason;
}

}  // namespace

Reading readLoopFile(const std::filesystem::path& path) {
  const std::string name = path.string();
  // Not blocking: opening a pipe without a writer must not hang; on ordinary files it changes nothing.
  const OpenFile open(::open(path.c_str(), O_RDONLY | O_CLOEXEC | O_NONBLOCK));
  if (!open.isOpen()) return refused(Code::kFileCannotOpen, {name, reasonInWords(errno)});
  struct stat about {};
  if (::fstat(open.descriptor(), &about) != 0) return refused(Code::kFileCannotOpen, {name, reasonInWords(errno)});
  if (S_ISDIR(about.st_mode)) return refused(Code::kFileCannotOpen, {name, "it is a folder"});
  if (!S_ISREG(about.st_mode)) return refused(Code::kFileCannotOpen, {name, "it is not an ordinary file"});
  const auto size = static_cast<std::size_t>(about.st_size);
  if (size > kMostFileBytes)
    return refused(Code::kFileTooLarge, {std::to_string(size), std::to_string(kMostFileBytes)});
  std::string text(size, '\0');
  std::size_t filled = 0;
  while (filled < size) {
    const ssize_t got = ::read(open.descriptor(), text.data() + filled, size - filled);
    if (got < 0 && errno == EINTR) continue;
    if (got < 0) return refused(Code::kFileCannotOpen, {name, reasonInWords(errno)});
    if (got == 0) break;
    filled += static_cast<std::size_t>(got);
  }
  text.resize(filled);
  return readLoop(text);
}

std::vector<text::Remark> writeLoopFile(const Loop& loop, const std::filesystem::path& path) {
  std::vector<text::Remark> remarks;
  FiniteCheck check(remarks);
  describe(check, loop);
  if (!remarks.empty()) return remarks;
  // A link stays a link: what it points to is replaced.
  std::error_code no_such_file;
  const std::filesystem::path real = std::filesystem::canonical(path, no_such_file);
  const std::string reason = replaceFile(no_such_file ? path : real, writeLoop(loop));
  if (!reason.empty()) remarks.push_back({Code::kFileCannotWrite, {}, {path.string(), reason}});
  return remarks;
}

std::string pointerOf(const Loop& loop, Id id) {
  std::string pointer;
  forEachList(
      [&](const char* key, const auto& list, const char*) {
        for (std::size_t i = 0; i < list.size() && pointer.empty(); ++i)
          if (list[i].id == id) pointer = std::string("/") + key + "/" + std::to_string(i);
      },
      loop);
  return pointer;
}

}  // namespace ebbline::loop
