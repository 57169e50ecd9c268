// SPDX-License-Identifier: GPL-3.0-or-later
// Baths and constants here are invented: what is tested holds for any numbers.
#include "model/equilibrium.hpp"

#include <gtest/gtest.h>

#include <atomic>
#include <cmath>
#include <cstdlib>
#include <new>

#include "model/activity.hpp"
#include "model/closed_liquor.hpp"
#include "model/physical.hpp"
#include "tests/support/bath_builder.hpp"

namespace {
std::atomic<long> g_allocations{0};
}

// Counts every allocation of this test program.
void* operator new(std::size_t size) {
  ++g_allocations;
  if (void* memory = std::malloc(size)) return memory;
  throw std::bad_alloc();
}
void operator delete(void* memory) noexcept { std::free(memory); }
void operator delete(void* memory, std::size_t) noexcept { std::free(memory); }

namespace tw::test {
namespace {

using namespace model;

constexpr double kRounding = 1e-12;

/// Ammoniacal copper with sulfate; Na^+ closes the charge where `balanced`.
struct Bath {
  ChemicalSystem system;
  LiquorInput input;
};

Bath ammine(ActivityModel model, bool balanced = true) {
  BathBuilder builder(model);
  builder.metal("Cu^2+", 2, 0.02).ligandTotal("NH3", 0, 0.5).fixed("SO4^2-", -2, 0.2).ph(9.5);
  const double lgBeta[] = {4.1, 7.6, 10.5, 12.6};
  for (int n = 1; n <= 4; ++n) {
    builder.complex("Cu(NH3)" + std::to_string(n), 2, {{"Cu^2+", 1}, {"NH3", n}}, lgBeta[n - 1]);
  }
  builder.complex("NH4^+", 1, {{"NH3", 1}, {"H^+", 1}}, 9.25)
      .hydroxo("Cu^2+", 2, {-7.9, -16.2, -26.6, -39.7});
  builder.complex("CuSO4", 0, {{"Cu^2+", 1}, {"SO4^2-", 1}}, 2.3);
  builder.solid("Cu(OH)2 fresh", {{"Cu^2+", 1}, {"OH^-", 2}}, -19.3);
  Bath bath{builder.system(), builder.input()};
  if (balanced) {
    Component sodium;
    sodium.formula = "Na^+";
    sodium.charge = 1;
    sodium.setBy = SetBy::Balance;
    sodium.other = "Cl^-";
    sodium.otherCharge = -1;
    bath.system.components.push_back(sodium);
    bath.input.value.push_back(0.0);
  }
  return bath;
}

LiquorReport solve(const Bath& bath) {
  auto report = analyse(bath.system, bath.input, {.margins = false});
  if (!report) throw std::runtime_error(report.error().code + " " + report.error().subject);
  return *report;
}

std::string faultOf(const Bath& bath) {
  const auto report = analyse(bath.system, bath.input, {.margins = false});
  return report ? "" : report.error().code + ":" + report.error().subject;
}

double charge(const LiquorReport& report) {
  double sum = 0.0, size = 0.0;
  for (const SpeciesAmount& s : report.species) {
    sum += s.charge * s.mol_L;
    size += std::abs(s.charge) * s.mol_L;
  }
  return sum / size;
}

class EveryModel : public testing::TestWithParam<ActivityModel> {};
INSTANTIATE_TEST_SUITE_P(Both, EveryModel,
                         testing::Values(ActivityModel::Conditional, ActivityModel::Davies));

TEST_P(EveryModel, BalancesAndChargeClose) {
  const LiquorReport report = solve(ammine(GetParam()));
  double copper = 0.0, I = 0.0;
  for (const SpeciesAmount& s : report.species) {
    if (s.formula.rfind("Cu", 0) == 0) copper += s.mol_L;
    I += 0.5 * s.charge * s.charge * s.mol_L;
  }
  EXPECT_NEAR(copper / 0.02, 1.0, kRounding);
  EXPECT_NEAR(charge(report), 0.0, kRounding);
  EXPECT_NEAR(report.ionicStrength_mol_L / I, 1.0, kRounding);
  EXPECT_LE(report.solver.residual, kRounding);
}

TEST_P(EveryModel, OrderOfComponentsDoesNotMatter) {
  const Bath bath = ammine(GetParam());
  Bath turned = bath;
  const std::size_t n = bath.system.components.size();
  const auto to = [n](std::size_t i) { return n - 1 - i; };
  for (std::size_t i = 0; i < n; ++i) {
    turned.system.components[to(i)] = bath.system.components[i];
    turned.input.value[to(i)] = bath.input.value[i];
  }
  turned.system.proton = to(bath.system.proton);
  turned.system.metal = to(bath.system.metal);
  for (auto& ligand : turned.system.ligands) ligand = to(ligand);
  for (auto& species : turned.system.species) {
    for (auto& term : species.formation.terms) term.component = to(term.component);
  }
  for (auto& solid : turned.system.solids) {
    for (auto& term : solid.dissolution.terms) term.component = to(term.component);
  }
  const LiquorReport a = solve(bath), b = solve(turned);
  EXPECT_NEAR(*a.pM, *b.pM, kRounding * 100);
  EXPECT_NEAR(*a.solids[0].lgSaturation, *b.solids[0].lgSaturation, kRounding * 100);
}

TEST_P(EveryModel, WarmStartEqualsColdStart) {
  Bath bath = ammine(GetParam());
  const auto warm = ClosedLiquor::open(bath.system, bath.input).value();
  Estimate estimate = warm->start();
  ASSERT_TRUE(warm->moveToPh(10.3, warm->totals(), estimate));
  const double fromNeighbour = warm->lgSaturation(0);
  const int warmIterations = warm->outcome().iterations;
  Estimate nothing;
  ASSERT_TRUE(warm->moveToPh(10.3, warm->totals(), nothing));
  EXPECT_NEAR(fromNeighbour, warm->lgSaturation(0), 1e-11);
  EXPECT_LE(warmIterations, warm->outcome().iterations);
}

TEST_P(EveryModel, WhatIsFoundCanBeStatedBack) {
  // Free, hydroxide and proton total read off the solved liquor must lead back to it.
  const Bath bath = ammine(GetParam());
  const LiquorReport first = solve(bath);
  Bath other = bath;
  other.system.components[other.system.ligands[0]].setBy = SetBy::Free;
  other.input.value[other.system.ligands[0]] = first.freeLigands_mol_L[0].second;
  other.system.components[other.system.proton].setBy = SetBy::Hydroxide;
  other.input.value[other.system.proton] = amount(first, kHydroxide);
  EXPECT_NEAR(*solve(other).pM, *first.pM, 1e-10);
  other.system.components[other.system.proton].setBy = SetBy::ProtonTotal;
  other.input.value[other.system.proton] = total(first, kProton);
  EXPECT_NEAR(solve(other).ph, first.ph, 1e-10);
}

TEST_P(EveryModel, ExcessCountsTheLastLooselyHeldLigand) {
  Bath bath = ammine(GetParam());
  Component& ligand = bath.system.components[bath.system.ligands[0]];
  ligand.setBy = SetBy::Excess;
  ligand.perMetal = {{bath.system.metal, 3.0}};
  bath.input.value[bath.system.ligands[0]] = 0.44;
  EXPECT_NEAR(total(solve(bath), "NH3"), 0.44 + 3.0 * 0.02, kRounding);
}

TEST_P(EveryModel, CausticBoundByMetalIsTakenOff) {
  Bath bath = ammine(GetParam());
  Component& proton = bath.system.components[bath.system.proton];
  proton.setBy = SetBy::Hydroxide;
  proton.perMetal = {{bath.system.metal, 2.0}};
  bath.input.value[bath.system.proton] = 0.05;
  EXPECT_NEAR(amount(solve(bath), kHydroxide) / (0.05 - 2.0 * 0.02), 1.0, kRounding);
  bath.input.value[bath.system.proton] = 0.03;
  EXPECT_EQ(faultOf(bath), "infeasible:H^+");
}

TEST_P(EveryModel, ZeroMetalLeavesWithItsSpecies) {
  Bath bath = ammine(GetParam());
  bath.input.value[bath.system.metal] = 0.0;
  const LiquorReport report = solve(bath);
  EXPECT_FALSE(report.pM);
  EXPECT_FALSE(report.solids[0].lgSaturation);
  for (const SpeciesAmount& s : report.species) {
    if (s.formula.rfind("Cu", 0) != 0) continue;
    EXPECT_EQ(s.mol_L, 0.0);
    EXPECT_FALSE(s.lgActivity || s.lgGamma) << s.formula;
  }
  EXPECT_NEAR(charge(report), 0.0, kRounding);
}

TEST_P(EveryModel, TracesKeepTheirDigits) {
  // pM of a trace follows its total exactly as long as it changes nothing else.
  Bath bath = ammine(GetParam());
  bath.input.value[bath.system.metal] = 1e-12;
  const double at1e12 = *solve(bath).pM;
  bath.input.value[bath.system.metal] = 1e-15;
  EXPECT_NEAR(*solve(bath).pM - at1e12, 3.0, 1e-9);
}

TEST_P(EveryModel, ConstantsFrom1e60To1e45AreNormal) {
  BathBuilder bath(GetParam());
  bath.metal("M^3+", 3, 0.01).ligandTotal("L^4-", -4, 0.03).ph(4.0);
  bath.complex("ML^-", -1, {{"M^3+", 1}, {"L^4-", 1}}, 45.0);
  bath.complex("M(OH)4^-", -1, {{"M^3+", 1}, {"H2O", 4}, {"H^+", -4}}, -60.0);
  bath.complex("H4L", 0, {{"L^4-", 1}, {"H^+", 4}}, 30.0);
  const LiquorReport report = bath.solve(25.0);
  EXPECT_LE(report.solver.residual, kRounding);
  EXPECT_NEAR(amount(report, "ML^-"), 0.01, 1e-9);
  EXPECT_NEAR(amount(report, "H4L") + amount(report, "L^4-"), 0.02, 1e-9);
}

TEST_P(EveryModel, ExactEquivalenceConverges) {
  // All metal and all ligand in one complex: both balances are the same but for traces.
  BathBuilder bath(GetParam());
  bath.metal("M^2+", 2, 0.01).ligandTotal("L^-", -1, 0.04).ph(7.0);
  bath.complex("ML4^2-", -2, {{"M^2+", 1}, {"L^-", 4}}, 38.0);
  const LiquorReport report = bath.solve(25.0);
  EXPECT_LE(report.solver.residual, kRounding);
  EXPECT_NEAR(amount(report, "L^-") / amount(report, "M^2+"), 4.0, 1e-5);
}

/// Charge left over from -1e-3 to 1e-3 mol/L through exactly nothing, and within rounding of it.
TEST_P(EveryModel, ChargeNearZeroConvergesForBothSigns) {
  Bath bath = ammine(GetParam());
  const std::size_t sulfate = 3;
  ASSERT_EQ(bath.system.components[sulfate].formula, "SO4^2-");
  // The sulfate at which neither ion is needed, by secant on the net of the two.
  const auto net = [&](double value) {
    bath.input.value[sulfate] = value;
    const LiquorReport report = solve(bath);
    return amount(report, "Na^+") - amount(report, "Cl^-");
  };
  double a = 0.01, b = 0.4;
  double fa = net(a);
  for (int n = 0; n < 60; ++n) {
    const double middle = 0.5 * (a + b);
    const double f = net(middle);
    (f * fa > 0.0 ? a : b) = middle;
    if (f * fa > 0.0) fa = f;
  }
  for (const double offset : {-1e-3, -1e-9, -1e-13, -1e-15, 0.0, 1e-15, 1e-13, 1e-9, 1e-3}) {
    bath.input.value[sulfate] = a + offset;
    const LiquorReport report = solve(bath);
    EXPECT_NEAR(charge(report), 0.0, kRounding) << offset;
    const double sodium = amount(report, "Na^+"), chloride = amount(report, "Cl^-");
    EXPECT_LE(std::min(sodium, chloride), 1e-12) << offset;
    if (std::abs(offset) >= 1e-9) {
      EXPECT_EQ(sodium > chloride, offset > 0.0) << offset;
    }
  }
}

TEST_P(EveryModel, OtherThatIsAComponentKeepsItsStatedTotal) {
  Bath bath = ammine(GetParam());
  Component chloride;
  chloride.formula = "Cl^-";
  chloride.charge = -1;
  chloride.setBy = SetBy::Total;
  bath.system.components.push_back(chloride);
  bath.input.value.push_back(0.1);
  bath.input.value[bath.system.proton] = 11.0;
  const LiquorReport byCation = solve(bath);
  EXPECT_NEAR(total(byCation, "Cl^-"), 0.1, kRounding);
  EXPECT_GT(total(byCation, "Na^+"), 0.0);
  bath.input.value[bath.system.proton] = 4.0;
  const LiquorReport byAnion = solve(bath);
  EXPECT_GT(total(byAnion, "Cl^-"), 0.1);
  EXPECT_EQ(total(byAnion, "Na^+"), 0.0);
  EXPECT_NEAR(charge(byAnion), 0.0, kRounding);
}

TEST(Equilibrium, PureWaterIsNeutral) {
  BathBuilder bath(ActivityModel::Davies);
  bath.metal("M^2+", 2, 0.0);
  ChemicalSystem system = bath.system();
  LiquorInput input = bath.input();
  system.components[system.proton].setBy = SetBy::ProtonTotal;
  input.value[system.proton] = 0.0;
  const auto report = analyse(system, input, {.margins = false});
  ASSERT_TRUE(report);
  EXPECT_NEAR(report->ph, 13.995 / 2.0, 1e-3);  // CRC Handbook, pKw 13.995 at 25 degC
}

TEST(Equilibrium, ProtonTotalMayBeNegative) {
  // 0.1 mol/L strong base: proton total -0.1, [OH^-] = 0.1.
  BathBuilder bath(ActivityModel::Conditional);
  bath.metal("M^+", 1, 1e-3);
  ChemicalSystem system = bath.system();
  LiquorInput input = bath.input();
  system.components[system.proton].setBy = SetBy::ProtonTotal;
  input.value[system.proton] = -0.1;
  const auto report = analyse(system, input, {.margins = false});
  ASSERT_TRUE(report);
  EXPECT_NEAR(amount(*report, kHydroxide) / 0.1, 1.0, 1e-11);
}

TEST(Equilibrium, FaultsNameTheirCulprit) {
  Bath bath = ammine(ActivityModel::Davies);
  bath.input.value[bath.system.metal] = -0.01;
  EXPECT_EQ(faultOf(bath), "negative_total:Cu^2+");
  bath = ammine(ActivityModel::Davies);
  bath.input.value[bath.system.ligands[0]] = std::nan("");
  EXPECT_EQ(faultOf(bath), "not_a_number:NH3");
  bath = ammine(ActivityModel::Davies);
  bath.input.temperature_C = 100.1;
  EXPECT_EQ(faultOf(bath), "temperature_out_of_range:temperature");
  bath = ammine(ActivityModel::Davies);
  bath.system.activityModel = ActivityModel::Sit;
  EXPECT_EQ(faultOf(bath), "activity_model_missing:sit");
  bath = ammine(ActivityModel::Davies);
  bath.system.components.back().other.clear();
  bath.input.value[bath.system.proton] = 2.0;  // acid: only an anion could close
  EXPECT_EQ(faultOf(bath), "charge_cannot_close:Na^+");
  bath = ammine(ActivityModel::Davies);
  bath.input.value[3] = 40.0;  // sulfate
  EXPECT_EQ(faultOf(bath), "ionic_strength_out_of_range:ionic_strength");
}

TEST(Equilibrium, FirstStrengthOnTheWayUpCounts) {
  // M(OH)4 = M^4+ + 4 OH^- at pH 7: c(M^4+) = T x/(1 + x), x = 2.5e-4 / gamma, reproduces three strengths
  // I = 8 c; the first one is the liquor (DESIGN: reached from I = 0).
  constexpr double kShare = 2.5e-4;
  const double A = debyeHueckelA(25.0);
  const auto excess = [&](double I) {
    const double x = kShare * std::pow(10.0, 16.0 * A * daviesTerm(I));
    return 8.0 * x / (1.0 + x) - I;
  };
  std::vector<double> roots;
  for (double I = 1e-4; I < 1.0; I *= 1.0001) {
    if (excess(I) * excess(I * 1.0001) <= 0.0) roots.push_back(I);
  }
  ASSERT_EQ(roots.size(), 3u);
  BathBuilder bath(ActivityModel::Davies);
  bath.metal("M^4+", 4, 1.0).ph(7.0);
  bath.complex("M(OH)4", 0, {{"M^4+", 1}, {"H2O", 4}, {"H^+", -4}}, -28.0 - std::log10(kShare));
  EXPECT_NEAR(bath.solve(25.0).ionicStrength_mol_L / roots[0], 1.0, 1e-3);
}

TEST(Equilibrium, SolvingAllocatesNothing) {
  for (const ActivityModel model : {ActivityModel::Conditional, ActivityModel::Davies}) {
    const Bath bath = ammine(model);
    const auto liquor = ClosedLiquor::open(bath.system, bath.input).value();
    Estimate estimate = liquor->start();
    ASSERT_TRUE(liquor->moveToPh(9.6, liquor->totals(), estimate));  // sizes settle here
    Estimate cold;
    cold.lnActivity.resize(liquor->layout().components, std::nan(""));
    const long before = g_allocations;
    const bool warmSolved = liquor->moveToPh(9.9, liquor->totals(), estimate);
    const bool coldSolved = liquor->moveToPh(9.9, liquor->totals(), cold);
    const long after = g_allocations;
    EXPECT_TRUE(warmSolved && coldSolved);
    EXPECT_EQ(after - before, 0);
  }
}

TEST(Equilibrium, CooledSampleGivesTheBathsOwnPh) {
  Bath bath = ammine(ActivityModel::Davies);
  bath.system.phTakenAtSample = true;
  for (auto& species : bath.system.species) {
    if (species.formula == "NH4^+") species.formation.K.dH_kJ_mol = -52.0;
  }
  bath.input.temperature_C = 50.0;
  bath.input.sampleTemperature_C = 25.0;
  const LiquorReport report = solve(bath);
  EXPECT_EQ(report.phMeasured, 9.5);
  EXPECT_EQ(report.phMeasuredAt_C, 25.0);
  // An ammonia buffer follows its pKa: about -52/(R ln10) (1/323.15 - 1/298.15) = -0.70.
  EXPECT_NEAR(report.ph, 9.5 - 0.70, 0.05);
  EXPECT_NEAR(charge(report), 0.0, kRounding);
}

}  // namespace
}  // namespace tw::test
