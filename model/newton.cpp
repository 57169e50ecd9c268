// SPDX-License-Identifier: GPL-3.0-or-later
// The iteration of Balances: damped Newton on ln P - ln N, and the path that is followed when it stalls.
#include <algorithm>
#include <cmath>

#include "model/activity.hpp"
#include "model/balances.hpp"

namespace tw::model {

namespace {
constexpr double kLargestStep = 25.0;    // ln units; a longer Newton step is scaled down
constexpr double kLargestStepLnI = 1.5;  // the model bends quickly in I
constexpr double kSufficient = 1e-4;     // Armijo's share; Nocedal & Wright, Numerical Optimization, ch. 3
constexpr double kSmallestLambda = 1e-8;
constexpr double kWildI = 4.0 * kLargestIonicStrength;
constexpr double kNoPivot = 1e-12;  // rows of the Jacobian are of order 1
constexpr double kTrace = 1e-12;
constexpr int kPolish = 50;
}  // namespace

bool Balances::solveStep(bool withI) {
  assemble(withI);
  const auto size = m_J.rows();
  for (std::size_t i = 0; i < m_unknowns; ++i) m_rhs(static_cast<Eigen::Index>(i)) = -m_R[i];
  m_rhs(size - 1) = withI ? -m_residualI : 0.0;
  m_lu.compute(m_J);
  // Two balances held by one and the same species are equal within rounding; what tells them apart is the
  // sign of a vanishing pivot. A trace on the diagonal, which is never negative, keeps it right.
  if (m_lu.matrixLU().diagonal().cwiseAbs().minCoeff() < kNoPivot) {
    m_J.diagonal().array() += kTrace;
    m_lu.compute(m_J);
  }
  m_step = m_lu.solve(m_rhs);
  if (!m_step.allFinite()) return false;
  m_stepScale = 1.0;
  double& scale = m_stepScale;
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    scale = std::min(scale, kLargestStep / std::max(std::abs(m_step(static_cast<Eigen::Index>(i))), 1e-9));
  }
  if (withI) scale = std::min(scale, kLargestStepLnI / std::max(std::abs(m_step(size - 1)), 1e-9));
  m_step *= scale;
  return true;
}

void Balances::saveTrialBase(bool withI) {
  std::copy(x.begin(), x.end(), m_baseX.begin());
  if (withI) m_baseLnI = std::log(std::max(I, 1e-300));
}

void Balances::moveTo(double lambda, bool withI) {
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    x[i] = m_baseX[i] + lambda * m_step(static_cast<Eigen::Index>(i));
  }
  if (withI) {
    I = std::min(std::exp(m_baseLnI + lambda * m_step(static_cast<Eigen::Index>(m_unknowns))), kWildI);
  }
  evaluate();
}

bool Balances::lineSearch(bool withI, double meritNow, double worstNow) {
  const double baseI = I;
  saveTrialBase(withI);
  for (double lambda = 1.0; lambda >= kSmallestLambda; lambda *= 0.5) {
    moveTo(lambda, withI);
    const double trial = merit(withI);
    if (std::isfinite(trial) && trial <= (1.0 - 2.0 * kSufficient * lambda * m_stepScale) * meritNow)
      return true;
    // Within rounding of the solution the merit is noise: take the better point and stop there.
    if (worstNow <= kAccepted) break;
    if (worstResidual(withI) <= kAccepted) return true;
  }
  std::copy(m_baseX.begin(), m_baseX.end(), x.begin());
  I = baseI;
  evaluate();
  return false;
}

bool Balances::iterate(bool withI, int largestCount, double aim) {
  const double accepted = std::max(aim, kAccepted);
  evaluate();
  for (int count = 0; count < largestCount; ++count) {
    const double worst = worstResidual(withI);
    const double now = merit(withI);
    if (!std::isfinite(now)) return false;
    if (worst <= aim) return true;
    if (!solveStep(withI)) return worst <= accepted;
    ++m_iterations;
    if (!lineSearch(withI, now, worst)) return worst <= accepted;
  }
  return worstResidual(withI) <= accepted;
}

bool Balances::correct() {
  constexpr double kOnPath = 1e-6;  // ln units: close enough to carry on
  constexpr int kTries = 8;
  evaluate();
  for (int t = 0; t < kTries; ++t) {
    if (merit(false) <= kOnPath * kOnPath) return true;
    if (!solveStep(false)) return false;
    ++m_iterations;
    saveTrialBase(false);
    moveTo(1.0, false);
  }
  return merit(false) <= kOnPath * kOnPath;
}

bool Balances::follow(int largestCount) {
  constexpr double kSmallestStep = 1e-7;
  evaluate();
  std::copy(m_R.begin(), m_R.end(), m_start.begin());
  double remaining = 1.0, step = 0.25;
  for (int spent = 0; remaining > 0.0 && step >= kSmallestStep && spent < largestCount; ++spent) {
    const double target = std::max(0.0, remaining - step);
    for (std::size_t i = 0; i < m_unknowns; ++i) offset[i] = target * m_start[i];
    std::copy(x.begin(), x.end(), m_pathX.begin());
    if (correct()) {
      remaining = target;
      step *= 2.0;
    } else {
      std::copy(m_pathX.begin(), m_pathX.end(), x.begin());
      step *= 0.25;
    }
  }
  std::fill(offset.begin(), offset.end(), 0.0);
  return remaining == 0.0 && iterate(false, kPolish);
}

double Balances::branchSlope() {
  assemble(true);
  m_lu.compute(m_J);
  const auto size = m_J.rows();
  m_rhs.setZero();
  m_rhs(size - 1) = 1.0;
  m_step = m_lu.solve(m_rhs);
  return 1.0 / m_step(size - 1);
}

}  // namespace tw::model
