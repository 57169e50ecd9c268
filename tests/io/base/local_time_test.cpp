// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/local_time.hpp"

#include <gtest/gtest.h>

#include <string>

using namespace std::chrono_literals;
using tw::io::parseTime;
using tw::io::TimeZone;

namespace {

TimeZone paris() { return *TimeZone::named("Europe/Paris"); }

std::string utc(const std::string& text, const std::string& order = {}) {
  const auto time = parseTime(text, paris(), order);
  return time ? tw::io::toRfc3339(time->at) : time.error().code;
}

}  // namespace

// Rules of the zones as of the tz database: central European time is UTC+1, in summer UTC+2, and clocks
// change at 01:00 UTC on the last Sundays of March and October (29 March and 25 October in 2026).

TEST(TimeZone, IsFoundByItsIanaName) {
  EXPECT_EQ(paris().name(), "Europe/Paris");
  const auto unknown = TimeZone::named("Europe/Atlantis");
  ASSERT_FALSE(unknown);
  EXPECT_EQ(unknown.error().code, "time_zone_unknown");
  EXPECT_FALSE(TimeZone::named(""));
  EXPECT_FALSE(TimeZone::named("../../etc/passwd"));
}

TEST(TimeZone, KnowsItsOffsetInSummerAndWinter) {
  EXPECT_EQ(paris().offsetAt(tw::io::parseRfc3339("2026-01-15T12:00:00Z")->at), 60min);
  EXPECT_EQ(paris().offsetAt(tw::io::parseRfc3339("2026-07-15T12:00:00Z")->at), 120min);
  EXPECT_EQ(TimeZone::named("Asia/Kolkata")->offsetAt({}), 330min);
}

TEST(ParseTime, ReadsLocalTimesInTheShopsZone) {
  EXPECT_EQ(utc("2026-03-02 06:00"), "2026-03-02T05:00:00Z");
  EXPECT_EQ(utc("2026-07-02T06:00:00"), "2026-07-02T04:00:00Z");
  EXPECT_EQ(utc("2026/07/02 06:00"), "2026-07-02T04:00:00Z");
  EXPECT_EQ(parseTime("2026-07-02 06:00", paris())->offset, 120min);
}

TEST(ParseTime, KeepsAnOffsetThatIsWritten) {
  const auto time = parseTime("2026-03-02T06:00:00+05:30", paris());
  ASSERT_TRUE(time);
  EXPECT_EQ(tw::io::toRfc3339(time->at), "2026-03-02T00:30:00Z");
  EXPECT_EQ(time->offset, 330min);
  EXPECT_EQ(*time, *tw::io::parseRfc3339("2026-03-02T06:00:00+05:30"));
}

TEST(ParseTime, RefusesTheAutumnHourThatOccursTwice) {
  EXPECT_EQ(utc("2026-10-25 01:59:59"), "2026-10-24T23:59:59Z");
  EXPECT_EQ(utc("2026-10-25 02:00"), "time_ambiguous");
  EXPECT_EQ(utc("2026-10-25 02:59:59.999"), "time_ambiguous");
  EXPECT_EQ(utc("2026-10-25 03:00"), "2026-10-25T02:00:00Z");
  EXPECT_EQ(utc("2026-10-25 02:30+02:00"), "2026-10-25T00:30:00Z");
  EXPECT_EQ(utc("2026-10-25 02:30+01:00"), "2026-10-25T01:30:00Z");
}

TEST(ParseTime, RefusesTheSpringHourThatDoesNotExist) {
  EXPECT_EQ(utc("2026-03-29 01:59:59"), "2026-03-29T00:59:59Z");
  EXPECT_EQ(utc("2026-03-29 02:00"), "time_does_not_exist");
  EXPECT_EQ(utc("2026-03-29 02:59:59"), "time_does_not_exist");
  EXPECT_EQ(utc("2026-03-29 03:00"), "2026-03-29T01:00:00Z");
}

TEST(ParseTime, SaysWhyAnHourNeedsAnOffset) {
  const auto time = parseTime("2026-10-25 02:30", paris());
  ASSERT_FALSE(time);
  EXPECT_EQ(time.error().subject, "2026-10-25 02:30");
  EXPECT_NE(time.error().detail.find("occurs twice in Europe/Paris"), std::string::npos);
  EXPECT_NE(time.error().detail.find("offset"), std::string::npos);
}

TEST(ParseTime, LeavesNoOrderOfDayAndMonthToChance) {
  EXPECT_EQ(utc("03/04/2026 06:00"), "date_order_open");
  EXPECT_EQ(utc("03.04.2026 06:00"), "date_order_open");
  EXPECT_EQ(utc("03/04/2026 06:00", "dmy"), "2026-04-03T04:00:00Z");
  EXPECT_EQ(utc("03/04/2026 06:00", "mdy"), "2026-03-04T05:00:00Z");
  EXPECT_EQ(utc("31.12.2026 06:00"), "2026-12-31T05:00:00Z");
  EXPECT_EQ(utc("12/31/2026 06:00"), "2026-12-31T05:00:00Z");
  EXPECT_EQ(utc("03/03/2026 06:00"), "2026-03-03T05:00:00Z");
  EXPECT_EQ(utc("12/31/2026 06:00", "dmy"), "time_unreadable");
  EXPECT_EQ(utc("31/12/26 06:00"), "date_order_open");
  EXPECT_EQ(utc("31/12/26 06:00", "dmy"), "2026-12-31T05:00:00Z");
  EXPECT_EQ(utc("26-12-31 06:00", "ymd"), "2026-12-31T05:00:00Z");
}

TEST(ParseTime, RefusesDaysThatAreNotInTheCalendar) {
  EXPECT_EQ(utc("2026-02-29 06:00"), "time_unreadable");
  EXPECT_EQ(utc("2028-02-29 06:00"), "2028-02-29T05:00:00Z");
  EXPECT_EQ(utc("2026-13-01 06:00"), "time_unreadable");
  EXPECT_EQ(utc("2026-00-10 06:00"), "time_unreadable");
  EXPECT_EQ(utc("31/30/2026 06:00"), "time_unreadable");
  EXPECT_EQ(utc("yesterday"), "time_unreadable");
}
