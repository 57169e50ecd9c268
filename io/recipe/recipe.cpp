// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/recipe.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <tuple>

#include "io/recipe/digest.hpp"
#include "io/recipe/recipe_draft.hpp"
#include "io/recipe/recipe_load.hpp"

namespace tw::io {
namespace {

using model::Fault;
using model::Faults;

int lineOf(const Fault& fault) {
  const auto colon = fault.where.rfind(':');
  if (colon == std::string::npos) return 0;
  int line = 0;
  for (const char c : fault.where.substr(colon + 1)) line = c >= '0' && c <= '9' ? 10 * line + (c - '0') : 0;
  return line;
}

void readDocument(TableReader& document, Draft& draft) {
  readBath(document, draft);
  readRows(document, true, draft.own);
  readComponents(document, draft);
  readChannels(document, draft);
  readRatios(document, draft);
  resolveRows(document, draft);
  readLimits(document, draft);
  readStocks(document, draft);
  document.allowRemarks();
  document.text("title");
  document.finish();
}

}  // namespace

Faults sortedFaults(Faults faults) {
  const auto key = [](const Fault& fault) {
    const auto colon = fault.where.rfind(':');
    return std::make_tuple(fault.where.substr(0, colon), lineOf(fault), fault.code, fault.subject,
                           fault.detail);
  };
  std::stable_sort(faults.begin(), faults.end(),
                   [&](const Fault& a, const Fault& b) { return key(a) < key(b); });
  const auto same = [&](const Fault& a, const Fault& b) { return key(a) == key(b); };
  faults.erase(std::unique(faults.begin(), faults.end(), same), faults.end());
  return faults;
}

model::Result<Recipe, Faults> loadRecipeWith(const std::filesystem::path& file, const Library& library) {
  const auto parsed = readToml(file);
  if (!parsed) return model::fail(parsed.error());
  Faults faults;
  TableReader document(parsed->root, file.string(), "", faults);
  if (document.requiredText("format") != kRecipeFormat) {
    document.fault("format", "unknown_format", fmt::format("expected format = \"{}\"", kRecipeFormat));
    return model::fail(sortedFaults(std::move(faults)));
  }
  Draft draft{.recipe = {},
              .own = {},
              .library = library,
              .ligands = {},
              .exclude = {},
              .componentReaders = {},
              .usedRows = {},
              .usedGases = {},
              .usedInteractions = {}};
  draft.recipe.file = file;
  readDocument(document, draft);
  if (!faults.empty()) return model::fail(sortedFaults(std::move(faults)));
  draft.recipe.sha256 = sha256Hex(parsed->bytes);
  draft.recipe.resolvedJson = resolvedDocument(parsed->root, draft);
  draft.recipe.resolvedSha256 = sha256Hex(draft.recipe.resolvedJson);
  return std::move(draft.recipe);
}

model::Result<Recipe, Faults> loadRecipe(const std::filesystem::path& file,
                                         const std::filesystem::path& constantsDir) {
  std::error_code code;
  if (!std::filesystem::exists(file, code)) {
    const auto missing = readToml(file);
    if (!missing) return model::fail(missing.error());
  }
  const auto directory = constantsDirectory(file, constantsDir);
  if (!directory) return model::fail(Faults{directory.error()});
  const auto library = loadConstants(*directory);
  if (!library) return model::fail(sortedFaults(library.error()));
  return loadRecipeWith(file, *library);
}

const Channel* Recipe::channel(const std::string& channelId) const {
  const auto found =
      std::find_if(channels.begin(), channels.end(), [&](const Channel& c) { return c.id == channelId; });
  return found == channels.end() ? nullptr : &*found;
}

}  // namespace tw::io
