// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/plant.hpp"

#include <array>
#include <charconv>
#include <cmath>
#include <utility>

#include "model/analysis.hpp"

namespace tw::monitor {
namespace {

std::optional<model::LiquorReport> analyseTarget(const io::Recipe& recipe) {
  const auto input = io::liquorInput(recipe, io::targetValues(recipe));
  if (!input) return std::nullopt;
  auto report = model::analyse(recipe.system, *input);
  if (!report) return std::nullopt;
  return std::move(*report);
}

}  // namespace

Plant::Plant(io::Shop shop, const std::map<std::string, io::Recipe>& recipes) : m_shop(std::move(shop)) {
  for (const io::Line& line : m_shop.lines) {
    for (const io::Tank& tank : line.tanks) {
      auto setup = std::make_unique<TankSetup>();
      setup->tank = tank;
      setup->tank.lineId = line.id;
      setup->lineTitle = line.title;
      setup->recipe = io::recipeForTank(recipes.at(tank.recipeId), tank);
      setup->needed = io::neededChannels(setup->recipe);
      setup->atTarget = analyseTarget(setup->recipe);
      m_byId[tank.id] = setup.get();
      m_tanks.push_back(std::move(setup));
    }
  }
}

const TankSetup* Plant::tank(const std::string& id) const {
  const auto at = m_byId.find(id);
  return at == m_byId.end() ? nullptr : at->second;
}

double inUnit(const io::Channel& channel, double canonical) {
  constexpr int kDigits = 12;
  const double x = io::fromCanonical(channel, canonical);
  if (x == 0.0 || !std::isfinite(x)) return x;
  // Through text: only a decimal reader gives back the double that is meant.
  std::array<char, 32> text{};
  const auto [end, error] =
      std::to_chars(text.data(), text.data() + text.size(), x, std::chars_format::scientific, kDigits - 1);
  double rounded = x;
  if (error == std::errc{}) std::from_chars(text.data(), end, rounded);
  return rounded;
}

double uncertainty(const io::Channel& channel, double x) {
  return std::hypot(channel.sigmaRel * x, channel.sigmaAbs);
}

}  // namespace tw::monitor
