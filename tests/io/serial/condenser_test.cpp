// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/serial/condenser.hpp"

#include <gtest/gtest.h>

#include <string>
#include <vector>

using namespace std::chrono_literals;
using tw::io::Condenser;
using tw::io::FrameOutcome;
using tw::io::IncomingBatch;
using tw::io::Instant;
using tw::io::SerialPort;

namespace {

const Instant kNoon = tw::io::parseRfc3339("2026-03-02T12:00:00Z")->at;

FrameOutcome frame(const std::string& line) { return tw::io::readFrame({}, line); }

Condenser condenser(double every_s) {
  SerialPort settings;
  settings.port = "/dev/ttyUSB0";
  settings.tank = "L2-T4";
  settings.every_s = every_s;
  return Condenser(settings);
}

/// "12:00:30Z ph=10.21" of each reading.
std::string summary(const std::vector<IncomingBatch>& batches) {
  std::string out;
  for (const auto& batch : batches) {
    for (const auto& r : batch.readings) {
      out += tw::io::toRfc3339(r.sampledAt.at).substr(11) + ' ' + r.channel + '=' + r.text;
      if (!r.unit.empty()) out += ' ' + r.unit;
      out += '\n';
    }
  }
  return out;
}

}  // namespace

TEST(Condenser, GivesTheMedianOfEachChannelStampedWithTheLastFrame) {
  auto it = condenser(60);
  EXPECT_TRUE(it.add(kNoon + 10s, frame("ph=10.2 temperature=41.5")).empty());
  EXPECT_TRUE(it.add(kNoon + 20s, frame("ph=99")).empty());
  EXPECT_TRUE(it.add(kNoon + 59s, frame("ph=10.3 temperature=41.6")).empty());
  const auto batches = it.add(kNoon + 60s, frame("ph=10.4"));
  EXPECT_EQ(summary(batches), "12:00:59Z ph=10.3\n12:00:59Z temperature=41.55\n");
  EXPECT_EQ(batches.at(0).source, "serial:/dev/ttyUSB0");
  EXPECT_EQ(batches[0].readings[0].tank, "L2-T4");
  EXPECT_EQ(batches[0].readings[0].line, 0);
  EXPECT_EQ(batches[0].readings[1].value, 0.5 * (41.5 + 41.6));
}

TEST(Condenser, ClosesAnIntervalWithoutAnotherFrame) {
  auto it = condenser(60);
  EXPECT_FALSE(it.dueAt());
  it.add(kNoon + 10s, frame("ph=10.2 pH"));
  EXPECT_EQ(it.dueAt(), kNoon + 60s);
  EXPECT_TRUE(it.flush(kNoon + 59s).empty());
  EXPECT_EQ(summary(it.flush(kNoon + 60s)), "12:00:10Z ph=10.2 pH\n");
  EXPECT_FALSE(it.dueAt());
}

TEST(Condenser, KeepsUnitsApart) {
  auto it = condenser(60);
  it.add(kNoon, frame("temperature=104 degF"));
  it.add(kNoon + 1s, frame("temperature=40 degC"));
  EXPECT_EQ(summary(it.flush(kNoon + 60s)), "12:00:01Z temperature=40 degC\n");
}

TEST(Condenser, GivesEveryLineWithItsOwnTimeWhenTheIntervalIsZero) {
  auto it = condenser(0);
  EXPECT_EQ(summary(it.add(kNoon, frame("ph=10.1"))), "12:00:00Z ph=10.1\n");
  EXPECT_EQ(summary(it.add(kNoon, frame("ph=10.2"))), "12:00:00.001Z ph=10.2\n");
  EXPECT_EQ(summary(it.add(kNoon + 1s, frame("ph=10.3"))), "12:00:01Z ph=10.3\n");
  EXPECT_EQ(it.skipped(), 0U);
}

TEST(Condenser, KeepsTheLatestOfASecondWhileBehindAndCountsTheRest) {
  auto it = condenser(0);
  EXPECT_EQ(summary(it.add(kNoon, frame("ph=10.1"))), "12:00:00Z ph=10.1\n");
  EXPECT_TRUE(it.add(kNoon + 100ms, frame("ph=10.2"), true).empty());
  EXPECT_TRUE(it.add(kNoon + 200ms, frame("ph=10.3"), true).empty());
  EXPECT_EQ(it.skipped(), 1U);
  EXPECT_EQ(it.dueAt(), kNoon + 1s);
  EXPECT_EQ(summary(it.flush(kNoon + 1s)), "12:00:00.200Z ph=10.3\n");
  EXPECT_EQ(summary(it.add(kNoon + 2s, frame("ph=10.4"))), "12:00:02Z ph=10.4\n");
}

TEST(Condenser, BoundsAFloodOfLines) {
  auto it = condenser(0);
  std::size_t kept = 0;
  for (int i = 0; i < 100'000; ++i) kept += it.add(kNoon, frame("ph=10.1")).size();
  EXPECT_LE(kept, 1001U);
  EXPECT_GE(it.skipped(), 98'000U);
}

TEST(Condenser, RecoversWhenTheClockIsSetBack) {
  auto every = condenser(0);
  every.add(kNoon + 1h, frame("ph=10.1"));
  EXPECT_EQ(summary(every.add(kNoon, frame("ph=10.2"))), "12:00:00Z ph=10.2\n");
  auto minute = condenser(60);
  minute.add(kNoon + 1h, frame("ph=10.1"));
  EXPECT_EQ(summary(minute.add(kNoon, frame("ph=10.2"))), "13:00:00Z ph=10.1\n");
  EXPECT_EQ(minute.dueAt(), kNoon + 60s);
}
