// SPDX-License-Identifier: GPL-3.0-or-later
// [bath], [limits], and the small checks that several tables share.
#include <fmt/format.h>

#include "io/recipe/cautions.hpp"
#include "io/recipe/recipe_draft.hpp"
#include "io/recipe/suggestion.hpp"

namespace tw::io {
namespace {

const Choices<model::ActivityModel> kActivityModels = {{"conditional", model::ActivityModel::Conditional},
                                                       {"davies", model::ActivityModel::Davies},
                                                       {"sit", model::ActivityModel::Sit}};
const Choices<bool> kPhTakenAtSample = {{"bath", false}, {"sample", true}};
const Choices<std::string> kConfidences = {{"published", "published"}, {"calibrate", "calibrate"}};

constexpr double kColdest_C = 0.0, kHottest_C = 100.0;  // liquid water, as far as Kw and density reach

bool isLetter(char c) { return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z'); }

void readChemistry(TableReader& bath, Draft& draft) {
  model::ChemicalSystem& system = draft.recipe.system;
  bath.require("activity_model");
  system.activityModel = bath.choice("activity_model", kActivityModels).value_or(system.activityModel);
  system.waterActivity = bath.flag("water_activity", false);
  if (system.waterActivity && system.activityModel != model::ActivityModel::Sit) {
    bath.fault("water_activity", "not_used",
               "water_activity is true; only activity_model = \"sit\" knows it");
  }
  system.water_kg_L = bath.positive("water_kg_L");
  system.phTakenAtSample = bath.choice("ph_taken_at", kPhTakenAtSample).value_or(false);
  const auto sample_C = bath.number("sample_temperature_C");
  if (sample_C && (*sample_C < kColdest_C || *sample_C > kHottest_C)) {
    bath.fault(
        "sample_temperature_C", "out_of_range",
        fmt::format("sample_temperature_C is {}; expected {} to {}", *sample_C, kColdest_C, kHottest_C));
  }
  if (system.phTakenAtSample) draft.recipe.sampleTemperature_C = sample_C;
  for (const std::string& word : bath.texts("margins_off")) {
    if (const auto kind = model::marginKind(word)) {
      system.marginsOff.push_back(*kind);
    } else {
      bath.fault("margins_off", "unknown_value",
                 fmt::format("margins_off names \"{}\"; expected some of: {}{}", word, listed(marginNames()),
                             didYouMean(word, marginNames())));
    }
  }
}

}  // namespace

std::vector<std::string> marginNames() {
  std::vector<std::string> names;
  for (std::size_t i = 0; i < model::kMarginCount; ++i)
    names.emplace_back(name(static_cast<model::MarginKind>(i)));
  return names;
}

void readBath(TableReader& document, Draft& draft) {
  document.require("bath");
  auto bath = document.table("bath");
  if (!bath) return;
  Recipe& recipe = draft.recipe;
  recipe.id = bath->requiredText("id");
  if (!recipe.id.empty()) checkId(*bath, "id", recipe.id);
  recipe.title = bath->requiredText("title");
  recipe.metal = bath->requiredText("metal");
  draft.ligands = bath->texts("ligands");
  recipe.sets = bath->texts("sets");
  if (recipe.sets.empty()) recipe.sets = {kDefaultSet};
  bath->require("volume_L");
  recipe.volume_L = bath->positive("volume_L").value_or(0.0);
  recipe.maxReadingAge_h = bath->positive("max_reading_age_h").value_or(recipe.maxReadingAge_h);
  recipe.horizon_h = bath->positive("horizon_h").value_or(recipe.horizon_h);
  readChemistry(*bath, draft);
  recipe.unreliableBecause = bath->text("unreliable_because", "");
  recipe.confidence = bath->choice("confidence", kConfidences).value_or(recipe.confidence);
  recipe.hazards = bath->texts("hazards");
  checkCautions(*bath, "hazards", recipe.hazards);
  draft.exclude = bath->texts("exclude");
  bath->allowRemarks();
  bath->finish();
}

void readLimits(TableReader& document, Draft& draft) {
  auto limits = document.table("limits");
  if (!limits) return;
  for (std::size_t i = 0; i < model::kMarginCount; ++i) {
    draft.recipe.limits[i] = readLimit(*limits, name(static_cast<model::MarginKind>(i)));
  }
  limits->allowRemarks();
  limits->finish();
}

std::optional<model::MarginLimit> readLimit(TableReader& parent, const std::string& key, bool rising) {
  auto table = parent.table(key);
  if (!table) return std::nullopt;
  const model::MarginLimit limit{.caution = table->requiredNumber("caution"),
                                 .act = table->requiredNumber("act")};
  const bool ordered = rising ? limit.caution < limit.act : limit.act < limit.caution;
  if (table->has("caution") && table->has("act") && !ordered) {
    table->fault("act", "bad_limit",
                 fmt::format("act is {}, caution is {}; expected act {} caution", limit.act, limit.caution,
                             rising ? "above" : "below"));
  }
  table->finish();
  return limit;
}

std::optional<model::Guard> readGuard(TableReader& parent, const std::string& id) {
  auto table = parent.table("guard");
  if (!table) return std::nullopt;
  model::Guard guard{.id = id, .cautionLow = {}, .actLow = {}, .cautionHigh = {}, .actHigh = {}};
  guard.actLow = table->number("act_low");
  guard.cautionLow = table->number("caution_low");
  guard.cautionHigh = table->number("caution_high");
  guard.actHigh = table->number("act_high");
  std::optional<double> before;
  for (const auto& bound : {guard.actLow, guard.cautionLow, guard.cautionHigh, guard.actHigh}) {
    if (!bound) continue;
    if (before && *bound <= *before) {
      table->fault(
          "", "bad_limit",
          fmt::format("guard goes from {} to {}; expected act_low < caution_low < caution_high < act_high",
                      *before, *bound));
    }
    before = bound;
  }
  table->finish();
  return guard;
}

void checkWindow(TableReader& reader, double low, double target, double high) {
  if (low <= target && target <= high && low < high) return;
  reader.fault("target", "bad_window",
               fmt::format("low {}, target {}, high {}; expected low <= target <= high", low, target, high));
}

void checkId(TableReader& reader, const std::string& key, const std::string& id) {
  bool fits = !id.empty() && isLetter(id.front());
  for (const char c : id) fits = fits && (isLetter(c) || (c >= '0' && c <= '9') || c == '-' || c == '_');
  if (fits) return;
  reader.fault(key, "bad_id",
               fmt::format("{} is \"{}\"; expected a letter, then letters, digits, - and _", key, id));
}

void checkCautions(TableReader& reader, const std::string& key, const std::vector<std::string>& keys) {
  for (const std::string& word : keys) {
    if (findCaution(word) != nullptr) continue;
    reader.fault(key, "unknown_caution",
                 fmt::format("{} names \"{}\"; expected some of: {}{}", key, word, listed(cautionKeys()),
                             didYouMean(word, cautionKeys())));
  }
}

}  // namespace tw::io
