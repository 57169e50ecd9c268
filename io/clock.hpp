// SPDX-License-Identifier: GPL-3.0-or-later
// Time is handed in: only the programs' main makes the real clock, tests move a false one by hand.
#pragma once

#include <memory>

#include "io/wire/time.hpp"

namespace tw::io {

class Clock {
 public:
  virtual ~Clock() = default;
  /// UTC now.
  [[nodiscard]] virtual Instant now() const = 0;
};

/// The system's clock.
[[nodiscard]] std::unique_ptr<Clock> systemClock();

}  // namespace tw::io
