// SPDX-License-Identifier: GPL-3.0-or-later
// Kills the service at a random moment while it takes a file of a thousand rows, starts it again, and counts:
// every reading must be there once, and every liquor must have its result. TW_LONG=1 repeats it more often;
// TW_SEED repeats a run.
#include <fcntl.h>
#include <gtest/gtest.h>
#include <signal.h>
#include <spawn.h>
#include <sqlite3.h>
#include <sys/wait.h>
#include <unistd.h>

#include <array>
#include <cstdio>
#include <cstdlib>
#include <filesystem>
#include <random>
#include <stdexcept>
#include <thread>

#include "tests/monitor/support/client.hpp"
#include "tests/monitor/support/temp_shop.hpp"

namespace tw::test {
namespace {

namespace fs = std::filesystem;

constexpr int kRows = 1000;
constexpr int kChannels = 4;
constexpr int kRunsInCi = 3;
constexpr int kRunsWhenLong = 20;
/// The whole file takes about this long; a kill may fall anywhere in it, or just after.
constexpr int kLongestWait_ms = 4000;

/// `tankward serve` as a process of its own.
class Served {
 public:
  explicit Served(const TempShop& shop) {
    std::array<int, 2> out{};
    if (::pipe2(out.data(), O_CLOEXEC) != 0) throw std::runtime_error("no pipe");
    posix_spawn_file_actions_t actions;
    posix_spawn_file_actions_init(&actions);
    posix_spawn_file_actions_adddup2(&actions, out[1], STDOUT_FILENO);
    const std::string log = (shop.dir() / "service.log").string();
    posix_spawn_file_actions_addopen(&actions, STDERR_FILENO, log.c_str(), O_WRONLY | O_CREAT | O_APPEND, 0600);
    std::string program = TW_PROGRAM, command = "serve", option = "--config", config = shop.config().string();
    std::array<char*, 5> argv = {program.data(), command.data(), option.data(), config.data(), nullptr};
    const int failed = ::posix_spawn(&m_pid, TW_PROGRAM, &actions, nullptr, argv.data(), environ);
    posix_spawn_file_actions_destroy(&actions);
    ::close(out[1]);
    m_out = out[0];
    if (failed != 0) throw std::runtime_error("the program does not start");
    m_port = readPort();
  }
  ~Served() {
    if (m_pid > 0) end(SIGKILL);
    ::close(m_out);
  }
  Served(const Served&) = delete;
  Served& operator=(const Served&) = delete;

  [[nodiscard]] unsigned port() const { return m_port; }
  /// Sends the signal and waits; the exit status, or minus the signal that ended it.
  int end(int signal) {
    ::kill(m_pid, signal);
    int status = 0;
    ::waitpid(m_pid, &status, 0);
    m_pid = -1;
    return WIFEXITED(status) ? WEXITSTATUS(status) : -WTERMSIG(status);
  }

 private:
  /// From "listening on http://127.0.0.1:PORT".
  unsigned readPort() const {
    std::string line;
    char c = 0;
    while (::read(m_out, &c, 1) == 1 && c != '\n') line += c;
    const std::size_t colon = line.rfind(':');
    if (!line.starts_with("listening on http://") || colon == std::string::npos) {
      throw std::runtime_error("the program did not say where it listens: '" + line + "'");
    }
    return static_cast<unsigned>(std::stoul(line.substr(colon + 1)));
  }

