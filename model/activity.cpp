// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/activity.hpp"

#include <algorithm>
#include <cmath>

#include "model/physical.hpp"

namespace tw::model {

double daviesTerm(double I) {
  const double root = std::sqrt(I);
  return root / (1.0 + root) - 0.3 * I;
}

double daviesTermSlope(double I) {
  const double root = std::sqrt(I);
  return 1.0 / (2.0 * root * (1.0 + root) * (1.0 + root)) - 0.3;
}

void activityCoefficients(ActivityModel model, double A, double I, std::size_t count, const double* charge,
                          const double* setschenow, double* lnGamma, double* slope) {
  if (model != ActivityModel::Davies || I <= 0.0) {  // at I = 0 gamma is 1 in every model
    std::fill_n(lnGamma, count, 0.0);
    std::fill_n(slope, count, 0.0);
    return;
  }
  const double perZSquared = -kLn10 * A * daviesTerm(I);  // Eq. 5
  const double slopePerZSquared = -kLn10 * A * daviesTermSlope(I) * I;
  for (std::size_t j = 0; j < count; ++j) {
    const double zSquared = charge[j] * charge[j];
    const double neutral = zSquared == 0.0 ? kLn10 * setschenow[j] * I : 0.0;
    lnGamma[j] = zSquared * perZSquared + neutral;
    slope[j] = zSquared * slopePerZSquared + neutral;
  }
}

}  // namespace tw::model
