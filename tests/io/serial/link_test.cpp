// SPDX-License-Identifier: GPL-3.0-or-later
// A real port: a pair of pseudo terminals joined by socat, which stands for the cable.
#include "io/serial/link.hpp"

#include <fcntl.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <spawn.h>
#include <sys/wait.h>
#include <termios.h>
#include <unistd.h>

#include <chrono>
#include <csignal>
#include <filesystem>
#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "io/clock.hpp"

extern char** environ;

namespace fs = std::filesystem;
using namespace std::chrono_literals;
using testing::HasSubstr;
using tw::io::IncomingBatch;
using tw::io::SerialLink;

namespace {

constexpr auto kDeadline = 20s;

/// The cable: socat, started and ended by its process id.
class Cable {
 public:
  explicit Cable(const fs::path& folder) : m_ours(folder / "ours"), m_theirs(folder / "theirs") {}
  Cable(const Cable&) = delete;
  Cable& operator=(const Cable&) = delete;
  ~Cable() { unplug(SIGTERM); }

  /// False when socat cannot be started.
  bool plug() {
    const std::string a = "pty,raw,echo=0,link=" + m_ours.string(), b = "pty,raw,echo=0,link=" + m_theirs.string();
    std::string program = "socat", left = a, right = b;
    char* const arguments[] = {program.data(), left.data(), right.data(), nullptr};
    if (::posix_spawnp(&m_pid, "socat", nullptr, nullptr, arguments, environ) != 0) return false;
    for (int i = 0; i < 2000 && !(fs::exists(m_ours) && fs::exists(m_theirs)); ++i) ::usleep(5000);
    m_far = ::open(m_theirs.c_str(), O_WRONLY | O_NOCTTY | O_CLOEXEC);
    return m_far >= 0;
  }
  void unplug(int signal) {
    if (m_far >= 0) ::close(std::exchange(m_far, -1));
    if (m_pid <= 0) return;
    ::kill(m_pid, signal);
    ::waitpid(std::exchange(m_pid, -1), nullptr, 0);
  }
  void say(const std::string& bytes) const {
    ASSERT_EQ(::write(m_far, bytes.data(), bytes.size()), static_cast<ssize_t>(bytes.size()));
  }
  [[nodiscard]] std::string port() const { return m_ours.string(); }

 private:
  fs::path m_ours, m_theirs;
  pid_t m_pid = -1;
  int m_far = -1;
};

bool hasSocat() {
  const char* path = std::getenv("PATH");
  for (std::string_view rest = path == nullptr ? "" : path; !rest.empty();) {
    const std::size_t end = std::min(rest.find(':'), rest.size());
    if (::access((fs::path(rest.substr(0, end)) / "socat").c_str(), X_OK) == 0) return true;
    rest.remove_prefix(std::min(end + 1, rest.size()));
  }
  return false;
}

class Link : public testing::Test {
 protected:
  void SetUp() override {
    if (!hasSocat()) GTEST_SKIP() << "socat is not installed: serial links are not tested";
    const auto* info = testing::UnitTest::GetInstance()->current_test_info();
    m_folder = fs::path(TW_BINARY_DIR) / "scratch" / (std::string("Link.") + info->name());
    fs::remove_all(m_folder);
    fs::create_directories(m_folder);
    cable = std::make_unique<Cable>(m_folder);
    settings.port = cable->port();
    settings.tank = "L2-T4";
    settings.every_s = 0.0;
  }
  void TearDown() override {
    link.reset();
    cable.reset();
    std::error_code ignored;
    fs::remove_all(m_folder, ignored);
  }

