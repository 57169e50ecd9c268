// SPDX-License-Identifier: GPL-3.0-or-later
// A second solution of the same chemistry, for judging the first. It shares the value types of
// model/system.hpp and model/liquor.hpp and nothing else: thermodynamics, treatment of rows, equations
// and root finding are written again from the contract, in 34-digit arithmetic.
//
// Method: at a fixed ionic strength every balance is ln(sum of gains / sum of losses) = 0, solved by
// damped Newton with restarts; the ionic strength is the first root of I(species(I)) = I on the way up
// from 0 (bracketed, then Ridders' method), as is every margin on a fine scan of its path.
// Slow (milliseconds to a second) and meant to be.
#pragma once

#include <array>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "model/liquor.hpp"
#include "model/system.hpp"

namespace tw::test {

struct ReferenceMargin {
  double value = 0.0;
  std::optional<double> fraction;
  std::string solid;
  double tolerance = 0.0;  ///< how far double rounding alone may move `value`
};

using OptionalMargin = std::optional<ReferenceMargin>;

struct ReferenceMarginSet {
  OptionalMargin smallest;
  std::vector<std::pair<std::string, OptionalMargin>> bySolid;   ///< sludge solids only
  std::vector<std::pair<std::string, OptionalMargin>> byLigand;  ///< ligand_loss only
  /// A curve touches its line within 1e-5, or crosses it at the very end of the range: null or value is
  /// decided by rounding.
  bool undecided = false;
};

struct Reference {
  std::string fault;  ///< empty when solved; otherwise why not
  double ph = 0.0;
  double ionicStrength_mol_L = 0.0;
  std::optional<double> pM;
  std::vector<std::optional<double>> pComponent;   ///< -lg activity of each component
  std::vector<double> totals_mol_L;                ///< per component
  std::vector<double> freeLigands_mol_L;           ///< per ligand of the system
  std::vector<double> species_mol_L;               ///< per ChemicalSystem::species
  double hydroxide_mol_L = 0.0;
  double other_mol_L = 0.0;                        ///< the inert `other` ion of the balance
  bool closedByOther = false;
  std::vector<std::optional<double>> lgSaturation; ///< per solid
  std::array<ReferenceMarginSet, model::kMarginCount> margins;
  std::vector<std::pair<std::string, OptionalMargin>> metalGain;  ///< second metals
  /// Largest change of a ln activity per unit of relative error in one balance: the condition number.
  double condition = 0.0;
};

/// `withMargins` false leaves `margins` empty.
Reference solveIndependently(const model::ChemicalSystem& system, const model::LiquorInput& input,
                             bool withMargins);

/// Worst relative residual of a report's own activities in the independently written balances, and of
/// its ionic strength; 1 when a component is present that should be absent, or the other way round.
double independentResidual(const model::ChemicalSystem& system, const model::LiquorInput& input,
                           const model::LiquorReport& report);

// Pure water, 0..100 degC, each from its publication (see the .cpp).
double independentDensity_kg_L(double t_C);
double independentPermittivity(double t_C);
double independentA(double t_C);
double independentPKw(double t_C);

/// lg K of a row at temperature and I = 0 (conditional: as tabulated), and its proton coefficient once
/// OH^- is replaced. `productCharge` is the species' charge; nullopt for a solid's dissolution.
struct RowAtTemperature {
  double lgK = 0.0;
  std::vector<double> nu;  ///< per component
};
RowAtTemperature independentRow(const model::ChemicalSystem& system, const model::Reaction& row,
                                std::optional<int> productCharge, double t_C);
/// lg activity coefficient of an ion or neutral species at ionic strength I.
double independentLgGamma(model::ActivityModel model, int charge, double setschenow, double I,
                          double t_C);

}  // namespace tw::test
