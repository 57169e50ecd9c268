// SPDX-License-Identifier: GPL-3.0-or-later
// Which recipe a tank uses, since when, by whom (FORMATS section 7). A tank's first recipe is taken as it
// is; a changed one comes into force only when a person adopts it.
#pragma once

#include <string>

#include "io/clock.hpp"
#include "io/store/store.hpp"
#include "monitor/pipeline/plant.hpp"

namespace tw::monitor {

/// Puts every tank's recipe into the store, and into force where none is yet (from the beginning of time,
/// so that readings from before the first start have one too). Fault `recipe_changed` for the first tank
/// whose file is not the recipe in force: it names both hashes and the remedy.
model::Result<model::Done> registerRecipes(const Plant& plant, io::Store& store, io::Instant now);

/// Takes the tank's recipe, as its file has it now, into force from `now`. Returns false when it already
/// is. Faults `unknown_tank`, those of the store.
model::Result<bool> adoptRecipe(const Plant& plant, io::Store& store, const std::string& tank,
                                const std::string& person, const std::string& reason, io::Instant now);

}  // namespace tw::monitor
