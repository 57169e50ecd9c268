// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/number_text.hpp"

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>

namespace tw::io {
namespace {

/// No measured value needs more characters.
constexpr std::size_t kLongestNumber = 48;
/// A mark that shows four times as often as the other decides; the fewer cells are slips of the pen.
constexpr std::size_t kClearMajority = 4;

bool isDigit(char c) { return c >= '0' && c <= '9'; }
bool isGroupMark(char c) { return c == ' ' || c == '\''; }

/// The cell in ASCII: every blank as ' ', every minus as '-', every apostrophe as '\''. Empty when it
/// holds other characters outside ASCII or is too long to be a number.
std::string toAscii(std::string_view cell) {
  std::string out;
  for (std::size_t i = 0; i < cell.size();) {
    const std::string_view rest = cell.substr(i);
    if (static_cast<unsigned char>(rest[0]) < 0x80) {
      out += rest[0] == '\t' ? ' ' : rest[0];
      i += 1;
    } else if (rest.substr(0, 2) == "\xC2\xA0") {
      out += ' ';
      i += 2;
    } else if (rest.substr(0, 3) == "\xE2\x80\xAF" || rest.substr(0, 3) == "\xE2\x80\x89") {
      out += ' ';
      i += 3;
    } else if (rest.substr(0, 3) == "\xE2\x88\x92") {
      out += '-';
      i += 3;
    } else if (rest.substr(0, 3) == "\xE2\x80\x99") {
      out += '\'';
      i += 3;
    } else {
      return "\x7f";
    }
    if (out.size() > kLongestNumber) return "\x7f";
  }
  const std::size_t first = out.find_first_not_of(' ');
  if (first == std::string::npos) return {};
  return out.substr(first, out.find_last_not_of(' ') - first + 1);
}

/// A number's text taken apart; the mantissa still has its marks.
struct Parts {
  bool negative = false;
  std::string_view mantissa, exponent;
};

bool split(std::string_view text, Parts& parts) {
  if (text.front() == '-' || text.front() == '+') {
    parts.negative = text.front() == '-';
    text.remove_prefix(1);
    while (!text.empty() && text.front() == ' ') text.remove_prefix(1);
  }
  const std::size_t end = text.find_first_of("eE");
  parts.mantissa = text.substr(0, end);
  if (end != std::string_view::npos) {
    parts.exponent = text.substr(end + 1);
    std::string_view digits = parts.exponent;
    if (!digits.empty() && (digits.front() == '-' || digits.front() == '+')) digits.remove_prefix(1);
    if (digits.empty() || digits.size() > 4 || !std::all_of(digits.begin(), digits.end(), isDigit)) {
      return false;
    }
  }
  const auto allowed = [](char c) { return isDigit(c) || isGroupMark(c) || c == '.' || c == ','; };
  return std::all_of(parts.mantissa.begin(), parts.mantissa.end(), allowed) &&
         std::any_of(parts.mantissa.begin(), parts.mantissa.end(), isDigit);
}

/// One to three digits, then groups of exactly three, all parted by `mark`.
bool isGrouped(std::string_view digits, char mark) {
  std::size_t run = 0;
  bool first = true;
  for (const char c : digits) {
    if (isDigit(c)) {
      ++run;
    } else if (c == mark && (first ? run >= 1 && run <= 3 : run == 3)) {
      first = false;
      run = 0;
    } else {
      return false;
    }
  }
  return first ? run >= 1 : run == 3;
}

/// Plain digits, or grouped by blanks or by apostrophes.
bool isInteger(std::string_view digits) {
  if (std::all_of(digits.begin(), digits.end(), isDigit)) return true;
  return isGrouped(digits, ' ') || isGrouped(digits, '\'');
}

enum class Shape {
  Bad,
  Whole,       ///< no mark
  Fraction,    ///< `decimal` is surely the decimal mark (grouping, if any, by `grouping`)
  Thousands,   ///< `grouping` surely groups; no fraction
  Either,      ///< one mark, three digits behind it: fraction or thousands
};

struct Reading {
  Shape shape = Shape::Bad;
  char decimal = '\0', grouping = '\0';
};

Reading classifyOneMark(std::string_view mantissa, char mark, bool hasExponent) {
  const char other = mark == '.' ? ',' : '.';
  if (std::count(mantissa.begin(), mantissa.end(), mark) > 1) {
    return {isGrouped(mantissa, mark) ? Shape::Thousands : Shape::Bad, other, mark};
  }
  const std::size_t at = mantissa.find(mark);
  const std::string_view whole = mantissa.substr(0, at), fraction = mantissa.substr(at + 1);
  if (!std::all_of(fraction.begin(), fraction.end(), isDigit) || !isInteger(whole)) return {};
  if (whole.empty() && fraction.empty()) return {};
  const bool couldGroup = fraction.size() == 3 && !whole.empty() && whole.size() <= 3 &&
                          whole.front() != '0' && !hasExponent;
  return {couldGroup ? Shape::Either : Shape::Fraction, mark, other};
}

Reading classify(const Parts& parts) {
  const std::string_view m = parts.mantissa;
  const std::size_t lastPoint = m.rfind('.'), lastComma = m.rfind(',');
  const bool point = lastPoint != std::string_view::npos, comma = lastComma != std::string_view::npos;
  if (!point && !comma) return {isInteger(m) ? Shape::Whole : Shape::Bad, '\0', '\0'};
  if (point != comma) return classifyOneMark(m, point ? '.' : ',', !parts.exponent.empty());
  const std::size_t at = std::max(lastPoint, lastComma);
  const char decimal = m[at], grouping = decimal == '.' ? ',' : '.';
  const std::string_view whole = m.substr(0, at), fraction = m.substr(at + 1);
  const bool good = isGrouped(whole, grouping) && std::all_of(fraction.begin(), fraction.end(), isDigit);
  return {good ? Shape::Fraction : Shape::Bad, decimal, grouping};
}

char markOf(DecimalMark mark) { return mark == DecimalMark::Comma ? ',' : '.'; }

/// Settles which mark is the decimal one under the file's decision, or says why not.
NumberKind settle(Reading& reading, Decimal decimal) {
  if (reading.shape == Shape::Bad) return NumberKind::NotANumber;
  if (reading.shape == Shape::Whole) return NumberKind::Number;
  if (decimal.mark == DecimalMark::Conflict) return NumberKind::DecimalOpen;
  const char used = markOf(decimal.mark);
  if (reading.shape != Shape::Either) {
    const bool fits = decimal.mark == DecimalMark::None || reading.decimal == used;
    return fits ? NumberKind::Number : NumberKind::WrongMark;
  }
  if (reading.decimal == used) return NumberKind::Number;
  if (!decimal.stated) return NumberKind::Ambiguous;
  std::swap(reading.decimal, reading.grouping);
  return NumberKind::Number;
}

NumberText convert(const Parts& parts, const Reading& reading) {
  NumberText number;
  if (parts.negative) number.plain += '-';
  for (const char c : parts.mantissa) {
    if (isDigit(c)) number.plain += c;
    if (c == reading.decimal) number.plain += '.';
  }
  if (!parts.exponent.empty()) {
    number.plain += 'e';
    number.plain += parts.exponent;
  }
  // from_chars takes no plus sign in front, but does so in the exponent.
  const char* end = number.plain.data() + number.plain.size();
  const auto [stop, error] = std::from_chars(number.plain.data(), end, number.value);
  if (error == std::errc::result_out_of_range || !std::isfinite(number.value)) {
    return {NumberKind::OutOfRange, 0.0, {}};
  }
  if (error != std::errc{} || stop != end) return {NumberKind::NotANumber, 0.0, {}};
  number.kind = NumberKind::Number;
  return number;
}

/// Words and signs that stand for "no value" in exports of instruments and spreadsheets.
bool saysNoValue(std::string_view text) {
  if (isDigit(text.front())) return false;
  std::string lower(text);
  std::transform(lower.begin(), lower.end(), lower.begin(),
                 [](char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c + 32) : c; });
  if (lower.front() == '#') return true;
  static constexpr std::array<std::string_view, 16> kWords = {
      "n/a", "na", "n.a.", "nd", "n.d.", "-", "--", "---", "nan", "null", "none", "err", "error", "?",
      "inf", "-inf"};
  return std::find(kWords.begin(), kWords.end(), lower) != kWords.end();
}

bool isLimit(std::string_view cell) {
  const std::size_t first = cell.find_first_not_of(" \t");
  if (first == std::string_view::npos) return false;
  const std::string_view rest = cell.substr(first);
  return rest[0] == '<' || rest[0] == '>' || rest[0] == '~' || rest.substr(0, 3) == "\xE2\x89\xA4" ||
         rest.substr(0, 3) == "\xE2\x89\xA5";
}

}  // namespace

