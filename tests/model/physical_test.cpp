// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/physical.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

namespace tw::test {
namespace {

using namespace model;

TEST(Physical, IonProductReproducesTheReleasesCheckValues) {
  // IAPWS R11-07, table 2 (computer-program verification), T in K and density in g/cm3.
  const struct {
    double T_K, density, pKw;
  } rows[] = {{300, 1.0, 13.906565},
              {600, 0.07, 21.048874},
              {600, 0.7, 11.203153},
              {800, 0.2, 15.089765},
              {800, 1.2, 6.438330}};
  for (const auto& row : rows) {
    EXPECT_NEAR(-waterLgKwAt(row.T_K, row.density), row.pKw, 5.1e-7) << row.T_K << " K, " << row.density;
  }
}

TEST(Physical, PermittivityIsWithinTheSpreadOfHandbooks) {
  // CRC Handbook of Chemistry and Physics, Permittivity of Water (Archer & Wang 1990), 0.1 MPa, from memory;
  // the equation used here was fitted to older data and differs by up to 0.2.
  EXPECT_NEAR(waterPermittivity(0.0), 87.90, 0.2);
  EXPECT_NEAR(waterPermittivity(25.0), 78.40, 0.2);
  EXPECT_NEAR(waterPermittivity(50.0), 69.90, 0.2);
  EXPECT_NEAR(waterPermittivity(100.0), 55.50, 0.2);
}

TEST(Physical, PermittivityAgreesWithItsOwnPaperAt25degC) {
  // Bradley & Pitzer 1979: 78.38 at 25 degC and 1 bar (from memory of table II).
  EXPECT_NEAR(waterPermittivity(25.0), 78.38, 0.01);
}

TEST(Physical, TemperatureIsCheckedAtBothEnds) {
  EXPECT_TRUE(checkTemperature(kColdest_C, "t"));
  EXPECT_TRUE(checkTemperature(kHottest_C, "t"));
  const double below = std::nextafter(kColdest_C, -1.0), above = std::nextafter(kHottest_C, 200.0);
  EXPECT_EQ(checkTemperature(below, "t").error().code, "temperature_out_of_range");
  EXPECT_EQ(checkTemperature(above, "bath").error().code, "temperature_out_of_range");
  EXPECT_EQ(checkTemperature(above, "bath").error().subject, "bath");
  EXPECT_EQ(checkTemperature(std::numeric_limits<double>::quiet_NaN(), "t").error().code, "not_a_number");
}

}  // namespace
}  // namespace tw::test
