// SPDX-License-Identifier: GPL-3.0-or-later
// Printed numbers, each with its source beside it. Tolerances are those of the printed digits, unless a
// row says why it is wider.
#include <gtest/gtest.h>

#include <cmath>
#include <limits>
#include <string>
#include <vector>

#include "model/analysis.hpp"
#include "model/physical.hpp"
#include "tests/support/bath_builder.hpp"

namespace tw::test {
namespace {

using namespace model;

// ---- Water ---------------------------------------------------------------------------------------

struct WaterRow {
  double t_C, printed, tolerance;
  const char* source;
};

TEST(Water, IonProductMatchesPrintedTables) {
  const char* const crc = "CRC Handbook of Chemistry and Physics, Ionization Constant of Normal Water, 0.1 MPa";
  // Marshall & Franck is an older equation on another density; the two differ by up to 0.015, most near 80 degC.
  const char* const marshall = "Lange's Handbook, 15th ed., Table 8.5 (Marshall & Franck 1981)";
  const WaterRow rows[] = {
      {0, 14.946, 0.001, crc},       {25, 13.995, 0.001, crc},      {50, 13.264, 0.001, crc},
      {75, 12.696, 0.001, crc},      {100, 12.252, 0.001, crc},     {10, 14.528, 0.016, marshall},
      {20, 14.163, 0.016, marshall}, {30, 13.836, 0.016, marshall}, {40, 13.542, 0.016, marshall},
      {60, 13.034, 0.016, marshall}, {80, 12.613, 0.016, marshall}, {90, 12.431, 0.016, marshall},
  };
  for (const WaterRow& row : rows) {
    EXPECT_NEAR(-waterLgKw(row.t_C), row.printed, row.tolerance) << row.t_C << " degC, " << row.source;
  }
}

TEST(Water, DebyeHueckelSlopeMatchesPrintedTables) {
  const char* const psi = "Hummel & Thoenen, PSI Chemical Thermodynamic Database 2020, NTB 21-03 (2023), ch. 4";
  const char* const nea = "NEA/IUPAC practice: 0.509 at 25 degC";
  // Three digits are printed, and permittivity formulas differ by 0.1 to 0.2 % among themselves.
  const WaterRow rows[] = {{0, 0.491, 0.0015, psi}, {15, 0.501, 0.0015, psi}, {25, 0.509, 0.0015, nea},
                           {37, 0.520, 0.0015, psi}};
  for (const WaterRow& row : rows) {
    EXPECT_NEAR(debyeHueckelA(row.t_C), row.printed, row.tolerance) << row.t_C << " degC, " << row.source;
  }
}

TEST(Water, DensityMatchesKellsTable) {
  // Kell, J. Chem. Eng. Data 20 (1975) 97, table II, in kg/L (from memory; the values are in every handbook).
  EXPECT_NEAR(waterDensity_kg_L(0.0), 0.9998396, 1e-6);
  EXPECT_NEAR(waterDensity_kg_L(25.0), 0.9970449, 1e-6);
  EXPECT_NEAR(waterDensity_kg_L(100.0), 0.9583637, 1e-6);
}

TEST(Water, DaviesLowersTheConcentrationIonProduct) {
  // Martell & Smith, Critical Stability Constants: pKw 13.78 at I = 0.1 (from memory).
  BathBuilder bath(ActivityModel::Davies);
  bath.metal("Cu^2+", 2, 1e-9).fixed("Na^+", 1, 0.1).fixed("ClO4^-", -1, 0.1).ph(7.0);
  const LiquorReport report = bath.solve(25.0);
  const double lgProduct = std::log10(amount(report, "H^+") * amount(report, "OH^-"));
  EXPECT_NEAR(report.ionicStrength_mol_L, 0.1, 1e-6);
  EXPECT_NEAR(-lgProduct, 13.78, 0.01);
}

// ---- Ammines -------------------------------------------------------------------------------------

struct Ammines {
  const char* title;
  const char* metal;
  std::vector<double> steps;  ///< stepwise lg K
  double cumulative;          ///< printed cumulative constant of the last step
  std::vector<double> lgFree; ///< lg of the free-metal fraction at 0.01, 0.1 and 1 mol/L free NH3
  std::vector<double> nBar;   ///< bound ammonia per metal there
  const char* source;
};

const char* const kMartell =
    "Martell & Smith, Critical Stability Constants, vols 1-4 (1974-76), I = 0, 25 degC, as tabulated in "
    "Harvey, Analytical Chemistry 2.1, App. 12";
const char* const kBjerrum = "J. Bjerrum, Metal Ammine Formation in Aqueous Solution (1941), 2 M NH4NO3, 18 degC";

// Fractions and n-bar: the sums worked outside this program from the same steps.
const Ammines kAmmines[] = {
    {"copper, I = 0", "Cu^2+", {4.04, 3.43, 2.80, 1.48}, 11.75, {-4.44, -7.88, -11.76}, {3.09, 3.74, 3.97}, kMartell},
    {"copper, 2 M", "Cu^2+", {4.31, 3.67, 3.04, 2.30, -0.46}, 12.86, {-5.51, -9.36, -13.45}, {3.62, 3.99, 4.25}, kBjerrum},
    {"nickel, I = 0", "Ni^2+", {2.72, 2.17, 1.66, 1.12, 0.67, -0.03}, 8.31, {-1.26, -4.06, -8.68}, {1.85, 3.77, 5.32}, kMartell},
    {"zinc, I = 0", "Zn^2+", {2.21, 2.29, 2.36, 2.03}, 8.89, {-1.32, -4.93, -8.89}, {2.92, 3.91, 3.99}, kMartell},
    {"cadmium, I = 0", "Cd^2+", {2.55, 2.01, 1.34, 0.84}, 6.74, {-0.96, -3.24, -6.80}, {1.49, 3.07, 3.86}, kMartell},
};

class AmmineTest : public testing::TestWithParam<Ammines> {};

TEST_P(AmmineTest, CumulativeConstantIsTheSumOfItsSteps) {
  const Ammines& set = GetParam();
  double sum = 0.0;
  for (const double step : set.steps) sum += step;
  EXPECT_NEAR(sum, set.cumulative, 1e-9) << set.source;
}

TEST_P(AmmineTest, SolvedLiquorObeysFractionsAndBoundLigand) {
  const Ammines& set = GetParam();
  const double free[] = {0.01, 0.1, 1.0};
  for (std::size_t k = 0; k < 3; ++k) {
    BathBuilder bath(ActivityModel::Conditional);
    bath.metal(set.metal, 2, 0.05).ligandFree("NH3", 0, free[k]).ph(10.0);
    double lgBeta = 0.0;
    for (std::size_t n = 0; n < set.steps.size(); ++n) {
      lgBeta += set.steps[n];
      bath.complex("M(NH3)" + std::to_string(n + 1), 2, {{set.metal, 1}, {"NH3", static_cast<double>(n + 1)}}, lgBeta);
    }
    const LiquorReport report = bath.solve(25.0);
    EXPECT_NEAR(std::log10(report.freeMetal_mol_L / 0.05), set.lgFree[k], 0.006) << set.title << free[k];
    const double bound = total(report, "NH3") - free[k];
    EXPECT_NEAR(bound / 0.05, set.nBar[k], 0.006) << set.title << " at " << free[k];
    // The last complex against its printed cumulative constant.
    const std::size_t n = set.steps.size();
    const double last = amount(report, "M(NH3)" + std::to_string(n));
    const double ratio = last / report.freeMetal_mol_L / std::pow(free[k], static_cast<double>(n));
    EXPECT_NEAR(std::log10(ratio), set.cumulative, 1e-9) << set.title;
  }
}

INSTANTIATE_TEST_SUITE_P(Sets, AmmineTest, testing::ValuesIn(kAmmines), [](const auto& row) {
  return "Row" + std::to_string(row.index);
});

TEST(SilverAmmine, FreeSilverMatchesThePrintedExample) {
  // Chemistry course, solubility-product unit: Ag 1.3e-3, NH3 5.0e-2, Kf 1.7e7; printed by hand method
  // NH3 left 4.7e-2, [Ag+] 3.46e-8. The full balances give 3.40e-8.
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("Ag^+", 1, 1.3e-3).ligandTotal("NH3", 0, 5.0e-2).ph(11.0);
  bath.complex("Ag(NH3)2^+", 1, {{"Ag^+", 1}, {"NH3", 2}}, std::log10(1.7e7));
  const LiquorReport report = bath.solve(25.0);
  EXPECT_NEAR(amount(report, "NH3"), 4.7e-2, 0.05e-2);
  EXPECT_NEAR(report.freeMetal_mol_L, 3.40e-8, 0.005e-8);
  EXPECT_NEAR(report.freeMetal_mol_L, 3.46e-8, 0.02 * 3.46e-8);
}

// ---- EDTA ----------------------------------------------------------------------------------------

struct AlphaRow {
  double ph, printed, tolerance;  ///< tolerance relative: half a unit of the last printed digit
};

double alphaY(const std::vector<double>& pKa, double ph) {
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("Cu^2+", 2, 1e-12).ligandTotal("EDTA^4-", -4, 0.01).ph(ph);
  double lgK = 0.0;
  for (std::size_t n = 0; n < pKa.size(); ++n) {
    lgK += pKa[n];
    const int protons = static_cast<int>(n) + 1;
    bath.complex("H" + std::to_string(protons) + "EDTA", protons - 4, {{"EDTA^4-", 1}, {"H^+", static_cast<double>(protons)}}, lgK);
  }
  return amount(bath.solve(25.0), "EDTA^4-") / 0.01;
}

TEST(Edta, AlphaMatchesFifieldAndKealeyTable57) {
  // Fifield & Kealey, Principles and Practice of Analytical Chemistry, Table 5.7, p. 254; Ka 1.02e-2,
  // 2.14e-3, 6.92e-7, 5.50e-11 (textbook set, from memory).
  const std::vector<double> pKa = {-std::log10(5.50e-11), -std::log10(6.92e-7), -std::log10(2.14e-3),
                                   -std::log10(1.02e-2)};
  const AlphaRow rows[] = {{2, 3.7e-14, 0.02}, {3, 2.5e-11, 0.02}, {4, 3.6e-9, 0.02},  {5, 3.5e-7, 0.02},
                           {6, 2.2e-5, 0.03},  {7, 4.8e-4, 0.02},  {8, 5.4e-3, 0.02},  {9, 5.2e-2, 0.02},
                           {10, 0.35, 0.02},   {11, 0.85, 0.01},   {12, 0.98, 0.01}};
  for (const AlphaRow& row : rows) {
    EXPECT_NEAR(alphaY(pKa, row.ph) / row.printed, 1.0, row.tolerance) << "pH " << row.ph;
  }
}

TEST(Edta, SixStepSetMatchesHarrisTable) {
  // Harris, Quantitative Chemical Analysis, EDTA chapter: steps 0.00 1.50 2.00 2.69 6.13 10.37; table from memory.
  const std::vector<double> pKa = {10.37, 6.13, 2.69, 2.00, 1.50, 0.00};
  const AlphaRow rows[] = {{7, 3.8e-4, 0.02}, {8, 4.2e-3, 0.02}, {9, 0.041, 0.02}, {10, 0.30, 0.02}, {11, 0.81, 0.01}};
  for (const AlphaRow& row : rows) {
    EXPECT_NEAR(alphaY(pKa, row.ph) / row.printed, 1.0, row.tolerance) << "pH " << row.ph;
  }
}

// ---- Cyanide -------------------------------------------------------------------------------------

TEST(Cyanide, CumulativeCopperConstantsMatchThePrintedOnes) {
  // Penneman & Jones, J. Chem. Phys. 24 (1956) 293: 1/beta2 = 1e-24; activity constants of the third and
  // fourth step at 29 degC scaled by the printed concentration constants to 25 degC. Printed 2.6e-29, 5e-31.
  const double third = 4.2e-5 * (1.5e-5 / 2.44e-5), fourth = 0.026 * (0.0057 / 0.0076);
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("Cu^+", 1, 0.3).ligandTotal("CN^-", -1, 1.1).ph(12.0);
  bath.complex("Cu(CN)2^-", -1, {{"Cu^+", 1}, {"CN^-", 2}}, 24.0);
  bath.complex("Cu(CN)3^2-", -2, {{"Cu^+", 1}, {"CN^-", 3}}, 24.0 - std::log10(third));
  bath.complex("Cu(CN)4^3-", -3, {{"Cu^+", 1}, {"CN^-", 4}}, 24.0 - std::log10(third * fourth));
  bath.complex("HCN", 0, {{"H^+", 1}, {"CN^-", 1}}, 9.21);
  const LiquorReport report = bath.solve(25.0);
  const double cu = report.freeMetal_mol_L, cn = amount(report, "CN^-");
  EXPECT_NEAR(cu * std::pow(cn, 3) / amount(report, "Cu(CN)3^2-"), 2.6e-29, 0.05e-29);
  EXPECT_NEAR(cu * std::pow(cn, 4) / amount(report, "Cu(CN)4^3-"), 5e-31, 0.5e-31);
  EXPECT_NEAR(total(report, "CN^-"), 1.1, 1e-11);
}

TEST(Cyanide, HydrogenCyanideShareFollowsPh) {
  // pKa 9.21: CRC Handbook, Dissociation Constants of Inorganic Acids and Bases, p. 8-40 (Perrin 1982).
  const AlphaRow rows[] = {{8, 0.942, 0}, {9, 0.619, 0}, {9.21, 0.500, 0}, {10, 0.140, 0}, {11, 0.0160, 0}, {12, 0.00162, 0}};
  for (const AlphaRow& row : rows) {
    BathBuilder bath(ActivityModel::Conditional);
    bath.metal("Cu^+", 1, 1e-12).ligandTotal("CN^-", -1, 0.5).ph(row.ph);
    bath.complex("HCN", 0, {{"H^+", 1}, {"CN^-", 1}}, 9.21);
    const double share = amount(bath.solve(25.0), "HCN") / 0.5;
    EXPECT_NEAR(share / row.printed, 1.0, 0.004) << "pH " << row.ph;
  }
}

// ---- Hydroxides ----------------------------------------------------------------------------------

TEST(Ferrihydrite, StandsOnItsLineAtThePublishedSolubility) {
  // Stefansson, Environ. Sci. Technol. 41 (2007) 6117: *Ks0 3.50, *beta -2.19 -5.76 -14.30 -21.71, I = 0.
  // Solubilities: sums worked outside this program, two decimals.
  const AlphaRow rows[] = {{2, -2.28, 0}, {4, -6.12, 0}, {7, -9.24, 0}, {8, -9.88, 0}, {9, -9.20, 0}, {11, -7.21, 0}};
  for (const AlphaRow& row : rows) {
    BathBuilder bath(ActivityModel::Conditional);
    bath.metal("Fe^3+", 3, std::pow(10.0, row.printed)).ph(row.ph);
    bath.hydroxo("Fe^3+", 3, {-2.19, -5.76, -14.30, -21.71}).solid("Fe(OH)3 fresh", {{"Fe^3+", 1}, {"H^+", -3}}, 3.50);
    EXPECT_NEAR(*bath.solve(25.0).solids.at(0).lgSaturation, 0.0, 0.0065) << "pH " << row.ph;
  }
}

TEST(ZincHydroxide, StandsOnItsLineOnBothSidesOfTheMinimum) {
  // Powell et al., Pure Appl. Chem. 85 (2013) 2249: *beta -8.96 -17.82 -28.05 -40.41; *Ks0 epsilon 11.38,
  // ZnO 11.12; amorphous 12.47 (NIST 46, from memory). Solubilities: sums worked outside, two decimals.
  const AlphaRow rows[] = {{7, -2.62, 0},  {8, -4.57, 0},  {9, -6.05, 0},  {10, -6.22, 0},
                           {11, -5.59, 0}, {12, -4.51, 0}, {13, -2.94, 0}, {14, -1.02, 0}};
  for (const AlphaRow& row : rows) {
    BathBuilder bath(ActivityModel::Conditional);
    bath.metal("Zn^2+", 2, std::pow(10.0, row.printed)).ph(row.ph);
    bath.hydroxo("Zn^2+", 2, {-8.96, -17.82, -28.05, -40.41});
    bath.solid("Zn(OH)2 epsilon", {{"Zn^2+", 1}, {"H^+", -2}}, 11.38);
    bath.solid("Zn(OH)2 amorphous", {{"Zn^2+", 1}, {"H^+", -2}}, 12.47);
    bath.solid("ZnO aged", {{"Zn^2+", 1}, {"H^+", -2}}, 11.12);
    const LiquorReport report = bath.solve(25.0);
    EXPECT_NEAR(*report.solids.at(0).lgSaturation, 0.0, 0.0065) << "pH " << row.ph;
    EXPECT_NEAR(*report.solids.at(1).lgSaturation, -1.09, 0.0065) << "pH " << row.ph;
    EXPECT_NEAR(*report.solids.at(2).lgSaturation, +0.26, 0.0065) << "pH " << row.ph;
  }
}

TEST(Ammonium, DaviesLeavesItsConstantWhereChargesCancel) {
  // Harris, Quantitative Chemical Analysis, App. G: pKa 9.245 at I = 0. NH4+ = NH3 + H+ changes no z^2, so
  // Davies holds the thermodynamic constant; the printed 9.26 at I = 0.1 is within its 0.02.
  BathBuilder bath(ActivityModel::Davies);
  bath.metal("Cu^2+", 2, 1e-9).ligandTotal("NH3", 0, 0.01).fixed("Na^+", 1, 0.1).fixed("ClO4^-", -1, 0.1).ph(9.0);
  bath.complex("NH4^+", 1, {{"H^+", 1}, {"NH3", 1}}, 9.245);
  const LiquorReport report = bath.solve(25.0);
  const double pKa = -std::log10(amount(report, "NH3") * amount(report, "H^+") / amount(report, "NH4^+"));
  EXPECT_NEAR(pKa, 9.245, 1e-9);
  EXPECT_NEAR(pKa, 9.26, 0.02);
}

TEST(CopperHydroxide, GoesIntoSolutionAsTotalAmmoniaRises) {
  // common practice: solubility product of copper(II) hydroxide near 1e-20, overall formation constant of
  // tetraamminecopper(II) near 1e12; ammonium as above.
  double before = std::numeric_limits<double>::infinity(), first = 0.0, last = 0.0;
  int crossings = 0;
  for (int step = 0; step <= 60; ++step) {
    const double ammonia = 0.05 * step;
    BathBuilder bath(ActivityModel::Conditional);
    bath.metal("Cu^2+", 2, 0.01).ligandTotal("NH3", 0, ammonia).ph(9.5);
    bath.complex("Cu(NH3)4^2+", 2, {{"Cu^2+", 1}, {"NH3", 4}}, 12.0);
    bath.complex("NH4^+", 1, {{"H^+", 1}, {"NH3", 1}}, 9.245);
    bath.solid("Cu(OH)2 fresh", {{"Cu^2+", 1}, {"OH^-", 2}}, -20.0);
    const double now = *bath.solve(25.0).solids.at(0).lgSaturation;
    EXPECT_LT(now, before) << "at " << ammonia << " mol/L total ammonia";
    if (before > 0.0 && now <= 0.0 && step > 0) ++crossings;
    if (step == 0) first = now;
    before = last = now;
  }
  EXPECT_GT(first, 8.0);
  EXPECT_LT(last, -3.0);
  EXPECT_EQ(crossings, 1);
}

}  // namespace
}  // namespace tw::test
