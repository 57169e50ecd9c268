// SPDX-License-Identifier: GPL-3.0-or-later
// `tankward check`: every fault of recipes, constants and shop files, told apart by their `format`.
#pragma once

#include <filesystem>
#include <string>

#include "io/recipe/recipe.hpp"
#include "model/result.hpp"

namespace tw::io {

/// A file, or every `*.toml` in a folder and its sub-folders. Constants files of one folder are checked
/// together, so that duplicates across files are found. `constantsDir` empty = as loadRecipe. Sorted by
/// file and line; empty = nothing wrong.
[[nodiscard]] model::Faults checkPath(const std::filesystem::path& path,
                                      const std::filesystem::path& constantsDir = {});

/// What takes part in one recipe, one line each: kind, name, set, lg K, where it is from. For `--list`.
[[nodiscard]] std::string listRows(const Recipe& recipe);

/// `--list` of a file or folder: listRows of each recipe that loads; the others are left out (checkPath
/// tells why).
[[nodiscard]] std::string listPath(const std::filesystem::path& path,
                                   const std::filesystem::path& constantsDir = {});

}  // namespace tw::io
