// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/cli/open_shop.hpp"

namespace tw::monitor::cli {

model::Result<OpenedShop, model::Faults> openShop(const std::filesystem::path& config) {
  auto shop = io::loadShop(config);
  if (!shop) return model::fail(shop.error());
  auto recipes = io::loadShopRecipes(*shop);
  if (!recipes) return model::fail(recipes.error());
  return OpenedShop{std::move(*shop), std::move(*recipes)};
}

model::Result<HeldStore> holdStore(const io::Shop& shop) {
  auto lock = io::StoreLock::take(shop.dataDir);
  if (!lock) return model::fail(lock.error());
  auto store = io::openStore(shop.dataDir, io::StoreMode::ReadWrite);
  if (!store) return model::fail(store.error());
  return HeldStore{std::move(*lock), std::move(*store)};
}

}  // namespace tw::monitor::cli
