// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/text_encoding.hpp"

#include <gtest/gtest.h>

#include <string>

using tw::io::decodeText;
using tw::io::isUtf8;

namespace {

std::string utf16(const std::string& ascii, bool bigEndian) {
  std::string out;
  for (const char c : ascii) {
    if (bigEndian) out += '\0';
    out += c;
    if (!bigEndian) out += '\0';
  }
  return out;
}

const std::string kDegree = "\xC2\xB0" "C";

}  // namespace

TEST(TextEncoding, DropsAByteOrderMark) { EXPECT_EQ(decodeText("\xEF\xBB\xBFtime"), "time"); }

TEST(TextEncoding, ReadsUtf16ByItsMark) {
  EXPECT_EQ(decodeText(std::string("\xFF\xFE", 2) + utf16("time,tank", false)), "time,tank");
  EXPECT_EQ(decodeText(std::string("\xFE\xFF", 2) + utf16("time,tank", true)), "time,tank");
  EXPECT_EQ(decodeText(std::string("\xFF\xFE\x3D\xD8\x00\xDE", 6)), "\xF0\x9F\x98\x80");  // U+1F600
  EXPECT_EQ(decodeText(std::string("\xFF\xFE\x00\xD8", 4)), "\xEF\xBF\xBD");
}

TEST(TextEncoding, ReadsUtf16WithoutAMark) {
  EXPECT_EQ(decodeText(utf16("time,tank,ph\n", false)), "time,tank,ph\n");
  EXPECT_EQ(decodeText(utf16("time,tank,ph\n", true)), "time,tank,ph\n");
}

TEST(TextEncoding, TakesBytesThatAreNoUtf8AsWindows1252) {
  EXPECT_EQ(decodeText("\xB0" "C"), kDegree);
  EXPECT_EQ(decodeText("\x80 \x96"), "\xE2\x82\xAC \xE2\x80\x93");
  EXPECT_EQ(decodeText(kDegree), kDegree);
}

TEST(TextEncoding, FollowsAHintWhereTheBytesAreSilent) {
  EXPECT_EQ(decodeText("\xC2\xB0", "Latin-1"), "\xC3\x82\xC2\xB0");
  EXPECT_EQ(decodeText("\xB0" "C", "utf-8"), "\xEF\xBF\xBD" "C");
  EXPECT_EQ(decodeText("\xEF\xBB\xBF\xC2\xB0", "latin1"), "\xC2\xB0");
}

TEST(TextEncoding, KnowsWellFormedUtf8) {
  EXPECT_TRUE(isUtf8("a\xC2\xB0\xE2\x82\xAC\xF0\x9F\x98\x80"));
  for (const char* bad : {"\x80", "\xC0\x80", "\xC2", "\xE0\x80\x80", "\xED\xA0\x80", "\xF4\x90\x80\x80", "\xFF"}) {
    EXPECT_FALSE(isUtf8(bad));
    EXPECT_TRUE(isUtf8(decodeText(bad)));
  }
}
