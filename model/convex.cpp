// SPDX-License-Identifier: GPL-3.0-or-later
// The last resort of Balances at fixed ionic strength. With some activities held, the balances of stated
// totals are the gradient of a convex function (EQUATIONS.md Eq. 17), which Newton with a line search always
// minimises; the other activities are then found one at a time, each by bracketing its own balance.
#include <algorithm>
#include <cmath>

#include "model/balances.hpp"

namespace tw::model {

namespace {
constexpr double kLongestStep = 25.0;  // ln units
constexpr double kTrace = 1e-14;       // on a diagonal scaled to 1: keeps equal rows apart
}  // namespace

/// Gradient of Eq. 17, sum nu c - T, and in `size` the sum of its terms.
void Balances::gradient() {
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    m_gradient[i] = 0.0;
    m_gradientSize[i] = 0.0;
    if (nested[i]) continue;
    for (std::size_t j = 0; j < m_species; ++j) {
      const double term = nu[j * m_unknowns + i] * m_c[j];
      m_gradient[i] += term;
      m_gradientSize[i] += std::abs(term);
    }
    m_gradient[i] -= value[i];
  }
}

/// One Newton direction of the convex problem, rows and columns scaled by sqrt of the diagonal.
void Balances::convexStep() {
  const auto at = [](std::size_t i) { return static_cast<Eigen::Index>(i); };
  m_J.setZero();
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    for (std::size_t k = 0; k < m_unknowns; ++k) {
      if (nested[i] || nested[k]) continue;
      double sum = 0.0;
      for (std::size_t j = 0; j < m_species; ++j) {
        sum += nu[j * m_unknowns + i] * nu[j * m_unknowns + k] * m_c[j];
      }
      m_J(at(i), at(k)) = sum;
    }
  }
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    m_baseX[i] = nested[i] ? 1.0 : std::sqrt(std::max(m_J(at(i), at(i)), 1e-300));
  }
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    for (std::size_t k = 0; k < m_unknowns; ++k) m_J(at(i), at(k)) /= m_baseX[i] * m_baseX[k];
    m_rhs(at(i)) = -m_gradient[i] / m_baseX[i];
  }
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    m_J(at(i), at(i)) = nested[i] ? 1.0 : m_J(at(i), at(i)) + kTrace;
  }
  m_J(at(m_unknowns), at(m_unknowns)) = 1.0;
  m_rhs(at(m_unknowns)) = 0.0;
  m_lu.compute(m_J);
  m_step = m_lu.solve(m_rhs);
  double longest = 0.0;
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    m_step(at(i)) /= m_baseX[i];
    longest = std::max(longest, std::abs(m_step(at(i))));
  }
  if (longest > kLongestStep) m_step *= kLongestStep / longest;
}

bool Balances::minimise() {
  constexpr int kLargestCount = 400;
  constexpr double kOvershoot = 0.5;  // of the first slope, on the far side of the valley
  const auto slope = [this] {
    double sum = 0.0;
    for (std::size_t i = 0; i < m_unknowns; ++i) sum += m_gradient[i] * m_step(static_cast<Eigen::Index>(i));
    return sum;
  };
  evaluate();
  gradient();
  for (int count = 0; count < kLargestCount; ++count) {
    double worst = 0.0;
    for (std::size_t i = 0; i < m_unknowns; ++i) {
      if (!nested[i]) worst = std::max(worst, std::abs(m_gradient[i]) / std::max(m_gradientSize[i], 1e-300));
    }
    if (worst <= 1e-13) return true;
    convexStep();
    if (!m_step.allFinite()) return worst <= kAccepted;
    ++m_iterations;
    const double first = slope();
    if (!(first < 0.0)) return worst <= kAccepted;
    std::copy(x.begin(), x.end(), m_baseX.begin());
    double lambda = 1.0;
    for (; lambda > 1e-12; lambda *= 0.5) {
      moveTo(lambda, false);
      gradient();
      // Along a convex valley the slope alone tells whether the step went too far.
      if (slope() <= -kOvershoot * first) break;
    }
    if (lambda <= 1e-12) return worst <= kAccepted;
  }
  return false;
}

/// Brings the residual of one nested balance to zero by its own activity, the convex problem solved anew at
/// every trial. True when it got there.
bool Balances::settle(std::size_t row) {
  constexpr int kWidenings = 100, kHalvings = 80;
  constexpr double kSettled = 1e-9;
  const auto residualAt = [&](double trial) {
    x[row] = trial;
    return minimise() ? m_R[row] : std::nan("");
  };
  double a = x[row];
  double fa = residualAt(a);
  if (std::isnan(fa) || std::abs(fa) <= kSettled) return !std::isnan(fa);
  double b = a, fb = fa;
  // Balances rise with their own activity, if not everywhere (a free ligand beside a proton total): the
  // steps lengthen until the other sign is found.
  double shortest = 0.2;
  for (int n = 0; n < kWidenings && fa * fb > 0.0; ++n, shortest *= 1.1) {
    a = b;
    fa = fb;
    b -= std::copysign(std::clamp(std::abs(fb), std::min(shortest, 20.0), 20.0), fb);
    fb = residualAt(b);
    if (std::isnan(fb)) return false;
  }
  if (fa * fb > 0.0) return false;
  for (int n = 0; n < kHalvings && std::abs(fb) > kSettled; ++n) {
    const double secant = (a * fb - b * fa) / (fb - fa);
    const double next = n % 2 == 0 ? secant : 0.5 * (a + b);
    const double f = residualAt(next);
    if (std::isnan(f)) return false;
    if (f * fb > 0.0) {
      b = next;
      fb = f;
    } else {
      a = b;
      fa = fb;
      b = next;
      fb = f;
    }
  }
  return true;
}

bool Balances::solveNested() {
  constexpr int kRounds = 40;
  constexpr int kPolish = 40;
  const bool any = std::any_of(nested.begin(), nested.end(), [](char n) { return n != 0; });
  for (int round = 0; round < (any ? kRounds : 1); ++round) {
    if (!any && !minimise()) break;
    for (std::size_t i = 0; i < m_unknowns; ++i) {
      if (nested[i] && !settle(i)) return false;
    }
    std::copy(x.begin(), x.end(), m_pathX.begin());
    if (worstResidual(false) <= kAccepted || iterate(false, kPolish)) return true;
    std::copy(m_pathX.begin(), m_pathX.end(), x.begin());
    evaluate();
  }
  return false;
}

}  // namespace tw::model
