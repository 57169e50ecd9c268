// SPDX-License-Identifier: GPL-3.0-or-later
// What `tankward export --csv` writes comes back with all that the store said of it.
#include <gtest/gtest.h>

#include <string>

#include "io/drop/table.hpp"

using tw::io::toRfc3339;

namespace {

tw::io::IncomingBatch parse(const std::string& rows) {
  static const tw::io::TimeZone zone = *tw::io::TimeZone::named("Europe/Paris");
  return tw::io::parseTable(
      "time,tank,channel,value,unit,operator,source,state,id,supersedes,reason,received,entered,entered_unit,inputs\n" +
          rows,
      "export.csv", zone);
}

}  // namespace

TEST(ExportReadBack, KeepsEnteredTextStateAndIds) {
  const auto batch = parse("2026-03-02T06:00:00+01:00,L2-T4,copper,22.097,g/L,kb,bench,superseded,r2,r1,\"typed, wrong\","
                           "2026-03-02T05:10:00.250Z,\"2,95\",oz/gal,\"{\"\"V\"\":12.30}\"\n");
  ASSERT_EQ(batch.readings.size(), 1U);
  EXPECT_TRUE(batch.refused.empty());
  const auto& r = batch.readings[0];
  EXPECT_EQ(toRfc3339(r.sampledAt.at, r.sampledAt.offset), "2026-03-02T06:00:00+01:00");
  EXPECT_EQ(r.value, 22.097);
  EXPECT_EQ(r.unit, "g/L");
  EXPECT_EQ(r.text, "2,95");
  EXPECT_EQ(r.enteredUnit, "oz/gal");
  EXPECT_EQ(r.op, "kb");
  EXPECT_EQ(r.source, "bench");
  EXPECT_EQ(r.state, "superseded");
  EXPECT_EQ(r.id, "r2");
  EXPECT_EQ(r.supersedes, "r1");
  EXPECT_EQ(r.reason, "typed, wrong");
  ASSERT_TRUE(r.receivedAt);
  EXPECT_EQ(toRfc3339(*r.receivedAt), "2026-03-02T05:10:00.250Z");
  EXPECT_EQ(r.inputs.at("V"), 12.3);
  EXPECT_EQ(r.inputsText, "{\"V\":12.30}");
}

TEST(ExportReadBack, KeepsARefusedTextThatIsNoNumber) {
  const auto batch = parse("2026-03-02T06:00:00Z,T,copper,,g/L,kb,drop:a.csv,refused,r3,,no number,,n/a,g/L,\n");
  ASSERT_EQ(batch.readings.size(), 1U);
  EXPECT_FALSE(batch.readings[0].value);
  EXPECT_EQ(batch.readings[0].text, "n/a");
  EXPECT_EQ(batch.readings[0].state, "refused");
}

TEST(ExportReadBack, ReadsFullPrecision) {
  const auto batch = parse("2026-03-02T06:00:00Z,T,copper,22.097123456789012,g/L,,,accepted,r4,,,,22.097123456789012,g/L,\n"
                           "2026-03-02T06:00:00Z,T,iron,1e-17,g/L,,,accepted,r5,,,,,,\n");
  ASSERT_EQ(batch.readings.size(), 2U);
  EXPECT_EQ(batch.readings[0].value, 22.097123456789012);
  EXPECT_EQ(batch.readings[1].value, 1e-17);
}

TEST(ExportReadBack, RefusesRowsThatNoExportWrites) {
  const auto batch = parse("2026-03-02T06:00:00Z,T,copper,1,g/L,,,perhaps,,,,,,,\n"
                           "2026-03-02T06:00:00Z,T,copper,1,g/L,,,accepted,,,,soon,,,\n"
                           "2026-03-02T06:00:00Z,T,copper,,g/L,,,accepted,,,,,,,\n"
                           "2026-03-02T06:00:00Z,T,copper,1,g/L,,,accepted,,,,,,,{V}\n"
                           "2026-03-02T06:00:00Z,T,,1,g/L,,,accepted,,,,,,,\n");
  EXPECT_TRUE(batch.readings.empty());
  ASSERT_EQ(batch.refused.size(), 5U);
  const char* codes[] = {"state_unknown", "time_unreadable", "value_missing", "inputs_unreadable", "channel_missing"};
  for (std::size_t i = 0; i < 5; ++i) EXPECT_EQ(batch.refused[i].code, codes[i]);
}

TEST(ExportReadBack, ReadsTheJsonFormAndPassesOverItsResults) {
  const tw::io::TimeZone zone = *tw::io::TimeZone::named("Etc/UTC");
  const std::string reading =
      R"({"id":"r2","tank":"T","channel":"copper","time":"2026-03-02T06:00:00Z","received_at":"2026-03-02T06:01:00Z",)"
      R"("value":22.097,"unit":"g/L","entered":"2,95","entered_unit":"oz/gal","state":"suspicious","supersedes":null,)"
      R"("reason":"","operator":"kb","source":"bench","inputs":{"V":12.30}})";
  for (const std::string gap : {"", "\n  "}) {
    const std::string text = "{" + gap + "\"readings\":" + gap + "[" + gap + reading + gap + "]," + gap +
                             R"("results":[{"recipe_sha256":"ab","tank":"T","species":[{"mol_L":1}]}]})" + gap;
    const auto batch = tw::io::parseTable(text, "export.jsonl", zone);
    EXPECT_TRUE(batch.refused.empty());
    ASSERT_EQ(batch.readings.size(), 1U);
    EXPECT_EQ(batch.readings[0].text, "2,95");
    EXPECT_EQ(batch.readings[0].enteredUnit, "oz/gal");
    EXPECT_EQ(batch.readings[0].state, "suspicious");
    EXPECT_EQ(batch.readings[0].inputsText, "{\"V\":12.30}");
    ASSERT_TRUE(batch.readings[0].receivedAt);
    EXPECT_EQ(toRfc3339(*batch.readings[0].receivedAt), "2026-03-02T06:01:00Z");
  }
}
