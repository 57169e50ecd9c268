// SPDX-License-Identifier: GPL-3.0-or-later
// Real folders, real inotify, the real loop; each test ends as soon as its condition holds.
#include "io/drop/watcher.hpp"

#include <fcntl.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sys/stat.h>
#include <unistd.h>

#include <chrono>
#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "io/clock.hpp"
#include "io/drop/table.hpp"
#include "scratch_folder.hpp"

namespace fs = std::filesystem;
using namespace std::chrono_literals;
using testing::ElementsAre;
using testing::HasSubstr;
using testing::IsEmpty;
using tw::io::DropWatcher;
using tw::io::IncomingBatch;

namespace {

constexpr auto kDeadline = 20s;
constexpr int kSettle_ms = 60;

class Watcher : public testing::Test {
 protected:
  void start() {
    tw::io::DropFolder settings;
    settings.path = folder.path();
    settings.settle_ms = kSettle_ms;
    watcher.emplace(
        loop, *clock, settings,
        [this](const fs::path& path, std::string bytes) { onFile(path, std::move(bytes)); },
        [this](bool up, std::string reason) { states.emplace_back(up, std::move(reason)); });
    watcher->start();
  }

  /// Files at once what comes, unless a test replaced this.
  std::function<void(const fs::path&, std::string)> onFile = [this](const fs::path& path, std::string bytes) {
    offered.emplace_back(path.filename().string(), bytes);
    watcher->filed(path, verdict);
  };

  /// Runs the loop until the condition holds; false at the deadline.
  bool runUntil(const std::function<bool()>& condition) {
    bool met = false;
    // The timer of an earlier call may still run out during this one.
    const auto late = std::make_shared<bool>(false);
    std::function<void()> look = [&] {
      met = condition();
      if (met || *late) return loop.stop();
      loop.after(2ms, look);
    };
    loop.post(look);
    loop.after(kDeadline, [late] { *late = true; });
    loop.run([](const char* what) { ADD_FAILURE() << what; });
    return met;
  }
  bool runUntilOffered(std::size_t count) {
    return runUntil([this, count] { return offered.size() >= count; });
  }
  bool up() const { return !states.empty() && states.back().first; }

  /// A file as a careful writer makes it: under another name, then renamed.
  void rename(const std::string& name, const std::string& bytes) {
    folder.write(".making", bytes);
    fs::rename(folder.path() / ".making", folder.path() / name);
  }

  tw::test::ScratchFolder folder;
  std::unique_ptr<tw::io::Clock> clock = tw::io::systemClock();
  tw::io::Loop loop;
  std::optional<DropWatcher> watcher;
  IncomingBatch verdict;
  std::vector<std::pair<std::string, std::string>> offered;
  std::vector<std::pair<bool, std::string>> states;
};

using Offered = std::pair<std::string, std::string>;

}  // namespace

TEST_F(Watcher, TakesARenamedFileAndMakesItsFolders) {
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  EXPECT_THAT(folder.names(), ElementsAre("refused", "taken"));
  rename("a.csv", "x");
  ASSERT_TRUE(runUntil([this] { return folder.has("taken/a.csv"); }));
  EXPECT_THAT(offered, ElementsAre(Offered{"a.csv", "x"}));
  EXPECT_EQ(states.size(), 1U);
}

TEST_F(Watcher, TakesFilesThatWereThereBefore) {
  folder.write("b.csv", "2");
  folder.write("a.csv", "1");
  const struct timespec times[2] = {{1'700'000'000, 0}, {1'700'000'000, 0}};
  ASSERT_EQ(::utimensat(AT_FDCWD, (folder.path() / "b.csv").c_str(), times, 0), 0);
  start();
  ASSERT_TRUE(runUntilOffered(2));
  EXPECT_THAT(offered, ElementsAre(Offered{"b.csv", "2"}, Offered{"a.csv", "1"}));
}

