// SPDX-License-Identifier: GPL-3.0-or-later
// The chemical system as flat arrays: what the solver runs on. Built once per system; only the constants
// change with temperature.
//
// Numbering. Components: those of the system in its order, then, where the balance names an `other` ion
// that is no component, that inert ion as one more. Species: the bare components in the same order, then
// OH^-, then ChemicalSystem::species in order. OH^- in a row is already replaced by Kw / a(H^+).
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "model/result.hpp"
#include "model/system.hpp"

namespace tw::model {

struct Layout {
  std::size_t components = 0;  ///< n, the inert `other` ion included
  std::size_t species = 0;     ///< m
  std::size_t hydroxide = 0;   ///< species index of OH^-
  std::size_t proton = 0;
  std::vector<std::string> componentFormula;  ///< n
  std::vector<double> componentCharge;        ///< n
  std::vector<std::string> formula;           ///< m
  std::vector<double> charge;                 ///< m
  std::vector<double> setschenow;             ///< m, L/mol
  std::vector<double> nu;                     ///< m x n, row per species
  std::vector<char> holdsMetal;               ///< m: holds the metal or a second one
  std::vector<double> solidNu;                ///< solids x n, components given per formula unit
  std::optional<std::size_t> balance;         ///< component set by Balance
  std::optional<std::size_t> other;           ///< component that closes the charge instead
  bool otherIsInert = false;                  ///< `other` is component n-1, not one of the system

  [[nodiscard]] double nuOf(std::size_t j, std::size_t i) const { return nu[j * components + i]; }
  [[nodiscard]] double solidNuOf(std::size_t s, std::size_t i) const { return solidNu[s * components + i]; }
};

/// Constants of a layout at one temperature.
struct Constants {
  double t_C = 25.0;
  double A = 0.0;  ///< Debye-Hueckel slope, Eq. 3
  ActivityModel model = ActivityModel::Conditional;
  std::vector<double> lnK;   ///< m, natural logarithm, at I = 0 (Conditional: as tabulated)
  std::vector<double> lnKs;  ///< per solid, of the dissolution in components
  double lgKw = -14.0;
};

/// Faults: `activity_model_missing`, `infeasible` where components contradict each other (two balances,
/// no H^+), `temperature_out_of_range` where a row's own T_C is needed and outside 0..100 degC.
Result<Layout> layOut(const ChemicalSystem& system);

/// Constants at t_C (degC), which must be in 0..100: rows first to I = 0, then to t_C, then OH^- out.
/// Resizes `constants` only when it does not fit yet.
void constantsAt(const ChemicalSystem& system, const Layout& layout, double t_C, Constants& constants);

}  // namespace tw::model
