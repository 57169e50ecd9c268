// SPDX-License-Identifier: GPL-3.0-or-later
// The shared safety table (io/recipe/cautions.hpp) in the language of the screen.
#pragma once

#include <QString>
#include <string>
#include <vector>

namespace tw::ui {

/// "Ammonia: gives off ...", one line a hazard; empty for none. Ends with who decides.
[[nodiscard]] QString cautionText(const std::vector<std::string>& hazards);
/// Titles only: "Ammonia, Hot liquor".
[[nodiscard]] QString cautionTitles(const std::vector<std::string>& hazards);

}  // namespace tw::ui
