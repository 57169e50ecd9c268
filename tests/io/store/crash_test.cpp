// SPDX-License-Identifier: GPL-3.0-or-later
// A process that writes is killed, at random and at every single write: what it had acknowledged is there,
// once, and the store is whole.
#include <sys/wait.h>
#include <unistd.h>

#include <algorithm>
#include <csignal>
#include <map>

#include "io/store/writer.hpp"
#include "tests/io/store/failing_calls.hpp"
#include "tests/io/store/forked_writer.hpp"

namespace tw::io::test {
namespace {

TEST(Crash, KilledAgainAndAgainNothingAcknowledgedIsLost) {
  TempFolder folder;
  int next = 0;
  std::vector<int> acknowledged;
  for (int round = 0; round < 12; ++round) {
    ForkedWriter child = forkWriter([&](int pipe) { writeForEver(folder.path(), next, pipe); });
    // Killed at another point of its work each time: after so many acknowledgements, wherever it is then.
    const std::vector<int> seen = child.readAcknowledged(static_cast<std::size_t>(1 + 37 * round));
    ::kill(child.pid, SIGKILL);
    const std::vector<int> rest = child.readAll();
    acknowledged.insert(acknowledged.end(), seen.begin(), seen.end());
    acknowledged.insert(acknowledged.end(), rest.begin(), rest.end());
    ASSERT_TRUE(WIFSIGNALED(child.wait()));
    expectWholeWith(folder.path(), acknowledged);
    next = acknowledged.back() + kKeysPerRound;
  }
}

void dieAtEveryCall(Begin begin) {
  TempFolder folder;
  const auto made = folder.path() / "made";
  const auto dataDir = folder.path() / "data";
  must(openStore(made, StoreMode::ReadWrite));
  int nth = 1;
  for (bool ended = false; !ended; ++nth) {
    SCOPED_TRACE("dies at call " + std::to_string(nth));
    prepare(dataDir, begin, made);
    ForkedWriter child = forkWriter([&](int pipe) {
      failCall(nth, FailWay::Die);
      writeSome(dataDir, pipe);
    });
    const std::vector<int> acknowledged = child.readAll();
    const int status = child.wait();
    ASSERT_TRUE(WIFEXITED(status));
    ended = WEXITSTATUS(status) == 0;
    ASSERT_TRUE(ended || WEXITSTATUS(status) == kDied);
    expectWholeWith(dataDir, acknowledged);
  }
  // Several calls a transaction: the loop has been inside each of them.
  EXPECT_GT(nth, 10 * kSomeKeys);
}

TEST(Crash, DyingAtAnyWriteLosesNothingAcknowledged) { dieAtEveryCall(Begin::WithStore); }

TEST(Crash, DyingWhileTheStoreIsMadeLeavesOneThatCanBeFinished) { dieAtEveryCall(Begin::WithoutStore); }

}  // namespace
}  // namespace tw::io::test
