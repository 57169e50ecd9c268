// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/loop.hpp"

#include <gtest/gtest.h>

#include <csignal>
#include <stdexcept>
#include <string>
#include <thread>
#include <vector>

#include "io/clock.hpp"

using namespace std::chrono_literals;
using tw::io::Loop;

namespace {
void failOnError(const char* what) { ADD_FAILURE() << what; }
}  // namespace

TEST(Loop, RunsPostedWorkInOrder) {
  Loop loop;
  std::vector<int> order;
  loop.post([&] { order.push_back(1); });
  loop.post([&] { order.push_back(2); });
  loop.post([&] { loop.stop(); });
  loop.run(failOnError);
  EXPECT_EQ(order, (std::vector<int>{1, 2}));
}

TEST(Loop, KeepsRunningWhenThereIsNothingToDo) {
  Loop loop;
  bool done = false;
  std::thread other([&] {
    loop.post([&] {
      done = true;
      loop.stop();
    });
  });
  loop.run(failOnError);
  other.join();
  EXPECT_TRUE(done);
}

TEST(Loop, SurvivesExceptionsOfHandlersAndReportsThem) {
  Loop loop;
  std::vector<std::string> errors;
  bool later = false;
  loop.post([] { throw std::runtime_error("first"); });
  loop.post([] { throw 42; });
  loop.post([&] {
    later = true;
    loop.stop();
  });
  loop.run([&](const char* what) { errors.emplace_back(what); });
  EXPECT_TRUE(later);
  EXPECT_EQ(errors, (std::vector<std::string>{"first", "an exception that is no std::exception"}));
}

TEST(Loop, CallsLaterWorkByItsDelay) {
  Loop loop;
  std::vector<int> order;
  loop.after(20ms, [&] {
    order.push_back(2);
    loop.stop();
  });
  loop.after(1ms, [&] { order.push_back(1); });
  loop.run(failOnError);
  EXPECT_EQ(order, (std::vector<int>{1, 2}));
}

TEST(Loop, TellsOfAStopSignalOnce) {
  Loop loop;
  int calls = 0;
  loop.onStopSignal([&] {
    ++calls;
    loop.stop();
  });
  loop.post([] { std::raise(SIGTERM); });
  loop.run(failOnError);
  EXPECT_EQ(calls, 1);
}

TEST(Loop, RunsAgainAfterAStop) {
  Loop loop;
  loop.stop();
  loop.run(failOnError);
  int calls = 0;
  loop.post([&] {
    ++calls;
    loop.stop();
  });
  loop.run(failOnError);
  EXPECT_EQ(calls, 1);
}

TEST(Clock, SystemClockIsAfterThisTestWasWritten) {
  EXPECT_GT(tw::io::systemClock()->now(), tw::io::parseRfc3339("2025-01-01T00:00:00Z")->at);
}
