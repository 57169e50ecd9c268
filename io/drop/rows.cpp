// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/rows.hpp"

#include <algorithm>

namespace tw::io {
namespace {

/// A quoted cell longer than this is a quote that was never closed.
constexpr std::size_t kLongestQuoted = 16 * 1024;

bool isBlank(char c) { return c == ' ' || c == '\t' || c == '\0' || c == '\v' || c == '\f'; }
bool endsLine(char c) { return c == '\n' || c == '\r'; }

}  // namespace

std::string_view trimmed(std::string_view text) {
  while (!text.empty()) {
    if (isBlank(text.front()) || endsLine(text.front())) {
      text.remove_prefix(1);
    } else if (text.substr(0, 2) == "\xC2\xA0") {
      text.remove_prefix(2);
    } else if (text.substr(0, 3) == "\xE2\x80\xAF") {
      text.remove_prefix(3);
    } else {
      break;
    }
  }
  while (!text.empty()) {
    if (isBlank(text.back()) || endsLine(text.back())) {
      text.remove_suffix(1);
    } else if (text.size() >= 2 && text.substr(text.size() - 2) == "\xC2\xA0") {
      text.remove_suffix(2);
    } else if (text.size() >= 3 && text.substr(text.size() - 3) == "\xE2\x80\xAF") {
      text.remove_suffix(3);
    } else {
      break;
    }
  }
  return text;
}

std::string lowerCase(std::string_view text) {
  std::string out(text);
  std::transform(out.begin(), out.end(), out.begin(),
                 [](char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c + 32) : c; });
  return out;
}

bool RowReader::atLineEnd() const { return m_at >= m_text.size() || endsLine(m_text[m_at]); }

void RowReader::skipLineEnd() {
  if (m_at >= m_text.size()) return;
  m_at += m_text.compare(m_at, 2, "\r\n") == 0 ? 2 : 1;
  ++m_line;
}

std::string_view RowReader::readPlain() {
  const std::size_t begin = m_at;
  while (m_at < m_text.size() && m_text[m_at] != m_separator && !endsLine(m_text[m_at])) ++m_at;
  return trimmed(m_text.substr(begin, m_at - begin));
}

/// At the opening quote. False, with nothing consumed for good, when the cell does not close properly.
bool RowReader::readQuoted(std::string_view& cell) {
  const std::size_t begin = ++m_at;
  bool doubled = false;
  int lines = 0;
  while (true) {
    if (m_at >= m_text.size() || m_at - begin > kLongestQuoted) return false;
    const char c = m_text[m_at];
    if (c == '"') {
      if (m_at + 1 >= m_text.size() || m_text[m_at + 1] != '"') break;
      doubled = true;
      m_at += 2;
      continue;
    }
    if (c == '\n' || (c == '\r' && (m_at + 1 >= m_text.size() || m_text[m_at + 1] != '\n'))) ++lines;
    ++m_at;
  }
  cell = m_text.substr(begin, m_at - begin);
  ++m_at;
  while (m_at < m_text.size() && m_text[m_at] == ' ') ++m_at;
  if (!atLineEnd() && m_text[m_at] != m_separator) return false;
  m_line += lines;
  if (doubled) {
    std::string& own = m_unquoted.emplace_back();
    for (std::size_t i = 0; i < cell.size(); ++i) {
      own += cell[i];
      if (cell[i] == '"') ++i;
    }
    cell = own;
  }
  cell = trimmed(cell);
  return true;
}

bool RowReader::next(Row& row) {
  if (m_at >= m_text.size()) return false;
  row.cells.clear();
  m_unquoted.clear();
  row.line = m_line;
  row.comment = row.badQuote = false;
  const std::size_t begin = m_at;
  const std::size_t lineEnd = std::min(m_text.find_first_of("\r\n", begin), m_text.size());
  row.raw = m_text.substr(begin, lineEnd - begin);
  const std::string_view start = trimmed(row.raw);
  row.comment = !start.empty() && start.front() == '#';
  while (!row.comment) {
    std::size_t ahead = m_at;
    while (ahead < m_text.size() && m_text[ahead] == ' ') ++ahead;
    if (ahead < m_text.size() && m_text[ahead] == '"') {
      m_at = ahead;
      std::string_view cell;
      if (!readQuoted(cell)) {
        row.badQuote = true;
        break;
      }
      row.cells.push_back(cell);
    } else {
      row.cells.push_back(readPlain());
    }
    if (atLineEnd()) break;
    ++m_at;
  }
  if (row.comment || row.badQuote) {
    // The line counter still stands on the row's first line unless an earlier quoted cell moved it.
    m_line = row.line;
    m_at = lineEnd;
  }
  skipLineEnd();
  row.blank = std::all_of(row.cells.begin(), row.cells.end(),
                          [](std::string_view cell) { return cell.empty(); }) &&
              !row.badQuote;
  return true;
}

}  // namespace tw::io
