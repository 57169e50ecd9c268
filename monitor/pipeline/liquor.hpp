// SPDX-License-Identifier: GPL-3.0-or-later
// A liquor at a time: which stored readings it consists of, and the result that follows. Pure.
#pragma once

#include <map>
#include <string>
#include <vector>

#include "io/store/store.hpp"
#include "model/condition.hpp"
#include "model/result.hpp"
#include "monitor/pipeline/plant.hpp"

namespace tw::monitor {

/// A channel that a liquor lacks at a time.
struct Lacking {
  std::string channel;
  bool tooOld = false;  ///< there is a reading, but older than max_age_h; else there is none at all
};

/// The newest accepted reading of each channel at `at`, none older than its max_age_h (DESIGN section 4).
struct LiquorPick {
  std::string tank;
  io::Instant at{};
  std::map<std::string, io::Reading> used;  ///< by channel; channels beyond the needed ones where fresh
  std::vector<Lacking> lacking;             ///< needed channels only
  [[nodiscard]] bool complete() const { return lacking.empty(); }
  [[nodiscard]] io::ChannelValues values() const;
  /// Ids of `used`, ascending.
  [[nodiscard]] std::vector<std::int64_t> ids() const;
};

/// `newest`: per channel the newest accepted reading at or before `at` (Store::newestAccepted). A reading
/// of `sample_temperature` counts only where it belongs to the same sample as the pH: the temperature of
/// another sample says nothing about this one.
[[nodiscard]] LiquorPick pickLiquor(const TankSetup& setup, const std::map<std::string, io::Reading>& newest,
                                    io::Instant at);

struct SolvedLiquor {
  model::LiquorReport report;
  model::Judgement judgement;
  std::vector<model::GuardValue> guards;
};

/// Analysis and judgement of given values (canonical). Faults of liquorInput and model::analyse.
model::Result<SolvedLiquor> solveValues(const TankSetup& setup, const io::ChannelValues& values);

/// The row for the store. `pick` must be complete. Not set: id, historic.
model::Result<io::ResultRow> solveLiquor(const TankSetup& setup, const LiquorPick& pick,
                                         io::Instant computedAt);

/// JSON object {id: value in its own unit} of channels and ratios, numbers that read back the same.
[[nodiscard]] std::string valuesJson(const io::Recipe& recipe, const io::ChannelValues& values);

}  // namespace tw::monitor