void DecimalEvidence::add(std::string_view cell) {
  if (cell.find_first_of(".,") == std::string_view::npos) return;
  const std::string text = toAscii(cell);
  Parts parts;
  if (text.empty() || !split(text, parts)) return;
  const Reading reading = classify(parts);
  if (reading.shape != Shape::Fraction && reading.shape != Shape::Thousands) return;
  ++(reading.decimal == '.' ? m_point : m_comma);
}

Decimal DecimalEvidence::decide(const std::string& hint) const {
  const DecimalMark hinted = hint == ","   ? DecimalMark::Comma
                             : hint == "." ? DecimalMark::Point
                                           : DecimalMark::None;
  DecimalMark shown = DecimalMark::None;
  if (m_point > 0 && m_point >= kClearMajority * m_comma) {
    shown = DecimalMark::Point;
  } else if (m_comma > 0 && m_comma >= kClearMajority * m_point) {
    shown = DecimalMark::Comma;
  } else if (m_point + m_comma > 0) {
    shown = DecimalMark::Conflict;
  }
  if (shown == DecimalMark::None || shown == DecimalMark::Conflict) {
    return hinted == DecimalMark::None ? Decimal{shown, false} : Decimal{hinted, true};
  }
  return {shown, shown == hinted};
}

NumberText readNumber(std::string_view cell, Decimal decimal) {
  if (isLimit(cell)) return {NumberKind::Limit, 0.0, {}};
  const std::string text = toAscii(cell);
  if (text.empty()) return {NumberKind::Empty, 0.0, {}};
  if (saysNoValue(text)) return {NumberKind::NoValue, 0.0, {}};
  Parts parts;
  if (!split(text, parts)) return {NumberKind::NotANumber, 0.0, {}};
  Reading reading = classify(parts);
  const NumberKind kind = settle(reading, decimal);
  if (kind != NumberKind::Number) return {kind, 0.0, {}};
  return convert(parts, reading);
}

