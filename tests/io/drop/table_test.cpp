// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/table.hpp"

#include <gtest/gtest.h>

#include <string>

using tw::io::IncomingBatch;
using tw::io::parseTable;
using tw::io::TableHints;
using tw::io::TimeZone;
using tw::io::toRfc3339;

namespace {

IncomingBatch parse(const std::string& text, const TableHints& hints = {}) {
  static const TimeZone zone = *TimeZone::named("Europe/Paris");
  return parseTable(text, "a.csv", zone, hints);
}

/// "line channel=value unit" of each reading, "line!column:value:code" of each refusal, in file order.
std::string summary(const IncomingBatch& batch) {
  std::string out;
  for (const auto& r : batch.readings) {
    out += std::to_string(r.line) + ' ' + r.channel + '=' + (r.value ? r.text : r.inputsText);
    if (!r.unit.empty()) out += ' ' + r.unit;
    out += '\n';
  }
  for (const auto& r : batch.refused) {
    out += std::to_string(r.line) + '!' + r.column + ':' + r.value + ':' + r.code + '\n';
  }
  return out;
}

const std::string kGood = "2 copper=22.1\n2 ph=10.2\n3 copper=22.0\n3 ph=10.3\n";

}  // namespace

TEST(ParseTable, MakesSeveralReadingsOfAWideRow) {
  const auto batch = parse("time,tank,operator,copper,ammonia,ph,temperature\n"
                           "2026-03-02 06:00,L2-T4,kb,22.1,85,10.2,41.5\n");
  ASSERT_EQ(batch.readings.size(), 4U);
  EXPECT_TRUE(batch.refused.empty());
  EXPECT_TRUE(batch.headerReadable);
  EXPECT_EQ(batch.source, "drop:a.csv");
  const auto& first = batch.readings.front();
  EXPECT_EQ(first.line, 2);
  EXPECT_EQ(first.column, "copper");
  EXPECT_EQ(first.tank, "L2-T4");
  EXPECT_EQ(first.channel, "copper");
  EXPECT_EQ(toRfc3339(first.sampledAt.at, first.sampledAt.offset), "2026-03-02T06:00:00+01:00");
  EXPECT_EQ(first.value, 22.1);
  EXPECT_EQ(first.text, "22.1");
  EXPECT_EQ(first.op, "kb");
  EXPECT_EQ(batch.readings.back().channel, "temperature");
}

TEST(ParseTable, ReadsLongRows) {
  const auto batch = parse("time,tank,channel,value,unit\n"
                           "2026-03-02T06:00:00Z,L2-T4,copper,2.95,oz/gal\n"
                           "2026-03-02T06:00:00Z,L2-T4,ph,10.2,\n");
  EXPECT_EQ(summary(batch), "2 copper=2.95 oz/gal\n3 ph=10.2\n");
}

TEST(ParseTable, ReadsEverySeparator) {
  for (const std::string separator : {",", ";", "\t", "|"}) {
    std::string text = "time,tank,copper,ph\n2026-03-02 06:00,T,22.1,10.2\n2026-03-02 07:00,T,22.0,10.3\n";
    for (char& c : text) {
      if (c == ',') c = separator[0];
    }
    EXPECT_EQ(summary(parse(text)), kGood) << separator;
  }
}

TEST(ParseTable, ReadsEveryLineEnd) {
  for (const std::string end : {"\n", "\r\n", "\r"}) {
    EXPECT_EQ(summary(parse("time,tank,copper,ph" + end + "2026-03-02 06:00,T,22.1,10.2" + end +
                            "2026-03-02 07:00,T,22.0,10.3")),
              kGood);
  }
}

TEST(ParseTable, ReadsHeadersInAnyCaseAndQuotes) {
  EXPECT_EQ(summary(parse("TIME,\"Tank\",Copper,pH\n2026-03-02 06:00,T,\"22.1\",10.2\n"
                          "2026-03-02 07:00,T,22.0,10.3\n")),
            kGood);
}

