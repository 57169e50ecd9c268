// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/report.hpp"

#include <cmath>

#include "model/physical.hpp"

namespace tw::model {

namespace {

SpeciesAmount amountOf(const ClosedLiquor& liquor, std::size_t j) {
  const Equilibrium& now = liquor.now();
  SpeciesAmount amount;
  amount.formula = liquor.layout().formula[j];
  amount.charge = static_cast<int>(std::lround(liquor.layout().charge[j]));
  amount.mol_L = now.concentration()[j];
  if (now.speciesPresent(j)) {
    amount.lgGamma = now.lnGamma()[j] / kLn10;
    amount.lgActivity = std::log10(amount.mol_L) + *amount.lgGamma;
  }
  return amount;
}

/// Bare components, complexes, OH^-, and an inert ion that closes the charge last.
std::vector<SpeciesAmount> speciesOf(const ClosedLiquor& liquor) {
  const Layout& layout = liquor.layout();
  const std::size_t own = liquor.system().components.size();
  std::vector<SpeciesAmount> species;
  species.reserve(layout.species);
  for (std::size_t j = 0; j < own; ++j) species.push_back(amountOf(liquor, j));
  for (std::size_t j = layout.hydroxide + 1; j < layout.species; ++j) species.push_back(amountOf(liquor, j));
  species.push_back(amountOf(liquor, layout.hydroxide));
  if (layout.otherIsInert) species.push_back(amountOf(liquor, layout.components - 1));
  return species;
}

std::optional<double> pOf(const Equilibrium& now, std::size_t component) {
  if (!now.present(component)) return std::nullopt;
  return -now.lnActivity(component) / kLn10;
}

}  // namespace

LiquorReport reportOf(const ClosedLiquor& liquor) {
  const ChemicalSystem& system = liquor.system();
  const Layout& layout = liquor.layout();
  const Equilibrium& now = liquor.now();
  LiquorReport report;
  report.temperature_C = liquor.constants().t_C;
  report.ph = -now.lnActivity(layout.proton) / kLn10;
  report.ionicStrength_mol_L = now.ionicStrength();
  report.pM = pOf(now, system.metal);
  report.freeMetal_mol_L = now.concentration()[system.metal];
  for (const ComponentIndex ligand : system.ligands) {
    report.freeLigands_mol_L.emplace_back(system.components[ligand].formula, now.freeSum(ligand));
  }
  if (system.hydroxideIsLigand) {
    report.freeLigands_mol_L.emplace_back(kHydroxide, now.concentration()[layout.hydroxide]);
  }
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    report.totals_mol_L.emplace_back(system.components[i].formula, now.total(i));
  }
  report.species = speciesOf(liquor);
  for (std::size_t s = 0; s < system.solids.size(); ++s) {
    const Solid& solid = system.solids[s];
    SolidState state{solid.id, solid.role, std::nullopt, solid.threshold};
    const double lgSaturation = liquor.lgSaturation(s);
    if (!std::isnan(lgSaturation)) state.lgSaturation = lgSaturation;
    report.solids.push_back(std::move(state));
  }
  const std::vector<ComponentIndex> metals = metalsOf(system);
  for (std::size_t k = 1; k < metals.size(); ++k) {
    report.secondMetals.push_back({system.components[metals[k]].formula, pOf(now, metals[k]),
                                   now.concentration()[metals[k]], std::nullopt});
  }
  report.solver.iterations = liquor.outcome().iterations;
  report.solver.residual = liquor.outcome().residual;
  report.solver.residualComponent = layout.componentFormula[liquor.outcome().residualRow];
  return report;
}

}  // namespace tw::model
