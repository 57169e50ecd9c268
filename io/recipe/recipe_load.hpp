// SPDX-License-Identifier: GPL-3.0-or-later
// Pieces of recipe loading that the checker and the shop share. Inside io/recipe only.
#pragma once

#include <filesystem>

#include "io/recipe/constants.hpp"
#include "io/recipe/recipe.hpp"

namespace tw::io {

inline constexpr const char* kRecipeFormat = "tankward-recipe/1";
inline constexpr const char* kShopFormat = "tankward-shop/1";

/// As loadRecipe, with a library read before.
model::Result<Recipe, model::Faults> loadRecipeWith(const std::filesystem::path& file,
                                                    const Library& library);

/// By file and line, each fault once.
model::Faults sortedFaults(model::Faults faults);

}  // namespace tw::io
