// SPDX-License-Identifier: GPL-3.0-or-later
#include <limits>

#include "tests/io/store/store_fixture.hpp"

namespace tw::io::test {
namespace {

using testing::ElementsAre;
using testing::IsEmpty;

class Readings : public StoreContract {};
INSTANTIATE_TEST_SUITE_P(Forms, Readings, testing::Values(kSqlite), formName);

TEST_P(Readings, KeepEveryFieldAsGiven) {
  NewReading given = make("copper", minute(0), 0.346);
  given.entered = "22,0";
  given.enteredUnit = "g/L";
  given.inputs = R"({"V":12.3})";
  given.reason = "Größe stimmt";
  given.sampledAt.offset = -570min;
  const Added added = add(given);
  EXPECT_EQ(added.outcome, AddOutcome::Stored);
  reopen();
  const Reading read = must(store().reading(added.id)).value();
  EXPECT_EQ(read.tank, "T1");
  EXPECT_EQ(read.channel, "copper");
  EXPECT_EQ(read.sampledAt, given.sampledAt);
  EXPECT_EQ(read.value, given.value);
  EXPECT_EQ(read.unit, "mol/L");
  EXPECT_EQ(read.entered, "22,0");
  EXPECT_EQ(read.enteredUnit, "g/L");
  EXPECT_EQ(read.inputs, given.inputs);
  EXPECT_EQ(read.op, "AB");
  EXPECT_EQ(read.source, "drop:morning.csv");
  EXPECT_EQ(read.state, ReadingState::Accepted);
  EXPECT_EQ(read.reason, given.reason);
  EXPECT_EQ(read.receivedAt, minute(1));
  EXPECT_EQ(read.id, added.id);
  EXPECT_FALSE(read.supersedes);
}

TEST_P(Readings, AreUnknownUntilTheyAreStored) {
  EXPECT_FALSE(must(store().reading(7)));
  EXPECT_THAT(must(store().readings("T1", Instant::min())), IsEmpty());
  EXPECT_THAT(must(store().newestAccepted("T1", minute(0))), IsEmpty());
}

TEST_P(Readings, TheSameAgainIsOneReadingByWhateverPath) {
  const Added first = add(make("copper", minute(0), 0.346));
  NewReading again = make("copper", minute(0), 0.346);
  again.source = "http";
  again.entered = "0.3460";
  again.op = "CD";
  EXPECT_EQ(add(again).outcome, AddOutcome::Duplicate);
  reopen();
  EXPECT_EQ(add(again).id, first.id);
  EXPECT_EQ(must(store().readings("T1", Instant::min())).size(), 1u);
}

TEST_P(Readings, OfAnotherTankTimeOrChannelAreOthers) {
  add(make("copper", minute(0), 0.346));
  NewReading tank = make("copper", minute(0), 0.346);
  tank.tank = "T2";
  EXPECT_EQ(add(tank).outcome, AddOutcome::Stored);
  EXPECT_EQ(add(make("copper", minute(0) + 1ms, 0.346)).outcome, AddOutcome::Stored);
  EXPECT_EQ(add(make("ammonia", minute(0), 0.346)).outcome, AddOutcome::Stored);
}

// FORMATS section 5: the canonical value counts within 1e-9 relative.
TEST_P(Readings, ATenBillionthIsTheSameValueAndAHundredMillionthAConflict) {
  const Added first = add(make("copper", minute(0), 0.346));
  const Added near = add(make("copper", minute(0), 0.346 * (1 + 1e-10)));
  EXPECT_EQ(near.outcome, AddOutcome::Duplicate);
  EXPECT_EQ(near.id, first.id);
  const Added far = add(make("copper", minute(0), 0.346 * (1 + 1e-8)));
  EXPECT_EQ(far.outcome, AddOutcome::Conflict);
  const Reading kept = must(store().reading(far.id)).value();
  EXPECT_EQ(kept.state, ReadingState::Suspicious);
  EXPECT_THAT(kept.reason, testing::HasSubstr("reading " + std::to_string(first.id)));
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").id, first.id);
}

TEST_P(Readings, TinyAndZeroValuesAreComparedRelativelyToo) {
  add(make("copper", minute(0), 1e-12));
  EXPECT_EQ(add(make("copper", minute(0), 1.00001e-12)).outcome, AddOutcome::Conflict);
  add(make("zinc", minute(0), 0.0));
  EXPECT_EQ(add(make("zinc", minute(0), 0.0)).outcome, AddOutcome::Duplicate);
  EXPECT_EQ(add(make("zinc", minute(0), 1e-15)).outcome, AddOutcome::Conflict);
}

TEST_P(Readings, TwoValuesInOneBatchConflictAsWell) {
  const auto added = must(store().addReadings({make("copper", minute(0), 1.0), make("copper", minute(0), 2.0),
                                               make("copper", minute(0), 1.0), make("copper", minute(0), 2.0)}));
  EXPECT_EQ(added[0].outcome, AddOutcome::Stored);
  EXPECT_EQ(added[1].outcome, AddOutcome::Conflict);
  EXPECT_EQ(added[2].outcome, AddOutcome::Duplicate);
  EXPECT_EQ(added[2].id, added[0].id);
  EXPECT_EQ(added[3].outcome, AddOutcome::Duplicate);
  EXPECT_EQ(added[3].id, added[1].id);
}

TEST_P(Readings, ASuspiciousOneAloneDoesNotMakeAConflict) {
  add(make("copper", minute(0), 1.0, ReadingState::Suspicious));
  EXPECT_EQ(add(make("copper", minute(0), 2.0)).outcome, AddOutcome::Stored);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").value, 2.0);
}

TEST_P(Readings, RefusedTextIsKnownByItsTextAndNeverConflicts) {
  add(make("copper", minute(0), 1.0));
  NewReading text = make("copper", minute(0), 0.0, ReadingState::Refused);
  text.value.reset();
  text.entered = "n/a";
  EXPECT_EQ(add(text).outcome, AddOutcome::Stored);
  EXPECT_EQ(add(text).outcome, AddOutcome::Duplicate);
  text.entered = "--";
  EXPECT_EQ(add(text).outcome, AddOutcome::Stored);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").value, 1.0);
}

TEST_P(Readings, ARefusedValueStaysRefusedAndIsTakenWhenItComesAgainJudgedBetter) {
  const Added refused = add(make("copper", minute(0), 90.0, ReadingState::Refused));
  EXPECT_EQ(add(make("copper", minute(0), 90.0, ReadingState::Refused)).outcome, AddOutcome::Duplicate);
  EXPECT_THAT(must(store().newestAccepted("T1", minute(0))), IsEmpty());
  const Added accepted = add(make("copper", minute(0), 90.0));
  EXPECT_EQ(accepted.outcome, AddOutcome::Stored);
  EXPECT_EQ(must(store().reading(accepted.id))->supersedes, refused.id);
  EXPECT_EQ(must(store().reading(refused.id))->state, ReadingState::Superseded);
  // Either judgement of it is known from now on.
  EXPECT_EQ(add(make("copper", minute(0), 90.0)).id, accepted.id);
  EXPECT_EQ(add(make("copper", minute(0), 90.0, ReadingState::Refused)).id, accepted.id);
}

TEST_P(Readings, ValuesThatNoTableShouldHoldAreRefusedWhole) {
  for (const double bad : {std::numeric_limits<double>::quiet_NaN(), std::numeric_limits<double>::infinity()}) {
    const auto result = store().addReadings({make("ph", minute(0), 10.2), make("copper", minute(0), bad)});
    ASSERT_FALSE(result);
    EXPECT_EQ(result.error().code, "reading_invalid");
    EXPECT_EQ(result.error().kind, model::FaultKind::Input);
  }
  NewReading empty = make("copper", minute(0), 1.0);
  empty.value.reset();
  EXPECT_EQ(store().addReadings({empty}).error().code, "reading_invalid");
  EXPECT_THAT(must(store().readings("T1", Instant::min())), IsEmpty());
}

TEST_P(Readings, ACorrectionIsANewRowAndTheOldOneStays) {
  const Added old = add(make("copper", minute(0), 3.46));
  NewReading corrected = make("copper", minute(0), 0.346);
  corrected.reason = "decimal slipped";
  corrected.op = "EF";
  const std::int64_t id = must(store().correctReading(old.id, corrected));
  reopen();
  const Reading before = must(store().reading(old.id)).value();
  const Reading after = must(store().reading(id)).value();
  EXPECT_EQ(before.state, ReadingState::Superseded);
  EXPECT_EQ(before.value, 3.46);
  EXPECT_EQ(after.state, ReadingState::Accepted);
  EXPECT_EQ(after.supersedes, old.id);
  EXPECT_EQ(after.reason, "decimal slipped");
  EXPECT_EQ(after.op, "EF");
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").id, id);
}

TEST_P(Readings, AFileReadAgainDoesNotBringBackWhatWasCorrected) {
  const Added old = add(make("copper", minute(0), 3.46));
  const std::int64_t id = must(store().correctReading(old.id, make("copper", minute(0), 0.346)));
  EXPECT_EQ(add(make("copper", minute(0), 3.46)).outcome, AddOutcome::Duplicate);
  EXPECT_EQ(add(make("copper", minute(0), 0.346)).id, id);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").id, id);
  EXPECT_EQ(must(store().readings("T1", Instant::min())).size(), 2u);
}

TEST_P(Readings, OnlyTheLastOfAChainCanBeCorrected) {
  const Added old = add(make("copper", minute(0), 1.0));
  const std::int64_t second = must(store().correctReading(old.id, make("copper", minute(0), 2.0)));
  const auto again = store().correctReading(old.id, make("copper", minute(0), 3.0));
  ASSERT_FALSE(again);
  EXPECT_EQ(again.error().code, "already_superseded");
  EXPECT_EQ(store().correctReading(99, make("copper", minute(0), 3.0)).error().code, "reading_unknown");
  const std::int64_t third = must(store().correctReading(second, make("copper", minute(0), 3.0)));
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").id, third);
  EXPECT_EQ(must(store().readings("T1", Instant::min())).size(), 3u);
}

TEST_P(Readings, ACorrectionMayMoveAReadingToAnotherTime) {
  const Added early = add(make("copper", minute(0), 1.0));
  const Added wrong = add(make("copper", minute(30), 2.0));
  must(store().correctReading(wrong.id, make("copper", minute(20), 2.0)));
  EXPECT_EQ(must(store().newestAccepted("T1", minute(19))).at("copper").id, early.id);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(25))).at("copper").value, 2.0);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(60))).at("copper").sampledAt.at, minute(20));
}

