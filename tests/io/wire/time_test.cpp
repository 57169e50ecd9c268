// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/wire/time.hpp"

#include <gtest/gtest.h>

#include <random>

namespace tw::io {
namespace {

using namespace std::chrono;

Instant utc(int y, unsigned mo, unsigned d, int h, int mi, int s, int ms = 0) {
  return sys_days{year{y} / month{mo} / day{d}} + hours{h} + minutes{mi} + seconds{s} + milliseconds{ms};
}

TEST(Rfc3339, WritesUtcWithZ) {
  EXPECT_EQ(toRfc3339(utc(2026, 3, 2, 6, 0, 0)), "2026-03-02T06:00:00Z");
  EXPECT_EQ(toRfc3339(utc(2026, 3, 2, 6, 0, 0, 7)), "2026-03-02T06:00:00.007Z");
  EXPECT_EQ(toRfc3339(utc(1969, 12, 31, 23, 59, 59)), "1969-12-31T23:59:59Z");
}

TEST(Rfc3339, WritesTheOffsetItWasEnteredWith) {
  EXPECT_EQ(toRfc3339(utc(2026, 3, 2, 6, 0, 0), minutes{60}), "2026-03-02T07:00:00+01:00");
  EXPECT_EQ(toRfc3339(utc(2026, 3, 2, 2, 0, 0), minutes{-210}), "2026-03-01T22:30:00-03:30");
}

struct ReadRow {
  const char* text;
  Instant at;
  int offset;
};
class ReadableTime : public testing::TestWithParam<ReadRow> {};
TEST_P(ReadableTime, IsRead) {
  const auto stamp = parseRfc3339(GetParam().text);
  ASSERT_TRUE(stamp) << GetParam().text;
  EXPECT_EQ(stamp->at, GetParam().at) << toRfc3339(stamp->at);
  EXPECT_EQ(stamp->offset, minutes{GetParam().offset});
}
// The first four are the examples of RFC 3339 section 5.8, their UTC as printed there.
INSTANTIATE_TEST_SUITE_P(
    Table, ReadableTime,
    testing::Values(ReadRow{"1985-04-12T23:20:50.52Z", utc(1985, 4, 12, 23, 20, 50, 520), 0},
                    ReadRow{"1996-12-19T16:39:57-08:00", utc(1996, 12, 20, 0, 39, 57), -480},
                    ReadRow{"1990-12-31T23:59:60Z", utc(1991, 1, 1, 0, 0, 0), 0},
                    ReadRow{"1937-01-01T12:00:27.87+00:20", utc(1937, 1, 1, 11, 40, 27, 870), 20},
                    ReadRow{"2026-03-02t06:00:00z", utc(2026, 3, 2, 6, 0, 0), 0},
                    ReadRow{"2026-03-02 06:00:00+00:00", utc(2026, 3, 2, 6, 0, 0), 0},
                    ReadRow{"2026-03-02T06:00:00.1239Z", utc(2026, 3, 2, 6, 0, 0, 123), 0},
                    ReadRow{"2024-02-29T00:00:00Z", utc(2024, 2, 29, 0, 0, 0), 0}));

class UnreadableTime : public testing::TestWithParam<const char*> {};
TEST_P(UnreadableTime, IsRefused) { EXPECT_FALSE(parseRfc3339(GetParam())) << GetParam(); }
INSTANTIATE_TEST_SUITE_P(
    Table, UnreadableTime,
    testing::Values("", "2026-03-02", "2026-03-02T06:00Z", "2026-03-02T06:00:00", "2026-02-29T00:00:00Z",
                    "2026-13-01T00:00:00Z", "2026-00-01T00:00:00Z", "2026-03-32T00:00:00Z",
                    "2026-03-02T24:00:00Z", "2026-03-02T06:60:00Z", "2026-03-02T06:00:61Z",
                    "2026-03-02T06:00:00.Z", "2026-03-02T06:00:00+0100", "2026-03-02T06:00:00+24:00",
                    "2026-03-02T06:00:00+01:60", "2026-03-02T06:00:00Zx", " 2026-03-02T06:00:00Z",
                    "26-03-02T06:00:00Z", "2026-03-02T06:00:00,5Z", "2026-3-2T06:00:00Z"));

TEST(Rfc3339, ReadsBackWhatItWrites) {
  std::mt19937_64 random(42);
  std::uniform_int_distribution<std::int64_t> ms(-2208988800000, 4102444800000);  // 1900 to 2100
  std::uniform_int_distribution<int> offset(-720, 840);
  for (int i = 0; i < 2000; ++i) {
    const StampedTime stamp{Instant{milliseconds{ms(random)}}, minutes{offset(random)}};
    const auto back = parseRfc3339(toRfc3339(stamp.at, stamp.offset));
    ASSERT_TRUE(back);
    EXPECT_EQ(*back, stamp);
  }
}

}  // namespace
}  // namespace tw::io
