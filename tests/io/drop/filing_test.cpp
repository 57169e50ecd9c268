// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/filing.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <string>

#include "scratch_folder.hpp"

using testing::ElementsAre;
using testing::HasSubstr;
using testing::IsEmpty;
using tw::io::fileAway;
using tw::io::Verdict;
using tw::test::ScratchFolder;

namespace {

const tw::io::Instant kNow = tw::io::parseRfc3339("2026-03-02T06:00:00.5Z")->at;
const Verdict kAllTaken{false, 3, {}};
const Verdict kOneRefused{false, 2, {{7, "ph", "n/a", "no_value", "says that there is no value"}}};
const Verdict kWhole{true, 0, {{1, "", "a,b", "header_unreadable", "no header line"}}};

class Filing : public testing::Test {
 protected:
  Filing() { EXPECT_TRUE(tw::io::prepareDropFolder(folder.path())); }
  ScratchFolder folder;
};

}  // namespace

TEST_F(Filing, MovesAFileThatWasTakenToTaken) {
  folder.write("a b.csv", "x");
  ASSERT_TRUE(fileAway(folder.path() / "a b.csv", kAllTaken, kNow));
  EXPECT_THAT(folder.names(), ElementsAre("refused", "taken"));
  EXPECT_EQ(folder.read("taken/a b.csv"), "x");
  EXPECT_THAT(folder.names("refused"), IsEmpty());
}

TEST_F(Filing, GivesAClashingNameTheUtc) {
  for (const char* text : {"1", "2", "3"}) {
    folder.write("a.csv", text);
    ASSERT_TRUE(fileAway(folder.path() / "a.csv", kAllTaken, kNow));
  }
  EXPECT_THAT(folder.names("taken"),
              ElementsAre("a.20260302T060000Z-2.csv", "a.20260302T060000Z.csv", "a.csv"));
  EXPECT_EQ(folder.read("taken/a.csv"), "1");
  EXPECT_EQ(folder.read("taken/a.20260302T060000Z-2.csv"), "3");
}

TEST_F(Filing, CopiesAFileWithRefusedCellsAndSaysWhy) {
  folder.write("a.csv", "x");
  ASSERT_TRUE(fileAway(folder.path() / "a.csv", kOneRefused, kNow));
  EXPECT_THAT(folder.names("taken"), ElementsAre("a.csv"));
  EXPECT_THAT(folder.names("refused"), ElementsAre("a.csv", "a.csv.why.txt"));
  EXPECT_EQ(folder.read("refused/a.csv"), "x");
  const std::string why = folder.read("refused/a.csv.why.txt");
  EXPECT_THAT(why, HasSubstr("a.csv: 1 not taken, 2 taken."));
  EXPECT_THAT(why, HasSubstr("line 7, column \"ph\", value \"n/a\": says that there is no value (no_value)"));
}

TEST_F(Filing, MovesAFileWithoutAHeaderToRefused) {
  folder.write("a.csv", "a,b");
  ASSERT_TRUE(fileAway(folder.path() / "a.csv", kWhole, kNow));
  EXPECT_THAT(folder.names("taken"), IsEmpty());
  EXPECT_THAT(folder.names("refused"), ElementsAre("a.csv", "a.csv.why.txt"));
  folder.write("a.csv", "c,d");
  ASSERT_TRUE(fileAway(folder.path() / "a.csv", kWhole, kNow));
  EXPECT_THAT(folder.names("refused"), ElementsAre("a.20260302T060000Z.csv", "a.20260302T060000Z.csv.why.txt",
                                                   "a.csv", "a.csv.why.txt"));
}

TEST_F(Filing, KeepsValuesOnOneLine) {
  const std::string why = tw::io::whyText("a.csv", {false, 0, {{2, "x\ny", "1\r\n2\x1b", "c", "r"}}}, kNow);
  EXPECT_THAT(why, HasSubstr("line 2, column \"x y\", value \"1  2\": r (c)\n"));
}

TEST_F(Filing, TakesTheLongestNames) {
  const std::string name = std::string(251, 'n') + ".csv";
  for (int i = 0; i < 2; ++i) {
    folder.write(name, "x");
    ASSERT_TRUE(fileAway(folder.path() / name, kOneRefused, kNow));
  }
  EXPECT_EQ(folder.names("taken").size(), 2U);
  EXPECT_EQ(folder.names("refused").size(), 4U);
}

TEST_F(Filing, FaultsWhenTheFileIsGoneOrTheFolderIs) {
  EXPECT_EQ(fileAway(folder.path() / "a.csv", kAllTaken, kNow).error().code, "filing_failed");
  std::filesystem::remove_all(folder.path());
  EXPECT_EQ(tw::io::prepareDropFolder(folder.path()).error().code, "folder_unusable");
}

TEST(DropName, IsAKnownExtensionInAnyCaseAndNothingTemporary) {
  for (const char* name : {"a.csv", "A.CSV", "b.tsv", "c.jsonl", "d.Txt", "a.b.csv", "\xC3\xA9 1.csv"}) {
    EXPECT_TRUE(tw::io::isDropName(name)) << name;
  }
  for (const char* name : {"", "a", "csv", ".csv", ".a.csv", "~a.csv", "~$a.csv", "#a.csv", "a.csv~", "a.csv.tmp",
                           "a.csv.part", "a.tmp.csv", "a.part.csv", "a.csv.why.txt", "a.xlsx", "a.json", "taken"}) {
    EXPECT_FALSE(tw::io::isDropName(name)) << name;
  }
}
