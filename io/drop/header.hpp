// SPDX-License-Identifier: GPL-3.0-or-later
// What the columns of a drop file mean, from its header line (FORMATS section 5). Pure.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace tw::io {

enum class Field {
  Nameless, Unknown, Twice,  // not read
  Time, Tank, Operator, Source,
  Reading, Input,            // wide: a channel's value, a burette input of a channel
  Channel, Value, Unit, Inputs, State, Id, Supersedes, Reason, Received, Entered, EnteredUnit,  // long
  Event, Stock, Amount, Lot, Note,                                                              // events
};

enum class TableShape { Wide, Long, Events };

struct Column {
  Field field = Field::Unknown;
  std::string written;  ///< as in the file
  std::string channel;  ///< lower case, for Reading and Input
  std::string input;    ///< as written, for Input
  std::string unit;     ///< from `name [unit]`, else empty
};

/// A name with an optional unit in square or round brackets, and a burette input behind a point.
struct ColumnName {
  std::string name;   ///< lower case, whole
  std::string unit;   ///< as written
  std::string channel, input;
};
[[nodiscard]] ColumnName readColumnName(std::string_view written);

/// The field that a lower-case name stands for in a table of this shape; Reading or Input for any other
/// name of a wide one, Unknown for any other name of the others.
[[nodiscard]] Field fieldOf(const ColumnName& name, TableShape shape);

struct Header {
  TableShape shape = TableShape::Wide;
  std::vector<Column> columns;
  std::string timeUnit;  ///< of `time [UTC]`
  /// Position of the first column of this field, or nothing.
  [[nodiscard]] std::optional<std::size_t> find(Field field) const;
};

/// nullopt when the cells are no header: it needs `time` and `tank`, and at least one of a channel, both
/// `channel` and `value` or `inputs`, or `event`.
[[nodiscard]] std::optional<Header> readHeader(const std::vector<std::string_view>& cells);

}  // namespace tw::io
