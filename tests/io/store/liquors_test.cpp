// SPDX-License-Identifier: GPL-3.0-or-later
// Which liquors are to be solved, and which again.
#include "tests/io/store/store_fixture.hpp"

namespace tw::io::test {
namespace {

using testing::ElementsAre;
using testing::IsEmpty;

class Liquors : public StoreContract {};
INSTANTIATE_TEST_SUITE_P(Forms, Liquors, testing::Values(kSqlite), formName);

TEST_P(Liquors, ArePendingFromTheFirstAcceptedReadingUntilSettled) {
  add(make("copper", minute(10), 1.0));
  add(make("ph", minute(10), 10.0));
  add(make("copper", minute(0), 1.0));
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(0), minute(10)));
  reopen();
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(0), minute(10)));
  EXPECT_EQ(must(store().pendingLiquors(1)).size(), 1u);
  settle(resultOf(minute(0), {3}));
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(10)));
  reopen();
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(10)));
}

TEST_P(Liquors, AreNotPendingForWhatIsNotAccepted) {
  add(make("copper", minute(0), 1.0, ReadingState::Suspicious));
  add(make("copper", minute(1), 1.0, ReadingState::Refused));
  EXPECT_THAT(pendingTimes(), IsEmpty());
  const Added stored = add(make("copper", minute(2), 1.0));
  settle(resultOf(minute(2), {stored.id}));
  add(make("copper", minute(2), 1.0));   // duplicate
  add(make("copper", minute(2), 11.0));  // conflict
  EXPECT_THAT(pendingTimes(), IsEmpty());
}

// A solver may be at work on the liquor when another reading of the same sample time comes.
TEST_P(Liquors, StayPendingWhenTheyWereMarkedAgainWhileBeingSolved) {
  const Added copper = add(make("copper", minute(0), 1.0));
  const PendingLiquor taken = must(store().pendingLiquors(0)).at(0);
  add(make("ph", minute(0), 10.0));
  must(store().settleLiquor(taken, resultOf(minute(0), {copper.id})));
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(0)));
  must(store().settleLiquor(must(store().pendingLiquors(0)).at(0), resultOf(minute(0), {copper.id})));
  EXPECT_THAT(pendingTimes(), IsEmpty());
  // A mark that was settled and set again is another one, too.
  must(store().correctReading(copper.id, make("copper", minute(0), 1.1)));
  must(store().settleLiquor(taken, resultOf(minute(0), {copper.id})));
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(0)));
}

TEST_P(Liquors, AreMarkedWithTheReadingOrNotAtAll) {
  (void)store().transaction([&](Store& inside) -> model::Result<model::Done> {
    must(inside.addReadings({make("copper", minute(0), 1.0)}));
    return model::fail(model::Fault{.code = "no", .subject = {}, .detail = {}, .where = {}});
  });
  EXPECT_THAT(pendingTimes(), IsEmpty());
}

TEST_P(Liquors, ASecondResultReplacesTheFirstForReaders) {
  const Added copper = add(make("copper", minute(0), 1.0));
  const std::int64_t first = settle(resultOf(minute(0), {copper.id}, 14.0));
  const std::int64_t second = settle(resultOf(minute(0), {copper.id}, 13.0));
  EXPECT_NE(first, second);
  const auto results = must(store().results("T1", Instant::min(), 0, false));
  ASSERT_EQ(results.size(), 1u);
  EXPECT_EQ(results[0].id, second);
  EXPECT_EQ(results[0].pM, 13.0);
}

TEST_P(Liquors, AnIncompleteOneWithdrawsItsResultAndWaits) {
  const Added copper = add(make("copper", minute(0), 1.0));
  settle(resultOf(minute(0), {copper.id}));
  NewReading strike = make("copper", minute(0), 0.0, ReadingState::Refused);
  strike.value.reset();
  must(store().correctReading(copper.id, strike));
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(0)));
  EXPECT_EQ(must(store().settleLiquor(must(store().pendingLiquors(0)).at(0), std::nullopt)), 0);
  EXPECT_THAT(pendingTimes(), IsEmpty());
  EXPECT_THAT(must(store().results("T1", Instant::min(), 0, false)), IsEmpty());
  EXPECT_FALSE(must(store().newestResult("T1")));
  // Twice is as good as once, and a later result is current again.
  must(store().settleLiquor({.tank = "T1", .sampledAt = minute(0)}, std::nullopt));
  settle(resultOf(minute(0), {copper.id}));
  EXPECT_TRUE(must(store().newestResult("T1")));
}

TEST_P(Liquors, AnIncompleteOneIsPendingAgainWhenItsOwnReadingComes) {
  add(make("copper", minute(0), 1.0));
  must(store().settleLiquor(must(store().pendingLiquors(0)).at(0), std::nullopt));
  EXPECT_THAT(pendingTimes(), IsEmpty());
  add(make("ph", minute(0), 10.0));
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(0)));
}

