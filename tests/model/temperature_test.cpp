// SPDX-License-Identifier: GPL-3.0-or-later
// Constants and enthalpies here are invented unless a source stands beside them.
#include "model/temperature.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "model/activity.hpp"
#include "model/layout.hpp"
#include "model/physical.hpp"
#include "tests/support/bath_builder.hpp"

namespace tw::test {
namespace {

using namespace model;

TEST(Temperature, RowWithoutEnthalpyKeepsItsValue) {
  Constant K;
  K.lgK = 7.5;
  EXPECT_EQ(lgKAt(K, 0.0, ActivityModel::Davies, 80.0), 7.5);
  EXPECT_TRUE(keptAsWritten(K, 80.0));
  EXPECT_FALSE(keptAsWritten(K, 25.0));
}

TEST(Temperature, EnthalpyShiftsAsTheIntegratedEquationSays) {
  // Eq. 8 by hand: dH = -52 kJ/mol from 25 to 60 degC: 52000/(R ln10) (1/333.15 - 1/298.15) = -0.9570.
  Constant K;
  K.lgK = 9.25;
  K.dH_kJ_mol = -52.0;
  EXPECT_NEAR(lgKAt(K, 0.0, ActivityModel::Conditional, 60.0), 9.25 - 0.9570, 1e-4);
  EXPECT_FALSE(keptAsWritten(K, 60.0));
}

TEST(Temperature, HeatCapacityActsInSecondOrder) {
  // Eq. 8 by hand: dCp = 200 J/(mol K): 200/(R ln10) (T0/T - 1 + ln(T/T0)) with T0/T = 298.15/333.15.
  Constant K;
  K.dH_kJ_mol = 0.0;
  K.dCp_J_mol_K = 200.0;
  const double ratio = 298.15 / 333.15;
  EXPECT_NEAR(lgKAt(K, 0.0, ActivityModel::Conditional, 60.0),
              200.0 / (8.314462618 * std::log(10.0)) * (ratio - 1.0 - std::log(ratio)), 1e-12);
}

TEST(Temperature, WaterFollowsItsMeasuredEnthalpy) {
  // dH of H2O = H^+ + OH^- at 25 degC is 55.80 kJ/mol (calorimetry at infinite dilution, printed as
  // 13.337 kcal/mol): the slope of Eq. 4 gives 56.4, 1 % more.
  const double h = 0.5;
  const double perKelvin = (waterLgKw(25.0 + h) - waterLgKw(25.0 - h)) / (2.0 * h);
  EXPECT_NEAR(perKelvin * 8.314462618e-3 * std::log(10.0) * 298.15 * 298.15, 55.80, 0.7);
}

TEST(Temperature, RowInAMediumIsBroughtToZeroStrengthByTheSameModel) {
  // M^2+ + L^- = ML^+: dz2 = 1 - 4 - 1 = -4. At I0 = 0.1: D = sqrt(0.1)/(1+sqrt(0.1)) - 0.03 = 0.21025.
  BathBuilder bath(ActivityModel::Davies);
  bath.metal("M^2+", 2, 1e-3).ligandTotal("L^-", -1, 1e-2).complex("ML^+", 1, {{"M^2+", 1}, {"L^-", 1}}, 4.0);
  const Species& species = bath.system().species[0];
  const double dz2 = dzSquaredOfFormation(species, bath.system().components);
  EXPECT_EQ(dz2, -4.0);
  Constant K = species.formation.K;
  K.I = 0.1;
  EXPECT_NEAR(lgKAt(K, dz2, ActivityModel::Davies, 25.0), 4.0 + 4.0 * 0.21025 * debyeHueckelA(25.0), 1e-5);
  EXPECT_EQ(lgKAt(K, dz2, ActivityModel::Conditional, 25.0), 4.0);
}

TEST(Temperature, ChargesCountAsTheRowIsWritten) {
  // M(OH)2(s) = M^2+ + 2 OH^-: 4 + 2 = 6; in the H^+ form M(OH)2 + 2 H^+ = M^2+ + 2 H2O: 4 - 2 = 2.
  BathBuilder bath(ActivityModel::Davies);
  bath.metal("M^2+", 2, 1e-3);
  bath.solid("with OH^-", {{"M^2+", 1}, {"OH^-", 2}}, -17.0);
  bath.solid("with H^+", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 11.0);
  const auto& solids = bath.system().solids;
  EXPECT_EQ(dzSquaredOfDissolution(solids[0].dissolution, bath.system().components), 6.0);
  EXPECT_EQ(dzSquaredOfDissolution(solids[1].dissolution, bath.system().components), 2.0);
}

TEST(Temperature, HydroxideIsReplacedLastAtTheBathsTemperature) {
  // A row with OH^- and no enthalpy keeps its own lg K; only Kw moves (DESIGN: order of corrections).
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("M^2+", 2, 1e-3).solid("M(OH)2", {{"M^2+", 1}, {"OH^-", 2}}, -17.0);
  const Layout layout = layOut(bath.system()).value();
  Constants constants;
  constantsAt(bath.system(), layout, 60.0, constants);
  EXPECT_NEAR(constants.lnKs[0] / std::log(10.0), -17.0 - 2.0 * waterLgKw(60.0), 1e-12);
}

TEST(Temperature, RecipesOwnHydroxideReplacesKw) {
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("M^2+", 2, 1e-3).complex(kHydroxide, -1, {{"H2O", 1}, {"H^+", -1}}, -13.78);
  ChemicalSystem system = bath.system();
  system.ownHydroxide = system.species.back();
  system.species.pop_back();
  const Layout layout = layOut(system).value();
  Constants constants;
  constantsAt(system, layout, 60.0, constants);
  EXPECT_EQ(constants.lgKw, -13.78);
}

TEST(Activity, DaviesTermAndItsSlopeAgree) {
  for (const double I : {1e-6, 0.01, 0.4, 3.0}) {
    const double h = 1e-4 * I;
    EXPECT_NEAR(daviesTermSlope(I), (daviesTerm(I + h) - daviesTerm(I - h)) / (2.0 * h),
                1e-6 * std::abs(daviesTermSlope(I)) + 1e-8)
        << I;
  }
}

TEST(Activity, NeutralSpeciesAreSaltedOut) {
  const double charge[] = {0.0, -1.0}, setschenow[] = {0.12, 0.0};
  double lnGamma[2], slope[2];
  activityCoefficients(ActivityModel::Davies, 0.51, 0.5, 2, charge, setschenow, lnGamma, slope);
  EXPECT_NEAR(lnGamma[0] / std::log(10.0), 0.06, 1e-14);
  EXPECT_NEAR(lnGamma[1] / std::log(10.0), -0.51 * daviesTerm(0.5), 1e-14);
}

}  // namespace
}  // namespace tw::test
