// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/load.hpp"

#include <gtest/gtest.h>

#include "monitor/pipeline/recipes_in_force.hpp"
#include "tests/monitor/support/temp_shop.hpp"

namespace tw::monitor {
namespace {

using test::at;

constexpr unsigned kThreads = 2;

class Load : public testing::Test {
 protected:
  Load() : m_clock("2026-03-10T06:00:00Z"), m_store(m_shop.store()) {}

  std::filesystem::path file(const std::string& name, const std::string& text) const {
    test::writeFile(m_shop.dir() / name, text);
    return m_shop.dir() / name;
  }
  LoadReport load(const std::vector<std::filesystem::path>& files) {
    auto report = loadFiles(m_shop.shop(), m_shop.recipes(), *m_store, files, m_clock, kThreads);
    EXPECT_TRUE(report) << report.error().detail;
    return *report;
  }
  std::vector<io::ResultRow> results() { return *m_store->results("T1", io::Instant{}, 0, false); }

  test::TempShop m_shop;
  test::FakeClock m_clock;
  std::unique_ptr<io::Store> m_store;
};

TEST_F(Load, SolvesEveryLiquorOnceAndIsSafeToRepeat) {
  const auto past = file("past.csv", test::wideTable(20, "2026-03-02T06:00:00Z", 60));
  const LoadReport first = load({past});
  EXPECT_EQ(first.files[0].accepted, 80U);
  EXPECT_EQ(first.solved, 20U);
  EXPECT_EQ(results().size(), 20U);
  const LoadReport second = load({past});
  EXPECT_EQ(second.files[0].accepted, 0U);
  EXPECT_EQ(second.files[0].duplicates, 80U);
  EXPECT_EQ(second.solved, 0U);
  EXPECT_EQ(results().size(), 20U);
}

TEST_F(Load, MarksAllButTheNewestResultAsHistoric) {
  load({file("past.csv", test::wideTable(5, "2026-03-02T06:00:00Z", 60))});
  const auto rows = results();
  for (const io::ResultRow& row : rows) EXPECT_EQ(row.historic, row.id != rows.back().id);
}

TEST_F(Load, NeverRaisesAnAlarm) {
  load({file("past.csv", "time,tank,copper,ammonia,ph,temperature\n2026-03-02T06:00:00Z,T1,22,20,9.9,40\n")});
  ASSERT_EQ(results().size(), 1U);
  EXPECT_NE(results()[0].condition, "fine");
  EXPECT_TRUE(m_store->alarms(true)->empty());
}

TEST_F(Load, SolvesLaterResultsAgainWhenALateReadingComes) {
  load({file("a.csv", "time,tank,copper,ammonia,ph,temperature\n2026-03-02T06:00:00Z,T1,22,85,10.2,40\n"),
        file("b.csv", "time,tank,ph,temperature\n2026-03-02T10:00:00Z,T1,10.2,40\n")});
  ASSERT_EQ(results().size(), 2U);
  const auto before = results()[1];
  load({file("c.csv", "time,tank,channel,value,unit\n2026-03-02T08:00:00Z,T1,copper,24,g/L\n")});
  ASSERT_EQ(results().size(), 3U);
  const auto after = results()[2];
  EXPECT_EQ(after.sampledAt, before.sampledAt);
  EXPECT_NE(after.id, before.id);
  EXPECT_NE(after.margins, before.margins);
}

TEST_F(Load, LeavesAnIncompleteLiquorWaitingForWhatItLacks) {
  const LoadReport lacking =
      load({file("a.csv", "time,tank,copper,ammonia,ph\n2026-03-02T06:00:00Z,T1,22,85,10.2\n")});
  EXPECT_EQ(lacking.incomplete, 1U);
  EXPECT_TRUE(results().empty());
  load({file("b.csv", "time,tank,channel,value,unit\n2026-03-02T05:00:00Z,T1,temperature,40,degC\n")});
  ASSERT_EQ(results().size(), 1U);
  EXPECT_EQ(results()[0].sampledAt, at("2026-03-02T06:00:00Z"));
}

TEST_F(Load, KeepsTheGoodCellsAndNamesTheBadOnes) {
  const LoadReport report = load({file(
      "a.csv", "time,tank,copper,ammonia,ph,temperature\n2026-03-02T06:00:00Z,T1,22,85,10.2,40\n"
               "2026-03-02T07:00:00Z,T1,2200,85,10.2,40\n")});
  EXPECT_EQ(report.files[0].accepted, 7U);
  ASSERT_EQ(report.files[0].refused.size(), 1U);
  EXPECT_EQ(report.files[0].refused[0].line, 3);
  EXPECT_EQ(report.files[0].refused[0].code, "implausible");
  EXPECT_EQ(results().size(), 2U);  // the second liquor rests on the copper of the first
}

TEST_F(Load, SaysWhichFileCannotBeRead) {
  const auto report =
      loadFiles(m_shop.shop(), m_shop.recipes(), *m_store, {m_shop.dir() / "none.csv"}, m_clock, kThreads);
  ASSERT_FALSE(report);
  EXPECT_EQ(report.error().code, "file_unreadable");
  EXPECT_EQ(report.error().kind, model::FaultKind::Machine);
}

TEST_F(Load, TakesAChangedRecipeOnlyWhenAPersonAdoptsIt) {
  auto recipes = m_shop.recipes();
  recipes.begin()->second.resolvedSha256 = std::string(64, 'b');
  const Plant changed(m_shop.shop(), recipes);
  const auto refused = registerRecipes(changed, *m_store, m_clock.now());
  ASSERT_FALSE(refused);
  EXPECT_EQ(refused.error().code, "recipe_changed");
  for (const char* tank : {"T1", "T2"}) {
    const auto adopted = adoptRecipe(changed, *m_store, tank, "mk", "new constants", m_clock.now());
    ASSERT_TRUE(adopted);
    EXPECT_TRUE(*adopted);
  }
  EXPECT_TRUE(registerRecipes(changed, *m_store, m_clock.now()));
  EXPECT_FALSE(*adoptRecipe(changed, *m_store, "T1", "mk", "again", m_clock.now()));
  // What was read before the change still has the recipe of its time.
  EXPECT_NE((*m_store->recipeInForce("T1", at("2026-03-02T06:00:00Z")))->sha256, std::string(64, 'b'));
}

}  // namespace
}  // namespace tw::monitor
