// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/waiting_files.hpp"

#include <gtest/gtest.h>

#include <map>

using namespace std::chrono_literals;
using tw::io::FileStamp;
using tw::io::WaitingFiles;

namespace {

struct Folder {
  std::map<std::string, FileStamp> files;
  auto asker() {
    return [this](const std::string& name) -> std::optional<FileStamp> {
      const auto found = files.find(name);
      if (found == files.end()) return std::nullopt;
      return found->second;
    };
  }
};

}  // namespace

TEST(WaitingFiles, TakesRenamedFilesAtOnceOldestFirst) {
  WaitingFiles waiting(500ms);
  waiting.complete("c.csv", {1, 10, 200});
  waiting.complete("b.csv", {2, 10, 100});
  waiting.complete("a.csv", {3, 10, 200});
  EXPECT_EQ(waiting.next(), "b.csv");
  EXPECT_EQ(waiting.next(), "a.csv");
  EXPECT_EQ(waiting.next(), "c.csv");
  EXPECT_FALSE(waiting.next());
}

TEST(WaitingFiles, WaitsUntilAClosedFileHasNotChangedForTheSettleTime) {
  WaitingFiles waiting(500ms);
  Folder folder{{{"a.csv", {1, 10, 100}}}};
  waiting.closed("a.csv", {1, 10, 100}, 0ms);
  EXPECT_EQ(waiting.dueAt(), 500ms);
  waiting.settle(499ms, folder.asker());
  EXPECT_FALSE(waiting.next());
  folder.files["a.csv"] = {1, 20, 300};
  waiting.settle(500ms, folder.asker());
  EXPECT_FALSE(waiting.next());
  EXPECT_EQ(waiting.dueAt(), 1000ms);
  waiting.settle(1000ms, folder.asker());
  EXPECT_EQ(waiting.next(), "a.csv");
  EXPECT_FALSE(waiting.dueAt());
}

TEST(WaitingFiles, LeavesAFileAloneWhileSomebodyWrites) {
  WaitingFiles waiting(500ms);
  Folder folder{{{"a.csv", {1, 10, 100}}}};
  waiting.closed("a.csv", {1, 10, 100}, 0ms);
  waiting.beingWritten("a.csv");
  waiting.found("a.csv", {1, 10, 100}, 100ms);
  waiting.settle(10'000ms, folder.asker());
  EXPECT_FALSE(waiting.next());
  waiting.closed("a.csv", {1, 10, 100}, 10'000ms);
  waiting.settle(10'500ms, folder.asker());
  EXPECT_EQ(waiting.next(), "a.csv");
}

TEST(WaitingFiles, ForgetsWritersWhenEventsWereLost) {
  WaitingFiles waiting(500ms);
  Folder folder{{{"a.csv", {1, 10, 100}}}};
  waiting.beingWritten("a.csv");
  waiting.forgetWriters();
  waiting.found("a.csv", {1, 10, 100}, 0ms);
  waiting.settle(500ms, folder.asker());
  EXPECT_EQ(waiting.next(), "a.csv");
}

TEST(WaitingFiles, ForgetsFilesThatAreGone) {
  WaitingFiles waiting(0ms);
  Folder folder;
  waiting.closed("a.csv", {1, 10, 100}, 0ms);
  waiting.complete("b.csv", {2, 10, 100});
  waiting.gone("b.csv");
  waiting.settle(1ms, folder.asker());
  EXPECT_FALSE(waiting.next());
  EXPECT_FALSE(waiting.dueAt());
}

TEST(WaitingFiles, QueuesAFileOnceHoweverOftenItIsSeen) {
  WaitingFiles waiting(0ms);
  waiting.complete("a.csv", {1, 10, 100});
  waiting.found("a.csv", {1, 10, 100}, 0ms);
  waiting.complete("a.csv", {2, 10, 200});
  EXPECT_EQ(waiting.next(), "a.csv");
  EXPECT_FALSE(waiting.next());
}
