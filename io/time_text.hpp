// SPDX-License-Identifier: GPL-3.0-or-later
// Dates and times as text, taken apart but not judged: no zone and no order of day and month yet. Pure.
#pragma once

#include <chrono>
#include <optional>
#include <string_view>

namespace tw::io {

/// The three numbers of a date in the order written.
struct DateFields {
  int first = 0, second = 0, third = 0;
  bool yearFirst = false;  ///< `first` has four digits: year, month, day
  bool shortYear = false;  ///< `third` was two digits and had 2000 added
};

struct TimeFields {
  DateFields date;
  std::chrono::milliseconds timeOfDay{0};
  std::optional<std::chrono::minutes> offset;  ///< from UTC, when one was written
};

/// Which of two leading numbers is the day; Open when both could be.
enum class DateOrder { Open, DayFirst, MonthFirst };

/// A date (`-`, `.` or `/` between the numbers), then blank or T, then h:mm[:ss[.fff]] [am|pm]
/// [Z|+hh:mm|+hhmm|+hh]. Ranges of the time of day are checked, the date's are not. A fraction is cut
/// to milliseconds. A leap second (60) becomes the last millisecond of its minute.
[[nodiscard]] std::optional<TimeFields> readTimeFields(std::string_view text);

/// What the date alone shows: one of the leading numbers over 12 settles it.
[[nodiscard]] DateOrder orderShownBy(const DateFields& date);

}  // namespace tw::io
