// SPDX-License-Identifier: GPL-3.0-or-later
// The whole service put together: loop, store, pipeline, board, drop folders, serial ports, API.
#pragma once

#include <map>
#include <memory>
#include <string>

#include "io/clock.hpp"
#include "io/loop.hpp"
#include "io/recipe/shop.hpp"
#include "model/result.hpp"

namespace tw::monitor {

class Service {
 public:
  /// Clock and loop outlive the service.
  Service(io::Loop& loop, const io::Clock& clock, io::Shop shop, std::map<std::string, io::Recipe> recipes);
  ~Service();

  /// Makes data_dir (0700), takes its lock, opens the store, registers recipes (fault `recipe_changed`),
  /// solves what a crash left, watches folders and ports, listens. Faults of all these.
  model::Result<model::Done> start();
  /// The port the API listens on.
  [[nodiscard]] unsigned port() const;
  /// Takes nothing more in, waits until what was taken is durable and solved (at most ten seconds; the
  /// rest is solved at the next start), then stops the loop. On the loop's thread.
  void stop();
  /// Nothing in any queue.
  [[nodiscard]] bool idle() const;
  /// What the minute timer does: ages, forecasts, pending liquors.
  void tick();

 private:
  struct Impl;
  std::unique_ptr<Impl> m_impl;
};

/// `tankward serve`: runs until SIGTERM or SIGINT. Prints "listening on http://ADDRESS:PORT" on stdout when
/// ready, faults on stderr. Returns the exit status: 0 stopped, 1 input, 3 machine.
int serve(const io::Shop& shop, std::map<std::string, io::Recipe> recipes, const io::Clock& clock);

}  // namespace tw::monitor
