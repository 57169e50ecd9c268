// SPDX-License-Identifier: GPL-3.0-or-later
// The whole service on a thread of its own, with a false clock.
#pragma once

#include <functional>
#include <memory>
#include <thread>

#include "io/loop.hpp"
#include "monitor/pipeline/service.hpp"
#include "tests/monitor/support/temp_shop.hpp"

namespace tw::test {

class RunningService {
 public:
  /// Throws when the service does not start.
  RunningService(const TempShop& shop, FakeClock& clock);
  /// Stops in order and joins.
  ~RunningService();
  RunningService(const RunningService&) = delete;
  RunningService& operator=(const RunningService&) = delete;

  [[nodiscard]] unsigned port() const { return m_port; }
  /// Runs `work` on the loop's thread and waits for it.
  void onLoop(const std::function<void(monitor::Service&)>& work);
  /// The minute timer.
  void tick();
  /// Waits until nothing is in any queue; false when that takes too long.
  [[nodiscard]] bool settle();
  void stop();

 private:
  io::Loop m_loop;
  std::unique_ptr<monitor::Service> m_service;
  unsigned m_port = 0;
  std::thread m_thread;
};

}  // namespace tw::test
