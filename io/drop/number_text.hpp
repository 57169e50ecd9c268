// SPDX-License-Identifier: GPL-3.0-or-later
// Numbers as people and instruments write them: decimal point or comma, thousands in groups, typographic
// minus and blanks. The decimal mark is decided for a whole file, never for a line. Pure.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>

namespace tw::io {

/// What separates the fraction. None: nothing in the file shows it (then a point is one). Conflict: the
/// file shows both about equally often.
enum class DecimalMark { None, Point, Comma, Conflict };

struct Decimal {
  DecimalMark mark = DecimalMark::None;
  bool stated = false;  ///< set by hand for the source, so that `1,234` may be one thousand
};

/// Counts what the number cells of a file show.
class DecimalEvidence {
 public:
  /// A cell such as 22,1 or 0,123 or 1.234,5 shows its mark; 1,234 and 17 show nothing.
  void add(std::string_view cell);
  /// The file's own evidence first (four to one, or undisputed), then `hint` ("," or "."; empty = none).
  [[nodiscard]] Decimal decide(const std::string& hint) const;

 private:
  std::size_t m_point = 0, m_comma = 0;
};

enum class NumberKind {
  Number,
  Empty,        ///< nothing but blanks: no value, not a fault
  NoValue,      ///< n/a, ND, -, #DIV/0! and the like
  Limit,        ///< <0.1, >50: a bound, not a value
  NotANumber,
  Ambiguous,    ///< 1,234: one thousand or one and a bit
  DecimalOpen,  ///< has a mark, and the file uses both
  WrongMark,    ///< has the mark that this file does not use
  OutOfRange,   ///< too large for a double
};

struct NumberText {
  NumberKind kind = NumberKind::Empty;
  double value = 0.0;
  std::string plain;  ///< digits as entered with a decimal point and no grouping, when a Number
};

/// Reads one cell. Groups of thousands by blank or apostrophe, or by the mark that is not the decimal
/// one; a leading +, an exponent, U+2212 for minus, no-break blanks (U+00A0, U+202F, U+2009) are fine.
[[nodiscard]] NumberText readNumber(std::string_view cell, Decimal decimal);

/// `code` of a refusal for everything but Number and Empty, and the reason in English.
[[nodiscard]] const char* numberRefusalCode(NumberKind kind);
[[nodiscard]] const char* numberRefusalReason(NumberKind kind);

/// `plain` as a JSON number: as it is when JSON allows that spelling, else the shortest that reads back
/// to the same value.
[[nodiscard]] std::string asJsonNumber(const NumberText& number);

}  // namespace tw::io
