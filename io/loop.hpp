// SPDX-License-Identifier: GPL-3.0-or-later
// The one event loop that waits for everything (files, ports, sockets, timers, signals). Asio stays
// behind it: only .cpp files of io/ and monitor/ that really need a socket include io/loop_asio.hpp.
#pragma once

#include <chrono>
#include <functional>
#include <memory>

namespace tw::io {

class Loop {
 public:
  Loop();
  ~Loop();
  Loop(const Loop&) = delete;
  Loop& operator=(const Loop&) = delete;

  /// Runs `work` on the loop's thread, soon. Callable from any thread.
  void post(std::function<void()> work);
  /// Runs `work` on the loop's thread after `delay`. Callable from the loop's thread.
  void after(std::chrono::milliseconds delay, std::function<void()> work);
  /// Calls `onStop` once on SIGTERM or SIGINT.
  void onStopSignal(std::function<void()> onStop);
  /// Serves until stop(); exceptions of handlers go to `onError` and the loop goes on.
  void run(const std::function<void(const char* what)>& onError);
  /// Makes run() return. Callable from any thread.
  void stop();

  struct Impl;
  [[nodiscard]] Impl& impl() { return *m_impl; }

 private:
  std::unique_ptr<Impl> m_impl;
};

}  // namespace tw::io
