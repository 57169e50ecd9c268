// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/report_json.hpp"

#include <utility>

#include <nlohmann/json.hpp>

namespace tw::monitor {
namespace {

using nlohmann::json;

std::optional<double> number(const json& object, const char* key) {
  const auto at = object.find(key);
  if (at == object.end() || !at->is_number()) return std::nullopt;
  return at->get<double>();
}

std::string text(const json& object, const char* key) {
  const auto at = object.find(key);
  return at != object.end() && at->is_string() ? at->get<std::string>() : std::string{};
}

std::optional<model::Margin> margin(const json& object, const std::string& solid = {}) {
  if (object.is_number()) {
    model::Margin bare;
    bare.value = object.get<double>();
    bare.solid = solid;
    return bare;
  }
  if (!object.is_object()) return std::nullopt;
  model::Margin found;
  found.fraction = number(object, "fraction");
  const auto value = number(object, "value");
  const auto mol_L = number(object, "mol_L");
  if (!value && !mol_L && !found.fraction) return std::nullopt;
  found.value = value ? *value : mol_L.value_or(0.0);
  found.solid = text(object, "solid");
  if (found.solid.empty()) found.solid = solid;
  found.ligand = text(object, "ligand");
  return found;
}

model::MarginSet marginSet(const json& object) {
  model::MarginSet set;
  set.smallest = margin(object);
  if (!object.is_object()) return set;
  if (const auto at = object.find("by_solid"); at != object.end() && at->is_object()) {
    for (const auto& [id, each] : at->items()) set.bySolid.emplace_back(id, margin(each, id));
  } else if (set.smallest) {
    // A single watched solid has no list of its own: the smallest is its margin.
    set.bySolid.emplace_back(set.smallest->solid, set.smallest);
  }
  if (const auto at = object.find("by_ligand"); at != object.end() && at->is_object()) {
    for (const auto& [id, each] : at->items()) set.byLigand.emplace_back(id, margin(each));
  }
  return set;
}

model::SolidRole role(const std::string& word) {
  if (word == "aged") return model::SolidRole::Aged;
  return word == "scale" ? model::SolidRole::Scale : model::SolidRole::Sludge;
}

StoredReport read(const json& object) {
  StoredReport stored;
  model::LiquorReport& report = stored.report;
  report.temperature_C = number(object, "temperature_C").value_or(report.temperature_C);
  report.ph = number(object, "ph").value_or(report.ph);
  report.pM = number(object, "pM");
  report.reliable = object.value("reliable", true);
  for (const json& warning : object.value("warnings", json::array())) {
    report.warnings.push_back(warning.get<std::string>());
  }
  for (const json& solid : object.value("solids", json::array())) {
    report.solids.push_back({text(solid, "id"), role(text(solid, "role")), number(solid, "lg_saturation"),
                             number(solid, "threshold").value_or(0.0)});
  }
  const json margins = object.value("margins", json::object());
  for (std::size_t i = 0; i < model::kMarginCount; ++i) {
    const char* id = model::name(static_cast<model::MarginKind>(i));
    const auto at = margins.find(id);
    if (at == margins.end()) continue;
    report.margins[i] = marginSet(*at);
    if (at->is_object()) {
      if (const auto sigma = number(*at, "sigma")) stored.sigma[id] = *sigma;
    }
  }
  return stored;
}

}  // namespace

model::Result<StoredReport> readReport(const std::string& solveJson) {
  try {
    return read(json::parse(solveJson));
  } catch (const json::exception& e) {
    return model::fail(model::Fault{"stored_result_unreadable", "result", e.what(), "",
                                    model::FaultKind::Machine});
  }
}

std::map<std::string, double> readValues(const std::string& valuesJson) {
  std::map<std::string, double> values;
  const json object = json::parse(valuesJson, nullptr, false);
  if (!object.is_object()) return values;
  for (const auto& [id, value] : object.items()) {
    if (value.is_number()) values[id] = value.get<double>();
  }
  return values;
}

std::vector<io::wire::MarginView> marginViews(const StoredReport& stored, const model::MarginLimits& limits) {
  std::vector<io::wire::MarginView> views;
  for (std::size_t i = 0; i < model::kMarginCount; ++i) {
    const auto& smallest = stored.report.margins[i].smallest;
    if (!smallest) continue;
    io::wire::MarginView view;
    view.id = model::name(static_cast<model::MarginKind>(i));
    view.judged = smallest->judged();
    if (smallest->fraction) view.mol_L = smallest->value;
    if (const auto sigma = stored.sigma.find(view.id); sigma != stored.sigma.end()) {
      view.sigma = sigma->second;
    }
    view.solid = smallest->solid;
    view.ligand = smallest->ligand;
    if (limits[i]) view.limit = io::wire::LimitPair{limits[i]->caution, limits[i]->act};
    views.push_back(std::move(view));
  }
  return views;
}

std::vector<model::GuardValue> guardsOf(const io::Recipe& recipe,
                                        const std::map<std::string, double>& values) {
  std::vector<model::GuardValue> guards;
  const auto add = [&](const std::string& id, const std::optional<model::Guard>& guard, double target) {
    const auto value = values.find(id);
    if (!guard || value == values.end()) return;
    model::GuardValue guarded;
    guarded.guard = *guard;
    guarded.guard.id = id;
    guarded.value = value->second;
    guarded.target = target;
    guards.push_back(std::move(guarded));
  };
  for (const io::Channel& channel : recipe.channels) add(channel.id, channel.guard, channel.target);
  for (const io::Ratio& ratio : recipe.ratios) add(ratio.id, ratio.guard, ratio.target);
  return guards;
}

}  // namespace tw::monitor