TEST_P(Readings, ACorrectionToRefusedStrikesAReadingOut) {
  const Added old = add(make("copper", minute(0), 1.0));
  NewReading strike = make("copper", minute(0), 0.0, ReadingState::Refused);
  strike.value.reset();
  strike.reason = "sample from another tank";
  must(store().correctReading(old.id, strike));
  EXPECT_THAT(must(store().newestAccepted("T1", minute(0))), IsEmpty());
}

TEST_P(Readings, AConfirmedReadingIsANewAcceptedRowByAPerson) {
  const Added suspicious = add(make("copper", minute(0), 1.0, ReadingState::Suspicious));
  EXPECT_THAT(must(store().newestAccepted("T1", minute(0))), IsEmpty());
  const std::int64_t id = must(store().confirmReading(suspicious.id, "GH", minute(9)));
  const Reading confirmed = must(store().reading(id)).value();
  EXPECT_EQ(confirmed.state, ReadingState::Accepted);
  EXPECT_EQ(confirmed.op, "GH");
  EXPECT_EQ(confirmed.receivedAt, minute(9));
  EXPECT_EQ(confirmed.supersedes, suspicious.id);
  EXPECT_EQ(confirmed.value, 1.0);
  EXPECT_EQ(must(store().reading(suspicious.id))->state, ReadingState::Superseded);
  EXPECT_EQ(store().confirmReading(suspicious.id, "GH", minute(9)).error().code, "already_superseded");
  EXPECT_EQ(store().confirmReading(id, "GH", minute(9)).error().code, "not_suspicious");
  EXPECT_EQ(store().confirmReading(99, "GH", minute(9)).error().code, "reading_unknown");
  EXPECT_EQ(add(make("copper", minute(0), 1.0)).id, id);
}

