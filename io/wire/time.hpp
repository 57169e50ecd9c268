// SPDX-License-Identifier: GPL-3.0-or-later
// Instants on the wire: RFC 3339 with milliseconds, UTC inside, the entered offset kept beside it.
#pragma once

#include <chrono>
#include <optional>
#include <string>

namespace tw::io {

using Instant = std::chrono::sys_time<std::chrono::milliseconds>;

/// An instant and the offset from UTC it was entered with.
struct StampedTime {
  Instant at{};
  std::chrono::minutes offset{0};
  friend bool operator==(const StampedTime&, const StampedTime&) = default;
};

/// "2026-03-02T06:00:00Z", fraction only when not zero; with an offset: "2026-03-02T07:00:00+01:00".
[[nodiscard]] std::string toRfc3339(Instant at, std::chrono::minutes offset = std::chrono::minutes{0});
/// Full RFC 3339 only (an offset or Z is required; lower case t, z and a blank for T allowed).
/// nullopt when it is anything else, or a date that does not exist.
[[nodiscard]] std::optional<StampedTime> parseRfc3339(const std::string& text);

}  // namespace tw::io
