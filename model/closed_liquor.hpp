// SPDX-License-Identifier: GPL-3.0-or-later
// A liquor solved from its readings and closed: every total known. From there it is moved, as margins and
// sweeps ask: pH held and the balance ion following, or everything kept and pH following.
// EQUATIONS.md sections 2 and 4.
#pragma once

#include <memory>
#include <optional>
#include <vector>

#include "model/equilibrium.hpp"
#include "model/layout.hpp"
#include "model/liquor.hpp"
#include "model/result.hpp"
#include "model/system.hpp"

namespace tw::model {

/// Every total of a liquor, per component of the layout, mol/L; the proton's entry is the proton total.
using Totals = std::vector<double>;

/// One system, one liquor, one workspace. `system` must outlive it. Not thread safe, not movable.
class ClosedLiquor {
 public:
  /// Lays out, solves what the readings state (at the sample's temperature first where the pH was taken on
  /// a sample) and closes. Faults as of analyse().
  static Result<std::unique_ptr<ClosedLiquor>> open(const ChemicalSystem& system, const LiquorInput& input);

  ClosedLiquor(const ClosedLiquor&) = delete;
  ClosedLiquor& operator=(const ClosedLiquor&) = delete;

  [[nodiscard]] const ChemicalSystem& system() const { return m_system; }
  [[nodiscard]] const Layout& layout() const { return m_layout; }
  [[nodiscard]] const Constants& constants() const { return m_constants; }
  [[nodiscard]] const Equilibrium& now() const { return m_solver; }  ///< what was solved last

  // The closed liquor as opened.
  [[nodiscard]] const Totals& totals() const { return m_totals; }
  [[nodiscard]] double ph() const { return m_ph; }
  [[nodiscard]] double temperature_C() const { return m_temperature_C; }
  [[nodiscard]] std::optional<double> phMeasured() const { return m_phMeasured; }
  [[nodiscard]] std::optional<double> phMeasuredAt_C() const { return m_phMeasuredAt_C; }
  [[nodiscard]] const Estimate& start() const { return m_start; }  ///< for the first step of a path
  [[nodiscard]] const SolveOutcome& outcome() const { return m_outcome; }

  // Moves, all at the bath's temperature unless said; false where no feasible liquor exists. `estimate` is
  // the neighbour to start from and becomes the new point.
  /// These totals at this pH; the balance ion, or its other, closes the charge.
  bool moveToPh(double ph, const Totals& totals, Estimate& estimate);
  /// These totals at this concentration of OH^-, mol/L; charge as above.
  bool moveToHydroxide(double hydroxide_mol_L, const Totals& totals, Estimate& estimate);
  /// All totals and the proton total divided by `factor`, at t_C; pH follows.
  bool moveClosed(double t_C, double factor, Estimate& estimate);

  /// lg saturation of solid `s` in the liquor solved last (Eq. 19); NaN where a component is absent.
  [[nodiscard]] double lgSaturation(std::size_t s) const;

 private:
  explicit ClosedLiquor(const ChemicalSystem& system, Layout layout);
  std::optional<Fault> solveStated(const LiquorInput& input);
  void close();
  bool moveHeld(const Totals& totals, Estimate& estimate);
  void setTemperature(double t_C);
  [[nodiscard]] Fault faultOf(const SolveOutcome& outcome) const;

  const ChemicalSystem& m_system;
  Layout m_layout;
  Constants m_constants;
  Equilibrium m_solver;
  Problem m_stated, m_moved;
  Totals m_totals;
  double m_otherLeast = 0.0;  ///< total that the `other` ion keeps in any case
  double m_ph = 7.0, m_temperature_C = 25.0;
  std::optional<double> m_phMeasured, m_phMeasuredAt_C;
  Estimate m_start;
  SolveOutcome m_outcome;
};

/// What the readings state, one row per component. Faults: `not_a_number`, `negative_total`, `infeasible`.
Result<Problem> statedProblem(const ChemicalSystem& system, const Layout& layout, const LiquorInput& input);

}  // namespace tw::model
