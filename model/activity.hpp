// SPDX-License-Identifier: GPL-3.0-or-later
// Activity coefficients as a function of ionic strength, with the derivative Newton needs.
// I: ionic strength, mol/L; A: Debye-Hueckel slope (model/physical.hpp); gamma on the molar scale.
#pragma once

#include <cstddef>

#include "model/system.hpp"

namespace tw::model {

inline constexpr double kDaviesRange_mol_L = 0.7;      ///< above it the result carries a warning
inline constexpr double kLargestIonicStrength = 20.0;  ///< mol/L; beyond it no liquor is feasible

/// sqrt(I)/(1+sqrt(I)) - 0.3 I (Eq. 5). Davies, Ion Association (1962), pp. 37-53.
[[nodiscard]] double daviesTerm(double I);
/// Its derivative by I; I > 0.
[[nodiscard]] double daviesTermSlope(double I);

/// ln gamma and I d(ln gamma)/dI of every species at one ionic strength.
/// `charge`, `setschenow` (L/mol), `lnGamma`, `slope` hold `count` numbers each. Conditional: zeros.
void activityCoefficients(ActivityModel model, double A, double I, std::size_t count, const double* charge,
                          const double* setschenow, double* lnGamma, double* slope);

}  // namespace tw::model
