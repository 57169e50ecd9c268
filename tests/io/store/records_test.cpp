// SPDX-License-Identifier: GPL-3.0-or-later
// Results, events, recipes and alarms.
#include <limits>

#include "tests/io/store/store_fixture.hpp"

namespace tw::io::test {
namespace {

using testing::ElementsAre;
using testing::IsEmpty;

class Records : public StoreContract {};
INSTANTIATE_TEST_SUITE_P(Forms, Records, testing::Values(kSqlite), formName);

TEST_P(Records, AResultKeepsEveryField) {
  const Added copper = add(make("copper", minute(0), 1.0));
  const Added ph = add(make("ph", minute(0), 10.0));
  ResultRow given = resultOf(minute(0), {copper.id, ph.id}, 14.2000000000000011);
  given.condition = "tight";
  given.doubtful = true;
  given.reliable = false;
  given.historic = true;
  given.ph = 10.25;
  given.temperature_C = 40.5;
  given.bed = 0.625;
  given.ionicStrength = 1.9;
  given.margins = {{"ph_up", 1.0 / 3.0}, {"ligand_loss", -5e-324}};
  given.values = R"({"copper":22.1})";
  given.json = R"({"recipe":"copper-ammine"})";
  const std::int64_t id = settle(given);
  reopen();
  const ResultRow read = must(store().newestResult("T1")).value();
  EXPECT_EQ(read.id, id);
  EXPECT_EQ(read.tank, "T1");
  EXPECT_EQ(read.sampledAt, minute(0));
  EXPECT_EQ(read.computedAt, minute(2));
  EXPECT_EQ(read.recipeSha256, "aa");
  EXPECT_EQ(read.programVersion, "0.1.0");
  EXPECT_EQ(read.condition, "tight");
  EXPECT_TRUE(read.doubtful);
  EXPECT_FALSE(read.reliable);
  EXPECT_TRUE(read.historic);
  EXPECT_EQ(read.pM, given.pM);
  EXPECT_EQ(read.ph, given.ph);
  EXPECT_EQ(read.temperature_C, given.temperature_C);
  EXPECT_EQ(read.bed, given.bed);
  EXPECT_EQ(read.ionicStrength, given.ionicStrength);
  EXPECT_EQ(read.margins, given.margins);
  EXPECT_EQ(read.values, given.values);
  EXPECT_EQ(read.json, given.json);
  EXPECT_THAT(read.readings, ElementsAre(copper.id, ph.id));
  EXPECT_THAT(must(store().results("T1", Instant::min(), 0, false)).at(0).json, IsEmpty());
}

TEST_P(Records, AbsentNumbersOfAResultStayAbsent) {
  ResultRow given = resultOf(minute(0), {});
  given.pM.reset();
  given.bed = std::numeric_limits<double>::quiet_NaN();
  settle(given);
  const ResultRow read = must(store().newestResult("T1")).value();
  EXPECT_FALSE(read.pM);
  EXPECT_FALSE(read.ph);
  EXPECT_FALSE(read.bed);
  EXPECT_THAT(read.margins, IsEmpty());
}

TEST_P(Records, ResultsComeBySampleTimeAndTheLimitKeepsTheNewest) {
  for (int t : {30, 10, 20, 40}) settle(resultOf(minute(t), {}));
  std::vector<Instant> times;
  for (const ResultRow& row : must(store().results("T1", minute(20), 2, false))) times.push_back(row.sampledAt);
  EXPECT_THAT(times, ElementsAre(minute(30), minute(40)));
  EXPECT_EQ(must(store().results("T1", minute(20), 0, false)).size(), 3u);
  EXPECT_EQ(must(store().newestResult("T1"))->sampledAt, minute(40));
  EXPECT_FALSE(must(store().newestResult("T2")));
}

TEST_P(Records, AResultMustNameReadingsThatExist) {
  const auto outcome = store().settleLiquor({.tank = "T1", .sampledAt = minute(0)}, resultOf(minute(0), {77}));
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().code, "store_failed");
  EXPECT_EQ(outcome.error().kind, model::FaultKind::Machine);
  EXPECT_FALSE(must(store().newestResult("T1")));
}

EventRow addition(Instant at, double litres) {
  EventRow event;
  event.tank = "T1";
  event.kind = "addition";
  event.at = {at, 120min};
  event.stock = "aqua-ammonia";
  event.amount = litres;
  event.unit = "L";
  event.op = "AB";
  event.lot = "N-17";
  event.note = "after the shift";
  event.source = "http";
  event.receivedAt = at + 1min;
  return event;
}

TEST_P(Records, AnEventKeepsEveryFieldAndIsStoredOnce) {
  const auto first = must(store().addEvents({addition(minute(0), 12.5), addition(minute(0), 13.0)}));
  EXPECT_EQ(first[0].outcome, AddOutcome::Stored);
  EXPECT_EQ(first[1].outcome, AddOutcome::Stored);
  reopen();
  const auto again = must(store().addEvents({addition(minute(0), 12.5 * (1 + 1e-12)), addition(minute(5), 1.0)}));
  EXPECT_EQ(again[0].outcome, AddOutcome::Duplicate);
  EXPECT_EQ(again[0].id, first[0].id);
  EXPECT_EQ(again[1].outcome, AddOutcome::Stored);
  const auto read = must(store().events("T1", Instant::min()));
  ASSERT_EQ(read.size(), 3u);
  const EventRow given = addition(minute(0), 12.5);
  EXPECT_EQ(read[0].id, first[0].id);
  EXPECT_EQ(read[0].tank, given.tank);
  EXPECT_EQ(read[0].kind, given.kind);
  EXPECT_EQ(read[0].at, given.at);
  EXPECT_EQ(read[0].stock, given.stock);
  EXPECT_EQ(read[0].amount, given.amount);
  EXPECT_EQ(read[0].unit, given.unit);
  EXPECT_EQ(read[0].op, given.op);
  EXPECT_EQ(read[0].lot, given.lot);
  EXPECT_EQ(read[0].note, given.note);
  EXPECT_EQ(read[0].source, given.source);
  EXPECT_EQ(read[0].receivedAt, given.receivedAt);
  EXPECT_EQ(must(store().events("T1", minute(1))).size(), 1u);
}

TEST_P(Records, EventsWithoutAmountAreKnownByTheirNote) {
  EventRow note = addition(minute(0), 0.0);
  note.kind = "note";
  note.amount.reset();
  EXPECT_EQ(must(store().addEvents({note}))[0].outcome, AddOutcome::Stored);
  EXPECT_EQ(must(store().addEvents({note}))[0].outcome, AddOutcome::Duplicate);
  note.note = "another";
  EXPECT_EQ(must(store().addEvents({note}))[0].outcome, AddOutcome::Stored);
  note.amount = 0.0;
  EXPECT_EQ(must(store().addEvents({note}))[0].outcome, AddOutcome::Stored);
  note.amount = std::numeric_limits<double>::infinity();
  EXPECT_EQ(store().addEvents({note}).error().code, "event_invalid");
}

TEST_P(Records, ARecipeIsKeptUnderItsHashAndNeverReplaced) {
  must(store().putRecipe("aa", "copper-ammine", "{\"a\":1}"));
  must(store().putRecipe("aa", "copper-ammine", "{\"a\":2}"));
  reopen();
  EXPECT_EQ(must(store().recipeJson("aa")), "{\"a\":1}");
  EXPECT_FALSE(must(store().recipeJson("bb")));
}

TEST_P(Records, TheRecipeInForceFollowsTheDate) {
  must(store().putRecipe("aa", "copper-ammine", "{}"));
  must(store().putRecipe("bb", "copper-ammine", "{}"));
  must(store().setRecipeInForce({"T1", "copper-ammine", "aa", minute(0), "shop", "first recipe"}));
  must(store().setRecipeInForce({"T1", "copper-ammine", "bb", minute(60), "KL", "new stock"}));
  EXPECT_FALSE(must(store().recipeInForce("T1", minute(0) - 1ms)));
  EXPECT_FALSE(must(store().recipeInForce("T2", minute(90))));
  EXPECT_EQ(must(store().recipeInForce("T1", minute(59)))->sha256, "aa");
  const RecipeInForce now = must(store().recipeInForce("T1", minute(60))).value();
  EXPECT_EQ(now.tank, "T1");
  EXPECT_EQ(now.recipeId, "copper-ammine");
  EXPECT_EQ(now.sha256, "bb");
  EXPECT_EQ(now.since, minute(60));
  EXPECT_EQ(now.by, "KL");
  EXPECT_EQ(now.reason, "new stock");
  // Of two for the same moment the one decided last holds.
  must(store().setRecipeInForce({"T1", "copper-ammine", "aa", minute(60), "KL", "back again"}));
  EXPECT_EQ(must(store().recipeInForce("T1", minute(60)))->sha256, "aa");
}

TEST_P(Records, ARecipeComesIntoForceOnlyOnceTheStoreHoldsIt) {
  const auto outcome = store().setRecipeInForce({"T1", "copper-ammine", "cc", minute(0), "shop", ""});
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().code, "recipe_unknown");
}

