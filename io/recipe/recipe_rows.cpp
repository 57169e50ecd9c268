// SPDX-License-Identifier: GPL-3.0-or-later
// Which rows of the library and of the recipe take part, and the watched solids.
#include <fmt/format.h>

#include <algorithm>
#include <utility>

#include "io/recipe/formula.hpp"
#include "io/recipe/recipe_draft.hpp"
#include "io/recipe/suggestion.hpp"

namespace tw::io {
namespace {

const Choices<model::SolidRole> kRoles = {{"sludge", model::SolidRole::Sludge},
                                          {"aged", model::SolidRole::Aged},
                                          {"scale", model::SolidRole::Scale}};

bool holds(const std::vector<std::string>& list, const std::string& word) {
  return std::find(list.begin(), list.end(), word) != list.end();
}

/// The row of this name from the set that stands first in the recipe's list; nullptr when none does.
const ReactionRow* fromSets(const std::vector<ReactionRow>& rows, const std::string& name,
                            const std::vector<std::string>& sets) {
  for (const std::string& set : sets) {
    for (const ReactionRow& row : rows) {
      if (row.name == name && row.set == set) return &row;
    }
  }
  return nullptr;
}

/// The recipe's own row (of a listed set first, else of any), else the library's.
const ReactionRow* chosen(const std::vector<ReactionRow>& own, const std::vector<ReactionRow>& library,
                          const std::string& name, const std::vector<std::string>& sets) {
  if (const ReactionRow* row = fromSets(own, name, sets)) return row;
  const auto any =
      std::find_if(own.begin(), own.end(), [&](const ReactionRow& row) { return row.name == name; });
  return any != own.end() ? &*any : fromSets(library, name, sets);
}

/// Names of both lists in order, each once: the library's, then what the recipe adds.
std::vector<std::string> namesOf(const std::vector<ReactionRow>& library,
                                 const std::vector<ReactionRow>& own) {
  std::vector<std::string> names;
  std::set<std::string> seen;
  for (const auto* rows : {&library, &own}) {
    for (const ReactionRow& row : *rows) {
      if (seen.insert(row.name).second) names.push_back(row.name);
    }
  }
  return names;
}

/// Names in the row that this recipe has no component for.
std::vector<std::string> missingParts(const ReactionRow& row, const Draft& draft) {
  std::vector<std::string> missing;
  for (const auto& [name, nu] : row.coefficients) {
    if (name != model::kWater && name != model::kHydroxide && !draft.component(name)) missing.push_back(name);
  }
  return missing;
}

model::Reaction reactionOf(const ReactionRow& row, const Draft& draft) {
  model::Reaction reaction;
  reaction.K = row.K;
  for (const auto& [name, nu] : row.coefficients) {
    if (nu == 0.0) continue;
    if (name == model::kWater) {
      reaction.water = nu;
    } else if (name == model::kHydroxide) {
      reaction.hydroxide = nu;
    } else {
      reaction.terms.push_back({.component = *draft.component(name), .nu = nu});
    }
  }
  return reaction;
}

void note(const ReactionRow& row, Draft& draft) {
  draft.usedRows.push_back(&row);
  draft.recipe.rows.push_back({.name = row.name,
                               .set = row.set,
                               .source = row.source,
                               .provenance = row.provenance,
                               .note = row.note,
                               .where = row.where,
                               .isSolid = row.isSolid,
                               .lgK = row.K.lgK,
                               .sigma = row.K.sigma,
                               .T_C = row.K.T_C,
                               .I = row.K.I});
}

void addSpecies(const ReactionRow& row, Draft& draft) {
  const auto formula = parseFormula(row.name);
  if (!formula) return;  // reported where the row was read
  model::Species species{.formula = row.name,
                         .charge = formula->charge,
                         .formation = reactionOf(row, draft),
                         .setschenow = row.setschenow};
  if (row.name == model::kHydroxide) {
    draft.recipe.system.ownHydroxide = std::move(species);
  } else {
    draft.recipe.system.species.push_back(std::move(species));
  }
  note(row, draft);
}

void resolveSpecies(Draft& draft) {
  for (const std::string& name : namesOf(draft.library.species, draft.own.species)) {
    if (holds(draft.exclude, name)) continue;
    const ReactionRow* row = chosen(draft.own.species, draft.library.species, name, draft.recipe.sets);
    if (row == nullptr || !missingParts(*row, draft).empty()) continue;
    if (const auto index = draft.component(name)) {
      if (*index < draft.componentReaders.size()) {
        draft.componentReaders[*index].fault(
            "formula", "component_not_independent",
            fmt::format(
                "{} is a species that other components make ({}); leave one of them out, or exclude it", name,
                row->where));
      }
      continue;
    }
    addSpecies(*row, draft);
  }
}

void checkOwnRows(Draft& draft, model::Faults& faults) {
  for (const auto* rows : {&draft.own.species, &draft.own.solids}) {
    for (const ReactionRow& row : *rows) {
      const auto missing = missingParts(row, draft);
      if (missing.empty()) continue;
      faults.push_back({.code = "unknown_component",
                        .subject = row.name,
                        .detail = fmt::format("{} needs {}; expected components of this recipe: {}{}",
                                              row.name, listed(missing), listed(draft.componentNames()),
                                              didYouMean(missing.front(), draft.componentNames())),
                        .where = row.where});
    }
  }
}

void checkExcludeAndSets(TableReader& document, const Draft& draft) {
  auto bath = document.table("bath");
  if (!bath) return;
  const auto known = namesOf(draft.library.species, draft.own.species);
  for (const std::string& name : draft.exclude) {
    if (holds(known, name)) continue;
    bath->fault("exclude", "unknown_species",
                fmt::format("exclude names \"{}\", which no row makes{}", name, didYouMean(name, known)));
  }
  std::vector<std::string> sets = {kDefaultSet};
  for (const auto* rows :
       {&draft.library.species, &draft.library.solids, &draft.own.species, &draft.own.solids}) {
    for (const ReactionRow& row : *rows) {
      if (!holds(sets, row.set)) sets.push_back(row.set);
    }
  }
  for (const std::string& set : draft.recipe.sets) {
    if (holds(sets, set)) continue;
    bath->fault(
        "sets", "unknown_set",
        fmt::format("sets names \"{}\"; expected some of: {}{}", set, listed(sets), didYouMean(set, sets)));
  }
}

void readWatchLimits(TableReader& reader, model::Solid& solid) {
  auto limits = reader.table("limits");
  if (!limits) return;
  for (const std::string& name : marginNames()) {
    if (const auto limit = readLimit(*limits, name))
      solid.limits.emplace_back(*model::marginKind(name), *limit);
  }
  solid.saturationLimit = readLimit(*limits, "lg_saturation", true);
  if (solid.saturationLimit && solid.role != model::SolidRole::Scale) {
    limits->fault("lg_saturation", "not_used", "lg_saturation is a limit of a scale only");
  }
  limits->finish();
}

const ReactionRow* watchedRow(TableReader& reader, const std::string& id, const Draft& draft) {
  const ReactionRow* row = chosen(draft.own.solids, draft.library.solids, id, draft.recipe.sets);
  const auto known = namesOf(draft.library.solids, draft.own.solids);
  if (row == nullptr) {
    const bool elsewhere = holds(known, id);
    reader.fault("solid", "unknown_solid",
                 elsewhere
                     ? fmt::format("{} stands in no set of this recipe ({})", id, listed(draft.recipe.sets))
                     : fmt::format("no row has the solid \"{}\"{}", id, didYouMean(id, known)));
    return nullptr;
  }
  const auto missing = missingParts(*row, draft);
  if (missing.empty()) return row;
  reader.fault("solid", "unknown_component",
               fmt::format("{} gives {}, which this recipe has no component for", id, listed(missing)));
  return nullptr;
}

void readWatch(TableReader& reader, Draft& draft) {
  model::Solid solid;
  solid.id = reader.requiredText("solid");
  if (!solid.id.empty()) reader.setSubject(fmt::format("watch {}", solid.id));
  reader.require("role");
  solid.role = reader.choice("role", kRoles).value_or(solid.role);
  solid.threshold = reader.number("threshold", 0.0);
  reader.notNegative("threshold_sigma");
  reader.text("threshold_from");
  readWatchLimits(reader, solid);
  reader.allowRemarks();
  reader.finish();
  if (solid.id.empty()) return;
  const auto& solids = draft.recipe.system.solids;
  if (std::any_of(solids.begin(), solids.end(),
                  [&](const model::Solid& other) { return other.id == solid.id; })) {
    reader.fault("solid", "duplicate", fmt::format("{} is watched already", solid.id));
    return;
  }
  const ReactionRow* row = watchedRow(reader, solid.id, draft);
  if (row == nullptr) return;
  solid.molarMass = row->molarMass;
  solid.dissolution = reactionOf(*row, draft);
  draft.recipe.system.solids.push_back(std::move(solid));
  note(*row, draft);
}

/// Gases and interactions between what the liquor holds: no solver uses them yet, the resolved document
/// keeps them.
void resolveOthers(Draft& draft) {
  std::set<std::string> present = {model::kHydroxide};
  for (const auto& component : draft.recipe.system.components) {
    present.insert(component.formula);
    if (!component.other.empty()) present.insert(component.other);
  }
  for (const auto& species : draft.recipe.system.species) present.insert(species.formula);
  std::set<std::string> seen;
  for (const auto* rows : {&std::as_const(draft.own.gases), &draft.library.gases}) {
    for (const GasRow& row : *rows) {
      if (present.contains(row.of) && seen.insert(row.id).second) draft.usedGases.push_back(&row);
    }
  }
  for (const auto* rows : {&std::as_const(draft.own.interactions), &draft.library.interactions}) {
    for (const InteractionRow& row : *rows) {
      const std::string pair = std::min(row.first, row.second) + " " + std::max(row.first, row.second);
      if (present.contains(row.first) && present.contains(row.second) && seen.insert(pair).second) {
        draft.usedInteractions.push_back(&row);
      }
    }
  }
}

}  // namespace

void resolveRows(TableReader& document, Draft& draft) {
  model::Faults faults;
  findDuplicates(draft.own, faults);
  checkOwnRows(draft, faults);
  for (const model::Fault& fault : faults) document.report(fault);
  checkExcludeAndSets(document, draft);
  resolveSpecies(draft);
  for (TableReader& reader : document.tables("watch")) readWatch(reader, draft);
  resolveOthers(draft);
}

}  // namespace tw::io
