// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/equilibrium.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "model/activity.hpp"
#include "model/physical.hpp"

namespace tw::model {

namespace {
constexpr double kUnknown = std::numeric_limits<double>::quiet_NaN();
constexpr double kNeutralLnH = -7.0 * kLn10;
}  // namespace

Equilibrium::Equilibrium(const Layout& layout)
    : m_layout(layout),
      m_present(layout.components, 0),
      m_speciesPresent(layout.species, 0),
      m_lnA(layout.components, kUnknown),
      m_c(layout.species, 0.0),
      m_lnGamma(layout.species, 0.0) {
  m_unknown.reserve(layout.components);
  m_active.reserve(layout.species);
}

double Equilibrium::total(std::size_t component) const {
  double sum = 0.0;
  for (std::size_t j = 0; j < m_layout.species; ++j) sum += m_layout.nuOf(j, component) * m_c[j];
  return sum;
}

double Equilibrium::freeSum(std::size_t component) const {
  double sum = 0.0;
  for (std::size_t j = 0; j < m_layout.species; ++j) {
    const double nu = m_layout.nuOf(j, component);
    if (nu > 0.0 && m_layout.holdsMetal[j] == 0) sum += nu * m_c[j];
  }
  return sum;
}

/// Chooses unknowns and active species for one side of the charge and fills the balances.
void Equilibrium::setUp(bool byOther) {
  m_byOther = byOther;
  const std::vector<ComponentRow>& rows = m_problem->rows;
  const bool closes = m_layout.balance && rows[*m_layout.balance].kind == RowKind::Balance;
  m_unknown.clear();
  for (std::size_t i = 0; i < m_layout.components; ++i) {
    const bool isFirst = closes && i == *m_layout.balance;
    const bool isOther = closes && byOther && i == m_layout.other.value_or(Balances::kNone);
    m_present[i] = (rows[i].kind != RowKind::Absent || isOther) && !(isFirst && byOther);
    if (m_present[i] && rows[i].kind != RowKind::Activity) m_unknown.push_back(i);
  }
  m_active.clear();
  for (std::size_t j = 0; j < m_layout.species; ++j) {
    bool present = true;
    for (std::size_t i = 0; i < m_layout.components; ++i) {
      present = present && (m_layout.nuOf(j, i) == 0.0 || m_present[i]);
    }
    m_speciesPresent[j] = present;
    if (present) m_active.push_back(j);
  }
  m_balances.resize(m_unknown.size(), m_active.size());
  m_balances.model = m_constants->model;
  m_balances.A = m_constants->A;
  for (std::size_t a = 0; a < m_active.size(); ++a) {
    const std::size_t j = m_active[a];
    m_balances.charge[a] = m_layout.charge[j];
    m_balances.setschenow[a] = m_layout.setschenow[j];
    m_balances.lnConstant[a] = m_constants->lnK[j];
    for (std::size_t i = 0; i < m_layout.components; ++i) {
      if (m_present[i] && rows[i].kind == RowKind::Activity) {
        m_balances.lnConstant[a] += m_layout.nuOf(j, i) * rows[i].value;
      }
    }
    for (std::size_t k = 0; k < m_unknown.size(); ++k) {
      m_balances.nu[a * m_unknown.size() + k] = m_layout.nuOf(j, m_unknown[k]);
    }
  }
  for (std::size_t k = 0; k < m_unknown.size(); ++k) {
    const std::size_t i = m_unknown[k];
    fillRow(k, i, closes && i == (byOther ? *m_layout.other : *m_layout.balance));
  }
}

void Equilibrium::fillRow(std::size_t unknown, std::size_t component, bool closesCharge) {
  const ComponentRow& row = m_problem->rows[component];
  double* w = m_balances.weight.data() + unknown * m_active.size();
  m_balances.value[unknown] = row.kind == RowKind::Hydroxide ? -row.value : row.value;
  m_balances.nested[unknown] = closesCharge || row.kind != RowKind::Total;
  const double zBalance = m_layout.componentCharge[component];
  if (closesCharge) {
    m_balances.balanceRow = unknown;
    m_balances.balanceCharge = zBalance;
    m_balances.value[unknown] = 0.0;
  }
  for (std::size_t a = 0; a < m_active.size(); ++a) {
    const std::size_t j = m_active[a];
    const double nu = m_layout.nuOf(j, component);
    if (closesCharge) {  // Eq. 14
      m_balances.balanceNu[a] = std::max(nu, 0.0);
      w[a] = -(m_layout.charge[j] - zBalance * m_balances.balanceNu[a]) / zBalance;
      continue;
    }
    if (row.kind == RowKind::Hydroxide) {  // minus signs: then it rises with ln a(H^+) like every balance
      w[a] = j == m_layout.hydroxide ? -1.0 : 0.0;
      for (const ComponentTerm& metal : row.perMetal) w[a] -= metal.nu * m_layout.nuOf(j, metal.component);
    } else if (row.kind == RowKind::Free) {
      w[a] = nu > 0.0 && m_layout.holdsMetal[j] == 0 ? nu : 0.0;
    } else {
      w[a] = nu;
      for (const ComponentTerm& metal : row.perMetal) w[a] -= metal.nu * m_layout.nuOf(j, metal.component);
    }
  }
}

/// Every stated amount as if uncomplexed, then rounds of single corrections.
void Equilibrium::coldStart() {
  constexpr int kSweeps = 12;
  constexpr double kClose = 1.0;  // ln units: Newton's ground
  double guessI = 0.0;
  for (std::size_t k = 0; k < m_unknown.size(); ++k) {
    const std::size_t i = m_unknown[k];
    const ComponentRow& row = m_problem->rows[i];
    double amount = std::abs(row.value);
    if (k == m_balances.balanceRow) amount = std::max(amount, 0.1);
    m_balances.x[k] = i == m_layout.proton ? kNeutralLnH : std::log(std::max(amount, 1e-250));
    const double z = m_layout.componentCharge[i];
    if (i != m_layout.proton && k != m_balances.balanceRow) guessI += 0.5 * z * z * amount;
  }
  if (m_withI) m_balances.I = std::clamp(guessI, 1e-7, 0.5);
  m_balances.evaluate();
  for (int s = 0; s < kSweeps; ++s) {
    m_balances.sweep();
    m_balances.evaluate();
    if (m_balances.worstLogResidual() < kClose) break;
  }
}

bool Equilibrium::canSwitch() const {
  return m_balances.balanceRow != Balances::kNone && m_layout.other.has_value();
}

/// Whether the ion that now closes the charge is the right one (Eq. 15), within rounding.
bool Equilibrium::sideFits() const {
  if (m_balances.balanceRow == Balances::kNone) return true;
  const double slack = 0.5 * Balances::kAccepted * m_balances.allCharge();
  double least = 0.0;
  if (m_byOther) {
    const ComponentRow& stated = m_problem->rows[*m_layout.other];
    if (stated.kind == RowKind::Total) least = stated.value;
  }
  return (m_balances.balanceNeeded() - least) * std::abs(m_balances.balanceCharge) >= -slack;
}

void Equilibrium::keepX() {
  for (std::size_t k = 0; k < m_unknown.size(); ++k) m_lnA[m_unknown[k]] = m_balances.x[k];
}

/// Joint Newton in ln activities and ln I from the estimate or from a cold start.
bool Equilibrium::jointFrom(bool warm, const Estimate& estimate) {
  constexpr int kLargestCount = 60;
  constexpr int kLargestWarmCount = 15;
  bool known = warm;
  for (const std::size_t i : m_unknown) known = known && std::isfinite(estimate.lnActivity[i]);
  if (known) {
    for (std::size_t k = 0; k < m_unknown.size(); ++k) m_balances.x[k] = estimate.lnActivity[m_unknown[k]];
    m_balances.I = std::max(estimate.I, 1e-12);
    if (m_balances.iterate(m_withI, kLargestWarmCount)) return true;
  }
  coldStart();
  return m_balances.iterate(m_withI, kLargestCount);
}

/// The joint iteration, and where it stalls once more from the solution at the I it would start with.
bool Equilibrium::jointSolved(bool warm, const Estimate& estimate) {
  constexpr int kLargestCount = 40;
  if (jointFrom(warm, estimate)) return true;
  coldStart();
  return solveFixedHere(m_balances.I) && m_balances.iterate(true, kLargestCount);
}

SolveStatus Equilibrium::solveSide(bool warm, bool mayTurn, const Estimate& estimate) {
  // So large a move of I between neighbours of a path may have jumped to another branch.
  constexpr double kJump = 0.25;
  if (!m_withI) {
    if (jointFrom(warm, estimate) || solveFixedHere(0.0)) return SolveStatus::Solved;
    return SolveStatus::NoSolution;
  }
  if (jointSolved(warm, estimate) && m_balances.I <= kLargestIonicStrength) {
    if (!sideFits() && mayTurn) return SolveStatus::Solved;  // the caller turns to the other ion
    const bool near = warm && std::abs(std::log(m_balances.I / std::max(estimate.I, 1e-12))) < kJump;
    if (firstBranch(!near)) return SolveStatus::Solved;
  }
  return walkUp();
}

SolveOutcome Equilibrium::solve(const Constants& constants, const Problem& problem, Estimate& estimate) {
  m_constants = &constants;
  m_problem = &problem;
  m_withI = constants.model != ActivityModel::Conditional;
  m_balances.resetCount();
  estimate.lnActivity.resize(m_layout.components, kUnknown);
  const bool hasOther =
      m_layout.balance && m_layout.other && problem.rows[*m_layout.balance].kind == RowKind::Balance;
  bool side = hasOther && estimate.byOther;
  SolveOutcome outcome;
  for (int attempt = 0; attempt < (hasOther ? 2 : 1); ++attempt) {
    setUp(side);
    outcome.status = solveSide(estimate.warm, hasOther && attempt == 0, estimate);
    if (outcome.status == SolveStatus::Solved && sideFits()) {
      publish(outcome, estimate);
      return outcome;
    }
    if (outcome.status == SolveStatus::Solved) outcome.status = SolveStatus::ChargeCannotClose;
    side = !m_byOther;
  }
  outcome.iterations = m_balances.iterations();
  return outcome;
}

void Equilibrium::publish(SolveOutcome& outcome, Estimate& estimate) {
  keepX();
  std::fill(m_c.begin(), m_c.end(), 0.0);
  std::fill(m_lnGamma.begin(), m_lnGamma.end(), 0.0);
  for (std::size_t a = 0; a < m_active.size(); ++a) {
    m_c[m_active[a]] = m_balances.concentration()[a];
    m_lnGamma[m_active[a]] = m_balances.lnGamma()[a];
  }
  for (std::size_t i = 0; i < m_layout.components; ++i) {
    const ComponentRow& row = m_problem->rows[i];
    if (row.kind == RowKind::Activity) m_lnA[i] = row.value;
    if (m_present[i]) estimate.lnActivity[i] = m_lnA[i];
  }
  m_I = m_balances.speciesIonicStrength();
  estimate.I = m_I;
  estimate.byOther = m_byOther;
  estimate.warm = true;
  outcome.iterations = m_balances.iterations();
  outcome.residual = m_balances.worstResidual(m_withI);
  const std::size_t worst = m_balances.worstRow();
  outcome.residualRow = worst == Balances::kNone ? m_layout.proton : m_unknown[worst];
}

}  // namespace tw::model