TEST_P(Readings, WhoConfirmsAConflictDecidesIt) {
  const Added first = add(make("copper", minute(0), 1.0));
  const Added other = add(make("copper", minute(0), 2.0));
  ASSERT_EQ(other.outcome, AddOutcome::Conflict);
  const std::int64_t id = must(store().confirmReading(other.id, "GH", minute(9)));
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").id, id);
  EXPECT_EQ(must(store().reading(first.id))->state, ReadingState::Superseded);
  EXPECT_EQ(must(store().reading(other.id))->state, ReadingState::Superseded);
}

// What an export wrote of a suspicious reading and its confirmation, read into another store.
TEST_P(Readings, AConfirmationReadBackFromAnExportIsNotTakenForWhatItConfirms) {
  const Added before = add(make("copper", minute(0), 1.0, ReadingState::Superseded));
  EXPECT_EQ(before.outcome, AddOutcome::Stored);
  EXPECT_THAT(must(store().newestAccepted("T1", minute(0))), IsEmpty());
  EXPECT_THAT(must(store().pendingLiquors(0)), IsEmpty());
  const Added confirmed = add(make("copper", minute(0), 1.0));
  EXPECT_EQ(confirmed.outcome, AddOutcome::Stored);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").id, confirmed.id);
  // Read back once more, both are known.
  EXPECT_EQ(add(make("copper", minute(0), 1.0, ReadingState::Superseded)).outcome, AddOutcome::Duplicate);
  EXPECT_EQ(add(make("copper", minute(0), 1.0)).id, confirmed.id);
}

