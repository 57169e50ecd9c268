// SPDX-License-Identifier: GPL-3.0-or-later
// The shop as the service works with it: every tank with its own recipe (overrides applied) and what is
// derived from that once. Built at start, then only read: safe to share between threads.
#pragma once

#include <map>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "io/recipe/shop.hpp"

namespace tw::monitor {

struct TankSetup {
  io::Tank tank;
  std::string lineTitle;
  io::Recipe recipe;                              ///< recipeForTank
  std::vector<std::string> needed;                ///< channel ids a liquor cannot do without
  std::optional<model::LiquorReport> atTarget;    ///< of the target composition; nullopt when it has none
  [[nodiscard]] double volume_L() const { return tank.volume_L.value_or(recipe.volume_L); }
};

class Plant {
 public:
  /// `recipes` by recipe id, as loadShopRecipes gives them; a tank whose recipe is missing there is a bug.
  Plant(io::Shop shop, const std::map<std::string, io::Recipe>& recipes);

  [[nodiscard]] const io::Shop& shop() const { return m_shop; }
  /// In shop order.
  [[nodiscard]] const std::vector<std::unique_ptr<const TankSetup>>& tanks() const { return m_tanks; }
  /// nullptr when the shop has no such tank.
  [[nodiscard]] const TankSetup* tank(const std::string& id) const;

 private:
  io::Shop m_shop;
  std::vector<std::unique_ptr<const TankSetup>> m_tanks;
  std::map<std::string, const TankSetup*> m_byId;
};

/// A canonical value in the channel's own unit, rounded to twelve digits: the way there and back must not
/// show as 15.400000000000002. Far finer than the 1e-9 within which two values are the same reading.
[[nodiscard]] double inUnit(const io::Channel& channel, double canonical);

/// Standard uncertainty of a channel's value x, in the channel's unit (u^2 = (sigma_rel x)^2 + sigma_abs^2).
[[nodiscard]] double uncertainty(const io::Channel& channel, double x);

}  // namespace tw::monitor
