// SPDX-License-Identifier: GPL-3.0-or-later
// Which files of a drop folder are still being written, which are complete and which comes next. Pure:
// what the folder says and the time are handed in.
#pragma once

#include <chrono>
#include <cstdint>
#include <map>
#include <optional>
#include <set>
#include <string>
#include <utility>

namespace tw::io {

/// What tells one state of a file from another.
struct FileStamp {
  std::uint64_t inode = 0, size = 0;
  std::int64_t modified_ns = 0;
  friend bool operator==(const FileStamp&, const FileStamp&) = default;
};

class WaitingFiles {
 public:
  using Time = std::chrono::milliseconds;  ///< on any clock that only goes forward

  explicit WaitingFiles(Time settle) : m_settle(settle) {}

  /// Somebody writes to it: not complete until closed or replaced.
  void beingWritten(const std::string& name);
  /// Closed by its writer: complete when its stamp has not changed for the settle time.
  void closed(const std::string& name, const FileStamp& stamp, Time now);
  /// Found by a scan: like closed, unless somebody writes to it or it is known already.
  void found(const std::string& name, const FileStamp& stamp, Time now);
  /// Renamed into place: complete at once.
  void complete(const std::string& name, const FileStamp& stamp);
  void gone(const std::string& name);
  /// Events were lost: nothing is known about writers any more.
  void forgetWriters() { m_written.clear(); }
  void clear();

  /// Asks `stampNow(name)` (nullopt = gone) about each file that is due, and makes it complete or waits on.
  template <class StampNow>
  void settle(Time now, StampNow stampNow) {
    for (auto it = m_settling.begin(); it != m_settling.end();) {
      auto& [name, state] = *it;
      if (now - state.since < m_settle) {
        ++it;
        continue;
      }
      const std::optional<FileStamp> stamp = stampNow(name);
      if (stamp && *stamp != state.stamp) {
        state = {*stamp, now};
        ++it;
        continue;
      }
      if (stamp) queue(name, *stamp);
      it = m_settling.erase(it);
    }
  }
  /// When settle() has something to do.
  [[nodiscard]] std::optional<Time> dueAt() const;
  /// The complete file that is oldest by modification, then by name; taken off.
  std::optional<std::string> next();

 private:
  struct Settling {
    FileStamp stamp;
    Time since{0};
  };
  void queue(const std::string& name, const FileStamp& stamp);

  Time m_settle;
  std::set<std::string> m_written;
  std::map<std::string, Settling> m_settling;
  std::set<std::pair<std::int64_t, std::string>> m_complete;
  std::map<std::string, std::int64_t> m_completeAt;  ///< name to its key in m_complete
};

}  // namespace tw::io