TEST(ParseTable, DecidesDecimalCommaForTheWholeFile) {
  const auto batch = parse("time;tank;copper;ph\n2026-03-02 06:00;T;22,1;10,215\n");
  ASSERT_EQ(batch.readings.size(), 2U);
  EXPECT_EQ(batch.readings[0].value, 22.1);
  EXPECT_EQ(batch.readings[1].value, 10.215);
  EXPECT_EQ(batch.readings[1].text, "10,215");
  const auto quoted = parse("time,tank,copper\n2026-03-02 06:00,T,\"22,1\"\n");
  ASSERT_EQ(quoted.readings.size(), 1U);
  EXPECT_EQ(quoted.readings[0].value, 22.1);
}

TEST(ParseTable, RefusesWhatCouldBeThousandsUnlessTold) {
  const std::string text = "time;tank;chloride\n2026-03-02 06:00;T;1,234\n";
  EXPECT_EQ(summary(parse(text)), "2!chloride:1,234:number_ambiguous\n");
  EXPECT_EQ(parse(text, {",", "", "", ""}).readings.at(0).value, 1.234);
  EXPECT_EQ(parse(text, {".", "", "", ""}).readings.at(0).value, 1234.0);
}

TEST(ParseTable, RefusesByCellAndKeepsTheRest) {
  const auto batch = parse("time,tank,copper,ammonia,ph\n"
                           "2026-03-02 06:00,T,<0.1,85,10.2\n"
                           "2026-03-02 07:00,T,22.1,#DIV/0!,n/a\n"
                           "2026-03-02 08:00,T,ND,,10.4\n"
                           "Total,,44.2,,\n"
                           "2026-03-02 09:00,,22.2,,\n");
  EXPECT_EQ(summary(batch),
            "2 ammonia=85\n2 ph=10.2\n3 copper=22.1\n4 ph=10.4\n"
            "2!copper:<0.1:limit_not_value\n3!ammonia:#DIV/0!:no_value\n3!ph:n/a:no_value\n"
            "4!copper:ND:no_value\n5!time:Total:time_unreadable\n6!tank::tank_missing\n");
  for (const auto& refusal : batch.refused) EXPECT_FALSE(refusal.reason.empty());
  EXPECT_TRUE(batch.headerReadable);
}

TEST(ParseTable, NamesTheColumnAsWritten) {
  EXPECT_EQ(summary(parse("Time,Tank,Copper [oz/gal]\nnever,T,1\n2026-03-02 06:00,T,x\n")),
            "2!Time:never:time_unreadable\n3!Copper [oz/gal]:x:not_a_number\n");
}

TEST(ParseTable, TakesUnitsFromTheHeader) {
  const auto batch = parse("time,tank,Copper [oz/gal],temperature (degF)\n2026-03-02 06:00,T,2.95,104\n");
  EXPECT_EQ(summary(batch), "2 copper=2.95 oz/gal\n2 temperature=104 degF\n");
  EXPECT_EQ(batch.readings[0].column, "Copper [oz/gal]");
  EXPECT_EQ(summary(parse("time,tank,channel,value [g/L],unit\n2026-03-02 06:00,T,copper,22.1,\n"
                          "2026-03-02 06:00,T,ph,10.2,pH\n")),
            "2 copper=22.1 g/L\n3 ph=10.2 pH\n");
}

TEST(ParseTable, JoinsBuretteInputsOfAChannel) {
  const auto batch = parse("time;tank;copper.V [mL];copper.blank;ph\n2026-03-02 06:00;T;12,30;0,05;10,2\n"
                           "2026-03-02 07:00;T;12,40;;\n");
  ASSERT_EQ(batch.readings.size(), 3U);
  const auto& copper = batch.readings[1];
  EXPECT_EQ(copper.channel, "copper");
  EXPECT_FALSE(copper.value);
  EXPECT_EQ(copper.inputs, (std::map<std::string, double>{{"V", 12.3}, {"blank", 0.05}}));
  EXPECT_EQ(copper.inputUnits, (std::map<std::string, std::string>{{"V", "mL"}}));
  EXPECT_EQ(copper.inputsText, R"({"V":12.30,"blank":0.05})");
  EXPECT_EQ(batch.readings[2].inputs, (std::map<std::string, double>{{"V", 12.4}}));
}

