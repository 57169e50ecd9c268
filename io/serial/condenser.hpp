// SPDX-License-Identifier: GPL-3.0-or-later
// A stream of serial frames to readings: the median of each channel and interval, or every line with a
// bound when lines come faster than they can be kept. Pure: the time of each frame is handed in.
#pragma once

#include <cstddef>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "io/incoming.hpp"
#include "io/recipe/shop.hpp"
#include "io/serial/frame.hpp"

namespace tw::io {

class Condenser {
 public:
  explicit Condenser(const SerialPort& settings);

  /// A good frame received at `at`. Returns what that completes: the interval before it (intervals are
  /// multiples of every_s since 1970, UTC), or with every_s = 0 the frame itself, stamped one
  /// millisecond after the one before when both came at once. While `behind` (or when stamps would run
  /// a second ahead of `at`) only the latest frame of a second is kept, and the others are counted.
  std::vector<IncomingBatch> add(Instant at, const FrameOutcome& frame, bool behind = false);
  /// What is due at `now` without another frame: call when dueAt() has passed.
  std::vector<IncomingBatch> flush(Instant now);
  /// When flush() has something to give; nullopt = nothing is held.
  [[nodiscard]] std::optional<Instant> dueAt() const;
  /// Frames passed over because lines came too fast.
  [[nodiscard]] std::size_t skipped() const { return m_skipped; }

 private:
  struct Sample {
    double value = 0.0;
    std::string text, unit;
  };
  IncomingBatch closeInterval();
  IncomingBatch single(Instant at, const FrameOutcome& frame);

  SerialPort m_settings;
  std::chrono::milliseconds m_interval{0};  ///< 0 = every line
  std::map<std::string, std::vector<Sample>> m_samples;
  Instant m_intervalEnd{}, m_lastFrame{}, m_lastStamp{};
  std::optional<std::pair<Instant, FrameOutcome>> m_held;  ///< latest of its second, while behind
  std::size_t m_skipped = 0;
};

}  // namespace tw::io
