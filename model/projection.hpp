// SPDX-License-Identifier: GPL-3.0-or-later
// A straight line through the margin of the last days: the simplest honest answer to "when".
#pragma once

#include <optional>
#include <vector>

namespace tw::model {

struct TrendPoint {
  double hours = 0.0;  ///< time, h, any origin
  double value = 0.0;  ///< the margin's judged number
};

/// Ordinary least squares through the points (Draper & Smith, Applied Regression Analysis, ch. 1).
struct StraightLine {
  double value = 0.0;         ///< at the newest point, on the line
  double slope_per_h = 0.0;
  double slopeSigma = 0.0;    ///< standard error of the slope; 0 with fewer than 3 points
  int points = 0;
};

/// nullopt with fewer than 3 points, or when they span less than `minSpan_h` hours.
[[nodiscard]] std::optional<StraightLine> fitLine(const std::vector<TrendPoint>& points,
                                                  double minSpan_h = 6.0);

/// Hours from the newest point until the line falls to `limit`; nullopt when it rises, is level within
/// its standard error (|slope| <= 2 sigma), or is already at or below the limit.
[[nodiscard]] std::optional<double> hoursUntil(const StraightLine& line, double limit);

}  // namespace tw::model
