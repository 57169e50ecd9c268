// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/check.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <set>

#include "io/recipe/constants.hpp"
#include "io/recipe/recipe_load.hpp"
#include "io/recipe/shop.hpp"
#include "io/recipe/suggestion.hpp"
#include "io/recipe/toml_reader.hpp"

namespace tw::io {
namespace {

namespace fs = std::filesystem;
using model::Faults;

void append(Faults& all, const Faults& some) { all.insert(all.end(), some.begin(), some.end()); }

std::vector<fs::path> tomlFiles(const fs::path& folder) {
  std::vector<fs::path> files;
  std::error_code code;
  for (auto entry = fs::recursive_directory_iterator(folder, code); !code && entry != fs::end(entry);
       entry.increment(code)) {
    if (entry->path().extension() == ".toml" && entry->is_regular_file()) files.push_back(entry->path());
  }
  std::sort(files.begin(), files.end());
  return files;
}

/// The `format` of a file; empty (with faults) when it has none.
std::string formatOf(const fs::path& path, Faults& faults) {
  const auto file = readToml(path);
  if (!file) {
    append(faults, file.error());
    return {};
  }
  TableReader document(file->root, path.string(), "", faults);
  return document.requiredText("format");
}

void checkShop(const fs::path& path, Faults& faults) {
  const auto shop = loadShop(path);
  if (!shop) {
    append(faults, shop.error());
    return;
  }
  if (const auto recipes = loadShopRecipes(*shop); !recipes) append(faults, recipes.error());
}

void checkFile(const fs::path& path, const fs::path& constantsDir, Faults& faults) {
  const std::string format = formatOf(path, faults);
  if (format == kRecipeFormat) {
    if (const auto recipe = loadRecipe(path, constantsDir); !recipe) append(faults, recipe.error());
  } else if (format == kConstantsFormat) {
    if (const auto library = loadConstantsFile(path); !library) append(faults, library.error());
  } else if (format == kShopFormat) {
    checkShop(path, faults);
  } else if (!format.empty()) {
    const std::vector<std::string> known = {kRecipeFormat, kConstantsFormat, kShopFormat};
    faults.push_back({.code = "unknown_format",
                      .subject = "format",
                      .detail = fmt::format("format is \"{}\"; expected one of: {}{}", format, listed(known),
                                            didYouMean(format, known)),
                      .where = path.string()});
  }
}

}  // namespace

Faults checkPath(const fs::path& path, const fs::path& constantsDir) {
  std::error_code code;
  Faults faults;
  if (!fs::is_directory(path, code)) {
    checkFile(path, constantsDir, faults);
    return sortedFaults(std::move(faults));
  }
  std::set<fs::path> libraries;
  for (const fs::path& file : tomlFiles(path)) {
    checkFile(file, constantsDir, faults);
    Faults ignored;
    if (formatOf(file, ignored) == kConstantsFormat) libraries.insert(file.parent_path());
  }
  for (const fs::path& folder : libraries) {
    if (const auto library = loadConstants(folder); !library) append(faults, library.error());
  }
  return sortedFaults(std::move(faults));
}

std::string listRows(const Recipe& recipe) {
  std::string text = fmt::format("{} ({})\n", recipe.id, recipe.file.string());
  for (const RowNote& row : recipe.rows) {
    text += fmt::format("  {} {} | set {} | lg K {} at {} degC, I = {} | {} | {} | {}\n",
                        row.isSolid ? "solid" : "species", row.name, row.set, row.lgK, row.T_C, row.I,
                        row.provenance, row.source, row.where);
  }
  return text;
}

std::string listPath(const fs::path& path, const fs::path& constantsDir) {
  std::error_code code;
  const auto files = fs::is_directory(path, code) ? tomlFiles(path) : std::vector<fs::path>{path};
  std::string text;
  for (const fs::path& file : files) {
    Faults ignored;
    if (formatOf(file, ignored) != kRecipeFormat) continue;
    if (const auto recipe = loadRecipe(file, constantsDir)) text += listRows(*recipe);
  }
  return text;
}

}  // namespace tw::io
