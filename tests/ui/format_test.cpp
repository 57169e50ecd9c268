// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/words/format.hpp"

#include <gtest/gtest.h>

#include "tests/ui/qt_environment.hpp"
#include "tests/ui/samples.hpp"

namespace tw::ui {
namespace {

QString plain(QString text) { return text.replace(QChar(0x00A0), QLatin1Char(' ')); }
Format english() { return Format(QLocale(QLocale::English, QLocale::UnitedKingdom)); }
QDateTime now() { return QDateTime::fromMSecsSinceEpoch(test::noon(), Qt::UTC); }

TEST(Format, GivesDigitsBySize) {
  test::needQt();
  EXPECT_EQ(english().number(900.4), QStringLiteral("900"));
  EXPECT_EQ(english().number(22.14), QStringLiteral("22.1"));
  EXPECT_EQ(english().number(4.534), QStringLiteral("4.53"));
  EXPECT_EQ(english().number(0.4534), QStringLiteral("0.453"));
}

TEST(Format, WritesUnitsAsPrinted) {
  test::needQt();
  EXPECT_EQ(plain(english().quantity(40.0, "degC")), QStringLiteral("40.0 \u00B0C"));
  EXPECT_EQ(plain(english().quantity(10.2, "pH")), QStringLiteral("pH 10.20"));
  EXPECT_EQ(plain(english().quantity(std::nullopt, "g/L")), QStringLiteral("\u2013"));
  EXPECT_EQ(plain(english().quantity(-0.5, "g/L")), QStringLiteral("\u22120.500 g/L"));
}

TEST(Format, CountsAgeInMinutesHoursAndDays) {
  test::needQt();
  EXPECT_EQ(plain(english().age(now().addSecs(-720), now())), QStringLiteral("12 min ago"));
  EXPECT_EQ(plain(english().age(now().addSecs(-31 * 3600), now())), QStringLiteral("31 h ago"));
  EXPECT_EQ(plain(english().age(now().addDays(-5), now())), QStringLiteral("5 d ago"));
  EXPECT_EQ(english().age(now().addSecs(-5), now()), QStringLiteral("just now"));
  EXPECT_EQ(english().age(QDateTime(), now()), QStringLiteral("never"));
}

TEST(Format, ShowsLocalTimeAndTheOffsetOnDemand) {
  test::needQt();  // Europe/Berlin, an hour ahead of UTC in winter
  EXPECT_EQ(english().clock(instant("2026-03-02T05:00:00Z"), now()), QStringLiteral("06:00"));
  EXPECT_EQ(english().clock(instant("2026-03-01T05:00:00Z"), now()), QStringLiteral("1 Mar 06:00"));
  EXPECT_EQ(english().clock(instant("2025-03-01T05:00:00Z"), now()), QStringLiteral("1 Mar 2025 06:00"));
  EXPECT_EQ(english().clockWithOffset(instant("2026-03-02T05:00:00Z")),
            QStringLiteral("2 Mar 2026 06:00:00 UTC+01:00"));
}

TEST(Format, ReadsTimesWithAnyOffset) {
  EXPECT_EQ(instant("2026-03-02T07:00:00+01:00"), instant("2026-03-02T06:00:00Z"));
  EXPECT_FALSE(instant("").isValid());
  EXPECT_FALSE(instant("yesterday").isValid());
}

TEST(Format, SetsFormulasWithIndices) {
  EXPECT_EQ(formulaText("Cu(NH3)4^2+"), QStringLiteral("Cu(NH\u2083)\u2084\u00B2\u207A"));
  EXPECT_EQ(formulaText("SO4^2-"), QStringLiteral("SO\u2084\u00B2\u207B"));
  EXPECT_EQ(formulaText("Zn(OH)2 amorphous"), QStringLiteral("Zn(OH)\u2082 amorphous"));
  EXPECT_EQ(formulaText("citrate^3-"), QStringLiteral("citrate\u00B3\u207B"));
}

}  // namespace
}  // namespace tw::ui