TEST(ParseTable, RefusesATitrationAsAWholeWhenOneInputIsBad) {
  EXPECT_EQ(summary(parse("time,tank,copper.V,copper.blank\n2026-03-02 06:00,T,12.3,n/a\n")),
            "2!copper.blank:n/a:no_value\n2!copper.V:12.3:titration_incomplete\n");
}

TEST(ParseTable, KeepsInputsBesideAValueOfTheSameRow) {
  const auto batch = parse("time,tank,copper,copper.V\n2026-03-02 06:00,T,22.1,12.3\n");
  ASSERT_EQ(batch.readings.size(), 1U);
  EXPECT_EQ(batch.readings[0].value, 22.1);
  EXPECT_EQ(batch.readings[0].inputsText, R"({"V":12.3})");
}

TEST(ParseTable, JoinsInputsThatStandInLongRows) {
  const auto batch = parse("time,tank,channel,value\n2026-03-02 06:00,T,copper.V,12.3\n"
                           "2026-03-02 06:00,T,copper.blank,0.05\n2026-03-02 07:00,T,copper.V,12.4\n");
  EXPECT_EQ(summary(batch), "2 copper={\"V\":12.3,\"blank\":0.05}\n4 copper={\"V\":12.4}\n");
}

TEST(ParseTable, SkipsSeparatorLineBlanksCommentsAndRepeatedHeaders) {
  EXPECT_EQ(summary(parse("sep=;\r\n\r\n# made by the night shift\r\ntime;tank;ph\r\n2026-03-02 06:00;T;10.2\r\n"
                          ";;\r\nTime;Tank;pH\r\n2026-03-02 07:00;T;10.3;\r\n")),
            "5 ph=10.2\n8 ph=10.3\n");
}

TEST(ParseTable, FollowsAnotherHeaderFurtherDown) {
  EXPECT_EQ(summary(parse("time,tank,ph\n2026-03-02 06:00,T,10.2\ntime,tank,copper\n2026-03-02 06:00,T,22\n")),
            "2 ph=10.2\n4 copper=22\n");
}

TEST(ParseTable, RefusesATitleBlockButReadsTheTable) {
  EXPECT_EQ(summary(parse("Shift report\ntime,tank,ph\n2026-03-02 06:00,T,10.2\n")),
            "3 ph=10.2\n1!:Shift report:before_header\n");
}

TEST(ParseTable, RefusesRowsWhoseCellsHaveShifted) {
  EXPECT_EQ(summary(parse("time,tank,copper,ph\n2026-03-02 06:00,T,22,1,10,2\n2026-03-02 07:00,T,22\n")),
            "3 copper=22\n2!:2026-03-02 06:00,T,22,1,10,2:too_many_cells\n");
}

TEST(ParseTable, RefusesColumnsItCannotPlace) {
  EXPECT_EQ(summary(parse("time,tank,ph,PH,\n2026-03-02 06:00,T,10.2,10.3,7\n")),
            "2 ph=10.2\n1!PH::column_twice\n2!:7:column_unknown\n");
  EXPECT_EQ(summary(parse("time,tank,channel,value,mood\n2026-03-02 06:00,T,ph,10.2,good\n")),
            "2 ph=10.2\n1!mood::column_unknown\n");
}

TEST(ParseTable, RefusesAFileWithoutAReadableHeader) {
  for (const char* text : {"", "\n\n", "a,b,c\n1,2,3\n", "time,ph\n2026-03-02 06:00,10.2\n", "tank,ph\nT,10.2\n",
                           "time,tank\n2026-03-02 06:00,T\n", "2026-03-02 06:00,T,10.2\n"}) {
    const auto batch = parse(text);
    EXPECT_FALSE(batch.headerReadable) << text;
    EXPECT_TRUE(batch.readings.empty());
    ASSERT_EQ(batch.refused.size(), 1U) << text;
    EXPECT_EQ(batch.refused[0].code, "header_unreadable");
  }
  EXPECT_TRUE(parse("time,tank,ph\n").headerReadable);
}

TEST(ParseTable, RefusesHoursThatTheZoneLeavesOpen) {
  EXPECT_EQ(summary(parse("time,tank,ph\n2026-10-25 02:30,T,10.2\n2026-03-29 02:30,T,10.2\n"
                          "2026-10-25T02:30:00+02:00,T,10.2\n")),
            "4 ph=10.2\n2!time:2026-10-25 02:30:time_ambiguous\n3!time:2026-03-29 02:30:time_does_not_exist\n");
}

