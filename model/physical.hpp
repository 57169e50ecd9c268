// SPDX-License-Identifier: GPL-3.0-or-later
// What water itself brings into the chemistry: density, permittivity, the Debye-Hueckel slope and the
// ion product, for liquid water at 1 bar. EQUATIONS.md section 1.
#pragma once

#include "model/result.hpp"

namespace tw::model {

inline constexpr double kGasConstant_J_mol_K = 8.314462618;  ///< CODATA 2018, exact
inline constexpr double kLn10 = 2.302585092994045684;
inline constexpr double kZeroCelsius_K = 273.15;
inline constexpr double kColdest_C = 0.0;    ///< lower end of every formula here
inline constexpr double kHottest_C = 100.0;  ///< upper end

/// Density of air-free water at 1 atm, kg/L, t in degC (Eq. 1). Kell, J. Chem. Eng. Data 20 (1975) 97.
/// Stated range 0..150 degC; not checked here.
[[nodiscard]] double waterDensity_kg_L(double t_C);

/// Static relative permittivity at 1 bar, t in degC (Eq. 2). Bradley & Pitzer, J. Phys. Chem. 83 (1979)
/// 1599. Stated range 0..350 degC; not checked here.
[[nodiscard]] double waterPermittivity(double t_C);

/// Debye-Hueckel slope A for decimal logarithms, (kg/mol)^0.5, t in degC (Eq. 3).
[[nodiscard]] double debyeHueckelA(double t_C);

/// lg of the ion product of water, molal, at zero ionic strength and Kell's density, t in degC (Eq. 4).
/// IAPWS R11-07 (Bandura & Lvov, J. Phys. Chem. Ref. Data 35 (2006) 15).
[[nodiscard]] double waterLgKw(double t_C);

/// The same equation at any density: T in K, density in kg/L; for checks against the release's table.
[[nodiscard]] double waterLgKwAt(double T_K, double density_kg_L);

/// `temperature_out_of_range` outside 0..100 degC, `not_a_number` for NaN; `subject` names the culprit.
Result<Done> checkTemperature(double t_C, const std::string& subject);

}  // namespace tw::model
