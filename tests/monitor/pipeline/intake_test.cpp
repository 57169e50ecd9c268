// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/intake.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "tests/monitor/support/temp_shop.hpp"

namespace tw::monitor {
namespace {

using test::at;

constexpr double kCopperMolarMass = 63.546;  // g/mol, as the recipe's constants have it

class Intake : public testing::Test {
 protected:
  Intake() : m_plant(m_shop.plant()) { m_batch.source = "drop:a.csv"; }

  io::Incoming& add(const std::string& channel, double value, const std::string& unit = "",
                    const std::string& tank = "T1") {
    io::Incoming cell;
    cell.line = static_cast<int>(m_batch.readings.size()) + 2;
    cell.column = channel;
    cell.tank = tank;
    cell.channel = channel;
    cell.sampledAt.at = at("2026-03-02T06:00:00Z");
    cell.value = value;
    cell.text = "as typed";
    cell.unit = unit;
    m_batch.readings.push_back(cell);
    return m_batch.readings.back();
  }
  io::IncomingEvent& addEvent(const std::string& kind) {
    io::IncomingEvent event;
    event.line = 2;
    event.tank = "T1";
    event.kind = kind;
    event.at.at = at("2026-03-02T06:00:00Z");
    event.stock = "aqua-ammonia";
    event.amount = 2.0;
    event.unit = "L";
    m_batch.events.push_back(event);
    return m_batch.events.back();
  }
  IntakeOutcome judge() { return judgeIntake(m_plant, m_batch, at("2026-03-02T07:00:00Z")); }

