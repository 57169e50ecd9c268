// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/words/reasons.hpp"

#include <gtest/gtest.h>

#include "tests/ui/qt_environment.hpp"
#include "tests/ui/samples.hpp"

namespace tw::ui {
namespace {

using io::wire::ReasonView;

struct Row {
  const char* name;
  ReasonView reason;
  const char* expected;  // blanks stand for no-break spaces
};

class ReasonSentence : public ::testing::TestWithParam<Row> {};

QString plain(QString text) { return text.replace(QChar(0x00A0), QLatin1Char(' ')); }

TEST_P(ReasonSentence, SaysItInPlainWords) {
  test::needQt();
  const Format format(QLocale(QLocale::English, QLocale::UnitedKingdom));
  const auto tank = test::copperTank("T1", "brink");
  EXPECT_EQ(plain(Reasons(format).sentence(GetParam().reason, tank)).toStdString(), GetParam().expected);
}

INSTANTIATE_TEST_SUITE_P(
    Codes, ReasonSentence,
    ::testing::Values(
        Row{"forecast", {"forecast", "ligand_loss", "drifting", 0.4, 0.3, 31.4},
            "ammonia reserve falling, 31 h to the caution limit"},
        Row{"forecast_far", {"forecast", "ligand_loss", "drifting", 0.4, 0.3, 100.0},
            "ammonia reserve falling, 4 d to the caution limit"},
        Row{"forecast_soon", {"forecast", "ligand_loss", "drifting", 0.4, 0.3, 0.7},
            "ammonia reserve falling, 42 min to the caution limit"},
        Row{"margin_tight", {"margin", "ligand_loss", "tight", 0.24, 0.30, {}},
            "ammonia reserve: only 24 % left, caution limit 30 %"},
        Row{"margin_brink", {"margin", "ligand_loss", "brink", 0.12, 0.15, {}},
            "ammonia reserve: only 12 % left, act limit 15 %"},
        Row{"margin_ph", {"margin", "ph_up", "tight", 0.42, 0.60, {}},
            "pH room up: only 0.42 pH left, caution limit 0.60 pH"},
        Row{"margin_warm", {"margin", "warming", "tight", 8.0, 10.0, {}},
            "warming room: only 8.0 K left, caution limit 10.0 K"},
        Row{"guard", {"guard", "copper", "tight", 16.9, 17.0, {}}, "Copper metal 16.9 g/L, past its caution limit 17.0 g/L"},
        Row{"window_low", {"window", "copper", "", 15.0, {}, {}},
            "Copper metal 15.0 g/L, below its window 18.0\u201326.0 g/L"},
        Row{"window_high", {"window", "copper", "", 27.0, {}, {}},
            "Copper metal 27.0 g/L, above its window 18.0\u201326.0 g/L"},
        Row{"solid", {"solid", "Cu(OH)2 fresh", "sludging", 0.1, 0.0, {}}, "Cu(OH)\u2082 fresh past its sludge line"},
        Row{"stale", {"stale", "copper", "stale", {}, {}, {}}, "Copper metal older than 26 h"},
        Row{"stale_unknown", {"stale", "chloride", "stale", {}, {}, {}}, "chloride never measured"},
        Row{"link", {"link", "/dev/ttyUSB0", "", {}, {}, {}}, "nothing heard from /dev/ttyUSB0"},
        Row{"unreliable", {"unreliable", "activity_model_out_of_range", "", {}, {}, {}},
            "liquor stronger than the activity model covers"},
        Row{"unreliable_subject", {"unreliable", "interaction_missing:Cu(NH3)4^2+", "", {}, {}, {}},
            "no interaction coefficient for Cu(NH\u2083)\u2084\u00B2\u207A"}),
    [](const auto& tested) { return std::string(tested.param.name); });

TEST(Headline, OfAStaleTankNamesTheLastCompleteReading) {
  test::needQt();
  const Format format(QLocale(QLocale::English, QLocale::UnitedKingdom));
  const QDateTime now = QDateTime::fromMSecsSinceEpoch(test::noon(), Qt::UTC);
  auto tank = test::copperTank("T1", "stale");
  tank.sampledAt = "2026-02-28T05:00:00Z";
  EXPECT_EQ(Reasons(format).headline(tank, now).toStdString(), "no complete reading since 28 Feb 06:00");
}

TEST(Headline, OfAFineTankSaysHowFarItsNearestMarginIs) {
  test::needQt();
  const Format format(QLocale(QLocale::English, QLocale::UnitedKingdom));
  const auto tank = test::copperTank("T1", "fine");
  EXPECT_EQ(plain(Reasons(format).headline(tank, {})).toStdString(), "ammonia reserve 52 %, caution limit 30 %");
}

TEST(Reasons, UseTheDecimalCommaOfTheLocale) {
  test::needQt();
  const Format format(QLocale(QLocale::German, QLocale::Germany));
  EXPECT_EQ(plain(Reasons(format).marginNumber("ph_up", 0.42)).toStdString(), "0,42 pH");
}

TEST(Reasons, NearestMarginIsTheOneWithLeastRoomForItsLimit) {
  auto tank = test::copperTank("T1", "tight");
  auto roomy = test::margin("ph_up", 3.0);
  auto closest = test::margin("metal_gain", 0.35);
  auto unlimited = test::margin("dilution", 0.01);
  unlimited.limit.reset();
  tank.margins = {roomy, unlimited, closest, test::margin("ligand_loss", 0.52, "NH3")};
  ASSERT_NE(nearestMargin(tank), nullptr);
  EXPECT_EQ(nearestMargin(tank)->id, "metal_gain");
}

}  // namespace
}  // namespace tw::ui
