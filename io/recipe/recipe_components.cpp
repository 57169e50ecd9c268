// SPDX-License-Identifier: GPL-3.0-or-later
// [[component]]: what species are made from, and what fixes each.
#include <fmt/format.h>

#include <algorithm>

#include "io/recipe/formula.hpp"
#include "io/recipe/recipe_draft.hpp"
#include "io/recipe/row_checks.hpp"
#include "io/recipe/suggestion.hpp"

namespace tw::io {
namespace {

using model::SetBy;

const Choices<SetBy> kSetBy = {{"total", SetBy::Total},         {"free", SetBy::Free},
                               {"excess", SetBy::Excess},       {"ph", SetBy::Ph},
                               {"hydroxide", SetBy::Hydroxide}, {"proton_total", SetBy::ProtonTotal},
                               {"fixed", SetBy::Fixed},         {"balance", SetBy::Balance}};

bool isForProton(SetBy setBy) {
  return setBy == SetBy::Ph || setBy == SetBy::Hydroxide || setBy == SetBy::ProtonTotal;
}

/// What each way of fixing a component needs, and what it has no use for.
void checkSource(TableReader& reader, SetBy setBy, const ComponentSource& source) {
  const auto unused = [&](const std::string& key) {
    if (reader.has(key)) {
      reader.fault(key, "not_used",
                   fmt::format("{} has no meaning with set_by = \"{}\"", key, reader.text("set_by", "")));
    }
  };
  switch (setBy) {
    case SetBy::Ph:
      unused("mol_L");
      break;
    case SetBy::Balance:
      unused("mol_L");
      unused("channel");
      break;
    case SetBy::Fixed:
      reader.require("mol_L");
      unused("channel");
      break;
    default:
      if (source.channel.has_value() == source.mol_L.has_value()) {
        reader.fault("channel", "missing_key",
                     fmt::format("{} needs either channel or mol_L", reader.path("")));
      }
  }
  if (setBy != SetBy::Excess && setBy != SetBy::Hydroxide) unused("per_metal");
  if (setBy == SetBy::Excess) reader.require("per_metal");
  if (setBy != SetBy::Balance) unused("other");
  if (source.mol_L && *source.mol_L < 0.0 && setBy != SetBy::ProtonTotal) {
    reader.fault("mol_L", "out_of_range", fmt::format("mol_L is {}; expected 0 or more", *source.mol_L));
  }
}

void readOther(TableReader& reader, model::Component& component) {
  component.other = reader.text("other", "");
  if (component.other.empty()) return;
  const auto formula = formulaIn(reader, "other", component.other);
  if (!formula) return;
  component.otherCharge = formula->charge;
  if (component.otherCharge * component.charge >= 0) {
    reader.fault("other", "bad_balance",
                 fmt::format("other is {} beside {}; expected an ion of the other sign", component.other,
                             component.formula));
  }
}

/// The recipe's own number, else the library's, else from the elements; 0 where none is known.
double massOf(TableReader& reader, const Library& library, const Formula& formula) {
  if (const auto given = reader.positive("molar_mass")) return *given;
  const ComponentRow* row = library.component(formula.text);
  return row != nullptr && row->molarMass > 0.0 ? row->molarMass : molarMass(formula);
}

void readComponent(TableReader& reader, Draft& draft) {
  model::Component component;
  component.formula = reader.requiredText("formula");
  if (!component.formula.empty()) reader.setSubject(fmt::format("component {}", component.formula));
  const auto formula =
      component.formula.empty() ? std::nullopt : formulaIn(reader, "formula", component.formula);
  component.charge = formula ? formula->charge : 0;
  component.molarMass = massOf(
      reader, draft.library,
      formula.value_or(Formula{.text = component.formula, .charge = 0, .opaque = true, .elements = {}}));
  const bool isProton = component.formula == model::kProton;
  reader.require("set_by");
  const auto setBy = reader.choice("set_by", kSetBy);
  component.setBy = setBy.value_or(isProton ? SetBy::Ph : SetBy::Total);
  component.isMetal = reader.flag("is_metal", false) || component.formula == draft.recipe.metal;
  const ComponentRow* row = draft.library.component(component.formula);
  ComponentSource source{.formula = component.formula,
                         .title = reader.text("title", row != nullptr ? row->title : component.formula),
                         .channel = reader.text("channel"),
                         .mol_L = reader.number("mol_L")};
  readOther(reader, component);
  reader.numbers("per_metal");
  reader.allowRemarks();
  if (setBy) {
    checkSource(reader, *setBy, source);
    if (isForProton(*setBy) != isProton) {
      reader.fault(
          "set_by", "bad_set_by",
          fmt::format("set_by is \"{}\" for {}; expected {}", reader.text("set_by", ""), component.formula,
                      isProton ? "ph, hydroxide or proton_total" : "that of a component other than H^+"));
    }
    if (*setBy == SetBy::Ph && !source.channel) source.channel = "ph";
    if (*setBy == SetBy::Balance && component.charge == 0) {
      reader.fault("set_by", "bad_balance",
                   fmt::format("{} carries no charge: it cannot balance", component.formula));
    }
  }
  if (component.formula == model::kHydroxide || component.formula == model::kWater) {
    reader.fault("formula", "reserved_species",
                 fmt::format("{} is always there and no component; H^+ stands for it", component.formula));
  } else if (draft.component(component.formula)) {
    reader.fault("formula", "duplicate", fmt::format("component {} stands twice", component.formula));
  }
  reader.finish();
  draft.recipe.system.components.push_back(std::move(component));
  draft.recipe.sources.push_back(std::move(source));
  draft.componentReaders.push_back(reader);
}

/// H^+ is always there; a recipe that does not name it reads its pH.
void addProton(Draft& draft) {
  if (!draft.component(model::kProton)) {
    const ComponentRow* row = draft.library.component(model::kProton);
    model::Component proton;
    proton.formula = model::kProton;
    proton.charge = 1;
    proton.molarMass = row != nullptr ? row->molarMass : 0.0;
    proton.setBy = SetBy::Ph;
    draft.recipe.system.components.push_back(proton);
    draft.recipe.sources.push_back(
        {.formula = model::kProton, .title = model::kProton, .channel = "ph", .mol_L = {}});
  }
  draft.recipe.system.proton = *draft.component(model::kProton);
}

void resolvePerMetal(Draft& draft) {
  auto& components = draft.recipe.system.components;
  for (std::size_t i = 0; i < draft.componentReaders.size(); ++i) {
    TableReader& reader = draft.componentReaders[i];
    if (components[i].setBy != SetBy::Excess && components[i].setBy != SetBy::Hydroxide) continue;
    for (const auto& [metal, count] : reader.numbers("per_metal")) {
      const auto index = draft.component(metal);
      if (!index || !components[*index].isMetal) {
        reader.fault("per_metal", "unknown_component",
                     fmt::format("per_metal names \"{}\"; expected a metal of this recipe", metal));
        continue;
      }
      components[i].perMetal.push_back({.component = *index, .nu = count});
    }
  }
}

void checkOneBalance(Draft& draft) {
  const auto& components = draft.recipe.system.components;
  std::string first;
  for (std::size_t i = 0; i < draft.componentReaders.size(); ++i) {
    if (components[i].setBy != SetBy::Balance) continue;
    if (!first.empty()) {
      draft.componentReaders[i].fault("set_by", "bad_balance",
                                      fmt::format("{} balances already; only one ion can", first));
    }
    first = components[i].formula;
  }
}

void resolveMetalAndLigands(TableReader& document, Draft& draft) {
  auto bath = document.table("bath");
  if (!bath) return;
  model::ChemicalSystem& system = draft.recipe.system;
  const auto names = draft.componentNames();
  const auto metal = draft.component(draft.recipe.metal);
  if (metal) {
    system.metal = *metal;
  } else if (!draft.recipe.metal.empty()) {
    bath->fault("metal", "unknown_component",
                fmt::format("metal is \"{}\"; expected one of the components: {}{}", draft.recipe.metal,
                            listed(names), didYouMean(draft.recipe.metal, names)));
  }
  for (const std::string& ligand : draft.ligands) {
    if (ligand == model::kHydroxide) {
      system.hydroxideIsLigand = true;
      continue;
    }
    const auto index = draft.component(ligand);
    if (index && *index != system.proton && !system.components[*index].isMetal) {
      system.ligands.push_back(*index);
    } else {
      bath->fault("ligands", "unknown_component",
                  fmt::format("ligands names \"{}\"; expected OH^- or a component that is no metal: {}{}",
                              ligand, listed(names), didYouMean(ligand, names)));
    }
  }
}

}  // namespace

std::optional<model::ComponentIndex> Draft::component(const std::string& formula) const {
  const auto& components = recipe.system.components;
  for (std::size_t i = 0; i < components.size(); ++i) {
    if (components[i].formula == formula) return i;
  }
  return std::nullopt;
}

std::vector<std::string> Draft::componentNames() const {
  std::vector<std::string> names;
  for (const auto& component : recipe.system.components) names.push_back(component.formula);
  return names;
}

void readComponents(TableReader& document, Draft& draft) {
  document.require("component");
  for (TableReader& reader : document.tables("component")) readComponent(reader, draft);
  addProton(draft);
  resolvePerMetal(draft);
  checkOneBalance(draft);
  resolveMetalAndLigands(document, draft);
}

}  // namespace tw::io