AlarmRow tight() {
  AlarmRow alarm;
  alarm.tank = "T1";
  alarm.kind = "margin";
  alarm.subject = "ph_up";
  alarm.word = "tight";
  alarm.priority = "medium";
  alarm.state = "unacknowledged";
  alarm.unit = "pH";
  alarm.toDo = "retest pH";
  alarm.raisedAt = minute(0);
  alarm.value = 0.5;
  alarm.limit = 0.6;
  return alarm;
}

TEST_P(Records, AnAlarmIsOneRowThroughItsLife) {
  AlarmRow alarm = tight();
  alarm.id = must(store().saveAlarm(alarm, minute(0), "", "raised"));
  alarm.state = "acknowledged";
  alarm.word = "brink";
  alarm.acknowledgedAt = minute(3);
  alarm.acknowledgedBy = "MN";
  alarm.comment = "adding ammonia";
  EXPECT_EQ(must(store().saveAlarm(alarm, minute(3), "MN", "acknowledged")), alarm.id);
  reopen();
  const auto standing = must(store().alarms(false));
  ASSERT_EQ(standing.size(), 1u);
  const AlarmRow& read = standing[0];
  EXPECT_EQ(read.id, alarm.id);
  EXPECT_EQ(read.tank, "T1");
  EXPECT_EQ(read.kind, "margin");
  EXPECT_EQ(read.subject, "ph_up");
  EXPECT_EQ(read.word, "brink");
  EXPECT_EQ(read.priority, "medium");
  EXPECT_EQ(read.state, "acknowledged");
  EXPECT_EQ(read.unit, "pH");
  EXPECT_EQ(read.toDo, "retest pH");
  EXPECT_EQ(read.raisedAt, minute(0));
  EXPECT_FALSE(read.clearedAt);
  EXPECT_EQ(read.acknowledgedAt, minute(3));
  EXPECT_EQ(read.acknowledgedBy, "MN");
  EXPECT_EQ(read.comment, "adding ammonia");
  EXPECT_EQ(read.value, 0.5);
  EXPECT_EQ(read.limit, 0.6);
  EXPECT_FALSE(read.historic);
}

