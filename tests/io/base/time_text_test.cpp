// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/time_text.hpp"

#include <gtest/gtest.h>

using namespace std::chrono_literals;
using tw::io::DateOrder;
using tw::io::orderShownBy;
using tw::io::readTimeFields;

TEST(TimeText, TakesYearFirstDatesApart) {
  const auto fields = readTimeFields("2026-03-02 06:07:08.25");
  ASSERT_TRUE(fields);
  EXPECT_TRUE(fields->date.yearFirst);
  EXPECT_EQ(fields->date.first, 2026);
  EXPECT_EQ(fields->date.second, 3);
  EXPECT_EQ(fields->date.third, 2);
  EXPECT_EQ(fields->timeOfDay, 6h + 7min + 8s + 250ms);
  EXPECT_FALSE(fields->offset);
}

TEST(TimeText, ReadsOffsetsInEverySpelling) {
  EXPECT_EQ(readTimeFields("2026-03-02T06:00Z")->offset, 0min);
  EXPECT_EQ(readTimeFields("2026-03-02T06:00:00+05:30")->offset, 330min);
  EXPECT_EQ(readTimeFields("2026-03-02 06:00 -0800")->offset, -480min);
  EXPECT_EQ(readTimeFields("2026-03-02t06:00:00\xE2\x88\x92" "03")->offset, -180min);
}

TEST(TimeText, ReadsTwelveHourClocks) {
  EXPECT_EQ(readTimeFields("2026-03-02 12:05 AM")->timeOfDay, 5min);
  EXPECT_EQ(readTimeFields("2026-03-02 12:05pm")->timeOfDay, 12h + 5min);
  EXPECT_EQ(readTimeFields("2026-03-02 6:05:00 PM")->timeOfDay, 18h + 5min);
  EXPECT_FALSE(readTimeFields("2026-03-02 13:05 PM"));
}

TEST(TimeText, CutsALeapSecondToItsMinute) {
  EXPECT_EQ(readTimeFields("2016-12-31T23:59:60Z")->timeOfDay, 24h - 1ms);
}

TEST(TimeText, RefusesWhatIsNoTime) {
  for (const char* text : {"", "Total", "2026-03-02", "2026-03-02 ", "06:00", "45000.25", "2026-03-02 24:00",
                           "2026-03-02 06:60", "2026-03-02 06:00:61", "2026-3-2-1 06:00", "026-03-02 06:00",
                           "2026-03/02 06:00", "2026-03-02 06:00 Paris", "2026-03-02 06:00:00.",
                           "2026-03-02T06:00+25:00", "2026-03-02T06:00+1", "12345-03-02 06:00"}) {
    EXPECT_FALSE(readTimeFields(text)) << text;
  }
}

TEST(TimeText, SeesTheOrderOfDayAndMonthOnlyInNumbersOverTwelve) {
  EXPECT_EQ(orderShownBy(readTimeFields("31.12.2026 06:00")->date), DateOrder::DayFirst);
  EXPECT_EQ(orderShownBy(readTimeFields("12/31/2026 06:00")->date), DateOrder::MonthFirst);
  EXPECT_EQ(orderShownBy(readTimeFields("03/04/2026 06:00")->date), DateOrder::Open);
  EXPECT_EQ(orderShownBy(readTimeFields("2026-12-31 06:00")->date), DateOrder::Open);
}