  test::TempShop m_shop;
  Plant m_plant;
  io::IncomingBatch m_batch;
};

TEST_F(Intake, KeepsTheCanonicalValueBesideWhatWasTyped) {
  add("copper", 22.0);
  const auto out = judge();
  ASSERT_EQ(out.readings.size(), 1U);
  EXPECT_NEAR(*out.readings[0].value, 22.0 / kCopperMolarMass, 1e-12);
  EXPECT_EQ(out.readings[0].unit, "mol/L");
  EXPECT_EQ(out.readings[0].entered, "as typed");
  EXPECT_EQ(out.readings[0].enteredUnit, "g/L");
  EXPECT_EQ(out.readings[0].state, io::ReadingState::Accepted);
  EXPECT_EQ(out.readings[0].receivedAt, at("2026-03-02T07:00:00Z"));
}

TEST_F(Intake, ConvertsAStatedUnit) {
  add("temperature", 104.0, "degF");
  EXPECT_NEAR(*judge().readings.at(0).value, 40.0, 1e-9);  // (104 - 32) / 1.8
}

TEST_F(Intake, RefusesButKeepsWhatIsImplausible) {
  add("copper", 300.0);  // plausible 0 to 80 g/L
  const auto out = judge();
  ASSERT_EQ(out.readings.size(), 1U);
  EXPECT_EQ(out.readings[0].state, io::ReadingState::Refused);
  EXPECT_EQ(out.acceptable(), 0U);
  ASSERT_EQ(out.refusals.size(), 1U);
  EXPECT_EQ(out.refusals[0].code, "implausible");
  EXPECT_EQ(out.refusals[0].line, 2);
  EXPECT_EQ(out.refusals[0].value, "as typed");
}

TEST_F(Intake, RefusesWithoutKeepingWhatHasNoIdentity) {
  add("copper", 22.0, "", "T9");
  add("silver", 1.0);
  add("copper", 22.0, "pH");
  add("copper", 22.0).sampledAt.at = at("2026-03-02T07:05:01Z");
  const auto out = judge();
  EXPECT_TRUE(out.readings.empty());
  std::vector<std::string> codes;
  for (const auto& refusal : out.refusals) codes.push_back(refusal.code);
  EXPECT_THAT(codes, testing::ElementsAre("unknown_tank", "unknown_channel", "unit_mismatch", "in_future"));
}

TEST_F(Intake, TakesATimeUpToFiveMinutesAhead) {
  add("copper", 22.0).sampledAt.at = at("2026-03-02T07:05:00Z");
  EXPECT_EQ(judge().acceptable(), 1U);
}

TEST_F(Intake, RefusalIsPerCell) {
  add("copper", 22.0);
  add("ammonia", 900.0);
  add("ph", 10.2);
  const auto out = judge();
  EXPECT_EQ(out.acceptable(), 2U);
  EXPECT_EQ(out.refusals.size(), 1U);
}

TEST_F(Intake, LeavesOutTheSameReadingWithinOneBatch) {
  add("copper", 22.0);
  add("copper", 22.0 * (1.0 + 1e-12));
  add("copper", 22.1);
  const auto out = judge();
  EXPECT_EQ(out.readings.size(), 2U);
  EXPECT_EQ(out.duplicates, 1U);
}

TEST_F(Intake, WorksOutBuretteNumbers) {
  io::Incoming& cell = add("copper", 0.0);
  cell.value.reset();
  cell.inputs = {{"V", 17.3}, {"sample", 5.0}};
  cell.inputsText = R"({"V":17.3,"sample":5})";
  const auto out = judge();
  ASSERT_EQ(out.readings.size(), 1U);
  // (V - blank) c_EDTA / sample with the recipe's blank 0 and c_EDTA 0.1 mol/L
  EXPECT_NEAR(*out.readings[0].value, 17.3 * 0.1 / 5.0, 1e-12);
  EXPECT_EQ(out.readings[0].inputs, cell.inputsText);
}

TEST_F(Intake, LetsAWorksheetUseAnotherChannelOfTheSameSample) {
  io::Incoming& ammonia = add("ammonia", 0.0);
  ammonia.value.reset();
  ammonia.inputs = {{"V", 20.0}};
  add("copper", 22.0);
  const auto out = judge();
  ASSERT_EQ(out.acceptable(), 2U) << out.refusals.at(0).reason;
  // (V_acid c_acid - V c_NaOH) / sample - n_Cu copper, constants of the recipe's worksheet
  const double expected = (50.0 * 0.2 - 20.0 * 0.2) / 1.0 - 4.45 * 22.0 / kCopperMolarMass;
  EXPECT_NEAR(*out.readings[0].value, expected, 1e-9);
}

TEST_F(Intake, SaysWhichBuretteNumberIsMissing) {
  io::Incoming& cell = add("copper", 0.0);
  cell.value.reset();
  cell.inputs = {{"sample", 5.0}};
  const auto out = judge();
  EXPECT_TRUE(out.readings.empty());
  EXPECT_EQ(out.refusals.at(0).code, "missing_input");
}

TEST_F(Intake, ReadsBackWhatAnExportSaid) {
  io::Incoming& refused = add("copper", 300.0);
  refused.state = "refused";
  refused.reason = "slipped decimal";
  refused.source = "serial:/dev/ttyUSB0";
  refused.receivedAt = at("2026-03-02T06:01:00Z");
  add("ph", 10.1).state = "superseded";
  const auto out = judge();
  ASSERT_EQ(out.readings.size(), 2U);
  EXPECT_TRUE(out.refusals.empty());
  EXPECT_EQ(out.readings[0].state, io::ReadingState::Refused);
  EXPECT_EQ(out.readings[0].reason, "slipped decimal");
  EXPECT_EQ(out.readings[0].source, "serial:/dev/ttyUSB0");
  EXPECT_EQ(out.readings[0].receivedAt, at("2026-03-02T06:01:00Z"));
  EXPECT_EQ(out.readings[1].state, io::ReadingState::Superseded);
}

TEST_F(Intake, StillJudgesARowThatCallsItselfAccepted) {
  add("copper", 300.0).state = "accepted";
  EXPECT_EQ(judge().acceptable(), 0U);
}

TEST_F(Intake, TakesEventsAndRefusesIncompleteOnes) {
  addEvent("addition");
  addEvent("addition").stock.clear();
  addEvent("addition").amount.reset();
  addEvent("party");
  addEvent("addition").unit = "bucket";
  addEvent("note").at.at = at("2026-03-02T08:00:00Z");
  const auto out = judge();
  EXPECT_EQ(out.events.size(), 1U);
  std::vector<std::string> codes;
  for (const auto& refusal : out.refusals) codes.push_back(refusal.code);
  EXPECT_THAT(codes, testing::ElementsAre("missing_stock", "missing_amount", "unknown_event", "unit_unknown",
                                          "in_future"));
}

TEST_F(Intake, PassesOnWhatTheReaderOfTheFileRefused) {
  m_batch.refused.push_back({4, "ph", "ten", "not_a_number", "no number"});
  EXPECT_EQ(judge().refusals.size(), 1U);
}

}  // namespace
}  // namespace tw::monitor
