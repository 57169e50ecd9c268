// SPDX-License-Identifier: GPL-3.0-or-later
// Solves the complexation equilibria of one liquor: from what fixes each component to every concentration.
// EQUATIONS.md sections 2 and 3.
//
// Method. Unknowns are ln activities and, where gamma depends on it, ln of the ionic strength, all in one
// damped Newton iteration. When that stalls, or lands on a solution that is not the one reached from
// I = 0, the ionic strength is walked upward from 0 and each step solved at fixed I, where the problem
// with totals is convex. On feasible input one of the two arrives.
#pragma once

#include <cstddef>
#include <string>
#include <vector>

#include "model/balances.hpp"
#include "model/layout.hpp"

namespace tw::model {

/// What fixes one component, after everything known beforehand is worked in.
enum class RowKind {
  Absent,     ///< total 0: leaves with all its species
  Total,      ///< sum nu c = value; of H^+ the proton total, any sign
  Free,       ///< sum nu c over species that hold no metal = value
  Excess,     ///< sum nu c - sum n_k T_k = value, where some T_k is itself unknown
  Activity,   ///< ln activity = value (H^+ by pH)
  Hydroxide,  ///< c(OH^-) + sum n_k T_k = value
  Balance,    ///< closes the charge
};

struct ComponentRow {
  RowKind kind = RowKind::Absent;
  double value = 0.0;                   ///< mol/L; Activity: natural logarithm
  std::vector<ComponentTerm> perMetal;  ///< n_k of Excess and Hydroxide
};

/// One row per component of the layout. When `rows[layout.balance]` is Balance, the layout's `other` ion
/// may close the charge instead; its own row then states the least total it keeps.
struct Problem {
  std::vector<ComponentRow> rows;
};

/// Where to start, and after a solve the solution. A default one starts cold.
struct Estimate {
  std::vector<double> lnActivity;  ///< per component; NaN where never known
  double I = 0.0;                  ///< mol/L
  bool warm = false;
  bool byOther = false;  ///< the charge is closed by `other`
};

enum class SolveStatus { Solved, ChargeCannotClose, IonicStrengthOutOfRange, NoSolution };

struct SolveOutcome {
  SolveStatus status = SolveStatus::NoSolution;
  int iterations = 0;           ///< Newton steps, fallback included
  double residual = 0.0;        ///< largest relative residual of any balance
  std::size_t residualRow = 0;  ///< component
};

/// The workspace and the solver. Bound to one layout, which must outlive it; not thread safe.
class Equilibrium {
 public:
  explicit Equilibrium(const Layout& layout);

  /// Solves and leaves the liquor readable below. `estimate` is changed only on success.
  SolveOutcome solve(const Constants& constants, const Problem& problem, Estimate& estimate);

  // The solved liquor; meaningful after Solved only.
  [[nodiscard]] const std::vector<double>& concentration() const { return m_c; }  ///< per species, mol/L
  [[nodiscard]] const std::vector<double>& lnGamma() const { return m_lnGamma; }  ///< per species
  [[nodiscard]] double lnActivity(std::size_t component) const { return m_lnA[component]; }
  [[nodiscard]] bool present(std::size_t component) const { return m_present[component] != 0; }
  [[nodiscard]] bool speciesPresent(std::size_t j) const { return m_speciesPresent[j] != 0; }
  [[nodiscard]] double ionicStrength() const { return m_I; }
  [[nodiscard]] double total(std::size_t component) const;    ///< sum nu c, mol/L
  [[nodiscard]] double freeSum(std::size_t component) const;  ///< the `free` sum, mol/L

 private:
  void setUp(bool byOther);
  void fillRow(std::size_t unknown, std::size_t component, bool closesCharge);
  void coldStart();
  [[nodiscard]] SolveStatus solveSide(bool warm, bool mayTurn, const Estimate& estimate);
  [[nodiscard]] bool jointFrom(bool warm, const Estimate& estimate);
  [[nodiscard]] bool jointSolved(bool warm, const Estimate& estimate);
  [[nodiscard]] bool firstBranch(bool thorough);
  [[nodiscard]] bool solveFixed(double I, double aim = Balances::kAimedAt);
  [[nodiscard]] bool solveFixedHere(double I, double aim = Balances::kAimedAt);
  [[nodiscard]] SolveStatus walkUp();
  [[nodiscard]] bool closeIn(double lnLow, double lnHigh);
  [[nodiscard]] bool sideFits() const;
  [[nodiscard]] bool canSwitch() const;
  void keepX();
  void publish(SolveOutcome& outcome, Estimate& estimate);

  const Layout& m_layout;
  const Constants* m_constants = nullptr;
  const Problem* m_problem = nullptr;
  Balances m_balances;
  bool m_withI = false, m_byOther = false;
  std::vector<std::size_t> m_unknown;  ///< component of each unknown
  std::vector<std::size_t> m_active;   ///< species of each active one
  std::vector<char> m_present, m_speciesPresent;
  std::vector<double> m_lnA, m_c, m_lnGamma, m_savedX;
  double m_I = 0.0;
};

}  // namespace tw::model
