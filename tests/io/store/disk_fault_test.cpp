// SPDX-License-Identifier: GPL-3.0-or-later
// A full disk and failing calls become faults; nothing aborts, and what was acknowledged stays.
#include <sys/resource.h>

#include <csignal>
#include <future>

#include "io/store/schema.hpp"
#include "io/store/sqlite_store.hpp"
#include "tests/io/store/failing_calls.hpp"
#include "tests/io/store/forked_writer.hpp"

namespace tw::io::test {
namespace {

void failAtEveryCall(FailWay way, Begin begin) {
  TempFolder folder;
  const auto made = folder.path() / "made";
  const auto dataDir = folder.path() / "data";
  must(openStore(made, StoreMode::ReadWrite));
  bool reached = true;
  int nth = 1;
  for (; reached; ++nth) {
    SCOPED_TRACE("call " + std::to_string(nth) + " fails");
    prepare(dataDir, begin, made);
    ForkedWriter child = forkWriter([&](int pipe) {
      failCall(nth, way);
      writeSome(dataDir, pipe);
      tell(pipe, failureReached() ? -1 : -2);
    });
    std::vector<int> acknowledged = child.readAll();
    const int status = child.wait();
    ASSERT_TRUE(WIFEXITED(status));
    ASSERT_EQ(WEXITSTATUS(status), 0);
    ASSERT_FALSE(acknowledged.empty());
    reached = acknowledged.back() == -1;
    acknowledged.pop_back();
    expectWholeWith(dataDir, acknowledged);
    if (!reached) {
      EXPECT_EQ(acknowledged.size(), static_cast<std::size_t>(kSomeKeys));
    }
  }
  EXPECT_GT(nth, 10 * kSomeKeys);
}

TEST(DiskFault, OneFailingCallAnywhereLosesNothingAcknowledged) {
  failAtEveryCall(FailWay::Once, Begin::WithStore);
}

TEST(DiskFault, ADiskThatIsFullFromAnyCallOnLosesNothingAcknowledged) {
  failAtEveryCall(FailWay::FromThen, Begin::WithStore);
}

TEST(DiskFault, ADiskThatIsFullWhileTheStoreIsMadeLeavesOneThatCanBeFinished) {
  failAtEveryCall(FailWay::FromThen, Begin::WithoutStore);
}

/// A store whose file may not grow beyond what the first rows need.
std::unique_ptr<Store> crampedStore(const std::filesystem::path& dataDir) {
  auto db = must(store::Database::open(dataDir / "tankward.db", false, true));
  db->execute("test", "PRAGMA journal_mode = WAL");
  must(store::migrate(*db, store::schemaSteps()));
  db->execute("test", "PRAGMA max_page_count = 60");
  EXPECT_FALSE(db->failed());
  return std::make_unique<store::SqliteStore>(std::move(db));
}

TEST(DiskFault, AFullStoreIsAMachineFaultAndKeepsWhatItHas) {
  TempFolder folder;
  const auto store = crampedStore(folder.path());
  int stored = 0;
  model::Result<std::vector<Added>> outcome = std::vector<Added>();
  while (stored < 100000) {
    outcome = store->addReadings({make("copper", minute(stored), 1.0)});
    if (!outcome) break;
    ++stored;
  }
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().code, "store_failed");
  EXPECT_EQ(outcome.error().kind, model::FaultKind::Machine);
  EXPECT_THAT(outcome.error().detail, testing::HasSubstr("full"));
  EXPECT_GT(stored, 10);
  EXPECT_EQ(must(store->readings("T1", Instant::min())).size(), static_cast<std::size_t>(stored));
  EXPECT_EQ(must(store->pendingLiquors(0)).size(), static_cast<std::size_t>(stored));
}

TEST(DiskFault, AGroupThatMeetsAFullStoreIsFaultedWhole) {
  TempFolder folder;
  std::vector<bool> outcomes;
  {
    std::promise<void> gate;  // it and the jobs outlive the writer, whose thread uses them
    const auto note = [&](model::Result<model::Done> outcome) { outcomes.push_back(outcome.has_value()); };
    const auto fill = [](int from, int count) {
      return [=](Store& store) -> model::Result<model::Done> {
        for (int t = from; t < from + count; ++t) {
          const auto added = store.addReadings({make("copper", minute(t), 1.0)});
          if (!added) return model::fail(added.error());
        }
        return model::Done{};
      };
    };
    Writer writer(crampedStore(folder.path()));
    ASSERT_TRUE(writer.submit([&](Store& store) { gate.get_future().wait(); return fill(0, 1)(store); }, note));
    ASSERT_TRUE(writer.submit(fill(1, 100000), note));
    ASSERT_TRUE(writer.submit(fill(200000, 1), note));
    gate.set_value();
  }
  ASSERT_EQ(outcomes.size(), 3u);
  // Whether the first was alone in its commit or not: what is told is what is there.
  const auto kept = must(must(openStore(folder.path(), StoreMode::ReadWrite))->readings("T1", Instant::min()));
  const std::size_t told = static_cast<std::size_t>(std::count(outcomes.begin(), outcomes.end(), true));
  EXPECT_EQ(kept.size(), told);
  EXPECT_FALSE(outcomes[1]);
}

TEST(DiskFault, AFileSizeLimitIsAFaultAndNoSignal) {
  TempFolder folder;
  ForkedWriter child = forkWriter([&](int pipe) {
    std::signal(SIGXFSZ, SIG_IGN);
    const rlimit limit{.rlim_cur = 600 * 1024, .rlim_max = 600 * 1024};
    if (::setrlimit(RLIMIT_FSIZE, &limit) != 0) ::_exit(4);
    const auto store = must(openStore(folder.path(), StoreMode::ReadWrite));
    for (int key = 0; key < kKeysPerRound; ++key) {
      const auto added = store->addReadings({keyed(key)});
      if (!added) ::_exit(added.error().kind == model::FaultKind::Machine ? 0 : 5);
      tell(pipe, key);
    }
    ::_exit(6);
  });
  const std::vector<int> acknowledged = child.readAll();
  const int status = child.wait();
  ASSERT_TRUE(WIFEXITED(status));
  EXPECT_EQ(WEXITSTATUS(status), 0);
  EXPECT_GT(acknowledged.size(), 10u);
  expectWholeWith(folder.path(), acknowledged);
}

}  // namespace
}  // namespace tw::io::test
