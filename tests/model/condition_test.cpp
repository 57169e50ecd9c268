// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/condition.hpp"

#include <gtest/gtest.h>

namespace tw::model {
namespace {

constexpr std::size_t at(MarginKind kind) { return static_cast<std::size_t>(kind); }

// Invented numbers: one sludge solid "A fresh", one "B fresh" with limits of its own, one scale "C".
ChemicalSystem bath() {
  ChemicalSystem system;
  Solid a, b, c;
  a.id = "A fresh";
  b.id = "B fresh";
  b.limits = {{MarginKind::PhUp, {0.2, 0.1}}};
  c.id = "C";
  c.role = SolidRole::Scale;
  c.saturationLimit = MarginLimit{-0.3, 0.0};
  system.solids = {a, b, c};
  return system;
}

LiquorReport liquor(double saturationA = -2.0, double saturationC = -2.0) {
  LiquorReport report;
  report.solids = {{"A fresh", SolidRole::Sludge, saturationA, 0.0},
                   {"B fresh", SolidRole::Sludge, -3.0, 0.0},
                   {"C", SolidRole::Scale, saturationC, 0.0}};
  return report;
}

Margin margin(double value, const std::string& solid = "A fresh",
              std::optional<double> fraction = std::nullopt) {
  return {value, fraction, solid, ""};
}

MarginLimits limitedPhUp() {
  MarginLimits limits;
  limits[at(MarginKind::PhUp)] = MarginLimit{0.6, 0.3};
  return limits;
}

Condition conditionAt(double phUp) {
  LiquorReport report = liquor();
  report.margins[at(MarginKind::PhUp)].smallest = margin(phUp);
  return judge(bath(), report, limitedPhUp(), {}).condition;
}

TEST(ConditionName, RoundTripsAndRefusesOtherWords) {
  for (const char* word : {"fine", "drifting", "tight", "brink", "sludging", "stale"}) {
    const auto found = condition(word);
    ASSERT_TRUE(found) << word;
    EXPECT_STREQ(name(*found), word);
  }
  EXPECT_FALSE(condition("Fine"));
  EXPECT_FALSE(condition(""));
}

TEST(Judge, TurnsTightAtCautionAndBrinkAtAct) {
  EXPECT_EQ(conditionAt(0.61), Condition::Fine);
  EXPECT_EQ(conditionAt(0.60), Condition::Tight);
  EXPECT_EQ(conditionAt(0.31), Condition::Tight);
  EXPECT_EQ(conditionAt(0.30), Condition::Brink);
  EXPECT_EQ(conditionAt(-0.5), Condition::Brink);
}

TEST(Judge, ComparesTheFractionWhereThereIsOne) {
  LiquorReport report = liquor();
  report.margins[at(MarginKind::LigandLoss)].smallest = margin(3.0, "A fresh", 0.2);
  MarginLimits limits;
  limits[at(MarginKind::LigandLoss)] = MarginLimit{0.30, 0.15};
  const Judgement judged = judge(bath(), report, limits, {});
  EXPECT_EQ(judged.condition, Condition::Tight);
  ASSERT_EQ(judged.findings.size(), 1U);
  EXPECT_EQ(judged.findings[0].code, "margin");
  EXPECT_EQ(judged.findings[0].subject, "ligand_loss");
  EXPECT_DOUBLE_EQ(judged.findings[0].value, 0.2);
  EXPECT_DOUBLE_EQ(judged.findings[0].limit, 0.30);
}

TEST(Judge, NeverCountsAMarginThatIsNullOrUnlimited) {
  EXPECT_EQ(judge(bath(), liquor(), limitedPhUp(), {}).condition, Condition::Fine);
  LiquorReport report = liquor();
  report.margins[at(MarginKind::PhDown)].smallest = margin(0.01);
  EXPECT_EQ(judge(bath(), report, limitedPhUp(), {}).condition, Condition::Fine);
}

TEST(Judge, PutsSludgingFirst) {
  LiquorReport report = liquor(0.01);
  report.margins[at(MarginKind::PhUp)].smallest = margin(0.1);
  const Judgement judged = judge(bath(), report, limitedPhUp(), {});
  EXPECT_EQ(judged.condition, Condition::Sludging);
  ASSERT_EQ(judged.findings.size(), 2U);
  EXPECT_EQ(judged.findings[0].subject, "A fresh");
  EXPECT_EQ(judged.findings[1].condition, Condition::Brink);
}

TEST(Judge, UsesTheThresholdOfTheSolid) {
  LiquorReport report = liquor(0.2);
  report.solids[0].threshold = 0.3;
  EXPECT_EQ(judge(bath(), report, {}, {}).condition, Condition::Fine);
  report.solids[0].threshold = 0.1;
  EXPECT_EQ(judge(bath(), report, {}, {}).condition, Condition::Sludging);
}

TEST(Judge, NeverCallsAScaleOrAnAbsentSolidSludge) {
  LiquorReport report = liquor(-2.0, 0.5);
  report.solids[0].lgSaturation.reset();
  const Judgement judged = judge(bath(), report, {}, {});
  EXPECT_EQ(judged.condition, Condition::Brink) << "the scale has a saturation limit of its own";
  EXPECT_EQ(judge(bath(), liquor(-2.0, -0.2), {}, {}).condition, Condition::Tight);
  EXPECT_EQ(judge(bath(), liquor(-2.0, -0.31), {}, {}).condition, Condition::Fine);
}

TEST(Judge, JudgesASolidWithLimitsByItsOwnMargins) {
  LiquorReport report = liquor();
  auto& set = report.margins[at(MarginKind::PhUp)];
  set.smallest = margin(0.25, "B fresh");
  set.bySolid = {{"A fresh", margin(0.7)}, {"B fresh", margin(0.25, "B fresh")}, {"C", margin(0.01, "C")}};
  EXPECT_EQ(judge(bath(), report, limitedPhUp(), {}).condition, Condition::Fine)
      << "0.25 is beyond B's own caution limit 0.2, and A's 0.7 is beyond the bath's";
  set.bySolid[0].second = margin(0.5);
  EXPECT_EQ(judge(bath(), report, limitedPhUp(), {}).condition, Condition::Tight);
  set.bySolid[0].second = margin(0.7);
  set.smallest = set.bySolid[1].second = margin(0.05, "B fresh");
  const Judgement judged = judge(bath(), report, limitedPhUp(), {});
  EXPECT_EQ(judged.condition, Condition::Brink);
  EXPECT_EQ(judged.findings.at(0).code, "solid");
}

TEST(Judge, CountsAGuardPastItsLimits) {
  const Guard guard{"free-cyanide", 12.0, 10.0, 25.0, 30.0};
  const auto with = [&](double x) { return judge(bath(), liquor(), {}, {{guard, x, 18.0}}).condition; };
  EXPECT_EQ(with(18.0), Condition::Fine);
  EXPECT_EQ(with(11.9), Condition::Tight);
  EXPECT_EQ(with(9.9), Condition::Brink);
  EXPECT_EQ(with(25.1), Condition::Tight);
  EXPECT_EQ(with(30.1), Condition::Brink);
}

TEST(Judge, IsDoubtfulWhenTheResultIsNotReliable) {
  LiquorReport report = liquor();
  EXPECT_FALSE(judge(bath(), report, {}, {}).doubtful);
  report.reliable = false;
  EXPECT_TRUE(judge(bath(), report, {}, {}).doubtful);
}

TEST(BedOf, PassesThroughItsFourHeights) {
  const MarginLimit limit{0.6, 0.3};
  EXPECT_DOUBLE_EQ(bedOf(1.6, 1.6, limit), 0.1);
  EXPECT_DOUBLE_EQ(bedOf(1.1, 1.6, limit), 0.3);
  EXPECT_DOUBLE_EQ(bedOf(0.6, 1.6, limit), 0.5);
  EXPECT_DOUBLE_EQ(bedOf(0.45, 1.6, limit), 0.625);
  EXPECT_DOUBLE_EQ(bedOf(0.3, 1.6, limit), 0.75);
  EXPECT_DOUBLE_EQ(bedOf(0.15, 1.6, limit), 0.875);
  EXPECT_DOUBLE_EQ(bedOf(0.0, 1.6, limit), 1.0);
  EXPECT_DOUBLE_EQ(bedOf(-1.0, 1.6, limit), 1.0);
  EXPECT_DOUBLE_EQ(bedOf(9.0, 1.6, limit), 0.02);
}

TEST(BedOf, StartsAtTwiceCautionWhenTheTargetIsTightItself) {
  EXPECT_DOUBLE_EQ(bedOf(1.2, 0.5, {0.6, 0.3}), 0.1);
  EXPECT_DOUBLE_EQ(bedOf(0.9, 0.6, {0.6, 0.3}), 0.3);
}

TEST(Bed, IsTheWorstOfTheLimitedMargins) {
  LiquorReport report = liquor(), target = liquor();
  report.margins[at(MarginKind::PhUp)].smallest = margin(0.6);
  report.margins[at(MarginKind::PhDown)].smallest = margin(0.01);
  target.margins[at(MarginKind::PhUp)].smallest = margin(1.6);
  EXPECT_DOUBLE_EQ(*bed(report, target, limitedPhUp(), {}), 0.5);
  EXPECT_FALSE(bed(report, target, {}, {}));
  EXPECT_FALSE(bed(liquor(), target, limitedPhUp(), {}));
}

TEST(Bed, IsFullPastTheLineThoughMarginsAreAbsent) {
  EXPECT_DOUBLE_EQ(*bed(liquor(0.5), liquor(), limitedPhUp(), {}), 1.0);
}

TEST(Bed, CountsDilutionFromOne) {
  LiquorReport report = liquor(), target = liquor();
  MarginLimits limits;
  limits[at(MarginKind::Dilution)] = MarginLimit{2.0, 1.5};
  target.margins[at(MarginKind::Dilution)].smallest = margin(5.0);
  report.margins[at(MarginKind::Dilution)].smallest = margin(1.25);
  EXPECT_DOUBLE_EQ(*bed(report, target, limits, {}), 0.875);
}

TEST(Bed, RunsAlongAGuardOnBothSides) {
  const Guard guard{"ratio", 12.0, 10.0, 25.0, 30.0};
  const auto height = [&](double x) { return *bed(liquor(), liquor(), {}, {{guard, x, 18.0}}); };
  EXPECT_DOUBLE_EQ(height(18.0), 0.1);
  EXPECT_DOUBLE_EQ(height(12.0), 0.5);
  EXPECT_DOUBLE_EQ(height(10.0), 0.75);
  EXPECT_DOUBLE_EQ(height(8.0), 1.0);
  EXPECT_DOUBLE_EQ(height(25.0), 0.5);
  EXPECT_DOUBLE_EQ(height(30.0), 0.75);
}

}  // namespace
}  // namespace tw::model
