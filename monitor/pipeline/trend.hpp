// SPDX-License-Identifier: GPL-3.0-or-later
// When will a margin reach its limits if nothing is done? Straight lines (model/projection.hpp) through
// the limited margins of the last days. Pure.
#pragma once

#include <map>
#include <optional>
#include <string>

#include "io/recipe/recipe.hpp"
#include "io/wire/api.hpp"
#include "io/wire/time.hpp"

namespace tw::monitor {

/// How much past a projection looks at (common practice: a working week).
inline constexpr std::chrono::hours kTrendWindow{24 * 5};

/// Judged numbers of the margins of each result, by sample time.
using MarginTrend = std::map<io::Instant, std::map<std::string, double>>;

/// Takes the limited margin that reaches its caution limit first (one inside it already goes before); of
/// equals, and where none does, the one that uses most of the bed at the horizon. Hours count from `now`. Results before `chapter` (the last dump) do not
/// count. nullopt when no limited margin has enough results for a line.
[[nodiscard]] std::optional<io::wire::ProjectionView> project(
    const io::Recipe& recipe, const std::optional<model::LiquorReport>& atTarget, const MarginTrend& trend,
    io::Instant chapter, io::Instant now);

}  // namespace tw::monitor