TEST_F(Watcher, LeavesOtherNamesAlone) {
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  for (const char* name : {"a.csv.tmp", ".b.csv", "c.xlsx", "~d.csv"}) rename(name, "x");
  fs::create_directory(folder.path() / "e.csv");
  fs::create_symlink("/etc/passwd", folder.path() / "f.csv");
  ASSERT_EQ(::mkfifo((folder.path() / "g.csv").c_str(), 0600), 0);
  rename("z.csv", "last");
  ASSERT_TRUE(runUntilOffered(1));
  EXPECT_THAT(offered, ElementsAre(Offered{"z.csv", "last"}));
  EXPECT_TRUE(folder.has("f.csv"));
}

TEST_F(Watcher, WaitsForAFileThatIsStillBeingWritten) {
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  const std::string path = (folder.path() / "a.csv").string();
  const int fd = ::open(path.c_str(), O_WRONLY | O_CREAT, 0600);
  ASSERT_GE(fd, 0);
  ASSERT_EQ(::write(fd, "half,", 5), 5);
  // Longer than the settle time: another file passes it by meanwhile.
  folder.write("b.csv", "whole");
  ASSERT_TRUE(runUntilOffered(1));
  EXPECT_EQ(offered[0].first, "b.csv");
  ASSERT_EQ(::write(fd, "rest", 4), 4);
  ::close(fd);
  ASSERT_TRUE(runUntilOffered(2));
  EXPECT_EQ(offered[1], (Offered{"a.csv", "half,rest"}));
}

TEST_F(Watcher, StartsTheSettleTimeAnewWhenAFileIsOpenedAgain) {
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  folder.write("a.csv", "first\n");
  loop.after(std::chrono::milliseconds{kSettle_ms / 2}, [this] {
    std::ofstream(folder.path() / "a.csv", std::ios::app) << "second\n";
  });
  ASSERT_TRUE(runUntilOffered(1));
  EXPECT_EQ(offered[0].second, "first\nsecond\n");
}

TEST_F(Watcher, TakesAThousandFilesAtOnceInOrder) {
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  for (int i = 0; i < 1000; ++i) rename("f" + std::to_string(1000 + i) + ".csv", std::to_string(i));
  ASSERT_TRUE(runUntilOffered(1000));
  ASSERT_TRUE(runUntil([this] { return folder.names("taken").size() == 1000; }));
  EXPECT_THAT(folder.names(), ElementsAre("refused", "taken"));
  // Renames keep the time of writing, so the order of arrival is the order of names here.
  for (std::size_t i = 1; i < offered.size(); ++i) EXPECT_LT(offered[i - 1].first, offered[i].first);
}

TEST_F(Watcher, OffersOneFileAtATime) {
  std::vector<fs::path> open;
  onFile = [&](const fs::path& path, std::string) { open.push_back(path); };
  start();
  rename("a.csv", "1");
  rename("b.csv", "2");
  ASSERT_TRUE(runUntil([&] { return open.size() == 1; }));
  bool waited = false;
  loop.after(std::chrono::milliseconds{3 * kSettle_ms}, [&] { waited = true; });
  ASSERT_TRUE(runUntil([&] { return waited; }));
  ASSERT_EQ(open.size(), 1U);
  watcher->filed(open[0], {});
  ASSERT_TRUE(runUntil([&] { return open.size() == 2; }));
}

TEST_F(Watcher, OffersAPostponedFileAgainBeforeTheOthers) {
  int refusals = 2;
  onFile = [&](const fs::path& path, std::string bytes) {
    offered.emplace_back(path.filename().string(), bytes);
    if (refusals-- > 0) return watcher->postponed(path, 5ms);
    watcher->filed(path, {});
  };
  start();
  rename("a.csv", "1");
  rename("b.csv", "2");
  ASSERT_TRUE(runUntilOffered(4));
  EXPECT_THAT(offered,
              ElementsAre(Offered{"a.csv", "1"}, Offered{"a.csv", "1"}, Offered{"a.csv", "1"}, Offered{"b.csv", "2"}));
}

