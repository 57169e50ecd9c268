// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/table.hpp"

#include <algorithm>
#include <optional>
#include <utility>

#include "io/drop/batch_builder.hpp"
#include "io/drop/dialect.hpp"
#include "io/drop/json_lines.hpp"
#include "io/drop/rows.hpp"
#include "io/drop/text_encoding.hpp"
#include "io/time_text.hpp"

namespace tw::io {
namespace {

/// Walks the rows of data of a table; a header that is repeated, or another one further down, is
/// followed on the way.
class TableWalk {
 public:
  TableWalk(std::string_view text, const Dialect& dialect)
      : m_rows(text, dialect.separator), m_header(dialect.header), m_headerLine(dialect.headerLine) {}

  /// The next row of data or of the block before the header. False at the end.
  bool next(Row& row) {
    while (m_rows.next(row)) {
      if (row.blank || row.comment) continue;
      if (row.line == 1 && separatorLine(row.raw)) continue;
      if (row.line <= m_headerLine) {
        m_newHeader = row.line == m_headerLine;
        if (!m_newHeader) return true;
        continue;
      }
      if (!mayBeHeader(row)) return true;
      auto header = readHeader(row.cells);
      if (!header) return true;
      m_header = std::move(*header);
      m_headerLine = row.line;
      m_newHeader = true;
    }
    return false;
  }

  [[nodiscard]] const Header& header() const { return m_header; }
  [[nodiscard]] int headerLine() const { return m_headerLine; }
  [[nodiscard]] bool beforeHeader(const Row& row) const { return row.line < m_headerLine; }
  /// True once for each header met.
  bool takeNewHeader() { return std::exchange(m_newHeader, false); }

 private:
  /// Cheap: a data row has digits in its time column.
  [[nodiscard]] bool mayBeHeader(const Row& row) const {
    if (row.badQuote) return false;
    for (const std::string_view cell : row.cells) {
      if (!cell.empty() && cell.front() >= '0' && cell.front() <= '9') return false;
    }
    return true;
  }

  RowReader m_rows;
  Header m_header;
  int m_headerLine;
  bool m_newHeader = false;
};

bool isNumberField(Field field) {
  return field == Field::Reading || field == Field::Input || field == Field::Value ||
         field == Field::Amount;
}

/// What the whole file shows, before any cell is read.
struct Evidence {
  DecimalEvidence decimal;
  std::size_t dayFirst = 0, monthFirst = 0;
  std::size_t values = 0;  ///< cells that may become readings

  [[nodiscard]] std::string dateOrder(const std::string& hint) const {
    if (dayFirst > 0 && monthFirst == 0) return "dmy";
    if (monthFirst > 0 && dayFirst == 0) return "mdy";
    return hint;
  }
};

Evidence gather(std::string_view text, const Dialect& dialect) {
  Evidence evidence;
  TableWalk walk(text, dialect);
  Row row;
  while (walk.next(row)) {
    if (walk.beforeHeader(row) || row.badQuote) continue;
    const auto& columns = walk.header().columns;
    for (std::size_t i = 0; i < row.cells.size() && i < columns.size(); ++i) {
      if (isNumberField(columns[i].field)) {
        evidence.decimal.add(row.cells[i]);
        evidence.values += row.cells[i].empty() ? 0 : 1;
      }
      const bool otherDate = columns[i].field == Field::Time && row.cells[i].size() > 4 &&
                             row.cells[i][4] != '-';
      if (!otherDate) continue;
      const auto fields = readTimeFields(row.cells[i]);
      if (!fields) continue;
      const DateOrder order = orderShownBy(fields->date);
      evidence.dayFirst += order == DateOrder::DayFirst ? 1 : 0;
      evidence.monthFirst += order == DateOrder::MonthFirst ? 1 : 0;
    }
  }
  return evidence;
}

class TableReader {
 public:
  TableReader(std::string_view text, const Dialect& dialect, const TableHints& hints, BatchBuilder& out)
      : m_walk(text, dialect), m_out(out) {
    const Evidence evidence = gather(text, dialect);
    m_decimal = evidence.decimal.decide(hints.decimal);
    m_out.expect(evidence.values);
    m_out.setDateOrder(evidence.dateOrder(hints.dateOrder));
  }

  void read() {
    Row row;
    while (m_walk.next(row)) {
      if (m_walk.takeNewHeader() && !useHeader()) return;
      if (m_walk.beforeHeader(row)) {
        m_out.refuse(row.line, {}, row.raw, "before_header", "stands before the header line");
      } else if (row.badQuote) {
        m_out.refuse(row.line, {}, row.raw, "quote_unclosed", "a quoted cell does not end as it should");
      } else if (fits(row)) {
        readRow(row);
      }
    }
    // A header without any row still has columns to refuse.
    if (m_walk.takeNewHeader()) useHeader();
  }

 private:
  /// Positions and units of a header; false when the whole file must be refused.
  bool useHeader() {
    const Header& header = m_walk.header();
    m_time = header.find(Field::Time), m_tank = header.find(Field::Tank);
    m_op = header.find(Field::Operator), m_source = header.find(Field::Source);
    for (const Column& column : header.columns) {
      if (column.field == Field::Unknown) {
        m_out.refuse(m_walk.headerLine(), column.written, {}, "column_unknown",
                     "no field of this name; the column was not read");
      } else if (column.field == Field::Twice) {
        m_out.refuse(m_walk.headerLine(), column.written, {}, "column_twice",
                     "this column stands further left already; it was not read");
      }
    }
    return useZone(header.timeUnit);
  }

