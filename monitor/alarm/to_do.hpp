// SPDX-License-Identifier: GPL-3.0-or-later
// One plain line for the person who answers an alarm: look, measure again, then act by the shop's own
// procedure. It never names acid as a remedy: an acid addition is the one that can kill (cyanide), and it
// needs a proposal with its cautions, not a line.
#pragma once

#include <string>
#include <vector>

#include "monitor/pipeline/plant.hpp"

namespace tw::monitor {

/// `margin` by its name ("ph_up"); `ligand` only for ligand_loss.
[[nodiscard]] std::string toDoForMargin(const TankSetup& setup, const std::string& margin,
                                        const std::string& ligand);
/// `low`: the value is below its window or guard, else above.
[[nodiscard]] std::string toDoForValue(const std::string& title, bool low);
[[nodiscard]] std::string toDoForSolid(const std::string& solid, bool sludging);
[[nodiscard]] std::string toDoForStale(const std::vector<std::string>& titles);
[[nodiscard]] std::string toDoForLink(const std::string& tank, const std::string& link);

}  // namespace tw::monitor
