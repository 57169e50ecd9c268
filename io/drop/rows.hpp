// SPDX-License-Identifier: GPL-3.0-or-later
// Text to rows of cells (RFC 4180 quoting, any separator, any line end). Pure; borrows the text.
#pragma once

#include <cstddef>
#include <deque>
#include <string>
#include <string_view>
#include <vector>

namespace tw::io {

struct Row {
  int line = 0;                         ///< where it starts, 1-based
  std::vector<std::string_view> cells;  ///< blanks around them removed; valid until the next row
  bool blank = false;                   ///< nothing but separators and blanks
  bool comment = false;                 ///< begins with #
  bool badQuote = false;                ///< a quoted cell that does not end as RFC 4180 says
  std::string_view raw;                 ///< the row's first line
};

/// Walks a text row by row. A quoted cell may hold separators and line ends; one that never closes costs
/// its own line only: reading goes on with the next.
class RowReader {
 public:
  RowReader(std::string_view text, char separator) : m_text(text), m_separator(separator) {}
  /// False at the end of the text.
  bool next(Row& row);

 private:
  bool readQuoted(std::string_view& cell);
  std::string_view readPlain();
  void skipLineEnd();
  [[nodiscard]] bool atLineEnd() const;

  std::string_view m_text;
  char m_separator;
  std::size_t m_at = 0;
  int m_line = 1;
  std::deque<std::string> m_unquoted;  ///< cells whose doubled quotes had to be undone
};

/// Without blanks (also no-break ones) at both ends.
[[nodiscard]] std::string_view trimmed(std::string_view text);
/// ASCII letters in lower case.
[[nodiscard]] std::string lowerCase(std::string_view text);

}  // namespace tw::io
