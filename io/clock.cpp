// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/clock.hpp"

namespace tw::io {
namespace {

class SystemClock final : public Clock {
 public:
  [[nodiscard]] Instant now() const override {
    return std::chrono::floor<std::chrono::milliseconds>(std::chrono::system_clock::now());
  }
};

}  // namespace

std::unique_ptr<Clock> systemClock() { return std::make_unique<SystemClock>(); }

}  // namespace tw::io
