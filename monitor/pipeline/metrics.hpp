// SPDX-License-Identifier: GPL-3.0-or-later
// Figures about the service itself, as Prometheus text (exposition format 0.0.4).
#pragma once

#include <cstddef>
#include <cstdint>
#include <map>
#include <string>

namespace tw::monitor {

/// Counts since start.
struct Counters {
  std::uint64_t readingsAccepted = 0, readingsDuplicate = 0, readingsSuspicious = 0, readingsRefused = 0;
  std::uint64_t filesTaken = 0, filesPostponed = 0, serialSkipped = 0;
  std::uint64_t results = 0, unsolved = 0, requests = 0;
};

/// What stands now.
struct Gauges {
  std::size_t pendingLiquors = 0, writerBacklog = 0, liveClients = 0, connections = 0;
  std::map<std::string, std::size_t> alarmsByPriority;  ///< standing
  std::map<std::string, bool> links;                    ///< serial port or drop folder -> up
};

[[nodiscard]] std::string metricsText(const Counters& counters, const Gauges& gauges);

}  // namespace tw::monitor
