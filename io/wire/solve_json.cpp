// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/wire/solve_json.hpp"

#include <nlohmann/json.hpp>

#include <algorithm>
#include <cmath>

namespace tw::io::wire {
namespace {

using json = nlohmann::ordered_json;  // keys in the order of FORMATS section 6
using model::MarginKind;

/// nlohmann writes doubles as the shortest text that reads back the same, whatever the locale.
json number(double value) { return std::isfinite(value) ? json(value) : json(); }
json number(const std::optional<double>& value) { return value ? number(*value) : json(); }

json namedNumbers(const std::vector<std::pair<std::string, double>>& values) {
  json object = json::object();
  for (const auto& [key, value] : values) object[key] = number(value);
  return object;
}

bool hasFraction(MarginKind kind) { return kind == MarginKind::LigandLoss || kind == MarginKind::MetalGain; }

/// The numbers of one margin, or nulls under the same keys.
json marginNumbers(MarginKind kind, const std::optional<model::Margin>& margin) {
  json object = json::object();
  if (kind == MarginKind::LigandLoss) object["ligand"] = margin ? json(margin->ligand) : json();
  if (hasFraction(kind)) {
    object["mol_L"] = margin ? number(margin->value) : json();
    object["fraction"] = margin ? number(margin->fraction) : json();
  } else {
    object["value"] = margin ? number(margin->value) : json();
  }
  return object;
}

json perSolid(MarginKind kind, const model::MarginSet& set) {
  json object = json::object();
  for (const auto& [solid, margin] : set.bySolid) {
    object[solid] = json();
    if (!margin) continue;
    object[solid] = marginNumbers(kind, margin);
    object[solid]["sigma"] = json();
  }
  return object;
}

json perLigand(const model::MarginSet& set) {
  json object = json::object();
  for (const auto& [ligand, margin] : set.byLigand) {
    object[ligand] = json();
    if (!margin) continue;
    object[ligand] = {
        {"mol_L", number(margin->value)}, {"fraction", number(margin->fraction)}, {"solid", margin->solid}};
  }
  return object;
}

/// null, unless only a solid with limits of its own (never the bath's margin) has one.
json margin(MarginKind kind, const model::MarginSet& set) {
  const auto& solids = set.bySolid;
  const bool any = set.smallest || std::any_of(solids.begin(), solids.end(),
                                               [](const auto& entry) { return entry.second.has_value(); });
  if (!any) return nullptr;
  json object = marginNumbers(kind, set.smallest);
  object["solid"] = set.smallest ? json(set.smallest->solid) : json();
  object["sigma"] = json();
  if (kind == MarginKind::LigandLoss) object["by_ligand"] = perLigand(set);
  if (solids.size() > 1 || !set.smallest) object["by_solid"] = perSolid(kind, set);
  return object;
}

json margins(const model::LiquorReport& report) {
  json object = json::object();
  for (std::size_t i = 0; i < model::kMarginCount; ++i) {
    const auto kind = static_cast<MarginKind>(i);
    object[name(kind)] = margin(kind, report.margin(kind));
  }
  return object;
}

const char* roleName(model::SolidRole role) {
  switch (role) {
    case model::SolidRole::Aged:
      return "aged";
    case model::SolidRole::Scale:
      return "scale";
    case model::SolidRole::Sludge:
      break;
  }
  return "sludge";
}

const char* modelName(model::ActivityModel activityModel) {
  switch (activityModel) {
    case model::ActivityModel::Davies:
      return "davies";
    case model::ActivityModel::Sit:
      return "sit";
    case model::ActivityModel::Conditional:
      break;
  }
  return "conditional";
}

json species(const model::LiquorReport& report) {
  json list = json::array();
  for (const auto& one : report.species) {
    list.push_back({{"formula", one.formula},
                    {"mol_L", number(one.mol_L)},
                    {"lg_gamma", number(one.lgGamma)},
                    {"lg_activity", number(one.lgActivity)}});
  }
  return list;
}

json solids(const model::LiquorReport& report) {
  json list = json::array();
  for (const auto& solid : report.solids) {
    list.push_back({{"id", solid.id},
                    {"role", roleName(solid.role)},
                    {"lg_saturation", number(solid.lgSaturation)},
                    {"threshold", number(solid.threshold)},
                    {"sigma", nullptr},
                    {"p_over", nullptr}});
  }
  return list;
}

json secondMetals(const model::LiquorReport& report) {
  json object = json::object();
  for (const auto& metal : report.secondMetals) {
    json gain;
    if (metal.metalGain) {
      gain = marginNumbers(MarginKind::MetalGain, metal.metalGain);
      gain["solid"] = metal.metalGain->solid;
      gain["sigma"] = json();
    }
    object[metal.formula] = {
        {"pM", number(metal.pM)}, {"free_mol_L", number(metal.free_mol_L)}, {"metal_gain", std::move(gain)}};
  }
  return object;
}

std::optional<double> negated(const std::optional<double>& value) {
  return value ? std::optional(-*value) : std::nullopt;
}

json liquor(const model::LiquorReport& report) {
  return {{"temperature_C", number(report.temperature_C)},
          {"ph", number(report.ph)},
          {"ph_measured", number(report.phMeasured)},
          {"ph_measured_at_C", number(report.phMeasuredAt_C)},
          {"ionic_strength_mol_L", number(report.ionicStrength_mol_L)},
          {"water_activity", number(report.waterActivity)},
          {"pM", number(report.pM)},
          {"lg_activity_metal", number(negated(report.pM))},
          {"free_metal_mol_L", number(report.freeMetal_mol_L)},
          {"free_ligands_mol_L", namedNumbers(report.freeLigands_mol_L)},
          {"sigma", {{"pM", nullptr}}},
          {"totals_mol_L", namedNumbers(report.totals_mol_L)},
          {"species", species(report)},
          {"solids", solids(report)},
          {"margins", margins(report)},
          {"sludge", nullptr},
          {"metals", secondMetals(report)},
          {"gases", nullptr}};
}

}  // namespace

std::string solveJson(const Recipe& recipe, const model::LiquorReport& report,
                      const model::Judgement& judgement, const std::vector<std::string>& extraWarnings,
                      int indent) {
  json object = {{"recipe", recipe.id},
                 {"recipe_sha256", recipe.sha256},
                 {"resolved_sha256", recipe.resolvedSha256},
                 {"activity_model", modelName(recipe.system.activityModel)}};
  object.update(liquor(report));
  std::vector<std::string> warnings = extraWarnings;
  warnings.insert(warnings.end(), report.warnings.begin(), report.warnings.end());
  object["condition"] = name(judgement.condition);
  object["doubtful"] = judgement.doubtful;
  object["warnings"] = warnings;
  object["no_enthalpy"] = report.noEnthalpy;
  object["reliable"] = report.reliable;
  object["solver"] = {{"iterations", report.solver.iterations}, {"residual", number(report.solver.residual)}};
  return object.dump(indent < 0 ? -1 : indent);
}

}  // namespace tw::io::wire
