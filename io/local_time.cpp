// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/local_time.hpp"

#include <date/tz.h>
#include <fmt/format.h>

#include <exception>

#include "io/time_text.hpp"

namespace tw::io {
namespace {

using std::chrono::milliseconds;
using std::chrono::minutes;

/// What readTimeFields adds to a year of two digits.
constexpr int kCentury = 2000;
constexpr int kMonths = 12;

/// Offsets of civil time are whole minutes; older ones are cut.
minutes wholeMinutes(std::chrono::seconds offset) {
  return std::chrono::duration_cast<minutes>(offset);
}

model::Fault timeFault(std::string code, const std::string& text, std::string detail) {
  return {std::move(code), text, std::move(detail), {}, model::FaultKind::Input};
}

/// The date's order in words of the hint, or a fault.
model::Result<std::chrono::year_month_day> settleDate(const DateFields& date, const std::string& text,
                                                      const std::string& order) {
  int year = 0, month = 0, day = 0;
  if (date.yearFirst) {
    year = date.first, month = date.second, day = date.third;
  } else if (order == "ymd" && date.shortYear) {
    year = kCentury + date.first, month = date.second, day = date.third - kCentury;
  } else {
    const DateOrder seen = orderShownBy(date);
    const bool dayFirst = order == "dmy" || (order != "mdy" && seen == DateOrder::DayFirst);
    const bool monthFirst = order == "mdy" || (order != "dmy" && seen == DateOrder::MonthFirst);
    const bool bothPossible = date.first <= kMonths && date.second <= kMonths;
    if (!dayFirst && !monthFirst && bothPossible && date.first != date.second) {
      return model::fail(timeFault("date_order_open", text,
                                   "day and month could be either way round: write YYYY-MM-DD or set "
                                   "date_order"));
    }
    year = date.third;
    day = monthFirst ? date.second : date.first;
    month = monthFirst ? date.first : date.second;
  }
  const std::chrono::year_month_day ymd{std::chrono::year{year},
                                        std::chrono::month{static_cast<unsigned>(month)},
                                        std::chrono::day{static_cast<unsigned>(day)}};
  if (!ymd.ok()) {
    return model::fail(timeFault("time_unreadable", text, "no such day in the calendar"));
  }
  return ymd;
}

}  // namespace

model::Result<TimeZone> TimeZone::named(const std::string& ianaName) {
  try {
    TimeZone zone;
    zone.m_zone = date::locate_zone(ianaName);
    zone.m_name = ianaName;
    return zone;
  } catch (const std::exception& error) {
    return model::fail(model::Fault{"time_zone_unknown", ianaName,
                                    fmt::format("no time zone of this name is installed: {}; expected "
                                                "an IANA name such as Europe/Paris",
                                                error.what()),
                                    {},
                                    model::FaultKind::Input});
  }
}

minutes TimeZone::offsetAt(Instant at) const {
  const auto* zone = static_cast<const date::time_zone*>(m_zone);
  if (zone == nullptr) return minutes{0};
  return wholeMinutes(zone->get_info(date::sys_time<milliseconds>{at.time_since_epoch()}).offset);
}

model::Result<StampedTime> TimeZone::fromLocal(std::chrono::local_time<milliseconds> local) const {
  const auto* zone = static_cast<const date::time_zone*>(m_zone);
  if (zone == nullptr) return StampedTime{Instant{local.time_since_epoch()}, minutes{0}};
  const date::local_info info = zone->get_info(date::local_time<milliseconds>{local.time_since_epoch()});
  if (info.result == date::local_info::ambiguous) {
    return model::fail(timeFault("time_ambiguous", m_name,
                                 fmt::format("this hour occurs twice in {} when clocks go back: give "
                                             "the offset from UTC",
                                             m_name)));
  }
  if (info.result == date::local_info::nonexistent) {
    return model::fail(timeFault("time_does_not_exist", m_name,
                                 fmt::format("this hour does not exist in {} when clocks go forward: "
                                             "give the offset from UTC",
                                             m_name)));
  }
  return StampedTime{Instant{local.time_since_epoch() - info.first.offset},
                     wholeMinutes(info.first.offset)};
}

model::Result<StampedTime> parseTime(const std::string& text, const TimeZone& zone,
                                     const std::string& dateOrder) {
  const auto fields = readTimeFields(text);
  if (!fields) {
    return model::fail(timeFault("time_unreadable", text,
                                 "expected YYYY-MM-DD hh:mm[:ss], with or without an offset from UTC"));
  }
  if (fields->date.shortYear && dateOrder.empty()) {
    return model::fail(timeFault("date_order_open", text,
                                 "a year of two digits needs date_order: write YYYY-MM-DD"));
  }
  auto ymd = settleDate(fields->date, text, dateOrder);
  if (!ymd) return model::fail(ymd.error());
  const auto local = std::chrono::local_time<milliseconds>{
      std::chrono::local_days{*ymd}.time_since_epoch() + fields->timeOfDay};
  if (fields->offset) {
    return StampedTime{Instant{local.time_since_epoch() - *fields->offset}, *fields->offset};
  }
  auto stamped = zone.fromLocal(local);
  if (!stamped) {
    model::Fault fault = stamped.error();
    fault.subject = text;
    return model::fail(std::move(fault));
  }
  return stamped;
}

}  // namespace tw::io
