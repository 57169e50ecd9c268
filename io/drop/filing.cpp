// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/filing.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <cstdio>
#include <cstring>
#include <system_error>

#include "io/drop/rows.hpp"

namespace tw::io {
namespace {

namespace fs = std::filesystem;

/// Names tried for one file before giving up: more clashes within a second are a fault of another kind.
constexpr int kMostNames = 1000;
/// Names may have 255 bytes; ours add a stamp, a count or `.why.txt`.
constexpr std::size_t kLongestStem = 200;

model::Fault fault(const char* code, const fs::path& path, const std::string& doing, int error) {
  return {code, path.filename().string(), doing + ": " + std::strerror(error), path.string(),
          model::FaultKind::Machine};
}

/// 20260302T060000Z
std::string compactUtc(Instant at) {
  std::string text = toRfc3339(std::chrono::floor<std::chrono::seconds>(at));
  std::erase_if(text, [](char c) { return c == '-' || c == ':'; });
  return text;
}

/// At most kLongestStem bytes, ending between characters.
std::string cut(std::string name) {
  if (name.size() <= kLongestStem) return name;
  std::size_t end = kLongestStem;
  while (end > 0 && (static_cast<unsigned char>(name[end]) & 0xC0) == 0x80) --end;
  name.resize(end);
  return name;
}

/// The n-th name to try for a file in a folder: plain, with the UTC, then with a count behind it.
fs::path candidate(const fs::path& folder, const fs::path& name, Instant now, int n) {
  if (n == 0) return folder / name;
  std::string stamped = cut(name.stem().string()) + '.' + compactUtc(now);
  if (n > 1) stamped += '-' + std::to_string(n);
  return folder / (stamped + name.extension().string());
}

/// Moves without ever replacing a file; the error number, 0 when done.
int renameNoReplace(const fs::path& from, const fs::path& to) {
  if (::renameat2(AT_FDCWD, from.c_str(), AT_FDCWD, to.c_str(), RENAME_NOREPLACE) == 0) return 0;
  if (errno != EINVAL && errno != ENOSYS) return errno;
  // A file system without that flag: a second name first, which fails when it exists.
  if (::link(from.c_str(), to.c_str()) != 0) return errno;
  return ::unlink(from.c_str()) == 0 ? 0 : errno;
}

/// The name that moveInto() will find free.
fs::path freeName(const fs::path& folder, const fs::path& name, Instant now) {
  std::error_code ignored;
  int n = 0;
  while (n < kMostNames && fs::exists(candidate(folder, name, now, n), ignored)) ++n;
  return candidate(folder, name, now, n);
}

model::Result<fs::path> moveInto(const fs::path& folder, const fs::path& file, Instant now) {
  for (int n = 0; n < kMostNames; ++n) {
    const fs::path target = candidate(folder, file.filename(), now, n);
    const int error = renameNoReplace(file, target);
    if (error == 0) return target;
    if (error != EEXIST) return model::fail(fault("filing_failed", file, "cannot move to " + target.string(), error));
  }
  return model::fail(fault("filing_failed", file, "no free name in " + folder.string(), EEXIST));
}

/// A file descriptor that closes itself.
class Descriptor {
 public:
  explicit Descriptor(int fd) : m_fd(fd) {}
  Descriptor(const Descriptor&) = delete;
  Descriptor& operator=(const Descriptor&) = delete;
  ~Descriptor() {
    if (m_fd >= 0) ::close(m_fd);
  }
  [[nodiscard]] int get() const { return m_fd; }

