// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/alarm/engine.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "tests/monitor/support/temp_shop.hpp"

namespace tw::monitor {
namespace {

using test::at;

const io::Instant kMorning = at("2026-03-02T06:00:00Z");

Observation margin(const std::string& word, const std::string& held) {
  Observation seen;
  seen.tank = "T1";
  seen.kind = kind::kMargin;
  seen.subject = "ligand_loss";
  seen.word = word;
  seen.heldWord = held;
  return seen;
}
Observation margin(const std::string& word) { return margin(word, word); }

// The arrows of IEC 62682 / ISA-18.2 (from memory), one row each.
struct Arrow {
  AlarmState from;
  AlarmEvent event;
  AlarmState to;
};
class AlarmStates : public testing::TestWithParam<Arrow> {};
TEST_P(AlarmStates, FollowsTheTable) {
  EXPECT_EQ(next(GetParam().from, GetParam().event), GetParam().to);
}
constexpr auto N = AlarmState::Normal;
constexpr auto U = AlarmState::Unacknowledged;
constexpr auto A = AlarmState::Acknowledged;
constexpr auto R = AlarmState::ReturnedUnacknowledged;
INSTANTIATE_TEST_SUITE_P(
    Table, AlarmStates,
    testing::Values(Arrow{N, AlarmEvent::Stands, U}, Arrow{U, AlarmEvent::Stands, U},
                    Arrow{A, AlarmEvent::Stands, A}, Arrow{R, AlarmEvent::Stands, U},
                    Arrow{U, AlarmEvent::Clears, R}, Arrow{A, AlarmEvent::Clears, N},
                    Arrow{R, AlarmEvent::Clears, R}, Arrow{N, AlarmEvent::Clears, N},
                    Arrow{U, AlarmEvent::Acknowledge, A}, Arrow{R, AlarmEvent::Acknowledge, N},
                    Arrow{A, AlarmEvent::Acknowledge, A}, Arrow{N, AlarmEvent::Acknowledge, N},
                    Arrow{A, AlarmEvent::Worse, U}, Arrow{U, AlarmEvent::Worse, U},
                    Arrow{U, AlarmEvent::Suppress, N}, Arrow{A, AlarmEvent::Suppress, N},
                    Arrow{R, AlarmEvent::Suppress, N}));

// A story a row: what is seen (or done) in turn, and what the engine says of it.
struct Step {
  const char* word;   // "" = nothing passed; "ack" = acknowledged by a person
  const char* held;
  const char* change;  // "" = none
  const char* state;
  const char* wordAfter;
};
struct Story {
  const char* name;
  std::vector<Step> steps;
};
class AlarmStories : public testing::TestWithParam<Story> {};
TEST_P(AlarmStories, RunsAsTold) {
  AlarmEngine engine;
  io::Instant now = kMorning;
  for (const Step& step : GetParam().steps) {
    SCOPED_TRACE(std::string("step ") + step.word + "/" + step.held);
    now += std::chrono::hours(1);
    std::vector<AlarmChange> changes;
    if (std::string(step.word) == "ack") {
      const auto change = engine.acknowledge(7, "mk", "seen", now);
      ASSERT_TRUE(change);
      changes.push_back(*change);
    } else {
      changes = engine.observe({margin(step.word, step.held)}, now);
    }
    if (std::string(step.change).empty()) {
      EXPECT_TRUE(changes.empty() || changes[0].change.empty());
    } else {
      ASSERT_EQ(changes.size(), 1U);
      EXPECT_EQ(changes[0].change, step.change);
      EXPECT_EQ(changes[0].alarm.state, step.state);
      EXPECT_EQ(changes[0].alarm.word, step.wordAfter);
    }
    engine.assignId("T1", kind::kMargin, "ligand_loss", 7);
  }
}
INSTANTIATE_TEST_SUITE_P(
    Table, AlarmStories,
    testing::Values(
        Story{"NothingPassedIsNothing", {{"", "", "", "", ""}}},
        Story{"TheDeadbandAloneRaisesNothing", {{"", "tight", "", "", ""}}},
        Story{"RaisedAcknowledgedCleared",
              {{"tight", "tight", "raised", "unacknowledged", "tight"},
               {"tight", "tight", "", "", ""},
               {"ack", "", "acknowledged", "acknowledged", "tight"},
               {"", "", "cleared", "normal", "tight"}}},
        Story{"ClearedBeforeAnyoneLooked",
              {{"tight", "tight", "raised", "unacknowledged", "tight"},
               {"", "", "cleared", "returned_unacknowledged", "tight"},
               {"", "", "", "", ""},
               {"ack", "", "acknowledged", "normal", "tight"}}},
        Story{"ReturnsAndComesAgain",
              {{"tight", "tight", "raised", "unacknowledged", "tight"},
               {"", "", "cleared", "returned_unacknowledged", "tight"},
               {"tight", "tight", "raised again", "unacknowledged", "tight"}}},
        Story{"WorseAsksForAnotherAnswer",
              {{"tight", "tight", "raised", "unacknowledged", "tight"},
               {"ack", "", "acknowledged", "acknowledged", "tight"},
               {"brink", "brink", "worse", "unacknowledged", "brink"}}},
        Story{"EasesToTheMilderWordAndKeepsItsState",
              {{"brink", "brink", "raised", "unacknowledged", "brink"},
               {"ack", "", "acknowledged", "acknowledged", "brink"},
               {"tight", "brink", "", "", ""},
               {"tight", "tight", "eased", "acknowledged", "tight"}}},
        Story{"HoldsInsideTheDeadband",
              {{"tight", "tight", "raised", "unacknowledged", "tight"},
               {"", "tight", "", "", ""},
               {"", "", "cleared", "returned_unacknowledged", "tight"}}}),
    [](const auto& story) { return std::string(story.param.name); });

TEST(AlarmEngine, RaisesOneAlarmPerTankKindAndSubject) {
  AlarmEngine engine;
  Observation other = margin("tight");
  other.subject = "ph_down";
  EXPECT_EQ(engine.observe({margin("tight"), other}, kMorning).size(), 2U);
  EXPECT_TRUE(engine.observe({margin("tight"), other}, kMorning).empty());
  EXPECT_EQ(engine.standing("T1").size(), 2U);
  EXPECT_TRUE(engine.standing("T2").empty());
}

TEST(AlarmEngine, LeavesAloneWhatIsNotObserved) {
  AlarmEngine engine;
  engine.observe({margin("tight")}, kMorning);
  EXPECT_TRUE(engine.observe({}, kMorning + std::chrono::hours(1)).empty());
  EXPECT_EQ(engine.standing().size(), 1U);
}

TEST(AlarmEngine, SaysPriorityFromTheWord) {
  EXPECT_STREQ(priorityOf("brink"), "high");
  EXPECT_STREQ(priorityOf("sludging"), "high");
  for (const char* word : {"tight", "window", "stale", "link"}) EXPECT_STREQ(priorityOf(word), "medium");
  EXPECT_STREQ(priorityOf("drifting"), "low");
}

TEST(AlarmEngine, ForgetsWhoAnsweredWhenItGetsWorse) {
  AlarmEngine engine;
  engine.observe({margin("tight")}, kMorning);
  engine.assignId("T1", kind::kMargin, "ligand_loss", 3);
  engine.acknowledge(3, "mk", "", kMorning);
  const auto worse = engine.observe({margin("brink")}, kMorning + std::chrono::hours(2));
  ASSERT_EQ(worse.size(), 1U);
  EXPECT_EQ(worse[0].alarm.id, 3);
  EXPECT_TRUE(worse[0].alarm.acknowledgedBy.empty());
  EXPECT_FALSE(worse[0].alarm.acknowledgedAt);
  EXPECT_EQ(worse[0].alarm.raisedAt, kMorning + std::chrono::hours(2));
}

TEST(AlarmEngine, FallsSilentWithATankOutOfServiceAndJudgesAfreshLater) {
  AlarmEngine engine;
  engine.observe({margin("tight")}, kMorning);
  const auto changes = engine.suppress("T1", kMorning);
  ASSERT_EQ(changes.size(), 1U);
  EXPECT_EQ(changes[0].alarm.state, "normal");
  EXPECT_TRUE(engine.standing().empty());
  EXPECT_EQ(engine.observe({margin("tight")}, kMorning).size(), 1U);
}

TEST(AlarmEngine, GoesOnAfterARestartWhereItWas) {
  AlarmEngine before;
  before.observe({margin("tight")}, kMorning);
  before.assignId("T1", kind::kMargin, "ligand_loss", 9);
  before.acknowledge(9, "mk", "", kMorning);
  AlarmEngine after(before.standing());
  EXPECT_TRUE(after.observe({margin("tight")}, kMorning).empty());
  const auto cleared = after.observe({margin("")}, kMorning);
  ASSERT_EQ(cleared.size(), 1U);
  EXPECT_EQ(cleared[0].alarm.state, "normal");
}

TEST(AlarmEngine, PutsUnansweredAndWorseAlarmsFirst) {
  AlarmEngine engine;
  Observation brink = margin("brink");
  brink.subject = "ph_down";
  Observation window = margin("window");
  window.kind = kind::kWindow;
  engine.observe({window, margin("tight"), brink}, kMorning);
  engine.assignId("T1", kind::kMargin, "ph_down", 1);
  engine.assignId("T1", kind::kMargin, "ligand_loss", 2);
  EXPECT_EQ(engine.standing()[0].subject, "ph_down");
  engine.acknowledge(1, "mk", "", kMorning);
  EXPECT_EQ(engine.standing().back().subject, "ph_down");
}

TEST(AlarmEngine, KnowsNoAlarmByAnIdItDoesNotHold) {
  AlarmEngine engine;
  EXPECT_FALSE(engine.acknowledge(0, "mk", "", kMorning));
  EXPECT_FALSE(engine.acknowledge(4, "mk", "", kMorning));
}

}  // namespace
}  // namespace tw::monitor
