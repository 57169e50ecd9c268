// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/dialect.hpp"

#include "io/drop/rows.hpp"

namespace tw::io {
namespace {

/// Lines of a title block that may stand before the header.
constexpr int kEarlyRows = 32;

std::optional<char> separatorOfHint(const std::string& hint) {
  const std::string name = lowerCase(hint);
  if (name == "tab" || name == "\\t" || name == "\t") return '\t';
  if (name == ";" || name == "semicolon") return ';';
  if (name == "," || name == "comma") return ',';
  if (name == "|" || name == "bar") return '|';
  return std::nullopt;
}

std::optional<Dialect> headerUnder(std::string_view text, char separator) {
  RowReader rows(text, separator);
  Row row;
  for (int seen = 0; seen < kEarlyRows && rows.next(row);) {
    if (row.blank || row.comment) continue;
    ++seen;
    if (auto header = readHeader(row.cells)) return Dialect{separator, std::move(*header), row.line};
  }
  return std::nullopt;
}

}  // namespace

std::optional<char> separatorLine(std::string_view line) {
  line = trimmed(line);
  if (!line.empty() && line.front() == '"' && line.back() == '"' && line.size() >= 2) {
    line = line.substr(1, line.size() - 2);
  }
  if (lowerCase(line.substr(0, 4)) != "sep=") return std::nullopt;
  // trimmed() takes a tab away.
  if (line.size() == 4) return '\t';
  if (line.size() != 5 && lowerCase(line.substr(4)) != "\\t") return std::nullopt;
  return separatorOfHint(std::string(line.substr(4)));
}

std::optional<Dialect> findDialect(std::string_view text, const std::string& hint) {
  const std::string_view first = text.substr(0, text.find_first_of("\r\n"));
  std::string candidates;
  if (const auto own = separatorLine(first)) candidates += *own;
  if (const auto hinted = separatorOfHint(hint)) candidates += *hinted;
  candidates += ";\t,|";
  std::optional<Dialect> best;
  for (const char separator : candidates) {
    auto found = headerUnder(text, separator);
    if (!found) continue;
    const bool better = !best || found->headerLine < best->headerLine ||
                        (found->headerLine == best->headerLine &&
                         found->header.columns.size() > best->header.columns.size());
    if (better) best = std::move(found);
  }
  return best;
}

}  // namespace tw::io