 private:
  int m_fd;
};

int writeAll(int fd, const char* data, std::size_t size) {
  while (size > 0) {
    const ssize_t written = ::write(fd, data, size);
    if (written < 0 && errno == EINTR) continue;
    if (written < 0) return errno;
    data += written;
    size -= static_cast<std::size_t>(written);
  }
  return 0;
}

int copyBytes(const fs::path& from, int to) {
  const Descriptor source(::open(from.c_str(), O_RDONLY | O_CLOEXEC | O_NOFOLLOW | O_NONBLOCK));
  if (source.get() < 0) return errno;
  std::array<char, 1 << 16> buffer;
  while (true) {
    const ssize_t got = ::read(source.get(), buffer.data(), buffer.size());
    if (got < 0 && errno == EINTR) continue;
    if (got < 0) return errno;
    if (got == 0) return 0;
    const int error = writeAll(to, buffer.data(), static_cast<std::size_t>(got));
    if (error != 0) return error;
  }
}

/// Fills a file under a hidden name, makes it durable, then gives it its name: never seen half.
template <class Fill>
model::Result<fs::path> writeNew(const fs::path& folder, const fs::path& name, Instant now, Fill fill) {
  const fs::path hidden = folder / ("." + cut(name.string()) + ".part");
  int error = 0;
  {
    const Descriptor out(::open(hidden.c_str(), O_WRONLY | O_CREAT | O_TRUNC | O_CLOEXEC | O_NOFOLLOW, 0640));
    error = out.get() < 0 ? errno : fill(out.get());
    if (error == 0 && ::fsync(out.get()) != 0) error = errno;
  }
  for (int n = 0; error == 0 && n < kMostNames; ++n) {
    const fs::path target = candidate(folder, name, now, n);
    error = renameNoReplace(hidden, target);
    if (error == 0) return target;
    if (error == EEXIST) error = 0;
  }
  ::unlink(hidden.c_str());
  return model::fail(fault("filing_failed", folder / name, "cannot write", error == 0 ? EEXIST : error));
}

/// On one line, whatever a cell held.
std::string oneLine(std::string_view text) {
  std::string out;
  for (const char c : text) {
    if (c == '\n' || c == '\r') {
      out += ' ';
    } else if (static_cast<unsigned char>(c) >= 0x20 || c == '\t') {
      out += c;
    }
  }
  return out;
}

}  // namespace

Verdict verdictOf(const IncomingBatch& batch) {
  return {!batch.headerReadable, batch.readings.size() + batch.events.size(), batch.refused};
}

std::string whyText(const std::string& fileName, const Verdict& verdict, Instant now) {
  std::string out =
      verdict.whole ? fmt::format("{}: nothing was taken. {}\n", fileName, toRfc3339(now))
                    : fmt::format("{}: {} not taken, {} taken. {}\n", fileName, verdict.refused.size(),
                                  verdict.taken, toRfc3339(now));
  for (const Refusal& refusal : verdict.refused) {
    out += fmt::format("line {}, column \"{}\", value \"{}\": {} ({})\n", refusal.line,
                       oneLine(refusal.column), oneLine(refusal.value), oneLine(refusal.reason),
                       refusal.code);
  }
  return out;
}

bool isDropName(const std::string& fileName) {
  if (fileName.empty() || fileName.front() == '.' || fileName.front() == '~' || fileName.front() == '#') {
    return false;
  }
  const fs::path name(lowerCase(fileName));
  static constexpr std::array<std::string_view, 4> kKinds = {".csv", ".tsv", ".jsonl", ".txt"};
  if (std::find(kKinds.begin(), kKinds.end(), name.extension().string()) == kKinds.end()) return false;
  // report.tmp.csv, report.part.csv: still being made. report.csv.why.txt: ours, moved back by hand.
  const std::string inner = name.stem().extension().string();
  return inner != ".tmp" && inner != ".part" && inner != ".partial" && inner != ".why";
}

model::Result<model::Done> prepareDropFolder(const fs::path& folder) {
  std::error_code error;
  if (!fs::is_directory(folder, error)) {
    return model::fail(model::Fault{"folder_unusable", folder.string(), "the folder does not exist",
                                    folder.string(), model::FaultKind::Machine});
  }
  for (const char* name : {"taken", "refused"}) {
    const fs::path inside = folder / name;
    if (::mkdir(inside.c_str(), 0750) != 0 && errno != EEXIST) {
      return model::fail(fault("folder_unusable", inside, "cannot make " + inside.string(), errno));
    }
    if (!fs::is_directory(inside, error)) {
      return model::fail(fault("folder_unusable", inside, inside.string(), ENOTDIR));
    }
    if (::access(inside.c_str(), W_OK | X_OK) != 0) {
      return model::fail(fault("folder_unusable", inside, "cannot write to " + inside.string(), errno));
    }
  }
  if (::access(folder.c_str(), R_OK | W_OK | X_OK) != 0) {
    return model::fail(fault("folder_unusable", folder, "cannot write to the folder", errno));
  }
  return model::Done{};
}

model::Result<model::Done> fileAway(const fs::path& file, const Verdict& verdict, Instant now) {
  const fs::path taken = file.parent_path() / "taken", refused = file.parent_path() / "refused";
  const std::string name = file.filename().string();
  const bool whole = verdict.whole;
  if (!whole && verdict.refused.empty()) {
    auto moved = moveInto(taken, file, now);
    if (!moved) return model::fail(moved.error());
    return model::Done{};
  }
  fs::path kept = freeName(refused, name, now);
  if (!whole) {
    auto copied = writeNew(refused, name, now, [&](int fd) { return copyBytes(file, fd); });
    if (!copied) return model::fail(copied.error());
    kept = *copied;
  }
  const std::string text = whyText(name, verdict, now);
  auto why = writeNew(refused, cut(kept.filename().string()) + ".why.txt", now,
                      [&](int fd) { return writeAll(fd, text.data(), text.size()); });
  if (!why) return model::fail(why.error());
  auto moved = moveInto(whole ? refused : taken, file, now);
  if (!moved) return model::fail(moved.error());
  return model::Done{};
}

}  // namespace tw::io
