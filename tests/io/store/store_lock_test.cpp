// SPDX-License-Identifier: GPL-3.0-or-later
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

#include <fstream>

#include "tests/io/store/store_fixture.hpp"

namespace tw::io::test {
namespace {

std::string firstWord(const std::filesystem::path& file) {
  std::ifstream stream(file);
  std::string word;
  stream >> word;
  return word;
}

TEST(StoreLock, NamesTheProcessThatHoldsIt) {
  TempFolder folder;
  const auto dir = folder.path() / "plant" / "data";
  const auto lock = StoreLock::take(dir);
  ASSERT_TRUE(lock);
  EXPECT_EQ(firstWord(dir / "lock"), std::to_string(::getpid()));
  const auto second = StoreLock::take(dir);
  ASSERT_FALSE(second);
  EXPECT_EQ(second.error().code, "store_locked");
  EXPECT_EQ(second.error().kind, model::FaultKind::Machine);
  EXPECT_EQ(second.error().subject, std::to_string(::getpid()));
  EXPECT_THAT(second.error().detail, testing::HasSubstr(std::to_string(::getpid())));
}

TEST(StoreLock, IsFreeAgainWhenDestroyedOrMovedAway) {
  TempFolder folder;
  {
    auto first = StoreLock::take(folder.path());
    ASSERT_TRUE(first);
    const StoreLock moved = std::move(*first);
    EXPECT_FALSE(StoreLock::take(folder.path()));
  }
  EXPECT_TRUE(StoreLock::take(folder.path()));
}

TEST(StoreLock, IsFreeAgainWhenItsProcessIsKilled) {
  TempFolder folder;
  int ready[2];
  ASSERT_EQ(::pipe(ready), 0);
  const pid_t child = ::fork();
  ASSERT_GE(child, 0);
  if (child == 0) {
    const auto lock = StoreLock::take(folder.path());
    const char byte = lock ? '1' : '0';
    (void)!::write(ready[1], &byte, 1);
    ::pause();
    ::_exit(0);
  }
  char byte = 0;
  ASSERT_EQ(::read(ready[0], &byte, 1), 1);
  EXPECT_EQ(byte, '1');
  const auto held = StoreLock::take(folder.path());
  ASSERT_FALSE(held);
  EXPECT_EQ(held.error().subject, std::to_string(child));
  ::kill(child, SIGKILL);
  ::waitpid(child, nullptr, 0);
  ::close(ready[0]);
  ::close(ready[1]);
  EXPECT_TRUE(StoreLock::take(folder.path()));
}

TEST(StoreLock, SaysWhatIsWrongWithAFolderThatCannotBe) {
  TempFolder folder;
  std::ofstream(folder.path() / "file") << "x";
  const auto lock = StoreLock::take(folder.path() / "file" / "data");
  ASSERT_FALSE(lock);
  EXPECT_EQ(lock.error().code, "store_open");
  EXPECT_EQ(lock.error().kind, model::FaultKind::Machine);
}

TEST(StoreLock, LeavesTheFolderToItsOwner) {
  TempFolder folder;
  const auto dir = folder.path() / "data";
  ASSERT_TRUE(StoreLock::take(dir));
  struct stat status {};
  ASSERT_EQ(::stat(dir.c_str(), &status), 0);
  EXPECT_EQ(status.st_mode & 0777, 0700u);
}

}  // namespace
}  // namespace tw::io::test
