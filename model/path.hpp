// SPDX-License-Identifier: GPL-3.0-or-later
// Finds where solids first reach their lines along a path that starts at the solved liquor.
// EQUATIONS.md section 6.
#pragma once

#include <optional>
#include <vector>

namespace tw::model {

/// A path through liquors: s = 0 is the solved one.
class Path {
 public:
  Path() = default;
  Path(const Path&) = delete;
  Path& operator=(const Path&) = delete;
  virtual ~Path() = default;
  /// lg saturation minus threshold of each followed solid at s; NaN where it cannot form. False where no
  /// feasible liquor exists. Values of s come mostly in small steps, so that each solve starts warm.
  virtual bool at(double s, std::vector<double>& above) = 0;
};

struct PathRange {
  double end = 1.0;  ///< s of the last liquor looked at
  double firstStep = 0.01;
  double largestStep = 0.1;  ///< narrower features than this may be missed
};

/// For each of `count` solids the smallest s in (0, end] where it reaches its line; nullopt where it does
/// not, or where it is past it at s = 0 already. 0 where it is exactly on it. The curve need not be
/// monotone: steps shrink where it is steep, and every hump is climbed. A search ends where the path has no
/// feasible liquor.
std::vector<std::optional<double>> firstCrossings(Path& path, std::size_t count, const PathRange& range);

}  // namespace tw::model
