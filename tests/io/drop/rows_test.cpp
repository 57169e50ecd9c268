// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/rows.hpp"

#include <gtest/gtest.h>

#include <string>
#include <vector>

using tw::io::Row;
using tw::io::RowReader;

namespace {

struct Seen {
  int line;
  std::vector<std::string> cells;
  bool badQuote = false;
  friend bool operator==(const Seen&, const Seen&) = default;
};

std::vector<Seen> rows(const std::string& text, char separator = ',') {
  std::vector<Seen> out;
  RowReader reader(text, separator);
  Row row;
  while (reader.next(row)) {
    if (row.blank || row.comment) continue;
    out.push_back({row.line, {row.cells.begin(), row.cells.end()}, row.badQuote});
  }
  return out;
}

using All = std::vector<Seen>;

}  // namespace

TEST(RowReader, SplitsLinesWithEveryLineEnd) {
  const All expected{{1, {"a", "b"}}, {2, {"c", "d"}}, {3, {"e", "f"}}};
  EXPECT_EQ(rows("a,b\nc,d\ne,f"), expected);
  EXPECT_EQ(rows("a,b\r\nc,d\r\ne,f\r\n"), expected);
  EXPECT_EQ(rows("a,b\rc,d\re,f\r"), expected);
}

TEST(RowReader, CountsBlankAndCommentLines) {
  EXPECT_EQ(rows("\n# a, \"comment\n , \na,b\n"), (All{{4, {"a", "b"}}}));
}

TEST(RowReader, UndoesQuotesAsRfc4180Says) {
  EXPECT_EQ(rows("\"a,1\",\"say \"\"no\"\"\",c\"d"), (All{{1, {"a,1", "say \"no\"", "c\"d"}}}));
  EXPECT_EQ(rows("a, \"b\" ,c"), (All{{1, {"a", "b", "c"}}}));
  EXPECT_EQ(rows("\"\",\"\""), All{});
}

TEST(RowReader, LetsAQuotedCellSpanLines) {
  EXPECT_EQ(rows("\"a\r\nb\",c\r\nd,e"), (All{{1, {"a\r\nb", "c"}}, {3, {"d", "e"}}}));
}

TEST(RowReader, LosesOnlyTheLineOfAQuoteThatNeverCloses) {
  const All seen = rows("a,\"b\nc,d\ne,f\n");
  ASSERT_EQ(seen.size(), 3U);
  EXPECT_TRUE(seen[0].badQuote);
  EXPECT_EQ(seen[1], (Seen{2, {"c", "d"}}));
  EXPECT_EQ(seen[2], (Seen{3, {"e", "f"}}));
}

TEST(RowReader, LosesOnlyTheLineOfTextBehindAQuote) {
  const All seen = rows("\"a\"x,b\nc,d\n");
  ASSERT_EQ(seen.size(), 2U);
  EXPECT_TRUE(seen[0].badQuote);
  EXPECT_EQ(seen[1], (Seen{2, {"c", "d"}}));
}

TEST(RowReader, SplitsAtTabs) {
  EXPECT_EQ(rows("a\t\t c \t\n", '\t'), (All{{1, {"a", "", "c", ""}}}));
}