  void start() {
    link.emplace(
        loop, *clock, settings,
        [this](const IncomingBatch& batch) {
          for (const auto& r : batch.readings) readings.push_back(r.channel + '=' + r.text);
        },
        [this](bool up, std::string reason) { states.emplace_back(up, std::move(reason)); });
    link->start();
  }
  bool runUntil(const std::function<bool()>& condition) {
    bool met = false;
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
  [[nodiscard]] bool up() const { return !states.empty() && states.back().first; }
  [[nodiscard]] bool down() const { return !states.empty() && !states.back().first; }

  std::unique_ptr<Cable> cable;
  tw::io::SerialPort settings;
  std::unique_ptr<tw::io::Clock> clock = tw::io::systemClock();
  tw::io::Loop loop;
  std::optional<SerialLink> link;
  std::vector<std::string> readings;
  std::vector<std::pair<bool, std::string>> states;

 private:
  fs::path m_folder;
};

}  // namespace

TEST_F(Link, ReadsLinesFromAPort) {
  ASSERT_TRUE(cable->plug());
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  cable->say("ph=10.21 temperature=41.5\r\nph=10.");
  ASSERT_TRUE(runUntil([this] { return readings.size() == 2; }));
  cable->say("22\r\n");
  ASSERT_TRUE(runUntil([this] { return readings.size() == 3; }));
  EXPECT_EQ(readings, (std::vector<std::string>{"ph=10.21", "temperature=41.5", "ph=10.22"}));
  EXPECT_EQ(states.size(), 1U);
  EXPECT_EQ(link->counters().good, 2U);
}

TEST_F(Link, GivesEveryLineOfABurst) {
  ASSERT_TRUE(cable->plug());
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  cable->say("ph=1\nph=2\nph=3\n");
  ASSERT_TRUE(runUntil([this] { return readings.size() == 3; }));
  EXPECT_EQ(readings, (std::vector<std::string>{"ph=1", "ph=2", "ph=3"}));
}

TEST_F(Link, CondensesAnInterval) {
  settings.every_s = 0.5;
  ASSERT_TRUE(cable->plug());
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  cable->say("ph=10.2\nph=10.4\nph=10.3\n");
  ASSERT_TRUE(runUntil([this] { return !readings.empty(); }));
  // The lines may fall on the border of two intervals; the last reading always closes by the timer.
  EXPECT_LE(readings.size(), 2U);
  EXPECT_EQ(link->counters().good, 3U);
}

TEST_F(Link, ComesBackAfterUnplugging) {
  ASSERT_TRUE(cable->plug());
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  for (const int signal : {SIGTERM, SIGKILL}) {  // the latter leaves the links behind
    cable->unplug(signal);
    ASSERT_TRUE(runUntil([this] { return down(); })) << signal;
    EXPECT_FALSE(states.back().second.empty());
    ASSERT_TRUE(cable->plug());
    ASSERT_TRUE(runUntil([this] { return up(); })) << signal;
    readings.clear();
    cable->say("ph=10.21\n");
    ASSERT_TRUE(runUntil([this] { return !readings.empty(); })) << signal;
  }
  EXPECT_EQ(link->counters().opened, 3U);
}

TEST_F(Link, WaitsForAPortThatIsNotThereYet) {
  start();
  ASSERT_TRUE(runUntil([this] { return down(); }));
  EXPECT_THAT(states.back().second, HasSubstr("no such port"));
  ASSERT_TRUE(cable->plug());
  ASSERT_TRUE(runUntil([this] { return up(); }));
}

TEST_F(Link, TellsThatAPortIsBusy) {
  ASSERT_TRUE(cable->plug());
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  std::string reason;
  SerialLink second(loop, *clock, settings, [](const IncomingBatch&) {},
                    [&](bool, std::string why) { reason = std::move(why); });
  second.start();
  ASSERT_TRUE(runUntil([&] { return !reason.empty(); }));
  EXPECT_THAT(reason, HasSubstr("busy"));
}

TEST_F(Link, TellsThatAFileIsNoSerialPort) {
  settings.port = TW_SOURCE_DIR "/CMakeLists.txt";
  start();
  ASSERT_TRUE(runUntil([this] { return down(); }));
  EXPECT_EQ(states.back().second, "not a serial port");
}

TEST_F(Link, TellsOfNoiseAndOfItsEnd) {
  ASSERT_TRUE(cable->plug());
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  std::string noise;
  for (int i = 0; i < 20; ++i) noise += "\x8f\xff~\x01?!\n";
  cable->say(noise + std::string(1000, 'x') + "\n");
  ASSERT_TRUE(runUntil([this] { return down(); }));
  EXPECT_THAT(states.back().second, HasSubstr("baud"));
  EXPECT_EQ(link->counters().opened, 1U);
  cable->say("ph=7*00\nph=7*12\n");
  ASSERT_TRUE(runUntil([this] { return up(); }));
  EXPECT_EQ(readings, std::vector<std::string>{"ph=7"});
  EXPECT_EQ(link->counters().unreadable, 20U);
  EXPECT_EQ(link->counters().tooLong, 1U);
  EXPECT_EQ(link->counters().wrongChecksum, 1U);
}

TEST_F(Link, ForgetsALineThatNeverEnds) {
  ASSERT_TRUE(cable->plug());
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  cable->say("ph=10.");
  ASSERT_TRUE(runUntil([this] { return link->counters().partialTimeouts == 1; }));
  cable->say("ph=7\n");
  ASSERT_TRUE(runUntil([this] { return !readings.empty(); }));
  EXPECT_EQ(readings, std::vector<std::string>{"ph=7"});
}

TEST_F(Link, SurvivesAFloodWithABound) {
  ASSERT_TRUE(cable->plug());
  start();
  ASSERT_TRUE(runUntil([this] { return up(); }));
  std::string flood;
  for (int i = 0; i < 200; ++i) flood += "ph=10.21\n";
  for (int i = 0; i < 20; ++i) {
    cable->say(flood);
    ASSERT_TRUE(runUntil([&] { return link->counters().good >= static_cast<std::size_t>(200 * (i + 1)); }));
  }
  EXPECT_EQ(link->counters().good, 4000U);
  EXPECT_LE(readings.size() + link->counters().skipped, 4001U);
}
