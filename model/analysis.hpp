// SPDX-License-Identifier: GPL-3.0-or-later
// The one door into the chemistry: analyse a liquor, sweep one of its quantities.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "model/liquor.hpp"
#include "model/result.hpp"
#include "model/system.hpp"

namespace tw::model {

struct AnalyseOptions {
  bool margins = true;  ///< false: equilibrium and saturation only (a preview, a residual check)
};

/// Solves the equilibria of one liquor, closes it, and finds every margin up to the sludge line
/// (EQUATIONS.md sections 1 to 7). Margins of a liquor already past a line are null.
///
/// Faults, all with the component or quantity as subject: `temperature_out_of_range` (0..100 degC),
/// `negative_total`, `not_a_number`, `charge_cannot_close`, `ionic_strength_out_of_range`,
/// `activity_model_missing` (a model this version lacks), `infeasible` (no liquor has these values).
/// On feasible input it never fails; the residual of every balance is <= 1e-12 relative.
Result<LiquorReport> analyse(const ChemicalSystem& system, const LiquorInput& input,
                             const AnalyseOptions& options = {});

enum class SweepOver { Ph, Temperature, Ligand, Metal, Dilution };

struct SweepRequest {
  SweepOver over = SweepOver::Ph;
  /// Ligand only: which component; nullopt = OH^- as free hydroxide (mol/L).
  std::optional<ComponentIndex> ligand;
  double from = 0.0, to = 0.0;  ///< pH, degC, mol/L total (OH^- free), or factor
  int points = 2;               ///< >= 2, both ends included
};

struct SweepPoint {
  double x = 0.0;
  /// nullopt where no feasible liquor exists at this x.
  std::optional<LiquorReport> liquor;  ///< without margins
  /// Share of the main metal's total held in each species that holds it: formula, share.
  std::vector<std::pair<std::string, double>> shares;
};

/// Follows one quantity from the solved liquor, everything else held as the margins hold it: totals
/// kept, pH fixed and the balance ion following (ph, ligand, metal), or all totals and the proton total
/// kept (temperature, dilution).
Result<std::vector<SweepPoint>> sweep(const ChemicalSystem& system, const LiquorInput& input,
                                      const SweepRequest& request);

}  // namespace tw::model
