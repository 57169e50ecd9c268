// SPDX-License-Identifier: GPL-3.0-or-later
// Which species hold how much of the metal, from one analysis. Pure.
#pragma once

#include <string>
#include <vector>

#include "ui/client/desk_values.hpp"
#include "ui/widgets/share_bars.hpp"
#include "ui/words/format.hpp"

namespace tw::ui {

/// How many atoms of an element a formula holds: 2 for Cu in "Cu2(OH)2^2+", 0 when it holds none.
[[nodiscard]] int atomsIn(const std::string& formula, const std::string& element);
/// Shares of the metal ("Cu^2+") over the species that hold it, largest first; those under 0.1 % are
/// summed up under `rest`.
[[nodiscard]] std::vector<Share> metalShares(const AnalysisView& analysis, const std::string& metal,
                                             const Format& format, const QString& rest);

}  // namespace tw::ui
