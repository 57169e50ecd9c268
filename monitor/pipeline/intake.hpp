// SPDX-License-Identifier: GPL-3.0-or-later
// Intake: what a file, a serial frame or a request says is judged against the tanks' recipes and the
// clock, and becomes rows for the store and refusals for the sender. Pure.
//
// Refusal is per cell. A value outside its plausible range is refused and still kept as a row (state
// refused, never used); a cell whose tank, channel, time or unit cannot be trusted is refused and not
// kept, because it has no identity to keep it under.
#pragma once

#include <cstddef>
#include <functional>
#include <string>
#include <vector>

#include "io/incoming.hpp"
#include "io/store/store.hpp"
#include "monitor/pipeline/plant.hpp"

namespace tw::monitor {

/// How far ahead of the service's clock a sample time may lie (FORMATS section 5).
inline constexpr std::chrono::minutes kFutureTolerance{5};

struct IntakeOutcome {
  std::vector<io::NewReading> readings;  ///< accepted, suspicious, and refused-but-kept; batch order
  std::vector<io::EventRow> events;
  /// The batch's own refusals first, then those of this judgement. Codes: unknown_tank, unknown_channel,
  /// unit_mismatch, unit_unknown, not_a_number, implausible, in_future, missing_input, unknown_input,
  /// no_worksheet, implausible_input, unknown_event, missing_amount, missing_stock.
  std::vector<io::Refusal> refusals;
  std::size_t duplicates = 0;            ///< the same reading again within this batch: left out
  /// Readings that may be used (state accepted).
  [[nodiscard]] std::size_t acceptable() const;
};

/// Canonical values of the other channels of a tank at a time, for worksheets that name them.
using KnownValues = std::function<io::ChannelValues(const std::string& tank, io::Instant at)>;

/// `now` is the time of receipt. `known` may be empty: a worksheet then sees this batch only.
[[nodiscard]] IntakeOutcome judgeIntake(const Plant& plant, const io::IncomingBatch& batch, io::Instant now,
                                        const KnownValues& known = {});

/// One value as a correction of a stored reading: unit and plausible range as above. Fault codes as the
/// refusals'.
model::Result<io::NewReading> judgeCorrection(const TankSetup& setup, const io::Reading& old, double value,
                                              const std::string& text, const std::string& unit,
                                              const std::string& person, const std::string& reason,
                                              io::Instant now);

}  // namespace tw::monitor
