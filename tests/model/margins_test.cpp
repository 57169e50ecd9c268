// SPDX-License-Identifier: GPL-3.0-or-later
// Baths and constants here are invented, most of them so that a margin can be worked out by hand.
#include <gtest/gtest.h>

#include <cmath>

#include "model/analysis.hpp"
#include "tests/support/bath_builder.hpp"

namespace tw::test {
namespace {

using namespace model;

constexpr double kByHand = 1e-9;

LiquorReport analysed(const ChemicalSystem& system, const LiquorInput& input) {
  auto report = analyse(system, input);
  if (!report) throw std::runtime_error(report.error().code + " " + report.error().subject);
  return *report;
}

/// Bare metal, 0.01 mol/L at pH 6, and its hydroxide M(OH)2 + 2 H^+ = M^2+ + 2 H2O of lg *Ks 12.
BathBuilder bareMetal() {
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("M^2+", 2, 0.01).ph(6.0);
  bath.solid("M(OH)2", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 12.0);
  return bath;
}

TEST(Margins, BareMetalMeetsItsHydroxideWhereItsProductSays) {
  // lg saturation = lg 0.01 + 2 pH - 12: -2 at pH 6, 0 at pH 7.
  const LiquorReport report = bareMetal().solve(25.0, true);
  EXPECT_NEAR(*report.solids[0].lgSaturation, -2.0, 1e-12);
  const auto& up = report.margin(MarginKind::PhUp).smallest;
  ASSERT_TRUE(up);
  EXPECT_NEAR(up->value, 1.0, kByHand);
  EXPECT_EQ(up->solid, "M(OH)2");
  EXPECT_FALSE(report.margin(MarginKind::PhDown).smallest);
}

TEST(Margins, MetalGainIsMolesAndShareOfTheMetal) {
  // 0 at 1 mol/L: 0.99 more, 99 times the metal.
  const auto gain = bareMetal().solve(25.0, true).margin(MarginKind::MetalGain).smallest;
  ASSERT_TRUE(gain);
  EXPECT_NEAR(gain->value, 0.99, kByHand);
  EXPECT_NEAR(*gain->fraction, 99.0, 1e-7);
  EXPECT_EQ(gain->judged(), *gain->fraction);
}

TEST(Margins, ThresholdMovesTheLine) {
  const BathBuilder bath = bareMetal();
  ChemicalSystem system = bath.system();
  system.solids[0].threshold = 0.5;
  EXPECT_NEAR(analysed(system, bath.input()).margin(MarginKind::PhUp).smallest->value, 1.25, kByHand);
}

TEST(Margins, EnthalpySetsWarming) {
  // lg *Ks falls by 2 (from the saturation of -2 to 0) at 1/T = 1/298.15 - 2 R ln10 / 150000.
  const BathBuilder bath = bareMetal();
  ChemicalSystem system = bath.system();
  system.solids[0].dissolution.K.dH_kJ_mol = -150.0;
  const LiquorReport report = analysed(system, bath.input());
  const double T = 1.0 / (1.0 / 298.15 - 2.0 * 8.314462618 * std::log(10.0) / 150000.0);
  // Proton total is kept: acid 1e-6 in unbuffered water, pH stays within the hydroxide that forms.
  ASSERT_TRUE(report.margin(MarginKind::Warming).smallest);
  EXPECT_NEAR(report.margin(MarginKind::Warming).smallest->value, T - 298.15, 2.0);
  EXPECT_FALSE(report.margin(MarginKind::Cooling).smallest);
}

/// A complex ML so strong that free metal is T_M/(K (T_L - T_M)).
BathBuilder strongComplex(double total) {
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("M^2+", 2, 0.1).ligandTotal("L^2-", -2, total).ph(9.0);
  bath.complex("ML", 0, {{"M^2+", 1}, {"L^2-", 1}}, 12.0);
  bath.solid("M(OH)2", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 16.0);
  return bath;
}

TEST(Margins, LigandLossIsMolesAndShareOfTheLigand) {
  // The line is at [M] = 10^(16 - 18) = 0.01: then ML = 0.09, L = 0.09/(0.01 x 1e12), T_L = 0.09 + 9e-12.
  const auto loss = strongComplex(0.3).solve(25.0, true).margin(MarginKind::LigandLoss);
  ASSERT_TRUE(loss.smallest);
  EXPECT_NEAR(loss.smallest->value, 0.3 - 0.09 - 9e-12, kByHand);
  EXPECT_NEAR(*loss.smallest->fraction, (0.3 - 0.09) / 0.3, kByHand);
  EXPECT_EQ(loss.smallest->ligand, "L^2-");
  ASSERT_EQ(loss.byLigand.size(), 1u);
}

TEST(Margins, LastCrumbsOfALigandAreCounted) {
  // Metal a trace beside the ligand: the line lies within the last millionth of what there is.
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("M^2+", 2, 1e-6).ligandTotal("L^2-", -2, 1.0).ph(9.0);
  bath.complex("ML", 0, {{"M^2+", 1}, {"L^2-", 1}}, 14.0);
  bath.solid("M(OH)2", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 11.5);  // line at [M] = 10^-6.5
  const auto loss = bath.solve(25.0, true).margin(MarginKind::LigandLoss).smallest;
  ASSERT_TRUE(loss);
  EXPECT_NEAR((1.0 - *loss->fraction) / (1e-6 - std::pow(10.0, -6.5)), 1.0, 1e-6);
}

TEST(Margins, LossOfAllTheLigandIsNoLossWhereTheMetalStaysDissolved) {
  BathBuilder bath = strongComplex(0.3);
  bath.ph(6.0);  // line at [M] = 10^4
  EXPECT_FALSE(bath.solve(25.0, true).margin(MarginKind::LigandLoss).smallest);
}

TEST(Margins, SolidThatHoldsTheLigandIsMetOnTheWayDown) {
  // MX2^- in excess X; MX(s) has its highest saturation at little X, none at no X.
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("M^+", 1, 0.1).ligandTotal("X^-", -1, 0.5).ph(9.0);
  bath.complex("MX2^-", -1, {{"M^+", 1}, {"X^-", 2}}, 20.5);
  bath.solid("MX", {{"M^+", 1}, {"X^-", 1}}, -15.7);
  const auto loss = bath.solve(25.0, true).margin(MarginKind::LigandLoss).smallest;
  ASSERT_TRUE(loss);
  // The line: [M][X] = 10^-15.7 with [MX2] = 0.1 to within traces: [X] = 0.1/10^(20.5 - 15.7).
  EXPECT_NEAR(loss->value, 0.5 - 0.2 - 0.1 / std::pow(10.0, 4.8), 1e-6);
}

TEST(Margins, AmphotericMetalHasALineOnBothSides) {
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("M^2+", 2, 0.01).ph(9.5).ligandTotal("L", 0, 1.0);
  bath.complex("ML4^2+", 2, {{"M^2+", 1}, {"L", 4}}, 9.0).complex("HL^+", 1, {{"L", 1}, {"H^+", 1}}, 9.3);
  bath.hydroxo("M^2+", 2, {-9.0, -17.0, -28.4, -41.2});
  bath.solid("M(OH)2", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 11.5);
  const LiquorReport report = bath.solve(25.0, true);
  ASSERT_TRUE(report.margin(MarginKind::PhUp).smallest);
  ASSERT_TRUE(report.margin(MarginKind::PhDown).smallest);
  // What a margin says must be so: at that pH the saturation is the threshold.
  for (const auto& [kind, sign] : {std::pair{MarginKind::PhUp, 1.0}, {MarginKind::PhDown, -1.0}}) {
    bath.ph(9.5 + sign * report.margin(kind).smallest->value);
    EXPECT_NEAR(*bath.solve(25.0).solids[0].lgSaturation, 0.0, 1e-9);
  }
}

TEST(Margins, DilutionKeepsNothingButProportions) {
  // ML half dissociates on dilution; the line is at [M] = 0.001 (pH held by nothing: no protons react).
  const LiquorReport report = strongComplex(0.3).solve(25.0, true);
  EXPECT_FALSE(report.margin(MarginKind::Dilution).smallest);
  BathBuilder weak(ActivityModel::Conditional);
  weak.metal("M^2+", 2, 0.1).ligandTotal("L", 0, 2.0).ph(9.0);
  weak.complex("ML4^2+", 2, {{"M^2+", 1}, {"L", 4}}, 8.0).complex("HL^+", 1, {{"L", 1}, {"H^+", 1}}, 9.3);
  weak.solid("M(OH)2", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 11.5);
  const auto dilution = weak.solve(25.0, true).margin(MarginKind::Dilution).smallest;
  ASSERT_TRUE(dilution);
  EXPECT_GT(dilution->value, 1.0);
  SweepRequest request;
  request.over = SweepOver::Dilution;
  request.from = 1.0;
  request.to = dilution->value;
  const auto points = sweep(weak.system(), weak.input(), request);
  ASSERT_TRUE(points);
  EXPECT_NEAR(*points->back().liquor->solids[0].lgSaturation, 0.0, 1e-9);
}

TEST(Margins, HydroxideAsLigandIsLostOnTheWayDownInPh) {
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("M^2+", 2, 0.01).ph(13.5).hydroxo("M^2+", 2, {-9.0, -17.0, -28.4, -41.2});
  bath.solid("M(OH)2", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 12.5);
  ChemicalSystem system = bath.system();
  system.hydroxideIsLigand = true;
  system.marginsOff = {MarginKind::PhDown};
  const LiquorReport report = analysed(system, bath.input());
  EXPECT_FALSE(report.margin(MarginKind::PhDown).smallest);
  const auto loss = report.margin(MarginKind::LigandLoss).smallest;
  ASSERT_TRUE(loss);
  EXPECT_EQ(loss->ligand, "OH^-");
  const double now = report.freeLigands_mol_L.back().second;
  EXPECT_NEAR(loss->value / now, *loss->fraction, 1e-14);
  const double pH = 13.5 + std::log10(1.0 - *loss->fraction);  // conditional: [OH^-] is Kw/[H^+]
  EXPECT_NEAR(*bath.ph(pH).solve(25.0).solids[0].lgSaturation, 0.0, 1e-9);
}

TEST(Margins, SolidWithLimitsOfItsOwnIsJudgedAlone) {
  BathBuilder bath = bareMetal();
  bath.solid("M(OH)2 other", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 11.0);
  bath.solid("scale", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 10.5);
  ChemicalSystem system = bath.system();
  system.solids[1].limits = {{MarginKind::PhUp, {0.3, 0.15}}};
  system.solids[2].role = SolidRole::Scale;
  const LiquorReport report = analysed(system, bath.input());
  const MarginSet& up = report.margin(MarginKind::PhUp);
  EXPECT_EQ(up.smallest->solid, "M(OH)2");
  ASSERT_EQ(up.bySolid.size(), 2u);
  EXPECT_NEAR(up.bySolid[1].second->value, 0.5, kByHand);
}

TEST(Margins, PastTheLineAllAreNull) {
  BathBuilder bath = bareMetal();
  const LiquorReport report = bath.ph(7.5).solve(25.0, true);
  EXPECT_GT(*report.solids[0].lgSaturation, 0.0);
  for (const MarginSet& set : report.margins) {
    EXPECT_FALSE(set.smallest);
    for (const auto& [solid, margin] : set.bySolid) EXPECT_FALSE(margin) << solid;
  }
}

TEST(Margins, SecondMetalHasItsOwnGain) {
  BathBuilder bath = bareMetal();
  bath.fixed("N^2+", 2, 1e-4).solid("N(OH)2", {{"N^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 10.0);
  ChemicalSystem system = bath.system();
  system.components.back().isMetal = true;
  const LiquorReport report = analysed(system, bath.input());
  ASSERT_EQ(report.secondMetals.size(), 1u);
  EXPECT_NEAR(*report.secondMetals[0].pM, 4.0, 1e-12);
  ASSERT_TRUE(report.secondMetals[0].metalGain);  // line at [N] = 10^-2
  EXPECT_NEAR(report.secondMetals[0].metalGain->value, 0.01 - 1e-4, kByHand);
}

TEST(Margins, SearchEndsWhereNoLiquorIsFeasible) {
  // A bath without a balance ion and an anion only cations of the metal could answer: metal is added until
  // I passes 20 mol/L, before the line.
  BathBuilder bath(ActivityModel::Davies);
  bath.metal("M^2+", 2, 0.01).ph(3.0).solid("M(OH)2", {{"M^2+", 1}, {"H2O", 2}, {"H^+", -2}}, 30.0);
  const LiquorReport report = bath.solve(25.0, true);
  EXPECT_FALSE(report.margin(MarginKind::MetalGain).smallest);
}

}  // namespace
}  // namespace tw::test