  bool useZone(const std::string& name) {
    m_zone.reset();
    if (name.empty()) {
      m_out.setZone(nullptr);
      return true;
    }
    const std::string lower = lowerCase(name);
    auto zone = TimeZone::named(lower == "utc" || lower == "z" || lower == "gmt" ? "Etc/UTC" : name);
    if (!zone) {
      m_out.refuseFile(m_walk.headerLine(), name, "the time column names an unknown time zone");
      return false;
    }
    m_zone = std::move(*zone);
    m_out.setZone(&*m_zone);
    return true;
  }

  /// Cells beyond the header mean that cells have shifted (often an unquoted decimal comma).
  bool fits(const Row& row) {
    for (std::size_t i = m_walk.header().columns.size(); i < row.cells.size(); ++i) {
      if (row.cells[i].empty()) continue;
      m_out.refuse(row.line, {}, row.raw, "too_many_cells", "the row has more cells than the header");
      return false;
    }
    return true;
  }

  static std::string_view at(const Row& row, std::optional<std::size_t> i) {
    return i && *i < row.cells.size() ? row.cells[*i] : std::string_view{};
  }
  [[nodiscard]] std::string_view cell(const Row& row, Field field) const {
    return at(row, m_walk.header().find(field));
  }
  [[nodiscard]] RowHead head(const Row& row) const {
    const auto& columns = m_walk.header().columns;
    return {row.line,         at(row, m_time), at(row, m_tank), at(row, m_op),
            at(row, m_source), columns[*m_time].written, columns[*m_tank].written};
  }

  void readRow(const Row& row) {
    switch (m_walk.header().shape) {
      case TableShape::Wide: return readWide(row);
      case TableShape::Long: return readLong(row);
      case TableShape::Events: break;
    }
    m_out.addEvent(head(row),
                   {cell(row, Field::Event), cell(row, Field::Stock), cell(row, Field::Amount),
                    unitOf(row, Field::Amount), cell(row, Field::Lot), cell(row, Field::Note)},
                   m_decimal);
  }

  void readWide(const Row& row) {
    if (!m_out.beginRow(head(row))) return;
    const auto& columns = m_walk.header().columns;
    for (std::size_t i = 0; i < row.cells.size() && i < columns.size(); ++i) {
      const Column& column = columns[i];
      if (column.field == Field::Reading || column.field == Field::Input) {
        m_out.addCell({column.written, column.channel, column.input, column.unit, row.cells[i]},
                      m_decimal);
      } else if (column.field == Field::Nameless && !row.cells[i].empty()) {
        m_out.refuse(row.line, {}, row.cells[i], "column_unknown", "the column has no name");
      }
    }
    m_out.endRow();
  }

  /// The unit cell of the row, else the unit in the header of `field`.
  [[nodiscard]] std::string_view unitOf(const Row& row, Field field) const {
    const std::string_view own = cell(row, Field::Unit);
    const auto column = m_walk.header().find(field);
    return own.empty() && column ? std::string_view(m_walk.header().columns[*column].unit) : own;
  }

  void readLong(const Row& row) {
    const std::string_view channelText = cell(row, Field::Channel);
    ColumnName name;
    std::string_view channel = channelText;
    if (channelText.find('.') != std::string_view::npos) {
      name = readColumnName(channelText);
      if (!name.input.empty()) channel = name.channel;
    }
    LongExtras extras;
    extras.state = cell(row, Field::State);
    extras.id = cell(row, Field::Id);
    extras.supersedes = cell(row, Field::Supersedes);
    extras.reason = cell(row, Field::Reason);
    extras.received = cell(row, Field::Received);
    extras.entered = cell(row, Field::Entered);
    if (m_walk.header().find(Field::EnteredUnit)) extras.enteredUnit = cell(row, Field::EnteredUnit);
    if (!readInputsText(cell(row, Field::Inputs), row.line, extras, m_out)) return;
    const auto value = m_walk.header().find(Field::Value);
    m_out.addLong(head(row),
                  {value ? std::string_view(m_walk.header().columns[*value].written) : "inputs", channel,
                   name.input, unitOf(row, Field::Value), at(row, value)},
                  extras, m_decimal);
  }

  TableWalk m_walk;
  BatchBuilder& m_out;
  Decimal m_decimal;
  std::optional<std::size_t> m_time, m_tank, m_op, m_source;
  std::optional<TimeZone> m_zone;
};

std::string_view firstLine(std::string_view text) {
  const std::size_t begin = text.find_first_not_of("\r\n \t");
  if (begin == std::string_view::npos) return {};
  return text.substr(begin, std::min(text.find_first_of("\r\n", begin), text.size()) - begin);
}

}  // namespace

IncomingBatch parseTable(std::string_view bytes, const std::string& fileName, const TimeZone& zone,
                         const TableHints& hints) {
  BatchBuilder out("drop:" + fileName, zone);
  const std::string text = decodeText(bytes, hints.encoding);
  if (const auto dialect = findDialect(text, hints.separator)) {
    TableReader(text, *dialect, hints, out).read();
  } else if (looksLikeJson(text)) {
    out.setDateOrder(hints.dateOrder);
    readJson(text, hints.decimal, out);
  } else if (trimmed(text).empty()) {
    out.refuseFile(0, {}, "the file is empty");
  } else {
    out.refuseFile(1, firstLine(text),
                   "no header line: expected time, tank and channels, or time, tank, channel and value, "
                   "or time, tank and event");
  }
  return out.finish();
}

}  // namespace tw::io
