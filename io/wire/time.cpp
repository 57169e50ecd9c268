// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/wire/time.hpp"

#include <fmt/format.h>

#include <string_view>

namespace tw::io {
namespace {

using std::chrono::milliseconds;
using std::chrono::minutes;

/// Takes digits and marks off the front of a text; one failure spoils the rest.
class Scanner {
 public:
  explicit Scanner(std::string_view text) : m_text(text) {}

  [[nodiscard]] bool good() const { return m_good; }
  [[nodiscard]] bool atEnd() const { return m_text.empty(); }
  [[nodiscard]] char peek() const { return m_text.empty() ? '\0' : m_text.front(); }

  int digits(std::size_t count) {
    int value = 0;
    for (std::size_t i = 0; i < count; ++i) {
      if (peek() < '0' || peek() > '9') return spoil();
      value = 10 * value + (m_text.front() - '0');
      m_text.remove_prefix(1);
    }
    return value;
  }
  void one(std::string_view allowed) {
    if (m_text.empty() || allowed.find(peek()) == std::string_view::npos) {
      spoil();
    } else {
      m_text.remove_prefix(1);
    }
  }
  /// Digits after the point, to the millisecond; finer ones are cut.
  int milliseconds() {
    int value = 0, place = 100, seen = 0;
    for (; peek() >= '0' && peek() <= '9'; m_text.remove_prefix(1), ++seen, place /= 10) {
      value += place * (m_text.front() - '0');
    }
    return seen == 0 ? spoil() : value;
  }
  int spoil() {
    m_good = false;
    m_text = {};
    return 0;
  }

 private:
  std::string_view m_text;
  bool m_good = true;
};

/// Z, or +hh:mm with hh < 24 and mm < 60.
minutes readOffset(Scanner& scan) {
  const char sign = scan.peek();
  scan.one("Zz+-");
  if (sign != '+' && sign != '-') return minutes{0};
  const int hours = scan.digits(2);
  scan.one(":");
  const int rest = scan.digits(2);
  if (hours > 23 || rest > 59) scan.spoil();
  const minutes size{60 * hours + rest};
  return sign == '-' ? -size : size;
}

}  // namespace

std::string toRfc3339(Instant at, minutes offset) {
  const auto local = at + offset;
  const auto day = std::chrono::floor<std::chrono::days>(local);
  const std::chrono::year_month_day date{day};
  const std::chrono::hh_mm_ss<milliseconds> time{local - day};
  std::string text = fmt::format("{:04}-{:02}-{:02}T{:02}:{:02}:{:02}", static_cast<int>(date.year()),
                                 static_cast<unsigned>(date.month()), static_cast<unsigned>(date.day()),
                                 time.hours().count(), time.minutes().count(), time.seconds().count());
  if (time.subseconds().count() != 0) text += fmt::format(".{:03}", time.subseconds().count());
  if (offset == minutes{0}) return text + "Z";
  const auto size = offset < minutes{0} ? -offset : offset;
  return text +
         fmt::format("{}{:02}:{:02}", offset < minutes{0} ? '-' : '+', size.count() / 60, size.count() % 60);
}

std::optional<StampedTime> parseRfc3339(const std::string& text) {
  Scanner scan(text);
  const int year = scan.digits(4);
  scan.one("-");
  const int month = scan.digits(2);
  scan.one("-");
  const int day = scan.digits(2);
  scan.one("Tt ");
  const int hour = scan.digits(2);
  scan.one(":");
  const int minute = scan.digits(2);
  scan.one(":");
  const int second = scan.digits(2);
  int fraction = 0;
  if (scan.peek() == '.') {
    scan.one(".");
    fraction = scan.milliseconds();
  }
  const minutes offset = readOffset(scan);
  const std::chrono::year_month_day date{std::chrono::year{year},
                                         std::chrono::month{static_cast<unsigned>(month)},
                                         std::chrono::day{static_cast<unsigned>(day)}};
  // A leap second (60) is a valid text; it is the instant at which the next minute begins.
  if (!scan.good() || !scan.atEnd() || !date.ok() || hour > 23 || minute > 59 || second > 60)
    return std::nullopt;
  const Instant local = std::chrono::sys_days{date} + std::chrono::hours{hour} + minutes{minute} +
                        std::chrono::seconds{second} + milliseconds{fraction};
  return StampedTime{local - offset, offset};
}

}  // namespace tw::io
