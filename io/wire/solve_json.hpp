// SPDX-License-Identifier: GPL-3.0-or-later
// The object of `solve --json` (FORMATS section 6), and `sweep`'s CSV and JSON.
#pragma once

#include <string>
#include <vector>

#include "io/recipe/recipe.hpp"
#include "model/analysis.hpp"
#include "model/condition.hpp"

namespace tw::io::wire {

/// One object, keys in FORMATS' order, numbers with 17 significant digits where needed for a round trip;
/// what this version does not compute (sigma, p_over, sludge, gases) is null. `extraWarnings` (such as
/// implausible:<channel>) come before the report's own. `indent` < 0 = one line.
[[nodiscard]] std::string solveJson(const Recipe& recipe, const model::LiquorReport& report,
                                    const model::Judgement& judgement,
                                    const std::vector<std::string>& extraWarnings, int indent = 2);

/// Columns `x, ph, pM, lg_saturation:<solid>..., share:<species>...`; empty cells where no liquor exists.
[[nodiscard]] std::string sweepCsv(const model::ChemicalSystem& system,
                                   const std::vector<model::SweepPoint>& points);
/// The same as an array of objects.
[[nodiscard]] std::string sweepJson(const model::ChemicalSystem& system,
                                    const std::vector<model::SweepPoint>& points);

}  // namespace tw::io::wire