TEST(ParseTable, LetsTheFileSettleTheOrderOfDayAndMonth) {
  const std::string open = "time,tank,ph\n03/04/2026 06:00,T,10.2\n";
  EXPECT_EQ(summary(parse(open)), "2!time:03/04/2026 06:00:date_order_open\n");
  EXPECT_EQ(toRfc3339(parse(open, {"", "", "", "dmy"}).readings.at(0).sampledAt.at), "2026-04-03T04:00:00Z");
  const auto settled = parse(open + "13/04/2026 06:00,T,10.3\n");
  ASSERT_EQ(settled.readings.size(), 2U);
  EXPECT_EQ(toRfc3339(settled.readings[0].sampledAt.at), "2026-04-03T04:00:00Z");
  EXPECT_EQ(parse("time,tank,ph\n31.12.2026 06:00,T,10.2\n").readings.size(), 1U);
}

TEST(ParseTable, ReadsAZoneNamedInTheHeader) {
  EXPECT_EQ(toRfc3339(parse("time [UTC],tank,ph\n2026-07-02 06:00,T,10.2\n").readings.at(0).sampledAt.at),
            "2026-07-02T06:00:00Z");
  EXPECT_FALSE(parse("time [shop],tank,ph\n2026-07-02 06:00,T,10.2\n").headerReadable);
}

TEST(ParseTable, ReadsEvents) {
  const auto batch = parse("time,tank,event,stock,amount,unit,operator,lot,note\n"
                           "2026-03-02 06:00,T,addition,aqua-ammonia,12.5,L,kb,A7,\"slowly, mixed\"\n"
                           "2026-03-02 07:00,T,Note,,,,kb,,filter changed\n"
                           "2026-03-02 08:00,T,explosion,,,,,,\n"
                           "2026-03-02 09:00,T,addition,aqua-ammonia,some,L,,,\n");
  ASSERT_EQ(batch.events.size(), 2U);
  EXPECT_EQ(batch.events[0].kind, "addition");
  EXPECT_EQ(batch.events[0].stock, "aqua-ammonia");
  EXPECT_EQ(batch.events[0].amount, 12.5);
  EXPECT_EQ(batch.events[0].amountText, "12.5");
  EXPECT_EQ(batch.events[0].unit, "L");
  EXPECT_EQ(batch.events[0].lot, "A7");
  EXPECT_EQ(batch.events[0].note, "slowly, mixed");
  EXPECT_EQ(batch.events[0].op, "kb");
  EXPECT_EQ(batch.events[1].kind, "note");
  EXPECT_FALSE(batch.events[1].amount);
  EXPECT_EQ(summary(batch), "4!event:explosion:event_unknown\n5!amount:some:not_a_number\n");
}

TEST(ParseTable, ReadsEncodings) {
  const std::string utf8 = "time,tank,temperature [\xC2\xB0" "C]\n2026-03-02 06:00,T,\xE2\x88\x92" "1.5\n";
  EXPECT_EQ(summary(parse("\xEF\xBB\xBF" + utf8)), "2 temperature=\xE2\x88\x92" "1.5 \xC2\xB0" "C\n");
  EXPECT_EQ(summary(parse("time,tank,temperature [\xB0" "C]\n2026-03-02 06:00,T,1.5\n")),
            "2 temperature=1.5 \xC2\xB0" "C\n");
  std::string wide("\xFF\xFE", 2);
  for (const char c : std::string("time;tank;ph\r\n2026-03-02 06:00;T;10,2\r\n")) {
    wide += c;
    wide += '\0';
  }
  EXPECT_EQ(summary(parse(wide)), "2 ph=10,2\n");
}

TEST(ParseTable, LosesOnlyTheLineOfABadQuote) {
  EXPECT_EQ(summary(parse("time,tank,ph\n2026-03-02 06:00,T,\"10.2\n2026-03-02 07:00,T,10.3\n")),
            "3 ph=10.3\n2!:2026-03-02 06:00,T,\"10.2:quote_unclosed\n");
}
