// SPDX-License-Identifier: GPL-3.0-or-later
// One serial port: opens, reads, survives unplugging, condenses to one reading (the median) per channel
// and `every_s`.
#pragma once

#include <cstddef>
#include <functional>
#include <memory>
#include <string>
#include <vector>

#include "io/clock.hpp"
#include "io/incoming.hpp"
#include "io/loop.hpp"
#include "io/recipe/shop.hpp"

namespace tw::io {

/// What has come over a link since it was made.
struct LinkCounters {
  std::size_t good = 0, unreadable = 0, wrongChecksum = 0, tooLong = 0;  ///< frames
  std::size_t partialTimeouts = 0;  ///< lines that never ended
  std::size_t skipped = 0;          ///< good frames passed over because they came too fast
  std::size_t opened = 0;           ///< times the port was opened
};

class SerialLink {
 public:
  /// `onBatch`: one interval's readings (medians, stamped with the time of the interval's last frame);
  /// the latest per second is kept when the loop falls behind. `onState(up, reason)`: link state
  /// changes, reconnecting with back-off for ever (0.2 s doubling to 5 s). A link is up once a byte came
  /// or it stayed open for half a second; twenty bad lines in a row count as down ("noise"), until a
  /// good one. All callbacks on the loop's thread.
  SerialLink(Loop& loop, const Clock& clock, const SerialPort& settings,
             std::function<void(IncomingBatch)> onBatch,
             std::function<void(bool up, std::string reason)> onState);
  ~SerialLink();
  void start();
  /// Closes the port; what an interval has gathered so far is dropped. Destroy before the loop.
  void stop();
  [[nodiscard]] LinkCounters counters() const;

 private:
  struct Impl;
  std::shared_ptr<Impl> m_impl;  ///< handlers under way keep it
};

}  // namespace tw::io
