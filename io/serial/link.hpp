// SPDX-License-Identifier: GPL-3.0-or-later
// One serial port: opens, reads, survives unplugging, condenses to one reading (the median) per channel
// and `every_s`.
#pragma once

#include <functional>
#include <memory>
#include <string>
#include <vector>

#include "io/clock.hpp"
#include "io/incoming.hpp"
#include "io/loop.hpp"
#include "io/recipe/shop.hpp"

namespace tw::io {

class SerialLink {
 public:
  /// `onBatch`: one interval's readings (medians, stamped with the time of the interval's last frame);
  /// the latest per second is kept when the loop falls behind. `onState(up, reason)`: link state
  /// changes, reconnecting with back-off for ever. All callbacks on the loop's thread.
  SerialLink(Loop& loop, const Clock& clock, const SerialPort& settings,
             std::function<void(IncomingBatch)> onBatch,
             std::function<void(bool up, std::string reason)> onState);
  ~SerialLink();
  void start();
  void stop();

 private:
  struct Impl;
  std::unique_ptr<Impl> m_impl;
};

}  // namespace tw::io
