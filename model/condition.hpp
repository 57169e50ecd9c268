// SPDX-License-Identifier: GPL-3.0-or-later
// From margins, limits and guards to the one condition word of a bath, and to the bed (how much of the
// margin is used). Pure rules; deadbands and time belong to the alarm engine.
#pragma once

#include <array>
#include <optional>
#include <string>
#include <vector>

#include "model/liquor.hpp"

namespace tw::model {

/// Worst last. The service adds Drifting and Stale; `judge` never answers them.
enum class Condition { Fine, Drifting, Tight, Brink, Sludging, Stale };
/// "fine", "drifting", "tight", "brink", "sludging", "stale".
[[nodiscard]] const char* name(Condition condition);
[[nodiscard]] std::optional<Condition> condition(const std::string& name);

/// Limits of the bath's margins; absent = shown, never judged.
using MarginLimits = std::array<std::optional<MarginLimit>, kMarginCount>;

/// A guarded channel or ratio: it counts like a margin. Values in the channel's own unit.
struct Guard {
  std::string id;
  std::optional<double> cautionLow, actLow, cautionHigh, actHigh;
};
struct GuardValue {
  Guard guard;
  double value = 0.0;
  std::optional<double> target;  ///< where the bed stands at 0.1
};

/// One reason behind a condition, as data; the edge makes the sentence.
struct Finding {
  Condition condition = Condition::Fine;
  std::string code;     ///< "margin" | "guard" | "solid"
  std::string subject;  ///< margin name, channel or ratio id, or solid id
  double value = 0.0;   ///< the judged number
  double limit = 0.0;   ///< the limit it passed (caution or act), or the threshold
};

struct Judgement {
  Condition condition = Condition::Fine;
  bool doubtful = false;             ///< the result is not reliable
  std::vector<Finding> findings;     ///< everything worse than fine, worst first
};

/// DESIGN section 5: sludging (a sludge solid past its threshold), brink (a limited margin inside act),
/// tight (inside caution), else fine; the first that fits. A margin that is null or has no limit never
/// counts. A solid with limits of its own is judged by its own margins in `bySolid`.
[[nodiscard]] Judgement judge(const ChemicalSystem& system, const LiquorReport& report,
                              const MarginLimits& limits, const std::vector<GuardValue>& guards);

/// Height of the bed for one margin, 0..1: 0.1 at `atTarget` (the margin at target composition), 0.5 at
/// caution, 0.75 at act, 1 at zero, linear between, clamped to 0.02..1. Where the target's margin is not
/// beyond caution the first leg runs from 2 x caution.
[[nodiscard]] double bedOf(double margin, double atTarget, const MarginLimit& limit);

/// The worst bed over the limited margins (and guards); nullopt when nothing is limited or computed.
/// `atTarget` is the analysis of the recipe's target composition.
[[nodiscard]] std::optional<double> bed(const LiquorReport& report, const LiquorReport& atTarget,
                                        const MarginLimits& limits,
                                        const std::vector<GuardValue>& guards);

}  // namespace tw::model