TEST_P(Records, OnlyStandingAlarmsAreListedUnlessAllAreAskedFor) {
  AlarmRow first = tight();
  first.id = must(store().saveAlarm(first, minute(0), "", "raised"));
  AlarmRow second = tight();
  second.subject = "ligand_loss";
  second.raisedAt = minute(5);
  second.id = must(store().saveAlarm(second, minute(5), "", "raised"));
  first.state = "normal";
  first.clearedAt = minute(7);
  must(store().saveAlarm(first, minute(7), "", "cleared"));
  const auto standing = must(store().alarms(false));
  ASSERT_EQ(standing.size(), 1u);
  EXPECT_EQ(standing[0].id, second.id);
  const auto all = must(store().alarms(true));
  ASSERT_EQ(all.size(), 2u);
  EXPECT_EQ(all[0].id, second.id);
  EXPECT_EQ(all[1].clearedAt, minute(7));
  EXPECT_EQ(must(store().alarms(true, 1)).size(), 1u);
}

TEST_P(Records, AnUnknownAlarmCannotBeChangedNorTheCauseOfAKnownOne) {
  AlarmRow alarm = tight();
  alarm.id = 9;
  EXPECT_EQ(store().saveAlarm(alarm, minute(0), "", "cleared").error().code, "alarm_unknown");
  alarm.id = 0;
  alarm.id = must(store().saveAlarm(alarm, minute(0), "", "raised"));
  alarm.subject = "ligand_loss";
  EXPECT_EQ(store().saveAlarm(alarm, minute(1), "", "raised").error().code, "store_failed");
  EXPECT_EQ(must(store().alarms(false)).at(0).subject, "ph_up");
}

}  // namespace
}  // namespace tw::io::test
