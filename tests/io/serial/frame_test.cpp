// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/serial/frame.hpp"

#include <gtest/gtest.h>

#include <string>

#include "io/serial/frame_pattern.hpp"

using tw::io::FrameKind;
using tw::io::FrameOutcome;
using tw::io::FrameReader;
using tw::io::readFrame;
using tw::io::SerialPort;

namespace {

/// "ph=10.21 pH;temperature=41.5" of a good frame, the fault of a bad one.
std::string summary(const FrameOutcome& outcome) {
  std::string out = outcome.fault.empty() ? "" : "!" + outcome.fault;
  for (const auto& value : outcome.values) {
    if (!out.empty()) out += ';';
    out += value.channel + '=' + value.text;
    if (!value.unit.empty()) out += ' ' + value.unit;
  }
  return out;
}

std::string named(const std::string& line, const std::string& checksum = "none") {
  SerialPort settings;
  settings.checksum = checksum;
  return summary(readFrame(settings, line));
}

std::string columns(const std::string& line, const std::string& separator = ";") {
  SerialPort settings;
  settings.frame = FrameKind::Columns;
  settings.columns = {"ph", "", "temperature"};
  settings.separator = separator;
  return summary(readFrame(settings, line));
}

std::string pattern(const std::string& expression, const std::string& line) {
  SerialPort settings;
  settings.frame = FrameKind::Pattern;
  settings.pattern = expression;
  return summary(readFrame(settings, line));
}

}  // namespace

TEST(NamedFrame, ReadsBothForms) {
  EXPECT_EQ(named("ph=10.21 temperature=41.5"), "ph=10.21;temperature=41.5");
  EXPECT_EQ(named("ph 10.21 pH; temperature 41.5 degC"), "ph=10.21 pH;temperature=41.5 degC");
}

TEST(NamedFrame, ReadsWhatInstrumentsMakeOfThem) {
  EXPECT_EQ(named("  PH = 10.21 ; Temperature:41.5 "), "ph=10.21;temperature=41.5");
  EXPECT_EQ(named("ph 10.21 temperature 41.5"), "ph=10.21;temperature=41.5");
  EXPECT_EQ(named("ph 10.21 pH temperature 41.5 degC"), "ph=10.21 pH;temperature=41.5 degC");
  EXPECT_EQ(named("ph=10.21,temperature=41.5"), "ph=10.21;temperature=41.5");
  EXPECT_EQ(named("ph=10.21pH temperature=41.5\xC2\xB0" "C"), "ph=10.21 pH;temperature=41.5 \xC2\xB0" "C");
  EXPECT_EQ(named("ph=10,21 temperature=41,5"), "ph=10,21;temperature=41,5");
  EXPECT_EQ(named("orp=-  120 mV"), "orp=-  120 mV");
  EXPECT_EQ(named("copper=+2.21E+1"), "copper=+2.21E+1");
  EXPECT_EQ(named("ph=.5;"), "ph=.5");
}

TEST(NamedFrame, GivesNumbersWhateverTheDecimalMark) {
  EXPECT_EQ(readFrame({}, "ph=10,215").values.at(0).value, 10.215);
  EXPECT_EQ(readFrame({}, "orp=- 120").values.at(0).value, -120.0);
  EXPECT_EQ(readFrame({}, "copper=+2.21E+1").values.at(0).value, 22.1);
}

TEST(NamedFrame, RefusesNoiseAsAWhole) {
  for (const char* line : {"", "hello", "10.21", "ph=", "=10.21", "ph=10.21 temperature=", "ph=10.2.1", "ph=1,234.5",
                           "ph=10.21 ph=10.22", "ph=10.21 PH 10.22", "ph=<0.1", "ph==10", "ph=10.21 !", "ph=n/a",
                           "ph=1e999", "\xFF\xFE\xFD"}) {
    EXPECT_EQ(named(line), "!unreadable") << line;
  }
}

TEST(NamedFrame, ChecksAChecksumWhenThereIsOne) {
  // XOR of the bytes before the star, worked out by hand: 'p'^'h'^'='^'7' = 0x70^0x68^0x3D^0x37 = 0x12.
  EXPECT_EQ(named("ph=7*12"), "ph=7");
  EXPECT_EQ(named("ph=7*12 "), "ph=7");
  EXPECT_EQ(named("ph=7*13"), "!checksum");
  EXPECT_EQ(named("ph=8*12"), "!checksum");
  EXPECT_EQ(named("ph=7*1"), "!checksum");
  EXPECT_EQ(named("ph=7*1G"), "!checksum");
  EXPECT_EQ(named("ph=7*12", "xor"), "ph=7");
  EXPECT_EQ(named("ph=7", "xor"), "!checksum");
}

TEST(NamedFrame, TakesEitherCaseOfAChecksum) {
  // 'p'^'h'^'='^'1'^'.'^'3' = 0x25^0x31^0x2E^0x33 = 0x09; with "ph=1.5": 0x25^0x31^0x2E^0x35 = 0x0F.
  EXPECT_EQ(named("ph=1.3*09"), "ph=1.3");
  EXPECT_EQ(named("ph=1.5*0F"), "ph=1.5");
  EXPECT_EQ(named("ph=1.5*0f"), "ph=1.5");
}

