// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/tank_view.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "tests/monitor/support/temp_shop.hpp"

namespace tw::monitor {
namespace {

using test::at;

// Limits of baths/copper_ammine.toml: ligand_loss 0.35 / 0.20; horizon 48 h; pH and temperature every 8 h.
class Condition : public testing::Test {
 protected:
  Condition() : m_plant(m_shop.plant()), m_setup(*m_plant.tank("T1")) {
    for (const auto& [channel, value] : io::targetValues(m_setup.recipe)) {
      io::Reading row;
      row.tank = "T1";
      row.channel = channel;
      row.sampledAt.at = at("2026-03-02T06:00:00Z");
      row.value = value;
      m_facts.readings[channel] = row;
      m_facts.values[channel] = io::fromCanonical(*m_setup.recipe.channel(channel), value);
    }
  }
  /// The newest result, with this ligand margin; the trend gets it too.
  void result(double ligandLoss, bool reliable = true) {
    io::ResultRow row;
    row.tank = "T1";
    row.sampledAt = at("2026-03-02T06:00:00Z");
    row.reliable = reliable;
    row.margins = {{"ligand_loss", ligandLoss}};
    m_facts.newest = row;
    m_facts.trend[row.sampledAt] = row.margins;
    m_facts.stored.emplace();
    m_facts.stored->report.reliable = reliable;
    model::Margin margin;
    margin.fraction = ligandLoss;
    margin.solid = "Cu(OH)2 fresh";
    m_facts.stored->report.margins[static_cast<std::size_t>(model::MarginKind::LigandLoss)].smallest = margin;
  }
  /// A straight fall of the ligand margin by `perDay` that ends at `now`.
  void falling(double now, double perDay, bool reliable = true) {
    result(now, reliable);
    for (int day = 1; day <= 4; ++day) {
      m_facts.trend[at("2026-03-02T06:00:00Z") - std::chrono::hours(24 * day)] = {
          {"ligand_loss", now + perDay * day}};
    }
  }
  io::wire::TankView view(const std::string& time = "2026-03-02T07:00:00Z") const {
    return tankView(m_setup, m_facts, m_alarms, at(time));
  }