TEST_P(Readings, ASupersededRowReadBackNeitherConflictsNorComesToLife) {
  add(make("copper", minute(0), 0.346));
  EXPECT_EQ(add(make("copper", minute(0), 3.46, ReadingState::Superseded)).outcome, AddOutcome::Stored);
  EXPECT_EQ(add(make("copper", minute(0), 3.46)).outcome, AddOutcome::Duplicate);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").value, 0.346);
}

TEST_P(Readings, NewestAcceptedLooksBackFromAnyInstant) {
  add(make("copper", minute(0), 1.0));
  add(make("copper", minute(10), 2.0));
  add(make("copper", minute(20), 3.0, ReadingState::Suspicious));
  add(make("copper", minute(30), 4.0));
  add(make("ph", minute(5), 10.0));
  NewReading elsewhere = make("copper", minute(8), 9.0);
  elsewhere.tank = "T2";
  add(elsewhere);
  EXPECT_THAT(must(store().newestAccepted("T1", minute(0) - 1ms)), IsEmpty());
  EXPECT_EQ(must(store().newestAccepted("T1", minute(0))).at("copper").value, 1.0);
  EXPECT_FALSE(must(store().newestAccepted("T1", minute(4))).contains("ph"));
  EXPECT_EQ(must(store().newestAccepted("T1", minute(9))).at("copper").value, 1.0);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(29))).at("copper").value, 2.0);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(29))).at("ph").value, 10.0);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(30))).at("copper").value, 4.0);
  EXPECT_EQ(must(store().newestAccepted("T1", minute(30))).size(), 2u);
}

TEST_P(Readings, AreListedBySampleTimeThenId) {
  add(make("ph", minute(20), 10.0));
  add(make("copper", minute(0), 1.0));
  add(make("ammonia", minute(0), 5.0));
  add(make("copper", minute(10), 2.0, ReadingState::Refused));
  std::vector<std::int64_t> ids;
  for (const Reading& reading : must(store().readings("T1", Instant::min()))) ids.push_back(reading.id);
  EXPECT_THAT(ids, ElementsAre(2, 3, 4, 1));
  EXPECT_EQ(must(store().readings("T1", minute(10))).size(), 2u);
  EXPECT_EQ(must(store().readings("T1", Instant::min(), 3)).back().id, 4);
}

TEST_P(Readings, ATransactionThatFaultsLeavesNothing) {
  const auto result = store().transaction([&](Store& inside) -> model::Result<model::Done> {
    must(inside.addReadings({make("copper", minute(0), 1.0)}));
    return model::fail(model::Fault{.code = "changed_my_mind", .subject = {}, .detail = {}, .where = {}});
  });
  ASSERT_FALSE(result);
  EXPECT_EQ(result.error().code, "changed_my_mind");
  EXPECT_THAT(must(store().readings("T1", Instant::min())), IsEmpty());
  EXPECT_THAT(pendingTimes(), IsEmpty());
}

TEST_P(Readings, ANestedTransactionCanFailAlone) {
  const auto result = store().transaction([&](Store& outer) -> model::Result<model::Done> {
    must(outer.addReadings({make("copper", minute(0), 1.0)}));
    const auto inner = outer.transaction([&](Store& inside) -> model::Result<model::Done> {
      must(inside.addReadings({make("copper", minute(1), 2.0)}));
      return model::fail(inside.addReadings({make("", minute(1), 2.0)}).error());
    });
    EXPECT_FALSE(inner);
    must(outer.addReadings({make("copper", minute(2), 3.0)}));
    return model::Done{};
  });
  ASSERT_TRUE(result);
  const auto kept = must(store().readings("T1", Instant::min()));
  ASSERT_EQ(kept.size(), 2u);
  EXPECT_EQ(kept[0].value, 1.0);
  EXPECT_EQ(kept[1].value, 3.0);
}

TEST_P(Readings, AnExceptionRollsBackAndTheStoreGoesOn) {
  EXPECT_THROW((void)store().transaction([&](Store& inside) -> model::Result<model::Done> {
    must(inside.addReadings({make("copper", minute(0), 1.0)}));
    throw std::logic_error("a bug");
  }),
               std::logic_error);
  EXPECT_THAT(must(store().readings("T1", Instant::min())), IsEmpty());
  EXPECT_EQ(add(make("copper", minute(0), 1.0)).outcome, AddOutcome::Stored);
}

}  // namespace
}  // namespace tw::io::test
