// SPDX-License-Identifier: GPL-3.0-or-later
// What every command that works on a shop begins with.
#pragma once

#include <filesystem>
#include <map>
#include <memory>
#include <string>

#include "io/recipe/shop.hpp"
#include "io/store/store.hpp"
#include "model/result.hpp"

namespace tw::monitor::cli {

struct OpenedShop {
  io::Shop shop;
  std::map<std::string, io::Recipe> recipes;  ///< by recipe id
};

/// The shop file and every recipe its tanks use.
model::Result<OpenedShop, model::Faults> openShop(const std::filesystem::path& config);

/// The store, held by this process alone (a running service answers `store_locked`).
struct HeldStore {
  io::StoreLock lock;
  std::unique_ptr<io::Store> store;
};
model::Result<HeldStore> holdStore(const io::Shop& shop);

}  // namespace tw::monitor::cli
