// SPDX-License-Identifier: GPL-3.0-or-later
// From what is known of a tank to what the alarm engine is told. Pure.
//
// Deadbands: an alarm that stands is let go only once its number has passed the limit by
//   margins            5 % of the limit                           (common practice)
//   saturation         0.05 in lg units                           (common practice)
//   windows, guards    max(1 u of the reading, 1 % of low..high)  (common practice; at least one standard
//                      uncertainty for titration results)
#pragma once

#include <map>
#include <string>
#include <vector>

#include "monitor/alarm/engine.hpp"
#include "monitor/pipeline/liquor.hpp"
#include "monitor/pipeline/report_json.hpp"

namespace tw::monitor {

inline constexpr double kMarginDeadband = 0.05;      ///< of the limit
inline constexpr double kSaturationDeadband = 0.05;  ///< lg units
inline constexpr double kWindowDeadband = 0.01;      ///< of high - low

/// A recipe with its limits moved outward by the deadbands, to judge what a standing alarm holds on to.
struct RelaxedLimits {
  model::ChemicalSystem system;
  model::MarginLimits limits;
};
[[nodiscard]] RelaxedLimits relaxed(const io::Recipe& recipe);

/// Margin, guard and solid alarms of a result. Subjects that could stand and do not are reported with an
/// empty word, so that they clear. While a sludge solid is past its line, margins say nothing new (they
/// may be absent) and are not reported: what stands, stands.
[[nodiscard]] std::vector<Observation> observeResult(const TankSetup& setup, const RelaxedLimits& relaxedLimits,
                                                     const StoredReport& stored,
                                                     const std::map<std::string, double>& values);

/// Channels and ratios outside low..high. A channel whose guard is passed is the guard's affair.
/// `values` by channel or ratio id, each in its own unit; an absent one is not reported.
[[nodiscard]] std::vector<Observation> observeWindows(const TankSetup& setup,
                                                      const std::map<std::string, double>& values);

/// One alarm for the liquor (subject "liquor") when a needed channel is missing or too old, so that a
/// shift without titrations makes one alarm a tank and not one a channel; one more for each guarded
/// channel that a liquor could do without. `newest` as of `now`.
[[nodiscard]] std::vector<Observation> observeStale(const TankSetup& setup,
                                                    const std::map<std::string, io::Reading>& newest,
                                                    io::Instant now);

/// Serial port or drop folder; `tank` is empty for a drop folder, which serves the whole shop.
[[nodiscard]] Observation observeLink(const std::string& tank, const std::string& link, bool up);

}  // namespace tw::monitor
