// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/temperature.hpp"

#include <cmath>

#include "model/activity.hpp"
#include "model/physical.hpp"

namespace tw::model {

namespace {

double sumNuZSquared(const Reaction& reaction, const std::vector<Component>& components) {
  double sum = reaction.hydroxide;  // z^2 of OH^- is 1, of water 0
  for (const ComponentTerm& term : reaction.terms) {
    const double z = components[term.component].charge;
    sum += term.nu * z * z;
  }
  return sum;
}

}  // namespace

double dzSquaredOfFormation(const Species& species, const std::vector<Component>& components) {
  const double z = species.charge;
  return z * z - sumNuZSquared(species.formation, components);
}

double dzSquaredOfDissolution(const Reaction& dissolution, const std::vector<Component>& components) {
  return sumNuZSquared(dissolution, components);
}

bool keptAsWritten(const Constant& K, double t_C) { return !K.dH_kJ_mol && K.T_C != t_C; }

double lgKAt(const Constant& K, double dzSquared, ActivityModel model, double t_C) {
  double lgK = K.lgK;
  if (model == ActivityModel::Davies && K.I > 0.0) {
    lgK -= debyeHueckelA(K.T_C) * daviesTerm(K.I) * dzSquared;  // Eq. 6
  }
  if (K.dH_kJ_mol && K.T_C != t_C) {  // Eq. 8
    const double T0 = K.T_C + kZeroCelsius_K;
    const double T = t_C + kZeroCelsius_K;
    const double R_ln10 = kGasConstant_J_mol_K * kLn10;
    lgK += -1000.0 * *K.dH_kJ_mol / R_ln10 * (1.0 / T - 1.0 / T0) +
           K.dCp_J_mol_K / R_ln10 * (T0 / T - 1.0 + std::log(T / T0));
  }
  return lgK;
}

}  // namespace tw::model
