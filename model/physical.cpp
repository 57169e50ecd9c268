// SPDX-License-Identifier: GPL-3.0-or-later
// t: degC, T: K, rho: kg/L, epsilon_r: relative permittivity.
#include "model/physical.hpp"

#include <cmath>

namespace tw::model {

double waterDensity_kg_L(double t_C) {
  // Kell 1975, the equation of the abstract; coefficients in kg/m3 and degC.
  const double t = t_C;
  const double numerator =
      999.83952 +
      t * (16.945176 + t * (-7.9870401e-3 + t * (-46.170461e-6 + t * (105.56302e-9 + t * -280.54253e-12))));
  return numerator / (1.0 + 16.879850e-3 * t) / 1000.0;
}

double waterPermittivity(double t_C) {
  // Bradley & Pitzer 1979, table I: U1..U9 with P in bar, T in K.
  constexpr double U1 = 3.4279e2, U2 = -5.0866e-3, U3 = 9.4690e-7;
  constexpr double U4 = -2.0525, U5 = 3.1159e3, U6 = -1.8289e2;
  constexpr double U7 = -8.0325e3, U8 = 4.2142e6, U9 = 2.1417;
  constexpr double P_bar = 1.0;
  const double T = t_C + kZeroCelsius_K;
  const double B = U7 + U8 / T + U9 * T;
  const double C = U4 + U5 / (U6 + T);
  const double at1000bar = U1 * std::exp(U2 * T + U3 * T * T);
  return at1000bar + C * std::log((B + P_bar) / (B + 1000.0));
}

double debyeHueckelA(double t_C) {
  constexpr double kSlope = 1.824830e6;  // SI; origin under Eq. 3
  const double epsilonT = waterPermittivity(t_C) * (t_C + kZeroCelsius_K);
  return kSlope * std::sqrt(waterDensity_kg_L(t_C)) / (epsilonT * std::sqrt(epsilonT));
}

double waterLgKwAt(double T_K, double density_kg_L) {
  // IAPWS R11-07, table 1: n, alpha_i, beta_i and the ideal-gas term.
  constexpr double n = 6.0;
  constexpr double alpha0 = -0.864671, alpha1 = 8659.19, alpha2 = -22786.2;
  constexpr double beta0 = 0.642044, beta1 = -56.8534, beta2 = -0.375754;
  constexpr double gamma0 = 0.61415, gamma1 = 48251.33, gamma2 = -67707.93, gamma3 = 10102100.0;
  constexpr double kMolarMassWater = 18.015268;  // g/mol, as in the release

  const double T = T_K;
  const double rho = density_kg_L;
  const double Z = rho * std::exp(alpha0 + alpha1 / T + alpha2 / (T * T) * std::cbrt(rho * rho));
  const double pKwGas = gamma0 + gamma1 / T + gamma2 / (T * T) + gamma3 / (T * T * T);
  const double pKw =
      -2.0 * n * (std::log10(1.0 + Z) - Z / (Z + 1.0) * rho * (beta0 + beta1 / T + beta2 * rho)) + pKwGas +
      2.0 * std::log10(kMolarMassWater / 1000.0);
  return -pKw;
}

double waterLgKw(double t_C) { return waterLgKwAt(t_C + kZeroCelsius_K, waterDensity_kg_L(t_C)); }

Result<Done> checkTemperature(double t_C, const std::string& subject) {
  if (!std::isfinite(t_C)) {
    return fail({"not_a_number", subject, "the temperature is not a number", "", FaultKind::Input});
  }
  if (t_C < kColdest_C || t_C > kHottest_C) {
    return fail({"temperature_out_of_range", subject,
                 std::to_string(t_C) + " degC is outside 0 to 100 degC, where the properties of "
                                       "liquid water are known",
                 "", FaultKind::Input});
  }
  return Done{};
}

}  // namespace tw::model