  test::TempShop m_shop;
  Plant m_plant;
  const TankSetup& m_setup;
  TankFacts m_facts;
  std::vector<io::AlarmRow> m_alarms;
};

TEST_F(Condition, IsStaleBeforeTheFirstResult) {
  m_facts.readings.clear();
  m_facts.values.clear();
  const auto seen = view();
  EXPECT_EQ(seen.condition, "stale");
  EXPECT_EQ(seen.sampledAt, "");
  EXPECT_THAT(seen.reasons, testing::SizeIs(4));
}

TEST_F(Condition, IsFineAwayFromEveryLimit) {
  result(0.6);
  EXPECT_EQ(view().condition, "fine");
  EXPECT_TRUE(view().reasons.empty());
  EXPECT_FALSE(view().stale);
}

TEST_F(Condition, NamesTheLimitThatIsPassed) {
  result(0.3);
  const auto seen = view();
  EXPECT_EQ(seen.condition, "tight");
  ASSERT_FALSE(seen.reasons.empty());
  EXPECT_EQ(seen.reasons[0].code, "margin");
  EXPECT_EQ(seen.reasons[0].subject, "ligand_loss");
  EXPECT_EQ(seen.reasons[0].word, "tight");
  EXPECT_DOUBLE_EQ(*seen.reasons[0].limit, 0.35);
}

TEST_F(Condition, DriftsWhenTheForecastReachesCautionWithinTheHorizon) {
  falling(0.45, 0.06);  // 0.10 above caution: 40 h at 0.06 a day
  const auto seen = view("2026-03-02T08:00:00Z");
  EXPECT_EQ(seen.condition, "drifting");
  EXPECT_EQ(seen.reasons[0].code, "forecast");
  EXPECT_NEAR(*seen.reasons[0].hours, 38.0, 0.01);  // 40 h after the result, two of them gone
  ASSERT_TRUE(seen.projection);
  EXPECT_NEAR(seen.projection->slope_per_day, -0.06, 1e-9);
  EXPECT_GT(*seen.projection->bedAtHorizon, 0.5);
}

TEST_F(Condition, DoesNotDriftBeyondTheHorizon) {
  falling(0.50, 0.06);  // 60 h
  EXPECT_EQ(view().condition, "fine");
  EXPECT_TRUE(view().projection);
}

TEST_F(Condition, ShowsTheProjectionOfTheMarginThatIsInsideItsLimit) {
  falling(0.30, 0.02);
  for (auto& [time, margins] : m_facts.trend) {
    margins["ph_down"] = 2.0 - 0.1 * std::chrono::duration<double, std::ratio<86400>>(time - at("2026-02-26T06:00:00Z")).count();
  }
  const auto seen = view();
  EXPECT_EQ(seen.condition, "tight");
  ASSERT_TRUE(seen.projection);
  EXPECT_EQ(seen.projection->margin, "ligand_loss");
  EXPECT_FALSE(seen.projection->hoursToCaution);
  EXPECT_NEAR(*seen.projection->hoursToAct, 119.0, 0.01);  // 0.10 at 0.02 a day, less the hour gone
}

TEST_F(Condition, ShowsValuesAsTheyWereTyped) {
  const io::Channel& copper = *m_setup.recipe.channel("copper");
  for (const double typed : {15.4, 22.1, 0.3, 18.7}) {
    EXPECT_EQ(inUnit(copper, *io::toCanonical(copper, typed)), typed);
  }
  EXPECT_EQ(inUnit(copper, 0.0), 0.0);
}

TEST_F(Condition, DoesNotForecastFromAnUnreliableResult) {
  falling(0.45, 0.06, false);
  const auto seen = view();
  EXPECT_EQ(seen.condition, "fine");
  EXPECT_TRUE(seen.doubtful);
}

TEST_F(Condition, ForgetsTheTrendBeforeADump) {
  falling(0.45, 0.06);
  m_facts.chapter = at("2026-03-01T12:00:00Z");
  EXPECT_FALSE(view().projection);
  EXPECT_EQ(view().condition, "fine");
}

TEST_F(Condition, BecomesStaleWithAgeAndKeepsWorseWords) {
  result(0.6);
  EXPECT_EQ(view("2026-03-02T16:00:00Z").condition, "fine");
  EXPECT_EQ(view("2026-03-02T16:01:00Z").condition, "stale");
  result(0.1);
  const auto seen = view("2026-03-02T16:01:00Z");
  EXPECT_EQ(seen.condition, "brink");
  EXPECT_TRUE(seen.stale);
  EXPECT_EQ(seen.reasons[0].code, "margin");
}

TEST_F(Condition, HoldsTheWordOfAnAlarmInsideItsDeadband) {
  result(0.36);
  EXPECT_EQ(view().condition, "fine");
  io::AlarmRow alarm;
  alarm.kind = "margin";
  alarm.subject = "ligand_loss";
  alarm.word = "tight";
  alarm.state = "acknowledged";
  m_alarms.push_back(alarm);
  EXPECT_EQ(view().condition, "tight");
  m_alarms[0].state = "returned_unacknowledged";
  EXPECT_EQ(view().condition, "fine");
}

TEST_F(Condition, SaysThatALiquorCouldNotBeSolved) {
  result(0.6);
  m_facts.unsolved = model::Fault{"charge_cannot_close", "Na^+", "", ""};
  const auto seen = view();
  EXPECT_TRUE(seen.doubtful);
  EXPECT_EQ(seen.reasons[0].code, "unreliable");
  EXPECT_EQ(seen.reasons[0].subject, "charge_cannot_close:Na^+");
}

TEST_F(Condition, ListsWhatIsDueByTheRecipesSchedule) {
  const auto due = dueOf(m_setup, m_facts, at("2026-03-02T14:00:00Z"));
  ASSERT_EQ(due.size(), 4U);
  for (const DueView& each : due) {
    const bool often = each.channel == "ph" || each.channel == "temperature";
    EXPECT_EQ(each.dueAt, often ? "2026-03-02T14:00:00Z" : "2026-03-03T06:00:00Z") << each.channel;
    EXPECT_EQ(each.overdue, often) << each.channel;
  }
  m_facts.inService = false;
  EXPECT_TRUE(dueOf(m_setup, m_facts, at("2026-03-02T14:00:00Z")).empty());
}

}  // namespace
}  // namespace tw::monitor
