// SPDX-License-Identifier: GPL-3.0-or-later
// What goes into an analysis of one liquor and what comes out. Plain values, no behaviour.
//
// Units: concentrations mol per litre of solution, temperature degC, pH on the activity scale,
// lg = decimal logarithm. An absent number is std::nullopt, never a guess.
#pragma once

#include <array>
#include <optional>
#include <string>
#include <vector>

#include "model/system.hpp"

namespace tw::model {

/// One liquor as analysed.
struct LiquorInput {
  double temperature_C = 25.0;                 ///< bath temperature, 0..100
  std::optional<double> sampleTemperature_C;   ///< where pH was read, if not at bath temperature
  /// One value per component, in the order of ChemicalSystem::components, meaning what `set_by` says:
  /// mol/L for total, free, excess, fixed, proton_total, hydroxide (mol/L of OH^-), pH for `ph`;
  /// ignored for `balance`.
  std::vector<double> value;
};

struct SpeciesAmount {
  std::string formula;
  int charge = 0;
  double mol_L = 0.0;
  std::optional<double> lgGamma;     ///< null where the species left the system (a total of 0)
  std::optional<double> lgActivity;
};

struct SolidState {
  std::string id;
  SolidRole role = SolidRole::Sludge;
  std::optional<double> lgSaturation;  ///< per formula unit of `gives`; null where a component is absent
  double threshold = 0.0;
};

/// One margin. `value` is pH units, K or a factor; for ligand_loss and metal_gain the mol/L, with
/// `fraction` of the total beside it.
struct Margin {
  double value = 0.0;
  std::optional<double> fraction;
  std::string solid;   ///< the solid that reaches its line first
  std::string ligand;  ///< ligand_loss only
  /// The number that limits are compared with: fraction where there is one, else value.
  [[nodiscard]] double judged() const { return fraction ? *fraction : value; }
};

/// Margins of one kind: the smallest over the sludge solids, and each solid's own.
struct MarginSet {
  std::optional<Margin> smallest;
  std::vector<std::pair<std::string, std::optional<Margin>>> bySolid;
  /// ligand_loss only: each ligand alone, in the recipe's order.
  std::vector<std::pair<std::string, std::optional<Margin>>> byLigand;
};

struct SecondMetal {
  std::string formula;
  std::optional<double> pM;
  double free_mol_L = 0.0;
  std::optional<Margin> metalGain;
};

struct SolverReport {
  int iterations = 0;
  double residual = 0.0;          ///< largest relative residual of any balance
  std::string residualComponent;  ///< whose balance that is
};

/// A closed liquor: every total known.
struct LiquorReport {
  double temperature_C = 25.0;
  double ph = 7.0;                             ///< at bath temperature
  std::optional<double> phMeasured;            ///< as the meter showed it, when on a cooled sample
  std::optional<double> phMeasuredAt_C;
  double ionicStrength_mol_L = 0.0;
  double waterActivity = 1.0;
  std::optional<double> pM;                    ///< -lg activity of the metal; null at zero metal
  double freeMetal_mol_L = 0.0;                ///< uncomplexed aquo ion
  std::vector<std::pair<std::string, double>> freeLigands_mol_L;  ///< the `free` sum for each ligand
  std::vector<std::pair<std::string, double>> totals_mol_L;       ///< per component, in system order
  std::vector<SpeciesAmount> species;          ///< bare components, complexes, OH^-
  std::vector<SolidState> solids;
  std::array<MarginSet, kMarginCount> margins; ///< indexed by MarginKind
  std::vector<SecondMetal> secondMetals;
  std::vector<std::string> warnings;           ///< "code" or "code:subject"
  std::vector<std::string> noEnthalpy;         ///< rows whose lg K was kept as written
  bool reliable = true;
  SolverReport solver;

  [[nodiscard]] const MarginSet& margin(MarginKind kind) const {
    return margins[static_cast<std::size_t>(kind)];
  }
};

}  // namespace tw::model
