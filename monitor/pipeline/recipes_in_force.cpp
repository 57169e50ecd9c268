// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/recipes_in_force.hpp"

#include <fmt/format.h>

namespace tw::monitor {
namespace {

model::Result<model::Done> putInForce(const TankSetup& setup, io::Store& store, io::Instant since,
                                      const std::string& person, const std::string& reason) {
  io::RecipeInForce row;
  row.tank = setup.tank.id;
  row.recipeId = setup.recipe.id;
  row.sha256 = setup.recipe.resolvedSha256;
  row.since = since;
  row.by = person;
  row.reason = reason;
  return store.setRecipeInForce(row);
}

model::Fault changed(const TankSetup& setup, const io::RecipeInForce& inForce) {
  return {"recipe_changed", setup.tank.id,
          fmt::format("tank {}: recipe '{}' resolves to {}, but {} has been in force since {}; take it into "
                      "use with `tankward adopt --config FILE --tank {}`, or restore the file",
                      setup.tank.id, setup.recipe.id, setup.recipe.resolvedSha256, inForce.sha256,
                      io::toRfc3339(inForce.since), setup.tank.id),
          setup.recipe.file.string()};
}

}  // namespace

model::Result<model::Done> registerRecipes(const Plant& plant, io::Store& store, io::Instant now) {
  return store.transaction([&](io::Store& within) -> model::Result<model::Done> {
    for (const auto& setup : plant.tanks()) {
      const io::Recipe& recipe = setup->recipe;
      const auto inForce = within.recipeInForce(setup->tank.id, now);
      if (!inForce) return model::fail(inForce.error());
      if (*inForce) {
        if ((*inForce)->sha256 != recipe.resolvedSha256) return model::fail(changed(*setup, **inForce));
        continue;
      }
      const auto put = within.putRecipe(recipe.resolvedSha256, recipe.id, recipe.resolvedJson);
      if (!put) return put;
      const auto taken = putInForce(*setup, within, io::Instant{}, "", "first recipe of this tank");
      if (!taken) return taken;
    }
    return model::Done{};
  });
}

model::Result<bool> adoptRecipe(const Plant& plant, io::Store& store, const std::string& tank,
                                const std::string& person, const std::string& reason, io::Instant now) {
  const TankSetup* setup = plant.tank(tank);
  if (setup == nullptr) {
    return model::fail(model::Fault{"unknown_tank", tank, fmt::format("the shop has no tank '{}'", tank), ""});
  }
  bool fresh = false;
  const auto done = store.transaction([&](io::Store& within) -> model::Result<model::Done> {
    const auto inForce = within.recipeInForce(tank, now);
    if (!inForce) return model::fail(inForce.error());
    if (*inForce && (*inForce)->sha256 == setup->recipe.resolvedSha256) return model::Done{};
    fresh = true;
    const io::Recipe& recipe = setup->recipe;
    const auto put = within.putRecipe(recipe.resolvedSha256, recipe.id, recipe.resolvedJson);
    if (!put) return put;
    return putInForce(*setup, within, *inForce ? now : io::Instant{}, person, reason);
  });
  if (!done) return model::fail(done.error());
  return fresh;
}

}  // namespace tw::monitor
