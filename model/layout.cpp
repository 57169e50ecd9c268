// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/layout.hpp"

#include <cmath>
#include <utility>

#include "model/physical.hpp"
#include "model/temperature.hpp"

namespace tw::model {

namespace {

Fault inconsistent(const std::string& subject, const std::string& detail) {
  return {"infeasible", subject, detail, "", FaultKind::Input};
}

/// Adds one species row: nu of its components, OH^- written out as -H^+.
void addSpecies(Layout& layout, const std::string& formula, double charge, double setschenow,
                const std::vector<ComponentTerm>& terms, double hydroxide) {
  layout.formula.push_back(formula);
  layout.charge.push_back(charge);
  layout.setschenow.push_back(setschenow);
  const std::size_t row = layout.nu.size();
  layout.nu.resize(row + layout.components, 0.0);
  for (const ComponentTerm& term : terms) layout.nu[row + term.component] += term.nu;
  layout.nu[row + layout.proton] -= hydroxide;
}

std::optional<std::size_t> componentNamed(const ChemicalSystem& system, const std::string& formula) {
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    if (system.components[i].formula == formula) return i;
  }
  return std::nullopt;
}

/// Finds the balance ion and its `other`; adds an inert one as an extra component.
std::optional<Fault> layOutBalance(const ChemicalSystem& system, Layout& layout) {
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    const Component& ion = system.components[i];
    if (ion.setBy != SetBy::Balance) continue;
    if (layout.balance) {
      if (layout.other == i) continue;  // each names the other one
      return inconsistent(ion.formula, "two components close the charge; only one can");
    }
    if (ion.charge == 0 || i == layout.proton) {
      return inconsistent(ion.formula, "only a charged ion other than H^+ can close the charge");
    }
    layout.balance = i;
    if (ion.other.empty()) continue;
    layout.other = componentNamed(system, ion.other);
    const int otherCharge = layout.other ? system.components[*layout.other].charge : ion.otherCharge;
    if (otherCharge * ion.charge >= 0 || layout.other == layout.proton) {
      return inconsistent(ion.other, "the ion that closes the charge instead must have the other sign");
    }
    if (!layout.other) {
      layout.otherIsInert = true;
      layout.other = layout.components;
      ++layout.components;
      layout.componentFormula.push_back(ion.other);
      layout.componentCharge.push_back(otherCharge);
    }
  }
  return std::nullopt;
}

std::optional<Fault> checkRow(const Constant& K, ActivityModel model, const std::string& row) {
  if (!std::isfinite(K.lgK)) return Fault{"not_a_number", row, "lg K is not a number", "", FaultKind::Input};
  const bool needsA = model == ActivityModel::Davies && K.I > 0.0;
  if (needsA || K.dH_kJ_mol) {
    const Result<Done> ok = checkTemperature(K.T_C, row);
    if (!ok && (needsA || !(K.T_C > -kZeroCelsius_K))) return ok.error();
  }
  return std::nullopt;
}

std::optional<Fault> checkRows(const ChemicalSystem& system) {
  for (const Species& s : system.species) {
    if (auto fault = checkRow(s.formation.K, system.activityModel, s.formula)) return fault;
  }
  for (const Solid& s : system.solids) {
    if (auto fault = checkRow(s.dissolution.K, system.activityModel, s.id)) return fault;
  }
  if (system.ownHydroxide) {
    return checkRow(system.ownHydroxide->formation.K, system.activityModel, kHydroxide);
  }
  return std::nullopt;
}

void markMetals(const ChemicalSystem& system, Layout& layout) {
  layout.holdsMetal.assign(layout.species, 0);
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    if (!system.components[i].isMetal && i != system.metal) continue;
    for (std::size_t j = 0; j < layout.species; ++j) {
      if (layout.nuOf(j, i) != 0.0) layout.holdsMetal[j] = 1;
    }
  }
}

}  // namespace

Result<Layout> layOut(const ChemicalSystem& system) {
  if (system.activityModel == ActivityModel::Sit) {
    return fail(Fault{"activity_model_missing", "sit", "this version solves conditional and davies only", "",
                      FaultKind::Input});
  }
  if (system.proton >= system.components.size() || system.metal >= system.components.size()) {
    return fail(inconsistent(kProton, "the system has no H^+ or no metal among its components"));
  }
  if (auto fault = checkRows(system)) return fail(std::move(*fault));

  Layout layout;
  layout.components = system.components.size();
  layout.proton = system.proton;
  for (const Component& component : system.components) {
    layout.componentFormula.push_back(component.formula);
    layout.componentCharge.push_back(component.charge);
  }
  if (auto fault = layOutBalance(system, layout)) return fail(std::move(*fault));

  for (std::size_t i = 0; i < layout.components; ++i) {
    addSpecies(layout, layout.componentFormula[i], layout.componentCharge[i], 0.0, {{i, 1.0}}, 0.0);
  }
  layout.hydroxide = layout.formula.size();
  addSpecies(layout, kHydroxide, -1.0, 0.0, {{layout.proton, -1.0}}, 0.0);
  for (const Species& s : system.species) {
    addSpecies(layout, s.formula, s.charge, s.charge == 0 ? s.setschenow : 0.0, s.formation.terms,
               s.formation.hydroxide);
  }
  layout.species = layout.formula.size();
  markMetals(system, layout);

  layout.solidNu.assign(system.solids.size() * layout.components, 0.0);
  for (std::size_t s = 0; s < system.solids.size(); ++s) {
    double* row = layout.solidNu.data() + s * layout.components;
    for (const ComponentTerm& term : system.solids[s].dissolution.terms) row[term.component] += term.nu;
    row[layout.proton] -= system.solids[s].dissolution.hydroxide;
  }
  return layout;
}

void constantsAt(const ChemicalSystem& system, const Layout& layout, double t_C, Constants& constants) {
  const ActivityModel model = system.activityModel;
  constants.t_C = t_C;
  constants.A = debyeHueckelA(t_C);
  constants.model = model;
  constants.lnK.assign(layout.species, 0.0);
  constants.lnKs.resize(system.solids.size());
  constants.lgKw = waterLgKw(t_C);
  if (system.ownHydroxide) {
    const Species& row = *system.ownHydroxide;
    constants.lgKw = lgKAt(row.formation.K, dzSquaredOfFormation(row, system.components), model, t_C);
  }
  constants.lnK[layout.hydroxide] = kLn10 * constants.lgKw;
  for (std::size_t k = 0; k < system.species.size(); ++k) {
    const Species& s = system.species[k];
    const double lgK = lgKAt(s.formation.K, dzSquaredOfFormation(s, system.components), model, t_C);
    constants.lnK[layout.hydroxide + 1 + k] = kLn10 * (lgK + s.formation.hydroxide * constants.lgKw);
  }
  for (std::size_t k = 0; k < system.solids.size(); ++k) {
    const Reaction& r = system.solids[k].dissolution;
    const double lgKs = lgKAt(r.K, dzSquaredOfDissolution(r, system.components), model, t_C);
    constants.lnKs[k] = kLn10 * (lgKs - r.hydroxide * constants.lgKw);
  }
}

}  // namespace tw::model
