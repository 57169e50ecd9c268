// SPDX-License-Identifier: GPL-3.0-or-later
// The sure path of Equilibrium: the ionic strength walked upward from 0, each step solved at fixed I; and
// the check that a solution is the first one on that walk. EQUATIONS.md section 3.
#include <algorithm>
#include <cmath>

#include "model/activity.hpp"
#include "model/equilibrium.hpp"

namespace tw::model {

namespace {
constexpr double kFirstI = 1e-9;  // mol/L, below any liquor: pure water has 1e-7
constexpr double kRatio = 1.12;   // of one step of the walk to the next
constexpr int kFixedCount = 40;   // Newton steps at fixed I before the path is followed
constexpr int kPathCount = 400;
}  // namespace

bool Equilibrium::solveFixedHere(double I, double aim) {
  m_balances.I = I;
  if (m_balances.iterate(false, kFixedCount, aim)) return true;
  coldStart();
  m_balances.I = I;
  if (m_balances.iterate(false, kFixedCount, aim)) return true;
  coldStart();
  m_balances.I = I;
  if (m_balances.follow(kPathCount)) return true;
  coldStart();
  m_balances.I = I;
  return m_balances.solveNested();
}

/// At fixed I with whichever ion closes the charge there; keeps x in m_lnA.
bool Equilibrium::solveFixed(double I, double aim) {
  bool solved = solveFixedHere(I, aim);
  if (canSwitch() && (!solved || !sideFits())) {
    keepX();
    setUp(!m_byOther);
    coldStart();
    for (std::size_t k = 0; k < m_unknown.size(); ++k) {
      if (solved && std::isfinite(m_lnA[m_unknown[k]]) && k != m_balances.balanceRow) {
        m_balances.x[k] = m_lnA[m_unknown[k]];
      }
    }
    solved = solveFixedHere(I, aim);
  }
  return solved;
}

/// True when no smaller I solves too: the branch has the right slope (Eq. 18) and, when `thorough`, the
/// species stay above I all the way down. Leaves the balances at the solution it found them at.
bool Equilibrium::firstBranch(bool thorough) {
  if (!(m_balances.branchSlope() < 0.0)) return false;
  if (!thorough) return true;
  constexpr double kSignOnly = 1e-3;  // of a residual: enough to tell which side of I the species are on
  constexpr double kStations[] = {0.85, 0.6, 0.35, 0.15, 0.04, 0.005};
  const double I = m_balances.I;
  const bool side = m_byOther;
  m_savedX.assign(m_balances.x.begin(), m_balances.x.end());
  bool first = true;
  for (const double share : kStations) {
    if (!solveFixed(I * share, kSignOnly) || m_balances.speciesIonicStrength() <= I * share) {
      first = false;
      break;
    }
  }
  if (m_byOther != side) setUp(side);
  std::copy(m_savedX.begin(), m_savedX.end(), m_balances.x.begin());
  m_balances.I = I;
  m_balances.evaluate();
  return first;
}

/// Finds the first I that its own species reproduce; I rises by a constant ratio, so a pair of solutions
/// closer together than that may be stepped over.
SolveStatus Equilibrium::walkUp() {
  coldStart();
  if (!solveFixed(0.0)) return SolveStatus::NoSolution;
  double low = kFirstI;
  for (double I = kFirstI; low < kLargestIonicStrength; I = std::min(I * kRatio, kLargestIonicStrength)) {
    if (!solveFixed(I)) return SolveStatus::NoSolution;
    if (m_balances.speciesIonicStrength() <= I) {
      return closeIn(std::log(low), std::log(I)) ? SolveStatus::Solved : SolveStatus::NoSolution;
    }
    low = I;
  }
  return SolveStatus::IonicStrengthOutOfRange;
}

/// The root of Eq. 16 between two ionic strengths, by joint Newton where it stays inside, else by halving.
bool Equilibrium::closeIn(double lnLow, double lnHigh) {
  constexpr int kHalvings = 60;
  for (int h = 0; h < kHalvings; ++h) {
    if (h % 4 == 0) {
      const double I = m_balances.I;
      m_savedX.assign(m_balances.x.begin(), m_balances.x.end());
      if (m_balances.iterate(true, 15) && sideFits()) {
        const double lnI = std::log(m_balances.I);
        const double slack = 1e-9;
        if (lnI >= lnLow - slack && lnI <= lnHigh + slack && m_balances.branchSlope() < 0.0) return true;
      }
      std::copy(m_savedX.begin(), m_savedX.end(), m_balances.x.begin());
      m_balances.I = I;
    }
    const double lnI = 0.5 * (lnLow + lnHigh);
    if (!solveFixed(std::exp(lnI))) return false;
    (m_balances.speciesIonicStrength() > std::exp(lnI) ? lnLow : lnHigh) = lnI;
  }
  return m_balances.worstResidual(true) <= Balances::kAccepted;
}

}  // namespace tw::model
