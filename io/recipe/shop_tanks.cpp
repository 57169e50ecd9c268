// SPDX-License-Identifier: GPL-3.0-or-later
// [[line]], [[line.tank]] and what a tank changes of its recipe.
#include <fmt/format.h>

#include <algorithm>

#include "io/recipe/recipe_draft.hpp"
#include "io/recipe/recipe_load.hpp"
#include "io/recipe/shop_parts.hpp"
#include "io/recipe/suggestion.hpp"

namespace tw::io {
namespace {

namespace fs = std::filesystem;
using model::Fault;
using model::Faults;

bool isColor(const std::string& text) {
  const auto hex = [](char c) {
    return (c >= '0' && c <= '9') || (c >= 'a' && c <= 'f') || (c >= 'A' && c <= 'F');
  };
  return text.size() == 7 && text[0] == '#' && std::all_of(text.begin() + 1, text.end(), hex);
}

/// Overrides by id: [[tank.channel]] with `id`, or [tank.channel.ID]; both spell the same.
std::vector<std::pair<std::string, TableReader>> byId(TableReader& tank, const std::string& key,
                                                      const std::string& idKey) {
  std::vector<std::pair<std::string, TableReader>> found;
  if (tank.isTable(key)) {
    if (auto table = tank.table(key)) {
      for (const std::string& id : table->keys()) {
        if (auto inner = table->table(id)) found.emplace_back(id, *inner);
      }
    }
    return found;
  }
  for (TableReader& reader : tank.tables(key)) found.emplace_back(reader.requiredText(idKey), reader);
  return found;
}

void readOverrides(TableReader& reader, Tank& tank) {
  for (auto& [id, channel] : byId(reader, "channel", "id")) {
    ChannelOverride& override = tank.channels[id];
    override.low = channel.number("low");
    override.target = channel.number("target");
    override.high = channel.number("high");
    override.every_h = channel.positive("every_h");
    channel.finish();
  }
  if (auto limits = reader.table("limits")) {
    for (const std::string& name : marginNames()) {
      if (const auto limit = readLimit(*limits, name)) tank.limits[*model::marginKind(name)] = *limit;
    }
    limits->finish();
  }
  for (auto& [id, watch] : byId(reader, "watch", "solid")) {
    Tank::WatchOverride& override = tank.watch[id];
    override.threshold = watch.number("threshold");
    override.thresholdSigma = watch.notNegative("threshold_sigma");
    override.thresholdFrom = watch.text("threshold_from", "");
    watch.finish();
  }
}

/// drag_out_L_h, evaporation_L_h, and per channel electrons, efficiency, anode_g_h (as "copper.electrons").
void readBalance(TableReader& reader, Tank& tank) {
  auto balance = reader.table("balance");
  if (!balance) return;
  for (const char* key : {"drag_out_L_h", "evaporation_L_h"}) {
    if (const auto value = balance->notNegative(key)) tank.balance[key] = *value;
  }
  for (const std::string& id : balance->keys()) {
    if (!balance->isTable(id)) continue;
    auto channel = balance->table(id);
    for (const char* key : {"electrons", "efficiency", "anode_g_h"}) {
      if (const auto value = channel->notNegative(key)) tank.balance[id + "." + key] = *value;
    }
    channel->finish();
  }
  balance->finish();
}

Tank readTank(TableReader& reader, const std::string& lineId) {
  Tank tank;
  tank.lineId = lineId;
  tank.where = reader.where();
  tank.id = reader.requiredText("id");
  if (!tank.id.empty()) {
    reader.setSubject(fmt::format("tank {}", tank.id));
    checkId(reader, "id", tank.id);
  }
  tank.title = reader.text("title", tank.id);
  tank.recipeId = reader.requiredText("recipe");
  tank.volume_L = reader.positive("volume_L");
  tank.liquorColor = reader.text("liquor_color", tank.liquorColor);
  if (!isColor(tank.liquorColor)) {
    reader.fault("liquor_color", "bad_color",
                 fmt::format("liquor_color is \"{}\"; expected #rrggbb", tank.liquorColor));
  }
  tank.inService = reader.flag("in_service", true);
  readOverrides(reader, tank);
  readBalance(reader, tank);
  reader.allowRemarks();
  reader.finish();
  return tank;
}

/// Every recipe of the shop's folders by id, as far as the id can be read.
std::map<std::string, std::vector<fs::path>> recipeFiles(const Shop& shop) {
  std::map<std::string, std::vector<fs::path>> found;
  for (const fs::path& folder : shop.recipeDirs) {
    std::error_code code;
    std::vector<fs::path> files;
    for (const auto& entry : fs::directory_iterator(folder, code)) {
      if (entry.path().extension() == ".toml") files.push_back(entry.path());
    }
    std::sort(files.begin(), files.end());
    for (const fs::path& file : files) {
      const auto parsed = readToml(file);
      if (!parsed || parsed->root["format"].value_or(std::string()) != kRecipeFormat) continue;
      const auto id = parsed->root["bath"]["id"].value<std::string>();
      if (id) found[*id].push_back(file);
    }
  }
  return found;
}

void overrideFault(const Tank& tank, const std::string& what, const std::string& id,
                   const std::vector<std::string>& known, Faults& faults) {
  faults.push_back({.code = "unknown_" + what,
                    .subject = "tank " + tank.id,
                    .detail = fmt::format("tank {} overrides {} \"{}\"; recipe {} has: {}{}", tank.id, what,
                                          id, tank.recipeId, listed(known), didYouMean(id, known)),
                    .where = tank.where});
}

void checkOverrides(const Tank& tank, const Recipe& recipe, Faults& faults) {
  std::vector<std::string> channels, solids;
  for (const Channel& channel : recipe.channels) channels.push_back(channel.id);
  for (const auto& solid : recipe.system.solids) solids.push_back(solid.id);
  for (const auto& [id, override] : tank.channels) {
    if (recipe.channel(id) == nullptr) overrideFault(tank, "channel", id, channels, faults);
  }
  for (const auto& [id, override] : tank.watch) {
    if (std::find(solids.begin(), solids.end(), id) == solids.end())
      overrideFault(tank, "solid", id, solids, faults);
  }
  for (const Channel& channel : recipeForTank(recipe, tank).channels) {
    if (channel.low <= channel.target && channel.target <= channel.high &&
        channel.plausibleLow <= channel.low && channel.high <= channel.plausibleHigh) {
      continue;
    }
    faults.push_back(
        {.code = "bad_window",
         .subject = "tank " + tank.id,
         .detail = fmt::format("channel {} would have low {}, target {}, high {}; expected low <= target "
                               "<= high inside {} to {}",
                               channel.id, channel.low, channel.target, channel.high, channel.plausibleLow,
                               channel.plausibleHigh),
         .where = tank.where});
  }
}

}  // namespace

Line readLine(TableReader& reader) {
  Line line;
  line.id = reader.requiredText("id");
  if (!line.id.empty()) {
    reader.setSubject(fmt::format("line {}", line.id));
    checkId(reader, "id", line.id);
  }
  line.title = reader.text("title", line.id);
  reader.require("tank");
  for (TableReader& tank : reader.tables("tank")) line.tanks.push_back(readTank(tank, line.id));
  reader.allowRemarks();
  reader.finish();
  return line;
}

model::Result<std::map<std::string, Recipe>, Faults> loadShopRecipes(const Shop& shop) {
  const auto files = recipeFiles(shop);
  std::vector<std::string> known;
  for (const auto& [id, paths] : files) known.push_back(id);
  std::map<std::string, Recipe> recipes;
  std::set<std::string> failed;
  Faults faults;
  for (const Line& line : shop.lines) {
    for (const Tank& tank : line.tanks) {
      const auto found = files.find(tank.recipeId);
      if (found == files.end()) {
        faults.push_back(
            {.code = "unknown_recipe",
             .subject = "tank " + tank.id,
             .detail = fmt::format("recipe is \"{}\"; the shop's folders have: {}{}", tank.recipeId,
                                   listed(known), didYouMean(tank.recipeId, known)),
             .where = tank.where});
        continue;
      }
      if (failed.contains(tank.recipeId)) continue;
      if (found->second.size() > 1) {
        faults.push_back({.code = "duplicate",
                          .subject = tank.recipeId,
                          .detail = fmt::format("two files have the recipe {}; the other is {}",
                                                tank.recipeId, found->second[0].string()),
                          .where = found->second[1].string()});
        failed.insert(tank.recipeId);
        continue;
      }
      if (!recipes.contains(tank.recipeId)) {
        auto recipe = loadRecipe(found->second.front(), shop.constants);
        if (!recipe) {
          faults.insert(faults.end(), recipe.error().begin(), recipe.error().end());
          failed.insert(tank.recipeId);
          continue;
        }
        recipes.emplace(tank.recipeId, *std::move(recipe));
      }
      checkOverrides(tank, recipes.at(tank.recipeId), faults);
    }
  }
  if (!faults.empty()) return model::fail(sortedFaults(std::move(faults)));
  return recipes;
}

Recipe recipeForTank(const Recipe& recipe, const Tank& tank) {
  Recipe own = recipe;
  own.volume_L = tank.volume_L.value_or(own.volume_L);
  for (const auto& [kind, limit] : tank.limits) own.limits[static_cast<std::size_t>(kind)] = limit;
  for (Channel& channel : own.channels) {
    const auto found = tank.channels.find(channel.id);
    if (found == tank.channels.end()) continue;
    channel.low = found->second.low.value_or(channel.low);
    channel.target = found->second.target.value_or(channel.target);
    channel.high = found->second.high.value_or(channel.high);
    if (found->second.every_h) channel.every_h = found->second.every_h;
  }
  for (auto& solid : own.system.solids) {
    const auto found = tank.watch.find(solid.id);
    if (found != tank.watch.end()) solid.threshold = found->second.threshold.value_or(solid.threshold);
  }
  return own;
}

}  // namespace tw::io
