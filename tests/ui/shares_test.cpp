// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/tank/shares.hpp"

#include <gtest/gtest.h>

#include "tests/ui/qt_environment.hpp"

namespace tw::ui {
namespace {

TEST(AtomsIn, CountsTheElementAndNothingThatOnlyBeginsLikeIt) {
  EXPECT_EQ(atomsIn("Cu^2+", "Cu"), 1);
  EXPECT_EQ(atomsIn("Cu2(OH)2^2+", "Cu"), 2);
  EXPECT_EQ(atomsIn("Cu(NH3)4^2+", "Cu"), 1);
  EXPECT_EQ(atomsIn("NH3", "Cu"), 0);
  EXPECT_EQ(atomsIn("Ni(citrate)^-", "Ni"), 1);
  EXPECT_EQ(atomsIn("Sn4(OH)4^4+", "S"), 0);
  EXPECT_EQ(atomsIn("citrate^3-", "Ni"), 0);
}

TEST(MetalShares, AddUpToTheWholeLargestFirst) {
  test::needQt();
  AnalysisView analysis;
  analysis.species = {{"Cu^2+", 1e-12}, {"Cu(NH3)4^2+", 0.6}, {"Cu2(OH)2^2+", 0.1}, {"NH3", 5.0}, {"Cu(NH3)3^2+", 0.2}};
  const Format format(QLocale(QLocale::English, QLocale::UnitedKingdom));
  const auto shares = metalShares(analysis, "Cu^2+", format, QStringLiteral("others"));
  ASSERT_EQ(shares.size(), 4U);
  EXPECT_NEAR(shares[0].fraction, 0.6, 1e-9);
  EXPECT_NEAR(shares[1].fraction, 0.2, 1e-9);  // two atoms of 0.1
  EXPECT_EQ(shares[3].label, QStringLiteral("others"));
  double sum = 0.0;
  for (const Share& share : shares) sum += share.fraction;
  EXPECT_NEAR(sum, 1.0, 1e-12);
}

TEST(MetalShares, AreEmptyWithoutMetal) {
  test::needQt();
  const Format format(QLocale(QLocale::English, QLocale::UnitedKingdom));
  EXPECT_TRUE(metalShares({}, "Cu^2+", format, {}).empty());
}

}  // namespace
}  // namespace tw::ui
