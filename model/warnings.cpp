// SPDX-License-Identifier: GPL-3.0-or-later
// Honest limits: what a result must say about itself.
#include <algorithm>
#include <cmath>
#include <set>

#include "model/activity.hpp"
#include "model/report.hpp"
#include "model/temperature.hpp"

namespace tw::model {

namespace {

constexpr double kFar_K = 15.0;            // from T_C without an enthalpy: the constant is a guess
constexpr double kShareThatCounts = 0.01;  // of a metal or ligand

double totalOf(const LiquorReport& report, ComponentIndex i) { return report.totals_mol_L[i].second; }

/// Whether the species holds over 1 % of a metal or ligand.
bool weighs(const ChemicalSystem& system, const LiquorReport& report, const Species& species, double mol_L) {
  for (const ComponentTerm& term : species.formation.terms) {
    const bool metal = system.components[term.component].isMetal || term.component == system.metal;
    const bool ligand =
        std::find(system.ligands.begin(), system.ligands.end(), term.component) != system.ligands.end();
    if ((metal || ligand) && term.nu * mol_L > kShareThatCounts * totalOf(report, term.component))
      return true;
  }
  return false;
}

/// Solids that a margin names, or that are past their line.
std::set<std::string> decidingSolids(const LiquorReport& report) {
  std::set<std::string> ids;
  for (const MarginSet& set : report.margins) {
    if (set.smallest) ids.insert(set.smallest->solid);
    for (const auto& [id, margin] : set.byLigand) {
      if (margin) ids.insert(margin->solid);
    }
  }
  for (const SecondMetal& metal : report.secondMetals) {
    if (metal.metalGain) ids.insert(metal.metalGain->solid);
  }
  for (const SolidState& solid : report.solids) {
    if (solid.role == SolidRole::Sludge && solid.lgSaturation && *solid.lgSaturation > solid.threshold) {
      ids.insert(solid.id);
    }
  }
  return ids;
}

/// A solid judged by its own limits decides its own margins.
void addOwnLimited(const ChemicalSystem& system, const LiquorReport& report, std::set<std::string>& ids) {
  for (const MarginSet& set : report.margins) {
    for (const auto& [id, margin] : set.bySolid) {
      if (!margin) continue;
      const auto solid = std::find_if(system.solids.begin(), system.solids.end(),
                                      [&id = id](const Solid& s) { return s.id == id; });
      if (solid != system.solids.end() && !solid->limits.empty()) ids.insert(id);
    }
  }
}

}  // namespace

void addWarnings(const ChemicalSystem& system, const LiquorInput& input, LiquorReport& report) {
  if (system.activityModel == ActivityModel::Davies && report.ionicStrength_mol_L > kDaviesRange_mol_L) {
    report.warnings.emplace_back("activity_model_out_of_range");
    report.reliable = false;
  }
  const bool sampled = system.phTakenAtSample && input.sampleTemperature_C;
  const auto kept = [&](const Constant& K) {
    return keptAsWritten(K, input.temperature_C) || (sampled && keptAsWritten(K, *input.sampleTemperature_C));
  };
  const auto consider = [&](const std::string& row, const Constant& K, bool decides) {
    if (!kept(K)) return;
    report.noEnthalpy.push_back(row);
    if (std::abs(K.T_C - input.temperature_C) > kFar_K && decides) {
      report.warnings.push_back("no_enthalpy_far:" + row);
      report.reliable = false;
    }
  };
  const std::size_t first = system.components.size();  // complexes follow the bare components
  for (std::size_t k = 0; k < system.species.size(); ++k) {
    const Species& species = system.species[k];
    const double mol_L = report.species[first + k].mol_L;
    consider(species.formula, species.formation.K, weighs(system, report, species, mol_L));
  }
  std::set<std::string> deciding = decidingSolids(report);
  addOwnLimited(system, report, deciding);
  for (const Solid& solid : system.solids) {
    consider(solid.id, solid.dissolution.K, deciding.count(solid.id) != 0);
  }
  if (system.ownHydroxide) consider(kHydroxide, system.ownHydroxide->formation.K, false);
}

}  // namespace tw::model