const char* numberRefusalCode(NumberKind kind) {
  switch (kind) {
    case NumberKind::NoValue: return "no_value";
    case NumberKind::Limit: return "limit_not_value";
    case NumberKind::Ambiguous: return "number_ambiguous";
    case NumberKind::DecimalOpen: return "decimal_open";
    case NumberKind::WrongMark: return "decimal_mismatch";
    case NumberKind::OutOfRange: return "number_out_of_range";
    case NumberKind::Number:
    case NumberKind::Empty:
    case NumberKind::NotANumber: break;
  }
  return "not_a_number";
}

const char* numberRefusalReason(NumberKind kind) {
  switch (kind) {
    case NumberKind::NoValue: return "says that there is no value; leave the cell empty";
    case NumberKind::Limit: return "a bound, not a value";
    case NumberKind::Ambiguous:
      return "could be thousands or a fraction; set `decimal` for this source";
    case NumberKind::DecimalOpen:
      return "this file uses decimal point and comma alike; set `decimal` for this source";
    case NumberKind::WrongMark: return "does not fit the decimal mark that the rest of the file uses";
    case NumberKind::OutOfRange: return "too large or too small for a number";
    case NumberKind::Number:
    case NumberKind::Empty:
    case NumberKind::NotANumber: break;
  }
  return "not a number";
}

std::string asJsonNumber(const NumberText& number) {
  std::string_view digits = number.plain;
  if (!digits.empty() && digits.front() == '-') digits.remove_prefix(1);
  const bool zeroLed = digits.size() > 1 && digits[0] == '0' && isDigit(digits[1]);
  const std::size_t point = digits.find('.');
  const bool bare = digits.empty() || digits.front() == '.' ||
                    (point != std::string_view::npos &&
                     (point + 1 == digits.size() || !isDigit(digits[point + 1])));
  if (!zeroLed && !bare) return number.plain;
  std::array<char, 32> buffer{};
  const auto end = std::to_chars(buffer.data(), buffer.data() + buffer.size(), number.value).ptr;
  return {buffer.data(), end};
}

}  // namespace tw::io
