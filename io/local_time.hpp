// SPDX-License-Identifier: GPL-3.0-or-later
// Times as people and instruments write them. The only place where zone names are resolved.
#pragma once

#include <memory>
#include <string>

#include "io/wire/time.hpp"
#include "model/result.hpp"

namespace tw::io {

/// The shop's zone (IANA name).
class TimeZone {
 public:
  /// Fault `time_zone_unknown`.
  static model::Result<TimeZone> named(const std::string& ianaName);
  /// Offset from UTC in force at an instant.
  [[nodiscard]] std::chrono::minutes offsetAt(Instant at) const;
  /// Local wall time to UTC. Faults `time_ambiguous` (the autumn hour that occurs twice) and
  /// `time_does_not_exist` (the spring gap); both ask for an offset.
  model::Result<StampedTime> fromLocal(std::chrono::local_time<std::chrono::milliseconds> local) const;  // calendar types are std, g++ 12 has them
  [[nodiscard]] const std::string& name() const { return m_name; }

 private:
  std::string m_name;
  const void* m_zone = nullptr;  ///< date::time_zone, owned by the zone database
};

/// RFC 3339, or local `YYYY-MM-DD[ T]hh:mm[:ss[.fff]]`, or a day-month-year form with `.`, `/` or `-`
/// whose order `dateOrder` ("dmy", "mdy", "ymd", empty = unknown) or an impossible month settles.
/// Faults: `time_unreadable`, `date_order_open`, and those of fromLocal.
model::Result<StampedTime> parseTime(const std::string& text, const TimeZone& zone,
                                     const std::string& dateOrder = {});

}  // namespace tw::io
