// SPDX-License-Identifier: GPL-3.0-or-later
// No bytes may crash the reader, and what it hands over is always well formed. RapidCheck prints its seed.
#include <gtest/gtest.h>
#include <rapidcheck.h>

#include <cmath>
#include <string>
#include <vector>

#include "io/drop/table.hpp"
#include "io/drop/text_encoding.hpp"

namespace {

const std::vector<std::string> kGoodFiles = {
    "sep=;\r\ntime;tank;operator;copper [oz/gal];copper.V;ph\r\n2026-03-02 06:00;T;kb;2,95;\"12,3\";10,215\r\n",
    "time,tank,channel,value,unit,operator,source,state,id,supersedes,reason,received,entered,entered_unit,inputs\n"
    "2026-03-02T06:00:00Z,T,copper,22.1,g/L,kb,s,accepted,r1,,,2026-03-02T06:01:00Z,22.1,g/L,\"{\"\"V\"\":1}\"\n",
    "time|tank|event|stock|amount|unit|note\n2026-03-02 06:00|T|addition|a|1.5|L|\"x\"\n",
    "{\"time\":\"2026-03-02 06:00\",\"tank\":\"T\",\"copper\":{\"value\":1,\"unit\":\"g/L\"},\"nickel\":{\"V\":1}}\n",
    "{\"readings\":[{\"time\":\"2026-03-02 06:00\",\"tank\":\"T\",\"channel\":\"ph\",\"value\":1}],\"results\":[]}",
    "[{\"time\":\"2026-03-02 06:00\",\"tank\":\"T\",\"channel\":\"ph\",\"value\":1}]\n",
};

void checkWellFormed(const std::string& bytes) {
  static const tw::io::TimeZone zone = *tw::io::TimeZone::named("Europe/Paris");
  const auto batch = tw::io::parseTable(bytes, "x.csv", zone);
  for (const auto& r : batch.readings) {
    RC_ASSERT(!r.tank.empty());
    RC_ASSERT(!r.channel.empty());
    RC_ASSERT(r.value.has_value() || !r.inputs.empty() || r.state == "refused");
    RC_ASSERT(!r.value || std::isfinite(*r.value));
    RC_ASSERT(r.line >= 1);
  }
  for (const auto& r : batch.refused) {
    RC_ASSERT(!r.code.empty());
    RC_ASSERT(!r.reason.empty());
    RC_ASSERT(tw::io::isUtf8(r.value));
  }
  RC_ASSERT(batch.headerReadable || (batch.readings.empty() && !batch.refused.empty()));
}

}  // namespace

TEST(ParseTableBytes, SurvivesRandomBytes) {
  EXPECT_TRUE(rc::check("random bytes", [](const std::string& bytes) { checkWellFormed(bytes); }));
}

TEST(ParseTableBytes, SurvivesMutatedFiles) {
  EXPECT_TRUE(rc::check("mutated files", [] {
    std::string bytes = *rc::gen::elementOf(kGoodFiles);
    const int edits = *rc::gen::inRange(1, 12);
    for (int i = 0; i < edits && !bytes.empty(); ++i) {
      const auto at = *rc::gen::inRange<std::size_t>(0, bytes.size());
      const char byte = *rc::gen::oneOf(rc::gen::arbitrary<char>(), rc::gen::elementOf(std::string("\",;\t|\r\n{}[]:.#=")));
      switch (*rc::gen::inRange(0, 4)) {
        case 0: bytes[at] = byte; break;
        case 1: bytes.insert(at, 1, byte); break;
        case 2: bytes.erase(at, *rc::gen::inRange<std::size_t>(1, 8)); break;
        default: bytes.insert(at, bytes.substr(0, *rc::gen::inRange<std::size_t>(0, bytes.size()))); break;
      }
    }
    checkWellFormed(bytes);
  }));
}

TEST(ParseTableBytes, StaysLinearOnHostileFiles) {
  static const tw::io::TimeZone zone = *tw::io::TimeZone::named("Etc/UTC");
  // Each would be quadratic for a reader that looks for the end of a quote or an object without a bound.
  std::string quotes = "time,tank,ph\n";
  for (int i = 0; i < 20'000; ++i) quotes += "a,\"\"\"b\n";
  const auto batch = tw::io::parseTable(quotes, "x.csv", zone);
  EXPECT_FALSE(batch.refused.empty());
  std::string braces(300'000, '{');
  EXPECT_FALSE(tw::io::parseTable(braces, "x.jsonl", zone).refused.empty());
  std::string lines;
  for (int i = 0; i < 20'000; ++i) lines += "{\"a\n";
  EXPECT_FALSE(tw::io::parseTable(lines, "x.jsonl", zone).refused.empty());
}

TEST(ParseTableBytes, BoundsTheRefusalsItLists) {
  static const tw::io::TimeZone zone = *tw::io::TimeZone::named("Etc/UTC");
  std::string rows = "time,tank,ph\n";
  for (int i = 0; i < 150'000; ++i) rows += "x\n";
  const auto batch = tw::io::parseTable(rows, "x.csv", zone);
  ASSERT_EQ(batch.refused.size(), 100'001U);
  EXPECT_EQ(batch.refused.back().code, "more_refused");
}