TEST(NamedFrame, DropsAParityBitThatTheLineLeft) {
  std::string line = "ph=10.21";
  for (char& c : line) c = static_cast<char>(static_cast<unsigned char>(c) | 0x80U);
  EXPECT_EQ(named(line), "ph=10.21");
}

TEST(ColumnsFrame, ReadsValuesInTheConfiguredOrder) {
  EXPECT_EQ(columns("10.21;x;41.5"), "ph=10.21;temperature=41.5");
  EXPECT_EQ(columns(" 10,21 ; ; 41,5 "), "ph=10,21;temperature=41,5");
  EXPECT_EQ(columns("10.21,x,41.5", ","), "ph=10.21;temperature=41.5");
  EXPECT_EQ(columns("10.21   x\t41.5", " "), "ph=10.21;temperature=41.5");
  EXPECT_EQ(columns("10.21\t\t41.5", "\t"), "ph=10.21;temperature=41.5");
  EXPECT_EQ(columns("10.21;;"), "ph=10.21");
}

TEST(ColumnsFrame, RefusesAnotherNumberOfColumns) {
  EXPECT_EQ(columns("10.21;41.5"), "!columns");
  EXPECT_EQ(columns("10.21;x;41.5;7"), "!columns");
  EXPECT_EQ(columns("a;b;c"), "!unreadable");
  EXPECT_EQ(columns(";;"), "!unreadable");
}

TEST(PatternFrame, TakesNamedGroupsAsChannels) {
  EXPECT_EQ(pattern("(?<ph>[0-9.]+) pH", "probe 2: 10.21 pH ok"), "ph=10.21");
  EXPECT_EQ(pattern("T(?<Temperature>\\S+)( P(?<ph>\\S+))?", "T41.5"), "temperature=41.5");
  EXPECT_EQ(pattern("(?<ph>[0-9.]+) pH", "nothing here"), "!unreadable");
  EXPECT_EQ(pattern("(?<ph>\\S+)", "abc"), "!unreadable");
}

TEST(PatternFrame, KnowsWhichExpressionsCannotBeUsed) {
  EXPECT_EQ(tw::io::patternFault("(?<ph>[0-9.]+) pH"), "");
  EXPECT_NE(tw::io::patternFault("(?<ph>[0-9.+"), "");
  EXPECT_NE(tw::io::patternFault("([0-9.]+)"), "");
  EXPECT_NE(tw::io::patternFault(""), "");
  EXPECT_EQ(pattern("(?<ph>[", "10"), "!unreadable");
}

TEST(PatternFrame, GivesUpOnAnExpressionThatBacktracksForEver) {
  EXPECT_EQ(pattern("^(?<ph>(1+)+)x$", std::string(200, '1')), "!unreadable");
}

TEST(FrameReader, SplitsLinesWithEveryEndHoweverTheyArrive) {
  FrameReader reader({});
  std::string seen;
  const std::string bytes = "ph=1\nph=2\r\nph=3\rph=4\n\n";
  for (const char c : bytes) {
    for (const auto& outcome : reader.feed({&c, 1})) seen += summary(outcome) + '|';
  }
  EXPECT_EQ(seen, "ph=1|ph=2|ph=3|ph=4|");
  EXPECT_FALSE(reader.hasPartial());
}

TEST(FrameReader, WaitsForTheEndOfALineAndForgetsItOnReset) {
  FrameReader reader({});
  EXPECT_TRUE(reader.feed("ph=10.").empty());
  EXPECT_TRUE(reader.hasPartial());
  reader.reset();
  EXPECT_FALSE(reader.hasPartial());
  const auto outcomes = reader.feed("ph=7\n");
  ASSERT_EQ(outcomes.size(), 1U);
  EXPECT_EQ(summary(outcomes[0]), "ph=7");
}

TEST(FrameReader, DropsControlCharacters) {
  FrameReader reader({});
  const auto outcomes = reader.feed(std::string("\0\x7f\x1b" "\fph=10.21\0\n", 14));
  ASSERT_EQ(outcomes.size(), 1U);
  EXPECT_EQ(summary(outcomes[0]), "ph=10.21");
  EXPECT_EQ(outcomes[0].line, "ph=10.21");
}

TEST(FrameReader, CountsALineOver256BytesOnceAndGoesOn) {
  FrameReader reader({});
  const auto outcomes = reader.feed(std::string(5000, 'x') + "\nph=7\n" + std::string(256, ' ') + "\n");
  ASSERT_EQ(outcomes.size(), 2U);
  EXPECT_EQ(outcomes[0].fault, "too_long");
  EXPECT_EQ(outcomes[0].line.size(), 256U);
  EXPECT_EQ(summary(outcomes[1]), "ph=7");
}
