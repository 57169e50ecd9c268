// SPDX-License-Identifier: GPL-3.0-or-later
// [[channel]] with its worksheet, the channels that always exist, [[ratio]].
#include <fmt/format.h>

#include <algorithm>
#include <functional>
#include <map>

#include "io/recipe/recipe_draft.hpp"
#include "io/recipe/suggestion.hpp"
#include "io/recipe/units.hpp"
#include "io/recipe/worksheet.hpp"

namespace tw::io {
namespace {

using model::SetBy;

/// g/mol of OH^-, in which caustic is quoted unless as_formula_mass says otherwise (IUPAC 2021: 15.999
/// + 1.008).
constexpr double kHydroxideMass = 17.007;

const Choices<bool> kRatioBy = {{"mole", true}, {"mass", false}};

struct ChannelReader {
  TableReader reader;
  std::size_t index = 0;
};

bool isTemperatureId(const std::string& id) { return id == "temperature" || id == "sample_temperature"; }

/// Column heads of drop files that are no channels (FORMATS section 5).
bool isColumnName(const std::string& id) {
  static const std::set<std::string> names = {"time",  "tank",  "operator", "channel", "value", "unit",
                                              "event", "stock", "amount",   "lot",     "note"};
  return names.contains(id);
}

std::string readUnit(TableReader& reader, const std::string& key) {
  const std::string unit = reader.text(key, "");
  if (findUnit(unit)) return unit;
  reader.fault(key, "unit_unknown", fmt::format("{} is \"{}\"; expected one of: {}", key, unit, unitNames()));
  return unit;
}

WorksheetInput readInput(TableReader& reader) {
  WorksheetInput input;
  input.id = reader.requiredText("id");
  if (!input.id.empty()) {
    checkId(reader, "id", input.id);
    reader.setSubject(reader.subject() + " " + input.id);
  }
  input.title = reader.text("title", input.id);
  input.unit = readUnit(reader, "unit");
  if (const auto plausible = reader.interval("plausible")) {
    input.plausibleLow = plausible->first;
    input.plausibleHigh = plausible->second;
  }
  input.defaultValue = reader.number("default");
  input.repeatability = reader.notNegative("repeatability").value_or(0.0);
  reader.allowRemarks();
  reader.finish();
  return input;
}

std::optional<Worksheet> readWorksheet(TableReader& channel) {
  auto reader = channel.table("worksheet");
  if (!reader) return std::nullopt;
  Worksheet sheet;
  sheet.title = reader->text("title", "");
  sheet.expression = reader->requiredText("value");
  sheet.titrant = reader->text("titrant", "");
  std::vector<std::string> names;
  for (TableReader& input : reader->tables("inputs")) {
    sheet.inputs.push_back(readInput(input));
    names.push_back(sheet.inputs.back().id);
  }
  if (auto constants = reader->table("constants")) {
    for (const std::string& name : constants->keys()) {
      auto constant = constants->table(name);
      if (!constant) continue;
      names.push_back(name);
      sheet.constants.push_back(
          {.name = name, .unit = readUnit(*constant, "unit"), .value = constant->requiredNumber("value")});
      constant->allowRemarks();
      constant->finish();
    }
  }
  std::sort(names.begin(), names.end());
  if (const auto twice = std::adjacent_find(names.begin(), names.end()); twice != names.end()) {
    reader->fault("inputs", "duplicate", fmt::format("\"{}\" stands twice in the worksheet", *twice));
  }
  if (!sheet.titrant.empty() && std::find(names.begin(), names.end(), sheet.titrant) == names.end()) {
    reader->fault("titrant", "unknown_name",
                  fmt::format("titrant is \"{}\"; expected one of: {}{}", sheet.titrant, listed(names),
                              didYouMean(sheet.titrant, names)));
  }
  sheet.steps = reader->texts("steps");
  sheet.cautions = reader->texts("caution");
  checkCautions(*reader, "caution", sheet.cautions);
  reader->allowRemarks();
  reader->finish();
  return sheet;
}

/// Which component reads the channel, if any.
std::optional<model::ComponentIndex> readerOf(const Draft& draft, const std::string& channelId) {
  const auto& sources = draft.recipe.sources;
  for (std::size_t i = 0; i < sources.size(); ++i) {
    if (sources[i].channel == channelId) return i;
  }
  return std::nullopt;
}

bool hasDimensionOf(const std::string& unit, const std::string& pattern) {
  const auto given = findUnit(unit);
  return given && given->dimension == findUnit(pattern)->dimension;
}

void mismatch(TableReader& reader, const Channel& channel, const std::string& expected) {
  if (!findUnit(channel.unit)) return;  // reported already
  reader.fault("unit", "unit_mismatch",
               fmt::format("unit of {} is \"{}\"; expected {}", channel.id, channel.unit, expected));
}

/// Sets what the store keeps, and how grams become moles.
void settleUnits(TableReader& reader, const Draft& draft, Channel& channel,
                 std::optional<double> asFormulaMass) {
  const auto index = readerOf(draft, channel.id);
  const model::Component* component = index ? &draft.recipe.system.components[*index] : nullptr;
  if (component != nullptr) {
    channel.formulaMass = component->setBy == SetBy::Hydroxide ? kHydroxideMass : component->molarMass;
  }
  channel.formulaMass = asFormulaMass.value_or(channel.formulaMass);
  const bool isMass = hasDimensionOf(channel.unit, "g/L");
  const bool isAmount = hasDimensionOf(channel.unit, "mol/L");
  channel.canonicalUnit = channel.unit;
  if (isTemperatureId(channel.id) && !hasDimensionOf(channel.unit, "degC"))
    mismatch(reader, channel, "degC, degF or K");
  if (hasDimensionOf(channel.unit, "degC")) channel.canonicalUnit = "degC";
  if (channel.id == "ph" && channel.unit != "pH") mismatch(reader, channel, "pH");
  if (isAmount || (isMass && channel.formulaMass > 0.0)) {
    channel.canonicalUnit = "mol/L";
  } else if (isMass) {
    channel.canonicalUnit = "g/L";
  }
  if (component == nullptr) return;
  if (component->setBy == SetBy::Ph) {
    if (channel.unit != "pH") mismatch(reader, channel, "pH");
  } else if (!isMass && !isAmount) {
    mismatch(reader, channel,
             fmt::format("a concentration, such as g/L, for component {}", component->formula));
  } else if (channel.canonicalUnit != "mol/L") {
    mismatch(reader, channel,
             fmt::format("mol/L, or a molar_mass for {} or as_formula_mass here", component->formula));
  }
}

void readChannel(TableReader& reader, Draft& draft) {
  Channel channel;
  channel.id = reader.requiredText("id");
  if (!channel.id.empty()) {
    reader.setSubject(fmt::format("channel {}", channel.id));
    checkId(reader, "id", channel.id);
    if (isColumnName(channel.id)) {
      reader.fault("id", "bad_id",
                   fmt::format("\"{}\" heads a column of drop files and names no channel", channel.id));
    }
    if (draft.channelIndex(channel.id)) {
      reader.fault("id", "duplicate", fmt::format("channel {} stands twice", channel.id));
    }
  }
  channel.title = reader.text("title", channel.id);
  reader.require("unit");
  channel.unit = readUnit(reader, "unit");
  channel.low = reader.requiredNumber("low");
  channel.target = reader.requiredNumber("target");
  channel.high = reader.requiredNumber("high");
  reader.require("plausible");
  const auto plausible = reader.interval("plausible");
  const bool windowGiven = reader.has("low") && reader.has("target") && reader.has("high");
  if (windowGiven) checkWindow(reader, channel.low, channel.target, channel.high);
  if (plausible) {
    channel.plausibleLow = plausible->first;
    channel.plausibleHigh = plausible->second;
    if (windowGiven && (channel.low < channel.plausibleLow || channel.high > channel.plausibleHigh)) {
      reader.fault("plausible", "bad_window",
                   fmt::format("plausible is [{}, {}], the window {} to {}; expected the window inside",
                               channel.plausibleLow, channel.plausibleHigh, channel.low, channel.high));
    }
  }
  channel.sigmaRel = reader.notNegative("sigma_rel").value_or(0.0);
  channel.sigmaAbs = reader.notNegative("sigma_abs").value_or(0.0);
  channel.every_h = reader.positive("every_h");
  channel.maxAge_h = reader.positive("max_age_h").value_or(draft.recipe.maxReadingAge_h);
  channel.guard = readGuard(reader, channel.id);
  settleUnits(reader, draft, channel, reader.positive("as_formula_mass"));
  channel.worksheet = readWorksheet(reader);
  reader.allowRemarks();
  reader.finish();
  draft.recipe.channels.push_back(std::move(channel));
}

/// A channel that the recipe need not declare: the whole range is its window, so it never stands out.
void addImplicit(Draft& draft, const std::string& id, const std::string& title, const std::string& unit,
                 double low, double target, double high) {
  if (draft.channelIndex(id)) return;
  Channel channel;
  channel.id = id;
  channel.title = title;
  channel.unit = channel.canonicalUnit = unit;
  channel.low = channel.plausibleLow = low;
  channel.target = target;
  channel.high = channel.plausibleHigh = high;
  channel.maxAge_h = draft.recipe.maxReadingAge_h;
  draft.recipe.channels.push_back(std::move(channel));
}

void addImplicitChannels(TableReader& document, Draft& draft) {
  const double sample_C = draft.recipe.sampleTemperature_C.value_or(25.0);
  addImplicit(draft, "ph", "pH", "pH", 0.0, 7.0, 14.0);
  addImplicit(draft, "temperature", "Temperature", "degC", 0.0, 25.0, 100.0);
  if (!draft.recipe.system.phTakenAtSample) return;
  const bool declared = draft.channelIndex("sample_temperature").has_value();
  if (!declared && !draft.recipe.sampleTemperature_C) {
    if (auto bath = document.table("bath")) {
      bath->fault("ph_taken_at", "missing_key",
                  "ph_taken_at is \"sample\"; expected sample_temperature_C or a channel sample_temperature");
    }
  }
  addImplicit(draft, "sample_temperature", "Sample temperature", "degC", 0.0, sample_C, 100.0);
}

void checkComponentChannels(Draft& draft) {
  std::map<std::string, std::string> takenBy;
  for (std::size_t i = 0; i < draft.recipe.sources.size(); ++i) {
    const auto& source = draft.recipe.sources[i];
    if (!source.channel || i >= draft.componentReaders.size()) continue;
    TableReader& reader = draft.componentReaders[i];
    if (!draft.channelIndex(*source.channel)) {
      const auto names = draft.channelNames();
      reader.fault("channel", "unknown_channel",
                   fmt::format("channel is \"{}\"; expected one of: {}{}", *source.channel, listed(names),
                               didYouMean(*source.channel, names)));
    }
    const auto [place, isNew] = takenBy.emplace(*source.channel, source.formula);
    if (!isNew) {
      reader.fault("channel", "duplicate",
                   fmt::format("channel {} is the number of {} already", *source.channel, place->second));
    }
  }
}

using Uses = std::map<std::string, std::set<std::string>>;  // channel -> channels its worksheet reads

/// A channel that its worksheet leads back to, or empty.
bool leadsTo(const Uses& uses, const std::string& from, const std::string& goal,
             std::set<std::string>& seen) {
  const auto found = uses.find(from);
  if (found == uses.end() || !seen.insert(from).second) return false;
  return std::any_of(found->second.begin(), found->second.end(), [&](const std::string& next) {
    return next == goal || leadsTo(uses, next, goal, seen);
  });
}

/// Expression, names and units of every worksheet; no channel may need itself.
void checkWorksheets(std::vector<ChannelReader>& readers, Draft& draft) {
  Uses uses;
  for (auto& [reader, index] : readers) {
    const Channel& channel = draft.recipe.channels[index];
    if (!channel.worksheet || channel.worksheet->expression.empty()) continue;
    auto sheet = reader.table("worksheet");
    const auto names = worksheetNames(*channel.worksheet, draft.recipe.channels, channel.id);
    const auto worked = evaluateExpression(channel.worksheet->expression, names);
    if (!worked) {
      sheet->fault("value", worked.error().code, worked.error().detail);
      continue;
    }
    const auto unit = findUnit(channel.unit);
    if (unit && worked->result.dimension != unit->dimension) {
      sheet->fault(
          "value", "unit_mismatch",
          fmt::format("\"{}\" works out to {}; expected {} ({})", channel.worksheet->expression,
                      dimensionText(worked->result.dimension), dimensionText(unit->dimension), channel.unit));
    }
    for (const std::string& name : worked->used) {
      const auto isLocal = [&](const auto& list, auto member) {
        return std::any_of(list.begin(), list.end(), [&](const auto& item) { return item.*member == name; });
      };
      if (isLocal(channel.worksheet->inputs, &WorksheetInput::id)) continue;
      if (isLocal(channel.worksheet->constants, &WorksheetConstant::name)) continue;
      uses[channel.id].insert(name);
    }
  }
  for (auto& [reader, index] : readers) {
    const std::string& id = draft.recipe.channels[index].id;
    std::set<std::string> seen;
    if (leadsTo(uses, id, id, seen)) {
      reader.table("worksheet")
          ->fault("value", "circular", fmt::format("the worksheet of {} needs {} itself", id, id));
    }
  }
}

void checkRatioUnits(TableReader& reader, const Draft& draft, const Ratio& ratio) {
  for (const auto& [key, id] : {std::pair{"of", ratio.of}, std::pair{"to", ratio.to}}) {
    if (id.empty()) continue;
    const auto index = draft.channelIndex(id);
    if (!index) {
      const auto names = draft.channelNames();
      reader.fault(
          key, "unknown_channel",
          fmt::format("{} is \"{}\"; expected one of: {}{}", key, id, listed(names), didYouMean(id, names)));
      continue;
    }
    const Channel& channel = draft.recipe.channels[*index];
    const bool fits = ratio.byMole ? channel.canonicalUnit == "mol/L"
                                   : channel.canonicalUnit == "g/L" || channel.formulaMass > 0.0;
    if (!fits) {
      reader.fault(key, "unit_mismatch",
                   fmt::format("{} is in {}; a ratio by {} needs a concentration with a formula mass", id,
                               channel.unit, ratio.byMole ? "mole" : "mass"));
    }
  }
}

void readRatio(TableReader& reader, Draft& draft) {
  Ratio ratio;
  ratio.id = reader.requiredText("id");
  if (!ratio.id.empty()) {
    reader.setSubject(fmt::format("ratio {}", ratio.id));
    checkId(reader, "id", ratio.id);
  }
  const auto sameId = [&](const Ratio& other) { return other.id == ratio.id; };
  const auto& known = draft.recipe.ratios;
  if (draft.channelIndex(ratio.id) || std::any_of(known.begin(), known.end(), sameId)) {
    reader.fault("id", "duplicate", fmt::format("{} names another channel or ratio already", ratio.id));
  }
  ratio.title = reader.text("title", ratio.id);
  ratio.of = reader.requiredText("of");
  ratio.to = reader.requiredText("to");
  ratio.byMole = reader.choice("by", kRatioBy).value_or(true);
  ratio.low = reader.requiredNumber("low");
  ratio.target = reader.requiredNumber("target");
  ratio.high = reader.requiredNumber("high");
  if (reader.has("low") && reader.has("target") && reader.has("high")) {
    checkWindow(reader, ratio.low, ratio.target, ratio.high);
  }
  checkRatioUnits(reader, draft, ratio);
  ratio.guard = readGuard(reader, ratio.id);
  reader.allowRemarks();
  reader.finish();
  draft.recipe.ratios.push_back(std::move(ratio));
}

}  // namespace

std::optional<std::size_t> Draft::channelIndex(const std::string& id) const {
  for (std::size_t i = 0; i < recipe.channels.size(); ++i) {
    if (recipe.channels[i].id == id) return i;
  }
  return std::nullopt;
}

std::vector<std::string> Draft::channelNames() const {
  std::vector<std::string> names;
  for (const Channel& channel : recipe.channels) names.push_back(channel.id);
  return names;
}

void readChannels(TableReader& document, Draft& draft) {
  std::vector<ChannelReader> readers;
  for (TableReader& reader : document.tables("channel")) {
    readChannel(reader, draft);
    readers.push_back({reader, draft.recipe.channels.size() - 1});
  }
  addImplicitChannels(document, draft);
  checkComponentChannels(draft);
  checkWorksheets(readers, draft);
}

void readRatios(TableReader& document, Draft& draft) {
  for (TableReader& reader : document.tables("ratio")) readRatio(reader, draft);
}

}  // namespace tw::io
