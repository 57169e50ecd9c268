// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/store/export.hpp"

#include <nlohmann/json.hpp>

#include "io/drop/table.hpp"
#include "tests/io/store/store_fixture.hpp"

namespace tw::io::test {
namespace {

/// Copper in g/L; 63.546 g/mol (IUPAC standard atomic weights 2021).
Recipe copperBath() {
  Recipe recipe;
  Channel copper;
  copper.id = "copper";
  copper.unit = "g/L";
  copper.canonicalUnit = "mol/L";
  copper.formulaMass = 63.546;
  recipe.channels = {copper};
  return recipe;
}

Reading titration() {
  Reading reading;
  static_cast<NewReading&>(reading) = make("copper", minute(0), 22.0 / 63.546);
  reading.entered = "2,95";
  reading.enteredUnit = "oz/gal";
  reading.inputs = R"({"V":12.3})";
  reading.reason = "typed \"2,9\", wrong\nline";
  reading.id = 12;
  reading.supersedes = 7;
  return reading;
}

Reading refusedText() {
  Reading reading;
  static_cast<NewReading&>(reading) = make("copper", minute(5), 0.0, ReadingState::Refused);
  reading.value.reset();
  reading.entered = "n/a";
  reading.reason = "no number";
  reading.sampledAt.offset = 0min;
  reading.id = 13;
  return reading;
}

TEST(Export, WritesTheColumnsInTheChannelsUnitWithTheOffsetKept) {
  Reading plain = titration();
  plain.reason = "";
  plain.entered = "22.0";
  plain.enteredUnit = "g/L";
  plain.inputs = "";
  plain.value = 22.0 / 63.546;
  plain.supersedes.reset();
  EXPECT_EQ(exportCsv({plain}, copperBath()),
            "time,tank,channel,value,unit,operator,source,state,id,supersedes,reason,received,entered,"
            "entered_unit,inputs\r\n"
            "2026-03-02T07:00:00+01:00,T1,copper,22,g/L,AB,drop:morning.csv,accepted,12,,,"
            "2026-03-02T06:01:00Z,22.0,g/L,\r\n");
}

TEST(Export, QuotesWhatRfc4180WantsQuoted) {
  const std::string text = exportCsv({titration()}, copperBath());
  EXPECT_THAT(text, testing::HasSubstr(",\"typed \"\"2,9\"\", wrong\nline\","));
  EXPECT_THAT(text, testing::HasSubstr(",\"{\"\"V\"\":12.3}\"\r\n"));
}

TEST(Export, LeavesAChannelThatTheRecipeHasNoMoreInItsCanonicalUnit) {
  Reading zinc = titration();
  zinc.channel = "zinc";
  zinc.value = 0.125;
  EXPECT_THAT(exportCsv({zinc}, copperBath()), testing::HasSubstr(",zinc,0.125,mol/L,"));
}

TEST(Export, WritesAJsonArrayOfTheSameFields) {
  const auto rows = nlohmann::json::parse(exportJson({titration(), refusedText()}, copperBath()));
  ASSERT_EQ(rows.size(), 2u);
  EXPECT_EQ(rows[0]["time"], "2026-03-02T07:00:00+01:00");
  EXPECT_NEAR(rows[0]["value"].get<double>(), 22.0, 1e-13);
  EXPECT_EQ(rows[0]["unit"], "g/L");
  EXPECT_EQ(rows[0]["id"], 12);
  EXPECT_EQ(rows[0]["supersedes"], 7);
  EXPECT_EQ(rows[0]["inputs"]["V"], 12.3);
  EXPECT_TRUE(rows[1]["value"].is_null());
  EXPECT_TRUE(rows[1]["supersedes"].is_null());
  EXPECT_TRUE(rows[1]["inputs"].is_null());
  EXPECT_EQ(nlohmann::json::parse(exportJson({}, copperBath())), nlohmann::json::array());
}

TEST(Export, OutlivesTextThatIsNoUtf8) {
  Reading old = titration();
  old.reason = "tr\xfc" "b";
  EXPECT_EQ(nlohmann::json::parse(exportJson({old}, copperBath())).size(), 1u);
}

TEST(Export, IsReadBackToTheSameReadings) {
  const Recipe recipe = copperBath();
  const auto zone = must(TimeZone::named("Europe/Paris"));
  const std::vector<Reading> written = {titration(), refusedText()};
  const IncomingBatch batch = parseTable(exportCsv(written, recipe), "export.csv", zone);
  EXPECT_TRUE(batch.refused.empty());
  ASSERT_EQ(batch.readings.size(), 2u);
  for (std::size_t i = 0; i < 2; ++i) {
    const Incoming& read = batch.readings[i];
    SCOPED_TRACE(written[i].entered);
    EXPECT_EQ(read.tank, written[i].tank);
    EXPECT_EQ(read.channel, written[i].channel);
    EXPECT_EQ(read.sampledAt, written[i].sampledAt);
    EXPECT_EQ(read.text, written[i].entered);
    EXPECT_EQ(read.inputsText, written[i].inputs);
    EXPECT_EQ(read.op, written[i].op);
    EXPECT_EQ(read.source, written[i].source);
    EXPECT_EQ(read.state, name(written[i].state));
    EXPECT_EQ(read.id, std::to_string(written[i].id));
    EXPECT_EQ(read.reason, written[i].reason);
    EXPECT_EQ(read.receivedAt, written[i].receivedAt);
    ASSERT_EQ(read.value.has_value(), written[i].value.has_value());
    if (read.value) {
      // Within the store's identity, by orders of magnitude.
      EXPECT_NEAR(must(toCanonical(recipe.channels[0], *read.value, read.unit)), *written[i].value, 1e-14);
    }
  }
}

}  // namespace
}  // namespace tw::io::test