  pid_t m_pid = -1;
  int m_out = -1;
  unsigned m_port = 0;
};

/// One number from the store, read by SQLite itself.
int count(const TempShop& shop, const std::string& sql) {
  sqlite3* db = nullptr;
  const std::string file = (shop.shop().dataDir / "tankward.db").string();
  int number = -1;
  if (::sqlite3_open_v2(file.c_str(), &db, SQLITE_OPEN_READONLY, nullptr) == SQLITE_OK) {
    sqlite3_stmt* row = nullptr;
    if (::sqlite3_prepare_v2(db, sql.c_str(), -1, &row, nullptr) == SQLITE_OK && ::sqlite3_step(row) == SQLITE_ROW) {
      number = ::sqlite3_column_int(row, 0);
    } else {
      std::fprintf(stderr, "%s: %s\n", sql.c_str(), ::sqlite3_errmsg(db));
    }
    ::sqlite3_finalize(row);
  }
  ::sqlite3_close(db);
  return number;
}

bool settled(const TempShop& shop, unsigned port, const std::string& file) {
  return waitUntil([&] {
    if (!fs::exists(shop.drop() / "taken" / file) || fs::exists(shop.drop() / file)) return false;
    const std::string metrics = get(port, "/metrics").body;
    return metrics.find("tankward_pending_liquors 0\n") != std::string::npos &&
           metrics.find("tankward_writer_backlog 0\n") != std::string::npos &&
           count(shop, "SELECT count(*) FROM pending_liquor WHERE waiting = 0") == 0;
  });
}

void expectEverythingOnce(const TempShop& shop) {
  EXPECT_EQ(count(shop, "SELECT count(*) FROM reading"), kRows * kChannels);
  EXPECT_EQ(count(shop, "SELECT count(*) FROM (SELECT DISTINCT tank, sampled_at, channel FROM reading)"),
            kRows * kChannels);
  EXPECT_EQ(count(shop, "SELECT count(DISTINCT sampled_at) FROM result WHERE tank = 'T1'"), kRows);
  EXPECT_EQ(count(shop, "SELECT count(*) FROM pending_liquor"), 0);
}

unsigned seed() {
  const char* given = std::getenv("TW_SEED");
  return given != nullptr ? static_cast<unsigned>(std::strtoul(given, nullptr, 10)) : std::random_device{}();
}

TEST(Crash, LosesAndDoublesNothingWhenKilledAtARandomMoment) {
  const unsigned start = seed();
  std::printf("TW_SEED=%u\n", start);
  std::mt19937 random(start);
  const int runs = std::getenv("TW_LONG") != nullptr ? kRunsWhenLong : kRunsInCi;
  for (int run = 0; run < runs; ++run) {
    const int wait_ms = std::uniform_int_distribution<int>(0, kLongestWait_ms)(random);
    SCOPED_TRACE("killed after " + std::to_string(wait_ms) + " ms");
    TempShop shop;
    {
      Served first(shop);
      shop.dropFile("many.csv", wideTable(kRows, "2026-03-02T06:00:00Z"));
      std::this_thread::sleep_for(std::chrono::milliseconds(wait_ms));
      EXPECT_EQ(first.end(SIGKILL), -SIGKILL);
    }
    std::printf("killed after %d ms: %d readings, %d results\n", wait_ms, count(shop, "SELECT count(*) FROM reading"),
                count(shop, "SELECT count(*) FROM result"));
    Served second(shop);
    ASSERT_TRUE(settled(shop, second.port(), "many.csv")) << readFile(shop.dir() / "service.log");
    expectEverythingOnce(shop);
    EXPECT_EQ(second.end(SIGTERM), 0);
  }
}

TEST(Crash, StopsInOrderOnSigterm) {
  TempShop shop;
  {
    Served service(shop);
    shop.dropFile("many.csv", wideTable(kRows, "2026-03-02T06:00:00Z"));
    ASSERT_TRUE(waitUntil([&] { return fs::exists(shop.drop() / "taken" / "many.csv"); }));
    EXPECT_EQ(service.end(SIGTERM), 0);
  }
  EXPECT_EQ(count(shop, "SELECT count(*) FROM reading"), kRows * kChannels);
  // What ten seconds did not suffice to solve is solved at the next start.
  Served again(shop);
  ASSERT_TRUE(settled(shop, again.port(), "many.csv"));
  expectEverythingOnce(shop);
}

}  // namespace
}  // namespace tw::test
