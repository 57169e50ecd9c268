// SPDX-License-Identifier: GPL-3.0-or-later
// The balances of one problem as functions of ln activities and ionic strength: residuals, Jacobian, and
// the damped Newton iteration on them. EQUATIONS.md sections 2 and 3. Internal to the solver.
//
// Legend. x_k: ln activity of unknown component k; c_j: concentration of species j, mol/L; nu_jk:
// stoichiometry; w_ij: weight of species j in balance i; b_i: its right side, mol/L; P_i, N_i: everything
// the balance counts up and down; I: ionic strength, mol/L.
#pragma once

#include <Eigen/Core>
#include <Eigen/LU>
#include <cstddef>
#include <vector>

#include "model/layout.hpp"

namespace tw::model {

/// One problem, without the components that are absent or whose activity is given. Not thread safe: one
/// object per thread. `iterate` and everything under it allocate nothing; `resize` does.
class Balances {
 public:
  static constexpr std::size_t kNone = static_cast<std::size_t>(-1);
  /// Contract: residual of every balance relative to the sum of its terms.
  static constexpr double kAccepted = 1e-12;
  /// Where Newton stops looking for more: a few rounding errors of ln c (|ln c| is about 100).
  static constexpr double kAimedAt = 2e-14;
  /// A balance ion needed at less than this share of all charge is absent within rounding.
  static constexpr double kNoCharge = 1e-17;

  void resize(std::size_t unknowns, std::size_t species);

  // Filled by the owner after resize; see the legend.
  std::vector<double> nu;          ///< species x unknowns
  std::vector<double> weight;      ///< unknowns x species; in the balance row: share of q (Eq. 14)
  std::vector<double> value;       ///< b_i
  std::vector<double> lnConstant;  ///< ln K_j plus the given activities
  std::vector<double> charge, setschenow;
  ActivityModel model = ActivityModel::Conditional;
  double A = 0.0;
  std::size_t balanceRow = kNone;
  double balanceCharge = 0.0;     ///< z of the ion that closes the charge
  std::vector<double> balanceNu;  ///< species: how many of that ion each holds

  std::vector<char> nested;  ///< unknowns: this balance is not that of a stated total (Eq. 17)

  std::vector<double> x;       ///< unknown ln activities
  double I = 0.0;              ///< current ionic strength; solved for only with `withI`
  std::vector<double> offset;  ///< residuals aimed at; zero except while following a path

  /// Concentrations and residuals at (x, I).
  void evaluate();
  /// Damped Newton from (x, I); true when every residual is accepted. `withI`: I is one more unknown.
  /// `aim`: the relative residual to stop at; a looser one than kAccepted is accepted too.
  bool iterate(bool withI, int largestCount, double aim = kAimedAt);
  /// One round of one-at-a-time corrections at fixed I, cheap and safe far from the solution.
  void sweep();
  /// Follows a path of residuals down to zero at fixed I (Eq. 20); slower and surer than `iterate`.
  bool follow(int largestCount);
  /// Convex minimisation of the stated totals at fixed I, the other balances bracketed around it (Eq. 17).
  bool solveNested();
  /// d ln(I of the species)/d ln I - 1 with all balances kept (Eq. 18); negative on the first branch.
  double branchSlope();

  [[nodiscard]] double worstResidual(bool withI) const;
  [[nodiscard]] double worstLogResidual() const;  ///< largest |ln P - ln N|
  [[nodiscard]] std::size_t worstRow() const;
  [[nodiscard]] double relativeResidual(std::size_t row) const { return m_relative[row]; }
  /// What the balance ion would have to be, mol/L; negative where only the other sign closes it.
  [[nodiscard]] double balanceNeeded() const { return m_needed; }
  [[nodiscard]] double allCharge() const { return m_allCharge; }  ///< sum |z| c
  [[nodiscard]] double speciesIonicStrength() const { return m_speciesI; }
  [[nodiscard]] const std::vector<double>& concentration() const { return m_c; }
  [[nodiscard]] const std::vector<double>& lnConcentration() const { return m_lnC; }
  [[nodiscard]] const std::vector<double>& lnGamma() const { return m_lnGamma; }
  [[nodiscard]] int iterations() const { return m_iterations; }
  void resetCount() { m_iterations = 0; }

 private:
  void evaluateRow(std::size_t i);
  void evaluateBalanceRow();
  void assemble(bool withI);
  void addToRow(Eigen::Index row, std::size_t j, double e, bool withI);
  [[nodiscard]] double merit(bool withI) const;
  [[nodiscard]] bool solveStep(bool withI);
  [[nodiscard]] bool lineSearch(bool withI, double meritNow, double worstNow);
  [[nodiscard]] bool correct();
  void gradient();
  void convexStep();
  [[nodiscard]] bool minimise();
  [[nodiscard]] bool settle(std::size_t row);
  void saveTrialBase(bool withI);
  void moveTo(double lambda, bool withI);

  std::size_t m_unknowns = 0, m_species = 0;
  std::vector<double> m_c, m_lnC, m_lnGamma, m_slope;
  std::vector<double> m_P, m_N, m_R, m_relative, m_baseX, m_pathX, m_start, m_gradient, m_gradientSize;
  double m_baseLnI = 0.0, m_residualI = 0.0, m_relativeI = 0.0, m_speciesI = 0.0;
  double m_needed = 0.0, m_allCharge = 0.0;
  bool m_noBalanceIon = false, m_balanceIsNoise = false;
  Eigen::MatrixXd m_J;
  Eigen::VectorXd m_rhs, m_step;
  Eigen::PartialPivLU<Eigen::MatrixXd> m_lu;
  double m_stepScale = 1.0;  ///< share of the full Newton step that m_step is
  int m_iterations = 0;
};

}  // namespace tw::model
