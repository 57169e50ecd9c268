// SPDX-License-Identifier: GPL-3.0-or-later
// Numbers, ages and times as people here write them. Pure functions; "now" and the locale are handed in.
#pragma once

#include <QCoreApplication>
#include <QDateTime>
#include <QLocale>
#include <QString>
#include <optional>
#include <string>

namespace tw::ui {

class Format {
  Q_DECLARE_TR_FUNCTIONS(Format)

 public:
  /// `now` is the service's clock, not the PC's.
  explicit Format(QLocale locale) : m_locale(std::move(locale)) {}

  [[nodiscard]] const QLocale& locale() const { return m_locale; }

  /// Digits by size: 1234, 123, 22.1, 4.53, 0.453; `ph` has two decimals.
  [[nodiscard]] QString number(double value) const;
  [[nodiscard]] QString fixed(double value, int decimals) const;
  /// "22.1 g/L"; pH as "pH 10.20"; degC written with its sign; an unknown value is an en dash.
  [[nodiscard]] QString quantity(std::optional<double> value, const std::string& unit) const;
  [[nodiscard]] QString percent(double fraction) const;
  /// "31 h", "40 min", "3.5 d": for a span that lies ahead or behind, never negative.
  [[nodiscard]] QString span(double hours) const;
  /// "12 min ago"; "never" for an invalid time.
  [[nodiscard]] QString age(const QDateTime& at, const QDateTime& now) const;
  /// Local time, the date only when it is not today: "06:00", "2 Mar 06:00", "2 Mar 2025 06:00".
  [[nodiscard]] QString clock(const QDateTime& at, const QDateTime& now) const;
  /// Local date and time with the offset from UTC, for tooltips.
  [[nodiscard]] QString clockWithOffset(const QDateTime& at) const;

 private:
  QLocale m_locale;
};

/// RFC 3339 to a UTC time; invalid for an empty or unreadable text.
[[nodiscard]] QDateTime instant(const std::string& rfc3339);
/// A unit as printed: degC -> the degree sign and C.
[[nodiscard]] QString unitText(const std::string& unit);
/// A formula with its digits and charge set as sub- and superscript: Cu(NH3)4^2+ .
[[nodiscard]] QString formulaText(const std::string& formula);

}  // namespace tw::ui
