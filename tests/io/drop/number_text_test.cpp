// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/number_text.hpp"

#include <gtest/gtest.h>

#include <string>
#include <vector>

using tw::io::asJsonNumber;
using tw::io::Decimal;
using tw::io::DecimalEvidence;
using tw::io::DecimalMark;
using tw::io::NumberKind;
using tw::io::readNumber;

namespace {

constexpr Decimal kNone{DecimalMark::None, false};
constexpr Decimal kPoint{DecimalMark::Point, false};
constexpr Decimal kComma{DecimalMark::Comma, false};
constexpr Decimal kStatedPoint{DecimalMark::Point, true};
constexpr Decimal kStatedComma{DecimalMark::Comma, true};

double number(const std::string& text, Decimal decimal) {
  const auto read = readNumber(text, decimal);
  EXPECT_EQ(read.kind, NumberKind::Number) << text;
  return read.value;
}

NumberKind kind(const std::string& text, Decimal decimal = kNone) { return readNumber(text, decimal).kind; }

DecimalMark shown(const std::vector<std::string>& cells, const std::string& hint = {}) {
  DecimalEvidence evidence;
  for (const auto& cell : cells) evidence.add(cell);
  return evidence.decide(hint).mark;
}

}  // namespace

TEST(NumberText, ReadsPlainNumbers) {
  EXPECT_EQ(number("22.1", kPoint), 22.1);
  EXPECT_EQ(number("  22.1 ", kPoint), 22.1);
  EXPECT_EQ(number("22,1", kComma), 22.1);
  EXPECT_EQ(number("-0.5", kNone), -0.5);
  EXPECT_EQ(number("+.5", kNone), 0.5);
  EXPECT_EQ(number("5.", kNone), 5.0);
  EXPECT_EQ(number("1.2E-3", kPoint), 0.0012);
  EXPECT_EQ(number("1,2e+3", kComma), 1200.0);
  EXPECT_EQ(number("007", kNone), 7.0);
}

TEST(NumberText, ReadsTypographicMinusAndBlanks) {
  EXPECT_EQ(number("\xE2\x88\x92" "3.5", kPoint), -3.5);            // U+2212
  EXPECT_EQ(number("1.2E\xE2\x88\x92" "3", kPoint), 0.0012);
  EXPECT_EQ(number("12\xC2\xA0" "345.6", kPoint), 12345.6);         // U+00A0
  EXPECT_EQ(number("12\xE2\x80\xAF" "345,6", kComma), 12345.6);     // U+202F
  EXPECT_EQ(number("\xC2\xA0" "22,1", kComma), 22.1);
  EXPECT_EQ(number("1'234.5", kPoint), 1234.5);
  EXPECT_EQ(number("1 234 567", kNone), 1234567.0);
}

TEST(NumberText, ReadsGroupsOnlyWhenTheyAreSure) {
  EXPECT_EQ(number("1,234.5", kPoint), 1234.5);
  EXPECT_EQ(number("1.234,5", kComma), 1234.5);
  EXPECT_EQ(number("1,234,567", kPoint), 1234567.0);
  EXPECT_EQ(kind("1,234", kNone), NumberKind::Ambiguous);
  EXPECT_EQ(kind("1,234", kPoint), NumberKind::Ambiguous);
  EXPECT_EQ(kind("1.234", kComma), NumberKind::Ambiguous);
  EXPECT_EQ(number("1,234", kStatedPoint), 1234.0);
  EXPECT_EQ(number("1.234", kStatedComma), 1234.0);
  EXPECT_EQ(number("1,234", kComma), 1.234);
  EXPECT_EQ(number("1.234", kPoint), 1.234);
  EXPECT_EQ(number("1.234", kNone), 1.234);
  EXPECT_EQ(number("0,123", kNone), 0.123);
}

TEST(NumberText, RefusesTheMarkThatTheFileDoesNotUse) {
  EXPECT_EQ(kind("22,1", kPoint), NumberKind::WrongMark);
  EXPECT_EQ(kind("22.1", kComma), NumberKind::WrongMark);
  EXPECT_EQ(kind("1,234.5", kComma), NumberKind::WrongMark);
  EXPECT_EQ(kind("22.1", {DecimalMark::Conflict, false}), NumberKind::DecimalOpen);
  EXPECT_EQ(number("22", {DecimalMark::Conflict, false}), 22.0);
}

TEST(NumberText, TellsBoundsWordsAndNoiseApart) {
  EXPECT_EQ(kind("<0.1"), NumberKind::Limit);
  EXPECT_EQ(kind(" > 50"), NumberKind::Limit);
  EXPECT_EQ(kind("\xE2\x89\xA4 0.1"), NumberKind::Limit);
  for (const char* word : {"n/a", "N/A", "ND", "n.d.", "-", "#DIV/0!", "#N/A", "NaN", "inf"}) {
    EXPECT_EQ(kind(word), NumberKind::NoValue) << word;
  }
  for (const char* text : {"abc", "22.1 g/L", "1.2.3", "1,2,3", "12 34", "1e", "e5", "--5", "0x1F", "1_000", "22;1",
                           "1.2,3.4", "1'2", ".", "+", "1e99999", "\xC2\xB5", "5%"}) {
    EXPECT_EQ(kind(text), NumberKind::NotANumber) << text;
  }
  EXPECT_EQ(kind(std::string(1000, '1')), NumberKind::NotANumber);
  EXPECT_EQ(kind("1e999"), NumberKind::OutOfRange);
  EXPECT_EQ(kind(""), NumberKind::Empty);
  EXPECT_EQ(kind(" \xC2\xA0\t"), NumberKind::Empty);
}

TEST(DecimalEvidence, DecidesForTheWholeFile) {
  EXPECT_EQ(shown({"22,1", "85", "1,234"}), DecimalMark::Comma);
  EXPECT_EQ(shown({"22.1", "85"}), DecimalMark::Point);
  EXPECT_EQ(shown({"1,234.5"}), DecimalMark::Point);
  EXPECT_EQ(shown({"1.234,5"}), DecimalMark::Comma);
  EXPECT_EQ(shown({"1.234.567"}), DecimalMark::Comma);
  EXPECT_EQ(shown({"12,345E2"}), DecimalMark::Comma);
  EXPECT_EQ(shown({"1,234", "17", "n/a", "<0,1", "2.345"}), DecimalMark::None);
}

TEST(DecimalEvidence, LetsAClearMajorityDecideAndLeavesTheRestOpen) {
  EXPECT_EQ(shown({"1,5", "2,5", "3,5", "4,5", "5.5"}), DecimalMark::Comma);
  EXPECT_EQ(shown({"1,5", "2,5", "5.5"}), DecimalMark::Conflict);
  EXPECT_EQ(shown({"1,5", "2,5", "5.5"}, "."), DecimalMark::Point);
}

TEST(DecimalEvidence, TakesAHintOnlyWhereTheFileIsSilent) {
  EXPECT_EQ(shown({"1,234"}, ","), DecimalMark::Comma);
  EXPECT_EQ(shown({"22.1"}, ","), DecimalMark::Point);
}

TEST(NumberText, KeepsDigitsForJsonWhereItsSpellingAllows) {
  const auto json = [](const char* text) { return asJsonNumber(readNumber(text, kComma)); };
  EXPECT_EQ(json("12,30"), "12.30");
  EXPECT_EQ(json("-0,050"), "-0.050");
  EXPECT_EQ(json("007"), "7");
  EXPECT_EQ(json(",5"), "0.5");
  EXPECT_EQ(json("5,"), "5");
}
