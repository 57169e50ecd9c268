// SPDX-License-Identifier: GPL-3.0-or-later
#include <atomic>
#include <future>
#include <thread>

#include "io/store/writer.hpp"
#include "tests/io/store/store_fixture.hpp"

namespace tw::io::test {
namespace {

using Outcome = model::Result<model::Done>;

model::Fault no() { return {.code = "no", .subject = {}, .detail = {}, .where = {}}; }

class WriterTest : public testing::Test {
 protected:
  std::unique_ptr<Store> open(StoreMode mode = StoreMode::ReadWrite) {
    return must(openStore(m_folder.path(), mode));
  }
  static Writer::Job addAt(int t) {
    return [t](Store& store) -> Outcome {
      const auto added = store.addReadings({make("copper", minute(t), 1.0 + t)});
      if (!added) return model::fail(added.error());
      return model::Done{};
    };
  }
  TempFolder m_folder;
};

TEST_F(WriterTest, TellsOfAJobOnlyWhenOthersCanReadIt) {
  auto reader = (open(), open(StoreMode::ReadOnly));
  std::promise<std::size_t> seen;
  Writer writer(open());
  ASSERT_TRUE(writer.submit(addAt(0), [&](Outcome outcome) {
    seen.set_value(outcome ? must(reader->readings("T1", Instant::min())).size() : 0);
  }));
  EXPECT_EQ(seen.get_future().get(), 1u);
}

TEST_F(WriterTest, FinishesWhatIsQueuedBeforeItEnds) {
  std::atomic<int> done = 0;
  {
    Writer writer(open(), 1000);
    for (int t = 0; t < 700; ++t) {
      ASSERT_TRUE(writer.submit(addAt(t), [&](Outcome outcome) { done += outcome ? 1 : 0; }));
    }
  }
  EXPECT_EQ(done, 700);
  EXPECT_EQ(must(open()->readings("T1", Instant::min())).size(), 700u);
}

TEST_F(WriterTest, UndoesAFaultyJobAlone) {
  std::vector<std::string> outcomes;
  std::promise<void> gate;  // outlives the writer, whose thread waits for it
  {
    const auto note = [&](Outcome outcome) { outcomes.push_back(outcome ? "done" : outcome.error().code); };
    Writer writer(open());
    // Holds the group open until all are queued, so that they share a commit.
    ASSERT_TRUE(writer.submit([&](Store& store) { gate.get_future().wait(); return addAt(0)(store); }, note));
    ASSERT_TRUE(writer.submit(
        [](Store& store) -> Outcome {
          (void)addAt(1)(store);
          return model::fail(no());
        },
        note));
    ASSERT_TRUE(writer.submit(
        [](Store& store) -> Outcome {
          (void)addAt(2)(store);
          throw std::logic_error("a bug");
        },
        note));
    ASSERT_TRUE(writer.submit(addAt(3), note));
    gate.set_value();
  }
  EXPECT_THAT(outcomes, testing::ElementsAre("done", "no", "internal_error", "done"));
  const auto kept = must(open()->readings("T1", Instant::min()));
  ASSERT_EQ(kept.size(), 2u);
  EXPECT_EQ(kept[0].sampledAt.at, minute(0));
  EXPECT_EQ(kept[1].sampledAt.at, minute(3));
}

TEST_F(WriterTest, RefusesWhatItCannotQueue) {
  std::promise<void> started, gate;
  std::atomic<int> done = 0;
  {
    Writer writer(open(), 2);
    ASSERT_TRUE(writer.submit(
        [&](Store&) -> Outcome {
          started.set_value();
          gate.get_future().wait();
          return model::Done{};
        },
        [&](Outcome) { ++done; }));
    started.get_future().wait();
    EXPECT_EQ(writer.backlog(), 1u);
    EXPECT_TRUE(writer.submit(addAt(0), [&](Outcome) { ++done; }));
    EXPECT_TRUE(writer.submit(addAt(1), [&](Outcome) { ++done; }));
    EXPECT_EQ(writer.backlog(), 3u);
    EXPECT_FALSE(writer.submit(addAt(2), [&](Outcome) { ++done; }));
    gate.set_value();
  }
  EXPECT_EQ(done, 3);
  EXPECT_EQ(must(open()->readings("T1", Instant::min())).size(), 2u);
}

TEST_F(WriterTest, OutlivesACompletionThatThrowsAndLogsIt) {
  bool reached = false;
  testing::internal::CaptureStderr();
  {
    Writer writer(open());
    ASSERT_TRUE(writer.submit(addAt(0), [](Outcome) { throw std::logic_error("a bug"); }));
    ASSERT_TRUE(writer.submit(addAt(1), [&](Outcome) { reached = true; }));
  }
  EXPECT_THAT(testing::internal::GetCapturedStderr(), testing::HasSubstr("completion_failed"));
  EXPECT_TRUE(reached);
}

TEST_F(WriterTest, TakesJobsFromManyThreads) {
  constexpr int kThreads = 4;
  constexpr int kJobs = 200;
  std::atomic<int> done = 0;
  {
    Writer writer(open(), kThreads * kJobs);
    std::vector<std::thread> threads;
    for (int n = 0; n < kThreads; ++n) {
      threads.emplace_back([&, n] {
        for (int job = 0; job < kJobs; ++job) {
          EXPECT_TRUE(writer.submit(addAt(n * kJobs + job), [&](Outcome outcome) { done += outcome ? 1 : 0; }));
        }
      });
    }
    for (std::thread& thread : threads) thread.join();
  }
  EXPECT_EQ(done, kThreads * kJobs);
  EXPECT_EQ(must(open()->readings("T1", Instant::min())).size(), static_cast<std::size_t>(kThreads * kJobs));
}

TEST_F(WriterTest, LetsOthersReadAConsistentStoreMeanwhile) {
  auto reader = (open(), open(StoreMode::ReadOnly));
  std::atomic<bool> ended = false;
  Writer writer(open(), 4000);
  for (int t = 0; t < 2000; ++t) {
    // Two rows a job: a reader must see both or neither.
    const auto job = [t](Store& store) -> Outcome {
      const auto added = store.addReadings({make("copper", minute(t), 1.0), make("ph", minute(t), 10.0)});
      if (!added) return model::fail(added.error());
      return model::Done{};
    };
    ASSERT_TRUE(writer.submit(job, [&, t](Outcome outcome) { ended = ended || !outcome || t == 1999; }));
  }
  std::size_t seen = 0;
  while (!ended) {
    const std::size_t now = must(reader->readings("T1", Instant::min())).size();
    ASSERT_GE(now, seen);
    ASSERT_EQ(now % 2, 0u);
    seen = now;
  }
  EXPECT_EQ(must(reader->readings("T1", Instant::min())).size(), 4000u);
}

}  // namespace
}  // namespace tw::io::test
