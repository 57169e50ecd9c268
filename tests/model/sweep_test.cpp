// SPDX-License-Identifier: GPL-3.0-or-later
// Constants here are invented.
#include <gtest/gtest.h>

#include <cmath>

#include "model/analysis.hpp"
#include "tests/support/bath_builder.hpp"

namespace tw::test {
namespace {

using namespace model;

BathBuilder bath() {
  BathBuilder built(ActivityModel::Davies);
  built.metal("M^2+", 2, 0.01).ligandTotal("L", 0, 0.2).ph(9.0);
  built.complex("ML4^2+", 2, {{"M^2+", 1}, {"L", 4}}, 9.0).complex("HL^+", 1, {{"L", 1}, {"H^+", 1}}, 9.3);
  built.solid("M(OH)2", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 12.5);
  return built;
}

std::vector<SweepPoint> swept(SweepOver over, double from, double to, int points = 3) {
  const BathBuilder built = bath();
  SweepRequest request{over, std::nullopt, from, to, points};
  if (over == SweepOver::Ligand) request.ligand = built.system().ligands[0];
  return sweep(built.system(), built.input(), request).value();
}

TEST(Sweep, HasBothEndsExactly) {
  const auto points = swept(SweepOver::Ph, 8.0, 10.1, 4);
  ASSERT_EQ(points.size(), 4u);
  EXPECT_EQ(points.front().x, 8.0);
  EXPECT_EQ(points.back().x, 10.1);
  EXPECT_NEAR(points.back().liquor->ph, 10.1, 1e-14);
}

TEST(Sweep, PassesThroughTheSolvedLiquor) {
  const LiquorReport here = bath().solve(25.0);
  EXPECT_NEAR(*swept(SweepOver::Ph, 8.0, 10.0)[1].liquor->pM, *here.pM, 1e-11);
  EXPECT_NEAR(*swept(SweepOver::Temperature, 20.0, 30.0)[1].liquor->pM, *here.pM, 1e-9);
  EXPECT_NEAR(*swept(SweepOver::Ligand, 0.1, 0.3)[1].liquor->pM, *here.pM, 1e-11);
  EXPECT_NEAR(*swept(SweepOver::Metal, 0.005, 0.015)[1].liquor->pM, *here.pM, 1e-11);
  EXPECT_NEAR(*swept(SweepOver::Dilution, 1.0, 2.0)[0].liquor->pM, *here.pM, 1e-9);
}

TEST(Sweep, SharesOfTheMetalAddUpToOne) {
  for (const SweepPoint& point : swept(SweepOver::Ligand, 0.0, 0.3, 5)) {
    double sum = 0.0;
    for (const auto& [formula, share] : point.shares) sum += share;
    EXPECT_NEAR(sum, 1.0, 1e-12) << point.x;
  }
}

TEST(Sweep, LigandOfZeroLeavesBareMetal) {
  const auto points = swept(SweepOver::Ligand, 0.0, 0.3, 2);
  EXPECT_NEAR(points[0].liquor->freeMetal_mol_L, 0.01, 1e-14);
}

TEST(Sweep, HydroxideIsSweptAsFreeConcentration) {
  const BathBuilder built = bath();
  const auto points =
      sweep(built.system(), built.input(), {SweepOver::Ligand, std::nullopt, 0.001, 0.01, 2}).value();
  EXPECT_NEAR(amount(*points[1].liquor, kHydroxide) / 0.01, 1.0, 1e-12);
}

TEST(Sweep, PointsWithoutALiquorAreEmpty) {
  const auto points = swept(SweepOver::Metal, 0.01, 100.0, 2);  // I would pass 20 mol/L
  EXPECT_TRUE(points[0].liquor);
  EXPECT_FALSE(points[1].liquor);
}

TEST(Sweep, RefusesARangeThatMakesNoSense) {
  const BathBuilder built = bath();
  const auto code = [&](SweepRequest request) {
    return sweep(built.system(), built.input(), request).error().code;
  };
  EXPECT_EQ(code({SweepOver::Ph, std::nullopt, 1.0, 2.0, 1}), "bad_range");
  EXPECT_EQ(code({SweepOver::Dilution, std::nullopt, 0.0, 2.0, 2}), "bad_range");
  EXPECT_EQ(code({SweepOver::Metal, std::nullopt, -0.1, 2.0, 2}), "bad_range");
  EXPECT_EQ(code({SweepOver::Temperature, std::nullopt, 20.0, 120.0, 2}), "temperature_out_of_range");
}

}  // namespace
}  // namespace tw::test
