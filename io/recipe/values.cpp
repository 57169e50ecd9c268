// SPDX-License-Identifier: GPL-3.0-or-later
// From channel values to what the solver takes, and back.
#include <fmt/format.h>

#include <cmath>

#include "io/recipe/recipe.hpp"
#include "io/recipe/units.hpp"

namespace tw::io {
namespace {

using model::Fault;
using model::Faults;

/// A channel's value in the mass or amount that a ratio compares; nullopt when it has none.
std::optional<double> comparable(const Channel& channel, double canonical, bool byMole) {
  if (byMole) return channel.canonicalUnit == "mol/L" ? std::optional(canonical) : std::nullopt;
  if (channel.canonicalUnit == "g/L") return canonical;
  if (channel.canonicalUnit == "mol/L" && channel.formulaMass > 0.0) return canonical * channel.formulaMass;
  return std::nullopt;
}

Fault missing(const Recipe& recipe, const std::string& id) {
  const Channel* channel = recipe.channel(id);
  return {.code = "missing_channel",
          .subject = id,
          .detail = fmt::format("the value of {}{} is missing", id,
                                channel != nullptr ? " (" + channel->unit + ")" : std::string()),
          .where = {}};
}

}  // namespace

model::Result<double> toCanonical(const Channel& channel, double value, const std::string& unit) {
  auto converted =
      convert(value, unit.empty() ? channel.unit : unit, channel.canonicalUnit, channel.formulaMass);
  if (converted) return converted;
  return model::fail(
      Fault{.code = "unit_mismatch",
            .subject = channel.id,
            .detail = fmt::format("{} in \"{}\": {}; expected {}", channel.id,
                                  unit.empty() ? channel.unit : unit, converted.error().detail, channel.unit),
            .where = {}});
}

double fromCanonical(const Channel& channel, double canonical) {
  const auto value = convert(canonical, channel.canonicalUnit, channel.unit, channel.formulaMass);
  return value ? *value : std::nan("");
}

std::vector<std::string> neededChannels(const Recipe& recipe) {
  std::vector<std::string> needed;
  for (const ComponentSource& source : recipe.sources) {
    if (source.channel) needed.push_back(*source.channel);
  }
  needed.emplace_back("temperature");
  return needed;
}

model::Result<model::LiquorInput, Faults> liquorInput(const Recipe& recipe, const ChannelValues& values) {
  Faults faults;
  for (const std::string& id : neededChannels(recipe)) {
    if (!values.contains(id)) faults.push_back(missing(recipe, id));
  }
  if (!faults.empty()) return model::fail(std::move(faults));
  model::LiquorInput input;
  input.temperature_C = values.at("temperature");
  if (recipe.system.phTakenAtSample) {
    const auto sample = values.find("sample_temperature");
    input.sampleTemperature_C =
        sample != values.end() ? std::optional(sample->second) : recipe.sampleTemperature_C;
    if (!input.sampleTemperature_C) return model::fail(Faults{missing(recipe, "sample_temperature")});
  }
  for (const ComponentSource& source : recipe.sources) {
    input.value.push_back(source.channel ? values.at(*source.channel) : source.mol_L.value_or(0.0));
  }
  return input;
}

ChannelValues targetValues(const Recipe& recipe) {
  ChannelValues values;
  for (const Channel& channel : recipe.channels) {
    if (const auto canonical = toCanonical(channel, channel.target)) values[channel.id] = *canonical;
  }
  return values;
}

std::vector<RatioValue> ratioValues(const Recipe& recipe, const ChannelValues& values) {
  std::vector<RatioValue> found;
  for (const Ratio& ratio : recipe.ratios) {
    const Channel* of = recipe.channel(ratio.of);
    const Channel* to = recipe.channel(ratio.to);
    if (of == nullptr || to == nullptr || !values.contains(ratio.of) || !values.contains(ratio.to)) continue;
    const auto above = comparable(*of, values.at(ratio.of), ratio.byMole);
    const auto below = comparable(*to, values.at(ratio.to), ratio.byMole);
    if (above && below && *below != 0.0) found.push_back({&ratio, *above / *below});
  }
  return found;
}

std::vector<model::GuardValue> guardValues(const Recipe& recipe, const ChannelValues& values) {
  std::vector<model::GuardValue> found;
  for (const Channel& channel : recipe.channels) {
    const auto value = values.find(channel.id);
    if (!channel.guard || value == values.end()) continue;
    found.push_back(
        {.guard = *channel.guard, .value = fromCanonical(channel, value->second), .target = channel.target});
  }
  for (const RatioValue& ratio : ratioValues(recipe, values)) {
    if (!ratio.ratio->guard) continue;
    found.push_back({.guard = *ratio.ratio->guard, .value = ratio.value, .target = ratio.ratio->target});
  }
  return found;
}

}  // namespace tw::io
