// SPDX-License-Identifier: GPL-3.0-or-later
#include <gtest/gtest.h>

#include <string>

#include "io/drop/json_object.hpp"
#include "io/drop/table.hpp"

using tw::io::IncomingBatch;
using tw::io::TimeZone;

namespace {

IncomingBatch parse(const std::string& text) {
  static const TimeZone zone = *TimeZone::named("Europe/Paris");
  return tw::io::parseTable(text, "a.jsonl", zone);
}

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

const std::string kHead = R"("time":"2026-03-02 06:00","tank":"T")";

}  // namespace

TEST(JsonLines, ReadFlatObjects) {
  const auto batch = parse("{" + kHead + R"(,"operator":"kb","copper":22.10,"pH":10,"ammonia":null})" + "\n\n{" +
                           kHead + R"(,"ph":1.02e1})" + "\n");
  EXPECT_EQ(summary(batch), "1 copper=22.10\n1 ph=10\n3 ph=1.02e1\n");
  EXPECT_EQ(batch.readings[0].op, "kb");
  EXPECT_EQ(batch.readings[0].value, 22.1);
}

TEST(JsonLines, ReadNestedUnitsAndBuretteInputs) {
  const auto batch = parse("{" + kHead + R"(,"ammonia":{"value":85,"unit":"g/L"},"nickel":{"V":12.30,"blank":0.05},)" +
                           R"("copper.V":12.1,"tin [oz/gal]":3,"values":{"ph":10.2,"zinc":{"V":9}}})");
  EXPECT_EQ(summary(batch),
            "1 ammonia=85 g/L\n1 tin=3 oz/gal\n1 ph=10.2\n1 nickel={\"V\":12.30,\"blank\":0.05}\n"
            "1 copper={\"V\":12.1}\n1 zinc={\"V\":9}\n");
  EXPECT_EQ(batch.readings[3].inputs.at("V"), 12.3);
}

TEST(JsonLines, ReadLongObjectsAndEvents) {
  const auto batch = parse("{" + kHead + R"(,"channel":"copper","value":2.95,"unit":"oz/gal"})" + "\n{" + kHead +
                           R"(,"event":"addition","stock":"aqua-ammonia","amount":12.5,"unit":"L"})");
  EXPECT_EQ(summary(batch), "1 copper=2.95 oz/gal\n");
  ASSERT_EQ(batch.events.size(), 1U);
  EXPECT_EQ(batch.events[0].line, 2);
  EXPECT_EQ(batch.events[0].amount, 12.5);
}

TEST(JsonLines, RefuseByCellAndByLine) {
  EXPECT_EQ(summary(parse("{" + kHead + R"(,"copper":"22,1","chloride":"1,234","ph":true,"tin":[1],"zinc":"<1"})" +
                          "\nnot json\n{\"time\":\n{" + kHead + R"(,"ph":10.2})" + "\n{\"tank\":\"T\",\"ph\":9}")),
            "1 copper=22,1\n4 ph=10.2\n1!chloride:1,234:number_ambiguous\n1!ph:true:not_a_number\n"
            "1!tin::not_a_number\n1!zinc:<1:limit_not_value\n2!:not json:json_unreadable\n"
            "3!:{\"time\"::json_unreadable\n5!time::time_missing\n");
}

TEST(JsonLines, ReadObjectsOverSeveralLinesAndArrays) {
  EXPECT_EQ(summary(parse("{\n" + kHead + ",\n\"ph\": 10.2\n}\n{\n" + kHead + ",\"ph\": 10.3}")),
            "1 ph=10.2\n5 ph=10.3\n");
  EXPECT_EQ(summary(parse("[\n{" + kHead + R"(,"ph":10.2},)" + "\n{" + kHead +
                          R"(,"ph":10.3}, {"recipe_sha256":"ab","species":[{"a":1}]})" + "\n]")),
            "2 ph=10.2\n3 ph=10.3\n");
}

TEST(JsonLines, RefuseAnObjectThatNeverEnds) {
  EXPECT_EQ(summary(parse("[{" + kHead + R"(,"ph":10.2})" + "\n,{\"time\":")),
            "1 ph=10.2\n2!:{\"time\"::json_unreadable\n");
}

TEST(JsonObject, KeepsDigitsAndRefusesOtherRoots) {
  const auto members = tw::io::readJsonObject(R"({"a":1.50,"b":{"c":{"d":{"e":1}}},"f":[[1],{"g":2}],"h":"x"})");
  ASSERT_TRUE(members);
  ASSERT_EQ(members->size(), 4U);
  EXPECT_EQ((*members)[0].text, "1.50");
  EXPECT_EQ((*members)[2].kind, tw::io::JsonMember::Kind::Other);
  EXPECT_EQ((*members)[3].text, "x");
  EXPECT_EQ(findMember(*members, "h"), &(*members)[3]);
  for (const char* text : {"", "1", "[]", "[{}]", "{", "{}{}", "{\"a\":1,}", "{\"a\"}", "null", "\"x\""}) {
    EXPECT_FALSE(tw::io::readJsonObject(text)) << text;
  }
}
