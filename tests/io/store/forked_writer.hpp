// SPDX-License-Identifier: GPL-3.0-or-later
// A child process that writes readings and tells its parent, through a pipe, which are acknowledged.
#pragma once

#include <sys/wait.h>
#include <unistd.h>

#include <algorithm>
#include <stdexcept>
#include <vector>

#include "io/store/sqlite_db.hpp"
#include "io/store/writer.hpp"
#include "tests/io/store/store_fixture.hpp"

namespace tw::io::test {

/// Keys of one round never meet those of another, however many were written and not acknowledged.
inline constexpr int kKeysPerRound = 100000;
/// Readings that writeSome writes; enough for a correction, a result and what follows them.
inline constexpr int kSomeKeys = 5;

struct ForkedWriter {
  pid_t pid = -1;
  int pipe = -1;

  /// Reads until `count` keys have come (or the child has ended).
  std::vector<int> readAcknowledged(std::size_t count) const {
    std::vector<int> keys;
    int key = 0;
    while (keys.size() < count && ::read(pipe, &key, sizeof key) == sizeof key) keys.push_back(key);
    return keys;
  }
  std::vector<int> readAll() const { return readAcknowledged(static_cast<std::size_t>(-1)); }
  /// Status as of waitpid.
  int wait() const {
    int status = 0;
    ::close(pipe);
    ::waitpid(pid, &status, 0);
    return status;
  }
};

/// The child runs `work` and ends with status 0, or 1 when it throws. Fork before any thread is made.
template <class Work>
ForkedWriter forkWriter(const Work& work) {
  int ends[2];
  if (::pipe(ends) != 0) throw std::runtime_error("no pipe");
  const pid_t pid = ::fork();
  if (pid < 0) throw std::runtime_error("no child");
  if (pid == 0) {
    ::close(ends[0]);
    int status = 0;
    try {
      work(ends[1]);
    } catch (...) {
      status = 1;
    }
    ::_exit(status);
  }
  ::close(ends[1]);
  return {.pid = pid, .pipe = ends[0]};
}

inline NewReading keyed(int key) {
  // Days before the fixture's morning, one minute each.
  return make("copper", minute(key - 10 * kKeysPerRound), 1.0 + key);
}

inline void tell(int pipe, int key) {
  if (::write(pipe, &key, sizeof key) != sizeof key) ::_exit(3);
}

/// Writes readings `first`, `first + 1` and so on through a Writer until it is killed.
inline void writeForEver(const std::filesystem::path& dataDir, int first, int pipe) {
  Writer writer(must(openStore(dataDir, StoreMode::ReadWrite)), 64);
  for (int key = first;;) {
    const bool queued = writer.submit(
        [key](Store& store) -> model::Result<model::Done> {
          const auto added = store.addReadings({keyed(key)});
          if (!added) return model::fail(added.error());
          return model::Done{};
        },
        [key, pipe](model::Result<model::Done> outcome) {
          if (outcome) tell(pipe, key);
        });
    if (queued) ++key;
  }
}

/// Opens (and makes) the store, writes kSomeKeys readings one by one with a correction and a result on the
/// way, and closes it (which copies the log into the store). Keys that a fault met are not told.
inline void writeSome(const std::filesystem::path& dataDir, int pipe) {
  auto store = openStore(dataDir, StoreMode::ReadWrite);
  if (!store) return;
  for (int key = 0; key < kSomeKeys; ++key) {
    const auto added = (*store)->addReadings({keyed(key)});
    if (added) tell(pipe, key);
    if (added && key == kSomeKeys / 2) {
      (void)(*store)->correctReading(added->at(0).id, keyed(key + kKeysPerRound));
      (void)(*store)->settleLiquor({.tank = "T1", .sampledAt = keyed(key).sampledAt.at},
                                   resultOf(keyed(key).sampledAt.at, {added->at(0).id}));
    }
  }
}

/// Where writeSome begins.
enum class Begin { WithoutStore, WithStore };

/// A folder for one run: empty, or with an empty store copied from `made`.
inline void prepare(const std::filesystem::path& dataDir, Begin begin, const std::filesystem::path& made) {
  std::filesystem::remove_all(dataDir);
  std::filesystem::create_directories(dataDir);
  if (begin == Begin::WithStore) std::filesystem::copy(made / "tankward.db", dataDir / "tankward.db");
}

/// Opens the store as a restarted service does and checks: integrity, foreign keys, every acknowledged
/// reading there exactly once, and its liquor pending or solved.
inline void expectWholeWith(const std::filesystem::path& dataDir, const std::vector<int>& acknowledged) {
  const auto store = must(openStore(dataDir, StoreMode::ReadWrite));
  std::map<Instant, int> found;
  for (const Reading& reading : must(store->readings("T1", Instant::min()))) {
    if (!reading.supersedes) ++found[reading.sampledAt.at];
  }
  std::map<Instant, bool> known;
  for (const PendingLiquor& liquor : must(store->pendingLiquors(0))) known[liquor.sampledAt] = true;
  for (const ResultRow& result : must(store->results("T1", Instant::min(), 0, false))) {
    known[result.sampledAt] = true;
  }
  for (const int key : acknowledged) {
    ASSERT_EQ(found[keyed(key).sampledAt.at], 1) << "reading " << key;
    ASSERT_TRUE(known[keyed(key).sampledAt.at]) << "liquor of reading " << key;
  }
  const auto db = must(store::Database::open(dataDir / "tankward.db", true, false));
  auto integrity = db->use("check", "PRAGMA integrity_check");
  ASSERT_TRUE(integrity.next());
  EXPECT_EQ(integrity.text(0), "ok");
  auto orphans = db->use("check", "PRAGMA foreign_key_check");
  EXPECT_FALSE(orphans.next());
}

}  // namespace tw::io::test