TEST_F(Watcher, FilesRefusedCellsWithTheirReasons) {
  const auto zone = *tw::io::TimeZone::named("Etc/UTC");
  onFile = [&](const fs::path& path, const std::string& bytes) {
    watcher->filed(path, tw::io::parseTable(bytes, path.filename().string(), zone));
  };
  start();
  rename("good.csv", "time,tank,ph\n2026-03-02 06:00,T,10.2\n");
  rename("mixed.csv", "time,tank,ph,copper\n2026-03-02 06:00,T,n/a,22.1\n");
  rename("noise.csv", "hello\n");
  ASSERT_TRUE(runUntil([this] { return folder.names().size() == 2; }));
  EXPECT_THAT(folder.names("taken"), ElementsAre("good.csv", "mixed.csv"));
  EXPECT_THAT(folder.names("refused"),
              ElementsAre("mixed.csv", "mixed.csv.why.txt", "noise.csv", "noise.csv.why.txt"));
  EXPECT_THAT(folder.read("refused/mixed.csv.why.txt"), HasSubstr("line 2, column \"ph\", value \"n/a\""));
}

TEST_F(Watcher, RefusesAFileThatIsTooLargeWithoutReadingIt) {
  const fs::path huge = folder.path() / "huge.csv";
  folder.write("huge.csv", "");
  fs::resize_file(huge, 64ULL * 1024 * 1024 + 1);  // sparse
  start();
  ASSERT_TRUE(runUntil([this] { return folder.has("refused/huge.csv"); }));
  EXPECT_THAT(offered, IsEmpty());
  EXPECT_THAT(folder.read("refused/huge.csv.why.txt"), HasSubstr("64 MiB"));
}

TEST_F(Watcher, TellsWhenTheFolderVanishesAndComesBack) {
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  const fs::path away = folder.path().string() + ".away";
  fs::remove_all(away);
  fs::rename(folder.path(), away);
  ASSERT_TRUE(runUntil([this] { return !up(); }));
  EXPECT_FALSE(states.back().second.empty());
  fs::rename(away, folder.path());
  ASSERT_TRUE(runUntil([this] { return up(); }));
  rename("a.csv", "x");
  ASSERT_TRUE(runUntilOffered(1));
}

TEST_F(Watcher, TellsThatAFolderIsMissingFromTheStart) {
  fs::remove_all(folder.path());
  start();
  ASSERT_TRUE(runUntil([this] { return !states.empty(); }));
  EXPECT_EQ(states.back(), (std::pair<bool, std::string>{false, "the folder does not exist"}));
  fs::create_directories(folder.path());
  ASSERT_TRUE(runUntil([this] { return up(); }));
}

TEST_F(Watcher, KeepsTryingToFileWithoutReadingTwice) {
  std::optional<fs::path> open;
  onFile = [&](const fs::path& path, std::string bytes) {
    offered.emplace_back(path.filename().string(), bytes);
    open = path;
  };
  start();
  rename("a.csv", "x");
  ASSERT_TRUE(runUntil([&] { return open.has_value(); }));
  // A file where the folder should be: nothing can be moved there.
  fs::remove(folder.path() / "taken");
  folder.write("taken", "in the way");
  watcher->filed(*open, {});
  ASSERT_TRUE(runUntil([this] { return !up(); }));
  fs::remove(folder.path() / "taken");
  ASSERT_TRUE(runUntil([this] { return up(); }));
  EXPECT_TRUE(folder.has("taken/a.csv"));
  EXPECT_EQ(offered.size(), 1U);
}

TEST_F(Watcher, ReadsAgainWhatWasReplacedWhileItWasOut) {
  bool first = true;
  onFile = [&](const fs::path& path, std::string bytes) {
    offered.emplace_back(path.filename().string(), bytes);
    if (std::exchange(first, false)) rename("a.csv", "new");
    watcher->filed(path, {});
  };
  start();
  rename("a.csv", "old");
  ASSERT_TRUE(runUntil([this] { return folder.has("taken/a.csv"); }));
  EXPECT_THAT(offered, ElementsAre(Offered{"a.csv", "old"}, Offered{"a.csv", "new"}));
  EXPECT_EQ(folder.read("taken/a.csv"), "new");
}

TEST_F(Watcher, SaysNothingAfterAStop) {
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  watcher->stop();
  rename("a.csv", "x");
  bool waited = false;
  loop.after(std::chrono::milliseconds{3 * kSettle_ms}, [&] { waited = true; });
  ASSERT_TRUE(runUntil([&] { return waited; }));
  EXPECT_THAT(offered, IsEmpty());
  EXPECT_TRUE(folder.has("a.csv"));
}
