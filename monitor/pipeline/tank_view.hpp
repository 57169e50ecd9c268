// SPDX-License-Identifier: GPL-3.0-or-later
// A tank as it stands now: condition word with its reasons, bed, projection, channels, what is due. Pure:
// facts and a time in, wire values out (DESIGN section 5).
#pragma once

#include <map>
#include <optional>
#include <string>
#include <vector>

#include "io/store/store.hpp"
#include "io/wire/api.hpp"
#include "monitor/pipeline/plant.hpp"
#include "monitor/pipeline/report_json.hpp"
#include "monitor/pipeline/trend.hpp"

namespace tw::monitor {

/// What the service knows of one tank.
struct TankFacts {
  bool inService = true;
  std::optional<io::ResultRow> newest;           ///< newest result, with json
  std::optional<StoredReport> stored;            ///< read from it
  std::map<std::string, double> values;          ///< of the newest result, in channel units
  std::map<std::string, io::Reading> readings;   ///< newest accepted, by channel
  MarginTrend trend;
  io::Instant chapter{};                         ///< last dump
  std::vector<std::string> lostLinks;            ///< serial ports of this tank
  /// A newer complete liquor that could not be solved: its numbers contradict each other.
  std::optional<model::Fault> unsolved;
};

/// The condition: judged against today's limits, held by alarms inside their deadband; `drifting` where a
/// limited margin is forecast to reach caution within the horizon (never from an unreliable result);
/// `stale` replaces fine and drifting, and is a second mark on worse words. A tank without any result is
/// stale. Reasons worst first. `alarms`: the tank's standing ones, worst first.
[[nodiscard]] io::wire::TankView tankView(const TankSetup& setup, const TankFacts& facts,
                                          const std::vector<io::AlarmRow>& alarms, io::Instant now);

struct DueView {
  std::string tank, tankTitle, channel, title, dueAt;
  bool overdue = false;
  std::optional<std::string> lastAt;
  io::Instant at{};
};
/// Channels with `every_h`; a tank out of service has none due. A channel never analysed is due now.
[[nodiscard]] std::vector<DueView> dueOf(const TankSetup& setup, const TankFacts& facts, io::Instant now);

}  // namespace tw::monitor
