// SPDX-License-Identifier: GPL-3.0-or-later
// The resolved recipe as canonical JSON: what the store keeps under its hash.
#include <nlohmann/json.hpp>

#include "io/recipe/recipe_draft.hpp"

namespace tw::io {
namespace {

using nlohmann::json;  // std::map underneath: keys come out sorted

json toJson(const toml::node& node) {
  if (const auto* table = node.as_table()) {
    json object = json::object();
    for (const auto& [key, value] : *table) object[std::string(key.str())] = toJson(value);
    return object;
  }
  if (const auto* array = node.as_array()) {
    json list = json::array();
    for (const toml::node& element : *array) list.push_back(toJson(element));
    return list;
  }
  if (node.is_number()) return *node.value<double>();  // 1 and 1.0 are one recipe
  if (node.is_boolean()) return *node.value<bool>();
  if (const auto text = node.value<std::string>()) return *text;
  return nullptr;
}

json toJson(const ReactionRow& row) {
  json object = {{"set", row.set},
                 {"lg_K", row.K.lgK},
                 {"sigma", row.K.sigma},
                 {"T_C", row.K.T_C},
                 {"I", row.K.I},
                 {"medium", row.K.medium},
                 {"dH_kJ_mol", row.K.dH_kJ_mol ? json(*row.K.dH_kJ_mol) : json()},
                 {"dCp_J_mol_K", row.K.dCp_J_mol_K},
                 {"source", row.source},
                 {"provenance", row.provenance}};
  object[row.isSolid ? "id" : "formula"] = row.name;
  object[row.isSolid ? "gives" : "from"] = row.coefficients;
  if (row.isSolid) {
    object["molar_mass"] = row.molarMass;
  } else {
    object["setschenow"] = row.setschenow;
  }
  return object;
}

json toJson(const GasRow& row) {
  return {{"id", row.id},
          {"of", row.of},
          {"lg_H", row.lgH},
          {"T_C", row.T_C},
          {"dH_kJ_mol", row.dH_kJ_mol ? json(*row.dH_kJ_mol) : json()},
          {"source", row.source},
          {"provenance", row.provenance}};
}

json toJson(const InteractionRow& row) {
  return {{"pair", {row.first, row.second}},
          {"epsilon", row.epsilon},
          {"source", row.source},
          {"provenance", row.provenance}};
}

}  // namespace

std::string resolvedDocument(const toml::table& document, const Draft& draft) {
  json components = json::array(), species = json::array(), solids = json::array();
  for (const auto& component : draft.recipe.system.components) {
    components.push_back({{"formula", component.formula}, {"molar_mass", component.molarMass}});
  }
  for (const ReactionRow* row : draft.usedRows) (row->isSolid ? solids : species).push_back(toJson(*row));
  json gases = json::array(), interactions = json::array();
  for (const GasRow* row : draft.usedGases) gases.push_back(toJson(*row));
  for (const InteractionRow* row : draft.usedInteractions) interactions.push_back(toJson(*row));
  const json resolved = {{"format", "tankward-resolved/1"},
                         {"recipe", toJson(document)},
                         {"component", std::move(components)},
                         {"species", std::move(species)},
                         {"solid", std::move(solids)},
                         {"gas", std::move(gases)},
                         {"interaction", std::move(interactions)}};
  return resolved.dump();
}

}  // namespace tw::io
