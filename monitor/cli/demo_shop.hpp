// SPDX-License-Identifier: GPL-3.0-or-later
// The invented shop of `tankward demo`: its tanks, and what happens to each of them.
// Nothing here describes a real plant; every number is made up to show one condition or another.
#pragma once

#include <optional>
#include <string>
#include <vector>

namespace tw::monitor::cli {

/// How one channel moves between additions.
struct ChannelStory {
  std::string channel;
  double lossPerDay = 0.0;   ///< share of the value lost a day (drag-out, evaporation of ammonia, use)
  double wander = 0.0;       ///< in channel units: spread of a slow wandering about the target
  std::string stock;         ///< what brings it back; empty = nobody adds anything
  double start = 1.0;        ///< first value, as a share of the target
};

struct TankStory {
  std::string id, title, lineId, recipeId, color;
  double volume_L = 0.0;
  bool inService = true;
  std::vector<ChannelStory> channels;
  /// Additions stop and losses are multiplied this long before the end; the tank runs into trouble.
  std::optional<double> neglectedForDays;
  double neglectFactor = 1.0;
  /// The last reading is this much older than the end.
  double silentForHours = 0.0;
};

/// The shop's tanks in hoist order.
[[nodiscard]] std::vector<TankStory> demoTanks();
/// The shop file's text. Paths in it are relative, so that the folder can be moved.
[[nodiscard]] std::string demoShopFile(const std::vector<TankStory>& tanks);

}  // namespace tw::monitor::cli
