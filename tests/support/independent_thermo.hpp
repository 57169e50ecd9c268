// SPDX-License-Identifier: GPL-3.0-or-later
// Water and constants for the independent solver, as templates over the number type.
#pragma once

#include <cmath>
#include <optional>
#include <vector>

#include "model/system.hpp"

namespace tw::test::independent {

using model::ActivityModel;
using model::ChemicalSystem;
using model::Reaction;

template <class R>
R ten() {
  return R(10);
}
template <class R>
R ln10() {
  using std::log;
  return log(ten<R>());
}

/// kg/L. Kell, J. Chem. Eng. Data 20 (1975) 97, eq. 16.
template <class R>
R density(R t) {
  const R numerator =
      R(999.83952) +
      t * (R(16.945176) +
           t * (R(-7.9870401e-3) +
                t * (R(-46.170461e-6) + t * (R(105.56302e-9) + t * R(-280.54253e-12)))));
  return numerator / (R(1) + R(16.879850e-3) * t) / R(1000);
}

/// Bradley & Pitzer, J. Phys. Chem. 83 (1979) 1599, table II, at 1 bar.
template <class R>
R permittivity(R t) {
  using std::exp;
  using std::log;
  const R T = t + R(273.15);
  const R at1000bar = R(342.79) * exp(R(-5.0866e-3) * T + R(9.4690e-7) * T * T);
  const R C = R(-2.0525) + R(3115.9) / (R(-182.89) + T);
  const R B = R(-8032.5) + R(4.2142e6) / T + R(2.1417) * T;
  return at1000bar + C * log((B + R(1)) / (B + R(1000)));
}

/// Debye-Hueckel slope, decimal, (L/mol)^0.5: 1.824830e6 sqrt(rho) / (eps T)^1.5.
template <class R>
R debyeHueckel(R t) {
  using std::sqrt;
  const R eT = permittivity(t) * (t + R(273.15));
  return R(1.824830e6) * sqrt(density(t)) / (eT * sqrt(eT));
}

/// IAPWS R11-07 (Bandura & Lvov, J. Phys. Chem. Ref. Data 35 (2006) 15), molal, at liquid density.
template <class R>
R pKw(R t) {
  using std::exp;
  using std::log10;
  using std::log;
  const R T = t + R(273.15);
  const R rho = density(t);
  const R rho23 = exp(R(2) / R(3) * log(rho));
  const R Z = rho * exp(R(-0.864671) + R(8659.19) / T - R(22786.2) / (T * T) * rho23);
  const R ideal = R(0.61415) + R(48251.33) / T - R(67707.93) / (T * T) + R(10102100.0) / (T * T * T);
  const R bracket =
      log10(R(1) + Z) - Z / (Z + R(1)) * rho * (R(0.642044) - R(56.8534) / T - R(0.375754) * rho);
  return R(-12) * bracket + ideal + R(2) * log10(R(0.018015268));
}

/// Davies, Ion Association (1962), with 0.3; conditional: all 1.
template <class R>
R lgGamma(ActivityModel model, int z, double setschenow, R I, R A) {
  using std::sqrt;
  if (model == ActivityModel::Conditional) return R(0);
  if (z == 0) return R(setschenow) * I;
  const R root = sqrt(I);
  return -A * R(z) * R(z) * (root / (R(1) + root) - R(0.3) * I);
}

template <class R>
struct Row {
  R lgK{};
  std::vector<double> nu;
};

/// Written form -> I = 0 -> temperature -> OH^- out, in that order (DESIGN section 3).
template <class R>
R lgKAsWritten(const ChemicalSystem& system, const Reaction& row, std::optional<int> productCharge,
               R t) {
  using std::log;
  R lgK = row.K.lgK;
  if (system.activityModel != ActivityModel::Conditional && row.K.I > 0.0) {
    double ions = row.hydroxide;
    for (const auto& term : row.terms) {
      const int z = system.components[term.component].charge;
      ions += term.nu * z * z;
    }
    const double dz2 = productCharge ? *productCharge * *productCharge - ions : ions;
    lgK += R(dz2) * lgGamma(system.activityModel, 1, 0.0, R(row.K.I), debyeHueckel(R(row.K.T_C)));
  }
  if (row.K.dH_kJ_mol) {
    const R T = t + R(273.15), T0 = R(row.K.T_C) + R(273.15);
    const R Rln10 = R(8.314462618) * ln10<R>();
    lgK += -R(*row.K.dH_kJ_mol) * R(1000) / Rln10 * (R(1) / T - R(1) / T0);
    lgK += R(row.K.dCp_J_mol_K) / Rln10 * (T0 / T - R(1) + log(T / T0));
  }
  return lgK;
}

/// lg K of OH^- = H2O - H^+.
template <class R>
R lgHydroxide(const ChemicalSystem& system, R t) {
  if (!system.ownHydroxide) return -pKw(t);
  return lgKAsWritten(system, system.ownHydroxide->formation, system.ownHydroxide->charge, t);
}

template <class R>
Row<R> rowAt(const ChemicalSystem& system, const Reaction& row, std::optional<int> productCharge, R t) {
  Row<R> out;
  out.lgK = lgKAsWritten(system, row, productCharge, t);
  out.nu.assign(system.components.size(), 0.0);
  for (const auto& term : row.terms) out.nu[term.component] += term.nu;
  out.nu[system.proton] -= row.hydroxide;
  const R shift = R(row.hydroxide) * lgHydroxide(system, t);
  // What a species is made from: K' = K K_OH^n. What a solid gives: Ks' = Ks / K_OH^n.
  out.lgK += productCharge ? shift : R(-shift);
  return out;
}

}  // namespace tw::test::independent
