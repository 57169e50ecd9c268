// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/words/format.hpp"

#include <cmath>

namespace tw::ui {
namespace {

constexpr double kMinutesPerHour = 60.0;
constexpr double kHoursPerDay = 24.0;
/// Up to here a span reads better in hours ("31 h") than in days.
constexpr double kHoursShown = 72.0;

int decimalsFor(double value) {
  const double size = std::abs(value);
  if (size >= 100.0 || size == 0.0) return 0;
  if (size >= 10.0) return 1;
  if (size >= 1.0) return 2;
  return 3;
}

QChar subscript(QChar digit) { return QChar(0x2080 + digit.digitValue()); }

QChar superscript(QChar character) {
  switch (character.unicode()) {
    case '+': return QChar(0x207A);
    case '-': return QChar(0x207B);
    case '1': return QChar(0x00B9);
    case '2': return QChar(0x00B2);
    case '3': return QChar(0x00B3);
    default: return character.isDigit() ? QChar(0x2070 + character.digitValue()) : character;
  }
}

}  // namespace

QString Format::number(double value) const { return fixed(value, decimalsFor(value)); }

QString Format::fixed(double value, int decimals) const {
  QString text = m_locale.toString(value, 'f', decimals);
  text.replace(QLatin1Char('-'), QChar(0x2212));
  return text;
}

QString Format::quantity(std::optional<double> value, const std::string& unit) const {
  if (!value) return QStringLiteral("\u2013");
  if (unit == "pH") return QStringLiteral("pH\u00A0") + fixed(*value, 2);
  const QString digits = unit == "degC" || unit == "degF" ? fixed(*value, 1) : number(*value);
  const QString printed = unitText(unit);
  return printed.isEmpty() ? digits : digits + QChar(0x00A0) + printed;
}

QString Format::percent(double fraction) const {
  const double value = fraction * 100.0;
  return fixed(value, std::abs(value) < 10.0 ? 1 : 0) + QStringLiteral("\u00A0%");
}

QString Format::span(double hours) const {
  const double size = std::max(hours, 0.0);
  if (size < 1.0) return tr("%1 min").arg(fixed(std::floor(size * kMinutesPerHour), 0));
  if (size < kHoursShown) return tr("%1 h").arg(fixed(std::floor(size), 0));
  return tr("%1 d").arg(fixed(std::floor(size / kHoursPerDay), 0));
}

QString Format::age(const QDateTime& at, const QDateTime& now) const {
  if (!at.isValid()) return tr("never");
  const double hours = static_cast<double>(at.secsTo(now)) / 3600.0;
  if (hours < 1.0 / kMinutesPerHour) return tr("just now");
  return tr("%1 ago").arg(span(hours));
}

QString Format::clock(const QDateTime& at, const QDateTime& now) const {
  if (!at.isValid()) return tr("never");
  const QDateTime local = at.toLocalTime();
  const QDateTime today = now.toLocalTime();
  const QString time = m_locale.toString(local.time(), QStringLiteral("HH:mm"));
  if (local.date() == today.date()) return time;
  const bool thisYear = local.date().year() == today.date().year();
  //: day and month, Qt date format
  const QString pattern = thisYear ? tr("d MMM") : tr("d MMM yyyy");
  return m_locale.toString(local.date(), pattern) + QLatin1Char(' ') + time;
}

QString Format::clockWithOffset(const QDateTime& at) const {
  if (!at.isValid()) return tr("never");
  const QDateTime local = at.toLocalTime();
  const int minutes = local.offsetFromUtc() / 60;
  const QString offset = QStringLiteral("UTC%1%2:%3")
                             .arg(minutes < 0 ? QChar(0x2212) : QLatin1Char('+'))
                             .arg(std::abs(minutes) / 60, 2, 10, QLatin1Char('0'))
                             .arg(std::abs(minutes) % 60, 2, 10, QLatin1Char('0'));
  return m_locale.toString(local.date(), tr("d MMM yyyy")) + QLatin1Char(' ') +
         m_locale.toString(local.time(), QStringLiteral("HH:mm:ss")) + QLatin1Char(' ') + offset;
}

QDateTime instant(const std::string& rfc3339) {
  if (rfc3339.empty()) return {};
  return QDateTime::fromString(QString::fromStdString(rfc3339), Qt::ISODateWithMs).toUTC();
}

QString unitText(const std::string& unit) {
  if (unit == "degC") return QStringLiteral("\u00B0C");
  if (unit == "degF") return QStringLiteral("\u00B0F");
  if (unit == "1" || unit == "ratio") return {};
  return QString::fromStdString(unit);
}

QString formulaText(const std::string& formula) {
  const QString plain = QString::fromStdString(formula);
  const qsizetype caret = plain.indexOf(QLatin1Char('^'));
  const QString body = caret < 0 ? plain : plain.left(caret);
  QString out;
  bool counting = false;  // a digit after a letter or bracket counts what stands before it
  for (qsizetype i = 0; i < body.size(); ++i) {
    const bool opens = i > 0 && (body[i - 1].isLetter() || body[i - 1] == QLatin1Char(')'));
    counting = body[i].isDigit() && (opens || counting);
    out += counting ? subscript(body[i]) : body[i];
  }
  if (caret >= 0) {
    for (const QChar character : plain.mid(caret + 1)) out += superscript(character);
  }
  return out;
}

}  // namespace tw::ui
