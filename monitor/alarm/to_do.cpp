// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/alarm/to_do.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

namespace tw::monitor {

std::string toDoForMargin(const TankSetup& setup, const std::string& margin, const std::string& ligand) {
  if (margin == "ligand_loss") {
    std::string name = ligand.empty() ? "the ligand" : ligand;
    for (const io::ComponentSource& source : setup.recipe.sources) {
      if (source.formula == ligand && !source.title.empty()) name = source.title;
    }
    return fmt::format("Titrate {} again; if it is confirmed, work out an addition and add it slowly, "
                       "with the cautions of its safety data sheet.", name);
  }
  if (margin == "metal_gain") return "Stop metal additions and titrate the metal and its ligand again.";
  if (margin == "ph_up") return "Measure the pH again with a checked electrode; add nothing alkaline meanwhile.";
  if (margin == "ph_down") {
    return "Measure the pH again with a checked electrode; add nothing that lowers it meanwhile.";
  }
  if (margin == "warming") return "Check the thermostat and the bath temperature; do not heat further.";
  if (margin == "cooling") return "Check the heater and the bath temperature; do not let it cool further.";
  if (margin == "dilution") return "Stop water additions, check the level, and sample again.";
  return "Sample and analyse again.";
}

std::string toDoForValue(const std::string& title, bool low) {
  return fmt::format("Measure {} again; if it is confirmed too {}, bring it back by the shop's procedure.",
                     title, low ? "low" : "high");
}

std::string toDoForSolid(const std::string& solid, bool sludging) {
  if (!sludging) return fmt::format("Sample and analyse again; {} is close to its limit.", solid);
  return fmt::format("Stop additions, look for haze ({}), sample again, and call the supervisor.", solid);
}

std::string toDoForStale(const std::vector<std::string>& titles) {
  return fmt::format("Sample and analyse: {}.", fmt::join(titles, ", "));
}

std::string toDoForLink(const std::string& tank, const std::string& link) {
  if (tank.empty()) return fmt::format("Check that the folder {} exists and can be read.", link);
  return fmt::format("Check cable, power and settings of the instrument at {}.", link);
}

}  // namespace tw::monitor