/// Copper at 0 and 60, pH every ten minutes: the liquors of 10 to 50 rest on copper of 0, the one of 60
/// on that of 60.
class LateReadings : public StoreContract {
 protected:
  void SetUp() override {
    StoreContract::SetUp();
    m_first = add(make("copper", minute(0), 1.0)).id;
    m_last = add(make("copper", minute(60), 1.2)).id;
    for (int t = 10; t <= 70; t += 10) {
      const std::int64_t ph = add(make("ph", minute(t), 10.0)).id;
      settle(resultOf(minute(t), {t < 60 ? m_first : m_last, ph}));
    }
    settle(resultOf(minute(0), {m_first}));
    ASSERT_THAT(pendingTimes(), IsEmpty());
  }
  std::int64_t m_first = 0, m_last = 0;
};
INSTANTIATE_TEST_SUITE_P(Forms, LateReadings, testing::Values(kSqlite), formName);

TEST_P(LateReadings, MarkWhatUsedTheOlderOneUpToTheNext) {
  add(make("copper", minute(25), 1.1));
  EXPECT_EQ(must(store().markLaterPending("T1", "copper", minute(25))), 3u);
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(25), minute(30), minute(40), minute(50)));
  reopen();
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(25), minute(30), minute(40), minute(50)));
}

TEST_P(LateReadings, MarkTheirOwnSampleTimeWhenItUsedTheOlderOne) {
  add(make("copper", minute(30), 1.1));
  EXPECT_EQ(must(store().markLaterPending("T1", "copper", minute(30))), 3u);
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(30), minute(40), minute(50)));
}

TEST_P(LateReadings, LeaveAloneWhatAlreadyUsesThem) {
  const Added late = add(make("copper", minute(25), 1.1));
  must(store().markLaterPending("T1", "copper", minute(25)));
  for (int t : {25, 30, 40, 50}) settle(resultOf(minute(t), {late.id}));
  EXPECT_EQ(must(store().markLaterPending("T1", "copper", minute(25))), 0u);
  EXPECT_THAT(pendingTimes(), IsEmpty());
}

TEST_P(LateReadings, LeaveOtherTanksAndChannelsAlone) {
  add(make("zinc", minute(25), 0.1));
  EXPECT_EQ(must(store().markLaterPending("T1", "zinc", minute(25))), 0u);
  EXPECT_EQ(must(store().markLaterPending("T2", "copper", minute(25))), 0u);
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(25)));
}

TEST_P(LateReadings, ThatAreTheNewestReachToTheEnd) {
  add(make("copper", minute(65), 1.3));
  EXPECT_EQ(must(store().markLaterPending("T1", "copper", minute(65))), 1u);
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(65), minute(70)));
}

TEST_P(LateReadings, ACorrectionMarksEveryResultThatUsedWhatItReplaces) {
  must(store().correctReading(m_first, make("copper", minute(0), 1.05)));
  EXPECT_THAT(pendingTimes(),
              ElementsAre(minute(0), minute(10), minute(20), minute(30), minute(40), minute(50)));
  // The pipeline's own call finds the same ones.
  EXPECT_EQ(must(store().markLaterPending("T1", "copper", minute(0))), 6u);
  EXPECT_EQ(pendingTimes().size(), 6u);
}

TEST_P(LateReadings, ACorrectedTimeMarksBothStretches) {
  must(store().correctReading(m_last, make("copper", minute(35), 1.2)));
  must(store().markLaterPending("T1", "copper", minute(35)));
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(35), minute(40), minute(50), minute(60), minute(70)));
}

TEST_P(LateReadings, AConfirmedConflictMarksWhatUsedTheOther) {
  const Added other = add(make("copper", minute(60), 9.0));
  ASSERT_EQ(other.outcome, AddOutcome::Conflict);
  EXPECT_THAT(pendingTimes(), IsEmpty());
  must(store().confirmReading(other.id, "GH", minute(90)));
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(60), minute(70)));
}

TEST_P(LateReadings, ASuspiciousReadingBetweenDoesNotEndTheStretch) {
  add(make("copper", minute(35), 5.0, ReadingState::Suspicious));
  add(make("copper", minute(25), 1.1));
  EXPECT_EQ(must(store().markLaterPending("T1", "copper", minute(25))), 3u);
}

TEST_P(LateReadings, WakeIncompleteLiquorsOfTheirStretch) {
  NewReading ph = make("ph", minute(100), 10.0);
  for (int t : {100, 110, 130}) {
    ph = make("ph", minute(t), 10.0);
    ph.tank = "T3";
    add(ph);
    must(store().settleLiquor({.tank = "T3", .sampledAt = minute(t)}, std::nullopt));
  }
  NewReading copper = make("copper", minute(120), 1.0);
  copper.tank = "T3";
  add(copper);
  copper.sampledAt.at = minute(105);
  add(copper);
  EXPECT_EQ(must(store().markLaterPending("T3", "copper", minute(105))), 1u);
  EXPECT_THAT(pendingTimes(), ElementsAre(minute(105), minute(110), minute(120)));
}

}  // namespace
}  // namespace tw::io::test
