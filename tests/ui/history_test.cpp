// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/tank/history.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "tests/ui/qt_environment.hpp"
#include "tests/ui/samples.hpp"

namespace tw::ui {
namespace {

io::wire::ResultView result(std::int64_t id, const std::string& at, double reserve) {
  io::wire::ResultView view;
  view.id = id;
  view.tank = "T1";
  view.sampledAt = at;
  view.pM = 14.0;
  view.margins = {test::margin("ligand_loss", reserve, "NH3")};
  return view;
}

io::wire::ReadingView reading(std::int64_t id, const std::string& at, double value, const std::string& state) {
  io::wire::ReadingView view;
  view.id = id;
  view.tank = "T1";
  view.channel = "copper";
  view.sampledAt = at;
  view.value = value;
  view.state = state;
  return view;
}

struct Fixture {
  Fixture() : format(QLocale(QLocale::English, QLocale::UnitedKingdom)), tank(test::copperTank("T1", "drifting")) {
    test::needQt();
    history.results = {result(1, "2026-03-01T10:00:00Z", 0.50), result(2, "2026-03-02T10:00:00Z", 0.44)};
  }
  [[nodiscard]] StripSet strips() const {
    return History(format).strips(tank, history, "ligand_loss", QDateTime::fromMSecsSinceEpoch(test::noon(), Qt::UTC));
  }
  Format format;
  io::wire::TankView tank;
  TankHistory history;
};

TEST(History, ShowsMarginMetalAndLigandToANewUser) {
  std::vector<std::string> open;
  for (const Strip& strip : Fixture().strips().strips) {
    if (!strip.folded) open.push_back(strip.id);
  }
  EXPECT_EQ(open, (std::vector<std::string>{"margin:ligand_loss", "copper", "ammonia"}));
}

TEST(History, DrawsAFractionInPercentWithItsLimits) {
  const Strip strip = Fixture().strips().strips.front();
  EXPECT_EQ(strip.unit, QStringLiteral("%"));
  ASSERT_EQ(strip.points.size(), 2U);
  EXPECT_DOUBLE_EQ(strip.points[1].value, 44.0);
  ASSERT_EQ(strip.limits.size(), 2U);
  EXPECT_DOUBLE_EQ(strip.limits[0].value, 30.0);
  EXPECT_TRUE(strip.limits[1].act);
}

TEST(History, ProjectsFromTheNewestPointOverTheHorizon) {
  Fixture fixture;
  io::wire::ProjectionView projection;
  projection.margin = "ligand_loss";
  projection.slope_per_day = -0.06;
  projection.horizon_h = 48.0;
  fixture.tank.projection = projection;
  const Strip strip = fixture.strips().strips.front();
  ASSERT_EQ(strip.projection.size(), 2U);
  EXPECT_DOUBLE_EQ(strip.projection[0].t, strip.points.back().t);
  EXPECT_DOUBLE_EQ(strip.projection[1].t - strip.projection[0].t, 48.0 * 3600.0);
  EXPECT_NEAR(strip.projection[1].value, 44.0 - 12.0, 1e-9);
}

TEST(History, BreaksTheCurveAtADump) {
  Fixture fixture;
  fixture.history.events = {{1, "T1", "dump", "2026-03-01T20:00:00Z", "", "", "MK", "", "", {}}};
  const Strip strip = fixture.strips().strips.front();
  ASSERT_EQ(strip.points.size(), 3U);
  EXPECT_TRUE(std::isnan(strip.points[1].value));
  ASSERT_EQ(fixture.strips().marks.size(), 1U);
  EXPECT_TRUE(fixture.strips().marks[0].dump);
}

TEST(History, KeepsCorrectedAndUndecidedReadingsOffTheCurve) {
  Fixture fixture;
  fixture.history.readings = {reading(1, "2026-03-01T10:00:00Z", 21.0, "accepted"),
                              reading(2, "2026-03-02T10:00:00Z", 220.0, "superseded"),
                              reading(3, "2026-03-02T10:30:00Z", 35.0, "suspicious"),
                              reading(4, "2026-03-02T11:00:00Z", 999.0, "refused")};
  for (const Strip& strip : fixture.strips().strips) {
    if (strip.id != "copper") continue;
    EXPECT_EQ(strip.points.size(), 1U);
    EXPECT_EQ(strip.hollow.size(), 1U);
    EXPECT_EQ(strip.waiting.size(), 1U);
  }
}

TEST(History, AnAlarmThatStandsReachesToNow) {
  Fixture fixture;
  fixture.history.alarms = {test::alarm(1, "T1", "margin", "ligand_loss", "brink"),
                            test::alarm(2, "T9", "margin", "ligand_loss", "brink")};
  const StripSet set = fixture.strips();
  ASSERT_EQ(set.alarms.size(), 1U);  // another tank's alarm is not ours
  EXPECT_DOUBLE_EQ(set.alarms[0].to, set.now);
}

}  // namespace
}  // namespace tw::ui
