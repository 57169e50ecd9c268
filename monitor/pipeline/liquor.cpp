// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/liquor.hpp"

#include <algorithm>
#include <utility>

#include <nlohmann/json.hpp>

#include "io/wire/solve_json.hpp"
#include "model/analysis.hpp"

namespace tw::monitor {
namespace {

constexpr const char* kSampleTemperature = "sample_temperature";

bool tooOld(const io::Channel& channel, io::Instant sampledAt, io::Instant at) {
  const std::chrono::duration<double, std::ratio<3600>> age = at - sampledAt;
  return age.count() > channel.maxAge_h;
}

bool ofAnotherSample(const std::map<std::string, io::Reading>& newest, const io::Reading& temperature) {
  const auto ph = newest.find("ph");
  return ph == newest.end() || ph->second.sampledAt.at != temperature.sampledAt.at;
}

}  // namespace

io::ChannelValues LiquorPick::values() const {
  io::ChannelValues values;
  for (const auto& [channel, reading] : used) values[channel] = reading.value.value();
  return values;
}

std::vector<std::int64_t> LiquorPick::ids() const {
  std::vector<std::int64_t> ids;
  for (const auto& [channel, reading] : used) ids.push_back(reading.id);
  std::sort(ids.begin(), ids.end());
  return ids;
}

LiquorPick pickLiquor(const TankSetup& setup, const std::map<std::string, io::Reading>& newest,
                      io::Instant at) {
  LiquorPick pick;
  pick.tank = setup.tank.id;
  pick.at = at;
  for (const io::Channel& channel : setup.recipe.channels) {
    const auto found = newest.find(channel.id);
    const bool needed =
        std::find(setup.needed.begin(), setup.needed.end(), channel.id) != setup.needed.end();
    const bool present = found != newest.end() && found->second.value.has_value();
    if (!present) {
      if (needed) pick.lacking.push_back({channel.id, false});
      continue;
    }
    if (tooOld(channel, found->second.sampledAt.at, at)) {
      if (needed) pick.lacking.push_back({channel.id, true});
      continue;
    }
    if (channel.id == kSampleTemperature && ofAnotherSample(newest, found->second)) continue;
    pick.used.emplace(channel.id, found->second);
  }
  return pick;
}

model::Result<SolvedLiquor> solveValues(const TankSetup& setup, const io::ChannelValues& values) {
  const auto input = io::liquorInput(setup.recipe, values);
  if (!input) return model::fail(input.error().front());
  auto report = model::analyse(setup.recipe.system, *input);
  if (!report) return model::fail(report.error());
  SolvedLiquor solved;
  solved.report = std::move(*report);
  solved.guards = io::guardValues(setup.recipe, values);
  solved.judgement =
      model::judge(setup.recipe.system, solved.report, setup.recipe.limits, solved.guards);
  return solved;
}

model::Result<io::ResultRow> solveLiquor(const TankSetup& setup, const LiquorPick& pick,
                                         io::Instant computedAt) {
  const io::ChannelValues values = pick.values();
  const auto solved = solveValues(setup, values);
  if (!solved) return model::fail(solved.error());
  const model::LiquorReport& report = solved->report;

  io::ResultRow row;
  row.tank = pick.tank;
  row.sampledAt = pick.at;
  row.computedAt = computedAt;
  row.recipeSha256 = setup.recipe.resolvedSha256;
  row.programVersion = TW_VERSION;
  row.condition = model::name(solved->judgement.condition);
  row.doubtful = solved->judgement.doubtful;
  row.reliable = report.reliable;
  row.pM = report.pM;
  row.ph = report.ph;
  row.temperature_C = report.temperature_C;
  row.ionicStrength = report.ionicStrength_mol_L;
  if (setup.atTarget) {
    row.bed = model::bed(report, *setup.atTarget, setup.recipe.limits, solved->guards);
  }
  for (std::size_t i = 0; i < model::kMarginCount; ++i) {
    const auto& margin = report.margins[i].smallest;
    if (margin) row.margins[model::name(static_cast<model::MarginKind>(i))] = margin->judged();
  }
  row.values = valuesJson(setup.recipe, values);
  row.json = io::wire::solveJson(setup.recipe, report, solved->judgement, {}, -1);
  row.readings = pick.ids();
  return row;
}

std::string valuesJson(const io::Recipe& recipe, const io::ChannelValues& values) {
  nlohmann::json json = nlohmann::json::object();
  for (const auto& [id, canonical] : values) {
    if (const io::Channel* channel = recipe.channel(id)) json[id] = inUnit(*channel, canonical);
  }
  for (const io::RatioValue& ratio : io::ratioValues(recipe, values)) json[ratio.ratio->id] = ratio.value;
  return json.dump();
}

}  // namespace tw::monitor
