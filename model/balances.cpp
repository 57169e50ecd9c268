// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/balances.hpp"

#include <algorithm>
#include <cmath>

#include "model/activity.hpp"

namespace tw::model {

namespace {
// ln c is kept where exp neither overflows nor vanishes, so that a wild trial step stays a number.
constexpr double kLargestLnC = 600.0;
constexpr double kSmallestLnC = -700.0;
constexpr double kSmallestSum = 1e-300;
}  // namespace

void Balances::resize(std::size_t unknowns, std::size_t species) {
  m_unknowns = unknowns;
  m_species = species;
  nu.assign(species * unknowns, 0.0);
  weight.assign(unknowns * species, 0.0);
  balanceNu.assign(species, 0.0);
  for (auto* perUnknown :
       {&value, &x, &offset, &m_P, &m_N, &m_R, &m_relative, &m_baseX, &m_pathX, &m_start}) {
    perUnknown->assign(unknowns, 0.0);
  }
  for (auto* perSpecies : {&lnConstant, &charge, &setschenow, &m_c, &m_lnC, &m_lnGamma, &m_slope}) {
    perSpecies->assign(species, 0.0);
  }
  m_gradient.assign(unknowns, 0.0);
  m_gradientSize.assign(unknowns, 0.0);
  nested.assign(unknowns, 0);
  balanceRow = kNone;
  const auto size = static_cast<Eigen::Index>(unknowns + 1);
  if (m_J.rows() != size) {
    m_J.resize(size, size);
    m_rhs.resize(size);
    m_step.resize(size);
    m_lu = Eigen::PartialPivLU<Eigen::MatrixXd>(size);
  }
}

void Balances::evaluate() {
  activityCoefficients(model, A, I, m_species, charge.data(), setschenow.data(), m_lnGamma.data(),
                       m_slope.data());
  m_speciesI = 0.0;
  m_allCharge = 0.0;
  for (std::size_t j = 0; j < m_species; ++j) {
    double lnC = lnConstant[j] - m_lnGamma[j];  // Eq. 9
    const double* nu_j = nu.data() + j * m_unknowns;
    for (std::size_t k = 0; k < m_unknowns; ++k) lnC += nu_j[k] * x[k];
    lnC = std::clamp(lnC, kSmallestLnC, kLargestLnC);
    m_lnC[j] = lnC;
    m_c[j] = std::exp(lnC);
    m_speciesI += 0.5 * charge[j] * charge[j] * m_c[j];
    m_allCharge += std::abs(charge[j]) * m_c[j];
  }
  m_speciesI = std::max(m_speciesI, kSmallestSum);
  m_residualI = std::log(m_speciesI) - std::log(std::max(I, kSmallestSum));
  m_relativeI = std::abs(m_speciesI - I) / m_speciesI;
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    if (i == balanceRow) {
      evaluateBalanceRow();
    } else {
      evaluateRow(i);
    }
  }
}

/// Eq. 12: R = ln P - ln N. Near straight in x over many powers of ten, where P - N is not.
void Balances::evaluateRow(std::size_t i) {
  const double* w = weight.data() + i * m_species;
  double up = 0.0, down = 0.0;
  for (std::size_t j = 0; j < m_species; ++j) (w[j] > 0.0 ? up : down) += std::abs(w[j]) * m_c[j];
  const double b = value[i];
  m_relative[i] = std::abs(up - down - b) / std::max(up + down, kSmallestSum);
  m_P[i] = std::max(up + (b < 0.0 ? -b : 0.0), kSmallestSum);
  m_N[i] = std::max(down + (b > 0.0 ? b : 0.0), kSmallestSum);
  m_R[i] = std::log(m_P[i]) - std::log(m_N[i]) - offset[i];
}

/// Eq. 14: the total of the balance ion against what closes the charge of everything else. Where that is
/// negative the ion is pressed to nothing and the owner turns to the ion of the other sign.
void Balances::evaluateBalanceRow() {
  const double* share = weight.data() + balanceRow * m_species;
  double total = 0.0, needed = 0.0;
  for (std::size_t j = 0; j < m_species; ++j) {
    total += balanceNu[j] * m_c[j];
    needed += share[j] * m_c[j];
  }
  const double floor = std::max(kNoCharge * m_allCharge, kSmallestSum);
  m_needed = needed;
  m_noBalanceIon = needed <= floor;
  total = std::max(total, kSmallestSum);
  m_P[balanceRow] = total;
  m_N[balanceRow] = std::max(needed, floor);
  m_R[balanceRow] = std::log(total) - std::log(m_N[balanceRow]) - offset[balanceRow];
  const double gap = std::abs(balanceCharge) * std::abs(total - m_N[balanceRow]);
  m_relative[balanceRow] = gap / std::max(m_allCharge, kSmallestSum);
  // So small an ion is the difference of rounding errors: its ln must not steer the line search.
  m_balanceIsNoise = std::abs(balanceCharge) * std::max(total, m_N[balanceRow]) < 1e-13 * m_allCharge;
}

