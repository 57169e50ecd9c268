// SPDX-License-Identifier: GPL-3.0-or-later
// A solved liquor as a page of text for a person at a terminal.
#pragma once

#include <string>
#include <vector>

#include "io/recipe/recipe.hpp"
#include "model/condition.hpp"
#include "model/liquor.hpp"

namespace tw::monitor::cli {

/// Condition with its reasons first, then margins with their limits, pM, solids and the main species;
/// every number with its unit. Warnings and the recipe's own doubts close the page.
[[nodiscard]] std::string liquorText(const io::Recipe& recipe, const model::LiquorReport& report,
                                     const model::Judgement& judgement,
                                     const std::vector<std::string>& extraWarnings);

}  // namespace tw::monitor::cli
