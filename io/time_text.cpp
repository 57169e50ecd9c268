// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/time_text.hpp"

#include <string>

namespace tw::io {
namespace {

using std::chrono::milliseconds;
using std::chrono::minutes;

bool isDigit(char c) { return c >= '0' && c <= '9'; }

/// Reads from the front of a text.
class Scanner {
 public:
  explicit Scanner(std::string_view text) : m_rest(text) {}

  [[nodiscard]] bool atEnd() const { return m_rest.empty(); }
  [[nodiscard]] char peek() const { return m_rest.empty() ? '\0' : m_rest.front(); }

  bool take(char c) {
    if (peek() != c || m_rest.empty()) return false;
    m_rest.remove_prefix(1);
    return true;
  }
  /// Either case of an ASCII word.
  bool takeWord(std::string_view lower) {
    if (m_rest.size() < lower.size()) return false;
    for (std::size_t i = 0; i < lower.size(); ++i) {
      const char c = m_rest[i];
      if ((c >= 'A' && c <= 'Z' ? static_cast<char>(c + 32) : c) != lower[i]) return false;
    }
    m_rest.remove_prefix(lower.size());
    return true;
  }
  /// Blanks, also the no-break ones (U+00A0, U+202F).
  bool skipBlanks() {
    const std::size_t before = m_rest.size();
    while (true) {
      if (peek() == ' ' || peek() == '\t') {
        m_rest.remove_prefix(1);
      } else if (m_rest.substr(0, 2) == "\xC2\xA0") {
        m_rest.remove_prefix(2);
      } else if (m_rest.substr(0, 3) == "\xE2\x80\xAF") {
        m_rest.remove_prefix(3);
      } else {
        return m_rest.size() != before;
      }
    }
  }
  /// `least` to `most` digits; the count goes to `digits`.
  std::optional<int> number(int least, int most, int* digits = nullptr) {
    int count = 0, value = 0;
    while (count < most && isDigit(peek())) {
      value = value * 10 + (peek() - '0');
      m_rest.remove_prefix(1);
      ++count;
    }
    if (digits != nullptr) *digits = count;
    if (count < least || isDigit(peek())) return std::nullopt;
    return value;
  }
  /// Digits after the point of a second, cut to milliseconds.
  std::optional<milliseconds> fraction() {
    int value = 0, count = 0;
    for (; isDigit(peek()); ++count) {
      if (count < 3) value = value * 10 + (peek() - '0');
      m_rest.remove_prefix(1);
    }
    if (count == 0) return std::nullopt;
    for (int i = count; i < 3; ++i) value *= 10;
    return milliseconds{value};
  }

 private:
  std::string_view m_rest;
};

std::optional<DateFields> readDate(Scanner& in) {
  DateFields date;
  int digits = 0;
  const auto first = in.number(1, 4, &digits);
  if (!first || digits == 3) return std::nullopt;
  date.yearFirst = digits == 4;
  const char mark = in.peek();
  if (mark != '-' && mark != '.' && mark != '/') return std::nullopt;
  in.take(mark);
  const auto second = in.number(1, 2);
  if (!second || !in.take(mark)) return std::nullopt;
  const auto third = in.number(1, date.yearFirst ? 2 : 4, &digits);
  if (!third || (!date.yearFirst && digits != 2 && digits != 4)) return std::nullopt;
  date.first = *first, date.second = *second, date.third = *third;
  if (!date.yearFirst && digits == 2) {
    date.shortYear = true;
    date.third += 2000;
  }
  return date;
}

std::optional<milliseconds> readClock(Scanner& in) {
  using namespace std::chrono;
  auto hour = in.number(1, 2);
  if (!hour || !in.take(':')) return std::nullopt;
  const auto minute = in.number(2, 2);
  if (!minute || *minute > 59) return std::nullopt;
  milliseconds tail{0};
  if (in.take(':')) {
    const auto second = in.number(2, 2);
    if (!second || *second > 60) return std::nullopt;
    tail = seconds{*second};
    if (in.take('.') || in.take(',')) {
      const auto part = in.fraction();
      if (!part) return std::nullopt;
      tail += *part;
    }
    // A leap second has no place in UTC counted without them.
    if (*second == 60) tail = milliseconds{59'999};
  }
  in.skipBlanks();
  const bool am = in.takeWord("am"), pm = !am && in.takeWord("pm");
  if (am || pm) {
    if (*hour < 1 || *hour > 12) return std::nullopt;
    *hour = *hour % 12 + (pm ? 12 : 0);
  }
  if (*hour > 23) return std::nullopt;
  return hours{*hour} + minutes{*minute} + tail;
}

/// nullopt = unreadable; an empty inner optional = none written.
std::optional<std::optional<minutes>> readOffset(Scanner& in) {
  if (in.atEnd()) return std::optional<minutes>{};
  if (in.takeWord("z")) return std::optional<minutes>{minutes{0}};
  const bool minus = in.takeWord("\xE2\x88\x92") || in.take('-');
  if (!minus && !in.take('+')) return std::nullopt;
  int digits = 0;
  auto first = in.number(2, 4, &digits);
  if (!first || digits == 3) return std::nullopt;
  int hour = *first, minute = 0;
  if (digits == 4) {
    minute = hour % 100;
    hour /= 100;
  } else if (in.take(':')) {
    const auto second = in.number(2, 2);
    if (!second) return std::nullopt;
    minute = *second;
  }
  if (hour > 23 || minute > 59) return std::nullopt;
  const minutes offset = std::chrono::hours{hour} + minutes{minute};
  return std::optional<minutes>{minus ? -offset : offset};
}

}  // namespace

std::optional<TimeFields> readTimeFields(std::string_view text) {
  Scanner in(text);
  in.skipBlanks();
  TimeFields fields;
  const auto date = readDate(in);
  if (!date) return std::nullopt;
  fields.date = *date;
  if (!in.takeWord("t") && !in.skipBlanks()) return std::nullopt;
  in.skipBlanks();
  const auto clock = readClock(in);
  if (!clock) return std::nullopt;
  fields.timeOfDay = *clock;
  in.skipBlanks();
  const auto offset = readOffset(in);
  if (!offset) return std::nullopt;
  fields.offset = *offset;
  in.skipBlanks();
  if (!in.atEnd()) return std::nullopt;
  return fields;
}

DateOrder orderShownBy(const DateFields& date) {
  if (date.yearFirst) return DateOrder::Open;
  if (date.first > 12 && date.second <= 12) return DateOrder::DayFirst;
  if (date.second > 12 && date.first <= 12) return DateOrder::MonthFirst;
  return DateOrder::Open;
}

}  // namespace tw::io