double Balances::worstResidual(bool withI) const {
  double worst = withI ? m_relativeI : 0.0;
  for (const double r : m_relative) worst = std::max(worst, r);
  return worst;
}

double Balances::worstLogResidual() const {
  double worst = 0.0;
  for (const double R : m_R) worst = std::max(worst, std::abs(R));
  return worst;
}

std::size_t Balances::worstRow() const {
  const auto at = std::max_element(m_relative.begin(), m_relative.end());
  return at == m_relative.end() ? kNone : static_cast<std::size_t>(at - m_relative.begin());
}

double Balances::merit(bool withI) const {
  double sum = withI ? m_residualI * m_residualI : 0.0;
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    if (i == balanceRow && m_balanceIsNoise) continue;
    sum += m_R[i] * m_R[i];
  }
  return sum;
}

/// Eq. 13: J_ik = sum_j e_ij nu_jk with e_ij = dR_i / d ln c_j; last column by ln I, last row Eq. 16. At
/// fixed I the last row is that of the unit matrix, so that the size, and with it the memory, never changes.
void Balances::assemble(bool withI) {
  m_J.setZero();
  const auto last = static_cast<Eigen::Index>(m_unknowns);
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    const double* w = weight.data() + i * m_species;
    for (std::size_t j = 0; j < m_species; ++j) {
      double e = 0.0;
      if (i == balanceRow) {
        e = balanceNu[j] * m_c[j] / m_P[i] - (m_noBalanceIon ? 0.0 : w[j] * m_c[j] / m_N[i]);
      } else if (w[j] != 0.0) {
        e = w[j] * m_c[j] / (w[j] > 0.0 ? m_P[i] : m_N[i]);
      }
      if (e != 0.0) addToRow(static_cast<Eigen::Index>(i), j, e, withI);
    }
  }
  if (withI) {
    for (std::size_t j = 0; j < m_species; ++j) {
      addToRow(last, j, 0.5 * charge[j] * charge[j] * m_c[j] / m_speciesI, withI);
    }
  }
  m_J(last, last) += withI ? -1.0 : 1.0;
}

void Balances::addToRow(Eigen::Index row, std::size_t j, double e, bool withI) {
  const double* nu_j = nu.data() + j * m_unknowns;
  for (std::size_t k = 0; k < m_unknowns; ++k) m_J(row, static_cast<Eigen::Index>(k)) += e * nu_j[k];
  if (withI) m_J(row, static_cast<Eigen::Index>(m_unknowns)) -= e * m_slope[j];
}

void Balances::sweep() {
  constexpr double kLargestMove = 30.0;  // ln units in one correction
  for (std::size_t i = 0; i < m_unknowns; ++i) {
    if (i == balanceRow) {
      evaluateBalanceRow();
    } else {
      evaluateRow(i);
    }
    const double* w = weight.data() + i * m_species;
    double slope = 0.0, steepest = 1.0;
    for (std::size_t j = 0; j < m_species; ++j) {
      const double nu_ji = nu[j * m_unknowns + i];
      if (nu_ji == 0.0) continue;
      if (i == balanceRow) {
        slope += balanceNu[j] * m_c[j] / m_P[i] * nu_ji;
      } else {
        slope += w[j] * m_c[j] / (w[j] > 0.0 ? m_P[i] : m_N[i]) * nu_ji;
      }
      steepest = std::max(steepest, std::abs(nu_ji));
    }
    // ln P is convex in x: downhill the present slope never overshoots, uphill the steepest one.
    const double R = m_R[i];
    double move = -R / (R > 0.0 ? std::max(slope, 1e-3) : steepest);
    move = std::clamp(move, -kLargestMove, kLargestMove);
    x[i] += move;
    for (std::size_t j = 0; j < m_species; ++j) {
      const double nu_ji = nu[j * m_unknowns + i];
      if (nu_ji == 0.0) continue;
      m_lnC[j] = std::clamp(m_lnC[j] + nu_ji * move, kSmallestLnC, kLargestLnC);
      m_c[j] = std::exp(m_lnC[j]);
    }
  }
}

}  // namespace tw::model
