// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/liquor.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>

#include "monitor/pipeline/report_json.hpp"
#include "tests/monitor/support/temp_shop.hpp"

namespace tw::monitor {
namespace {

using test::at;

class Liquor : public testing::Test {
 protected:
  Liquor() : m_plant(m_shop.plant()), m_setup(*m_plant.tank("T1")) {
    put("copper", 22.0, "2026-03-02T06:00:00Z");
    put("ammonia", 85.0, "2026-03-02T06:00:00Z");
    put("ph", 10.2, "2026-03-02T06:00:00Z");
    put("temperature", 40.0, "2026-03-02T06:00:00Z");
  }
  void put(const std::string& channel, double value, const std::string& time) {
    io::Reading row;
    row.id = static_cast<std::int64_t>(m_newest.size()) + 1;
    row.tank = "T1";
    row.channel = channel;
    row.sampledAt.at = at(time);
    row.value = *io::toCanonical(*m_setup.recipe.channel(channel), value);
    m_newest[channel] = row;
  }
  LiquorPick pick(const std::string& time) const { return pickLiquor(m_setup, m_newest, at(time)); }

  test::TempShop m_shop;
  Plant m_plant;
  const TankSetup& m_setup;
  std::map<std::string, io::Reading> m_newest;
};

TEST_F(Liquor, TakesEachChannelUpToItsOwnAge) {
  EXPECT_TRUE(pick("2026-03-02T16:00:00Z").complete());  // pH: 10 h
  const LiquorPick late = pick("2026-03-02T16:00:01Z");
  ASSERT_EQ(late.lacking.size(), 2U);
  EXPECT_EQ(late.lacking[0].channel, "ph");
  EXPECT_TRUE(late.lacking[0].tooOld);
}

TEST_F(Liquor, SaysWhichChannelWasNeverMeasured) {
  m_newest.erase("ammonia");
  const LiquorPick lacking = pick("2026-03-02T07:00:00Z");
  ASSERT_EQ(lacking.lacking.size(), 1U);
  EXPECT_EQ(lacking.lacking[0].channel, "ammonia");
  EXPECT_FALSE(lacking.lacking[0].tooOld);
}

TEST_F(Liquor, GivesARowThatReadsBackAsItWasSolved) {
  const auto row = solveLiquor(m_setup, pick("2026-03-02T06:00:00Z"), at("2026-03-02T06:01:00Z"));
  ASSERT_TRUE(row) << row.error().detail;
  EXPECT_EQ(row->condition, "fine");
  EXPECT_EQ(row->recipeSha256, m_setup.recipe.resolvedSha256);
  EXPECT_THAT(row->readings, testing::ElementsAre(1, 2, 3, 4));
  const auto values = readValues(row->values);
  EXPECT_NEAR(values.at("copper"), 22.0, 1e-9);
  // mole ratio: 85 / 17.031 over 22 / 63.546
  EXPECT_NEAR(values.at("ammonia-to-copper"), 85.0 / 17.031 / (22.0 / 63.546), 1e-3);

  const auto stored = readReport(row->json);
  ASSERT_TRUE(stored) << stored.error().detail;
  const auto again = model::judge(m_setup.recipe.system, stored->report, m_setup.recipe.limits,
                                  guardsOf(m_setup.recipe, values));
  EXPECT_EQ(model::name(again.condition), row->condition);
  for (const auto& view : marginViews(*stored, m_setup.recipe.limits)) {
    EXPECT_DOUBLE_EQ(view.judged, row->margins.at(view.id)) << view.id;
  }
  EXPECT_FALSE(row->margins.empty());
  EXPECT_EQ(stored->report.solids.size(), 2U);
}

TEST_F(Liquor, IsAsHighAsTheBedStandsAtTarget) {
  const auto row = solveLiquor(m_setup, pick("2026-03-02T06:00:00Z"), at("2026-03-02T06:01:00Z"));
  ASSERT_TRUE(row);
  ASSERT_TRUE(row->bed);
  EXPECT_NEAR(*row->bed, 0.1, 0.02);  // DESIGN section 5: 0.1 at target composition
}

TEST_F(Liquor, TurnsWorseAsTheLigandGoes) {
  put("ammonia", 25.0, "2026-03-02T06:00:00Z");
  const auto row = solveLiquor(m_setup, pick("2026-03-02T06:00:00Z"), at("2026-03-02T06:01:00Z"));
  ASSERT_TRUE(row) << row.error().detail;
  EXPECT_NE(row->condition, "fine");
}

TEST_F(Liquor, HandsUpTheFaultOfALiquorThatCannotBe) {
  put("copper", -5.0, "2026-03-02T06:00:00Z");
  const auto row = solveLiquor(m_setup, pick("2026-03-02T06:00:00Z"), at("2026-03-02T06:01:00Z"));
  ASSERT_FALSE(row);
  EXPECT_EQ(row.error().code, "negative_total");
}

}  // namespace
}  // namespace tw::monitor
