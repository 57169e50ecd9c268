// SPDX-License-Identifier: GPL-3.0-or-later
// The past of the invented shop: titrations, meter readings and additions, as files that `load` reads.
#pragma once

#include <string>

#include "io/recipe/recipe.hpp"
#include "io/wire/time.hpp"
#include "monitor/cli/demo_shop.hpp"

namespace tw::monitor::cli {

struct HistoryFiles {
  std::string readings;  ///< wide CSV, one row a sampling round
  std::string events;    ///< event CSV; empty when nothing was added
};

/// Simulates one tank hour by hour over `days` before `end`: first-order losses, wandering, noise of each
/// channel's stated uncertainty, additions back to target when a titration finds a channel low. The same
/// seed, tank, end and days give the same text on every machine.
[[nodiscard]] HistoryFiles demoHistory(const TankStory& story, const io::Recipe& recipe, io::Instant end,
                                       int days, unsigned long seed);

}  // namespace tw::monitor::cli
