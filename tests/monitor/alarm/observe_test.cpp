// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/alarm/observe.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>

#include "monitor/alarm/to_do.hpp"
#include "tests/monitor/support/temp_shop.hpp"

namespace tw::monitor {
namespace {

using test::at;

// Limits and windows below are those of baths/copper_ammine.toml: ligand_loss 0.35 / 0.20, copper 18 to 26 g/L
// with sigma_rel 0.01, pH 9.8 to 10.6 with a guard at 8.6 / 8.2.
class Observing : public testing::Test {
 protected:
  Observing() : m_plant(m_shop.plant()), m_setup(*m_plant.tank("T1")), m_relaxed(relaxed(m_setup.recipe)) {}

  /// A result with a ligand margin (fraction) and a saturation of the sludge solid.
  static StoredReport stored(double ligandLoss, double lgSaturation = -2.0) {
    StoredReport out;
    model::Margin margin;
    margin.value = 1.0;
    margin.fraction = ligandLoss;
    margin.solid = "Cu(OH)2 fresh";
    margin.ligand = "NH3";
    auto& set = out.report.margins[static_cast<std::size_t>(model::MarginKind::LigandLoss)];
    set.smallest = margin;
    set.bySolid.emplace_back("Cu(OH)2 fresh", margin);
    out.report.solids.push_back({"Cu(OH)2 fresh", model::SolidRole::Sludge, lgSaturation, 0.0});
    return out;
  }

  static const Observation* find(const std::vector<Observation>& all, const std::string& kind,
                                 const std::string& subject) {
    const auto at = std::find_if(all.begin(), all.end(), [&](const Observation& each) {
      return each.kind == kind && each.subject == subject;
    });
    return at == all.end() ? nullptr : &*at;
  }

  Observation ligandLoss(double value) const {
    const auto all = observeResult(m_setup, m_relaxed, stored(value), {});
    return *find(all, kind::kMargin, "ligand_loss");
  }
  Observation window(double copper) const {
    return *find(observeWindows(m_setup, {{"copper", copper}}), kind::kWindow, "copper");
  }
  static io::Reading reading(const std::string& channel, double value, const std::string& time) {
    io::Reading row;
    row.channel = channel;
    row.value = value;
    row.sampledAt.at = at(time);
    row.state = io::ReadingState::Accepted;
    return row;
  }

  test::TempShop m_shop;
  Plant m_plant;
  const TankSetup& m_setup;
  RelaxedLimits m_relaxed;
};

TEST_F(Observing, LetsAMarginGoFivePercentPastItsLimit) {
  EXPECT_EQ(ligandLoss(0.34).word, "tight");
  EXPECT_EQ(ligandLoss(0.36).word, "");
  EXPECT_EQ(ligandLoss(0.36).heldWord, "tight");
  EXPECT_EQ(ligandLoss(0.37).heldWord, "");  // 0.35 x 1.05 = 0.3675
}

TEST_F(Observing, TellsTheActLimitFromTheCautionLimit) {
  const Observation brink = ligandLoss(0.19);
  EXPECT_EQ(brink.word, "brink");
  EXPECT_DOUBLE_EQ(*brink.limit, 0.20);
  EXPECT_DOUBLE_EQ(*brink.value, 0.19);
  EXPECT_EQ(ligandLoss(0.205).word, "tight");
  EXPECT_EQ(ligandLoss(0.205).heldWord, "brink");  // 0.20 x 1.05 = 0.21
}

TEST_F(Observing, SaysNothingOfMarginsWhileSludgeForms) {
  const auto all = observeResult(m_setup, m_relaxed, stored(0.1, 0.3), {});
  EXPECT_EQ(find(all, kind::kMargin, "ligand_loss"), nullptr);
  const Observation* solid = find(all, kind::kSolid, "Cu(OH)2 fresh");
  ASSERT_NE(solid, nullptr);
  EXPECT_EQ(solid->word, "sludging");
}

TEST_F(Observing, HoldsSludgingUntilTheSaturationIsWellBelowTheLine) {
  const auto held = [&](double saturation) {
    const auto all = observeResult(m_setup, m_relaxed, stored(0.5, saturation), {});
    return find(all, kind::kSolid, "Cu(OH)2 fresh")->heldWord;
  };
  EXPECT_EQ(held(-0.03), "sludging");
  EXPECT_EQ(held(-0.06), "");
}

TEST_F(Observing, HoldsAWindowByOneStandardUncertainty) {
  EXPECT_EQ(window(17.9).word, "window");
  EXPECT_EQ(window(18.1).word, "");
  EXPECT_EQ(window(18.1).heldWord, "window");  // u = 0.01 x 18.1 = 0.18 g/L
  EXPECT_EQ(window(18.3).heldWord, "");
  EXPECT_EQ(window(26.1).word, "window");
  EXPECT_DOUBLE_EQ(*window(26.1).limit, 26.0);
}

TEST_F(Observing, LeavesAGuardedChannelPastItsGuardToTheGuard) {
  const std::map<std::string, double> values = {{"ph", 8.5}};
  EXPECT_EQ(find(observeWindows(m_setup, values), kind::kWindow, "ph")->word, "");
  const auto all = observeResult(m_setup, m_relaxed, stored(0.6), values);
  EXPECT_EQ(find(all, kind::kGuard, "ph")->word, "tight");
  EXPECT_EQ(find(observeWindows(m_setup, {{"ph", 9.5}}), kind::kWindow, "ph")->word, "window");
}

TEST_F(Observing, HoldsAGuardByOneStandardUncertainty) {
  // pH: sigma_abs 0.05, and 1 % of 9.8 to 10.6 is less.
  const auto held = [&](double ph) {
    return find(observeResult(m_setup, m_relaxed, stored(0.6), {{"ph", ph}}), kind::kGuard, "ph")->heldWord;
  };
  EXPECT_EQ(held(8.62), "tight");
  EXPECT_EQ(held(8.66), "");
}

TEST_F(Observing, MakesOneStaleAlarmForAShiftWithoutTitrations) {
  const io::Instant now = at("2026-03-02T12:00:00Z");
  const auto all = observeStale(m_setup, {}, now);
  ASSERT_EQ(all.size(), 1U);
  EXPECT_EQ(all[0].subject, "liquor");
  EXPECT_EQ(all[0].word, "stale");
  EXPECT_THAT(all[0].toDo, testing::HasSubstr("Copper metal"));
}

TEST_F(Observing, IsFreshUpToTheAgeLimitAndStalePastIt) {
  // copper and ammonia max_age_h 26, pH and temperature 10.
  std::map<std::string, io::Reading> newest;
  for (const char* channel : {"copper", "ammonia"}) {
    newest[channel] = reading(channel, 0.3, "2026-03-01T12:00:00Z");
  }
  for (const char* channel : {"ph", "temperature"}) {
    newest[channel] = reading(channel, 10.0, "2026-03-02T04:00:00Z");
  }
  EXPECT_EQ(observeStale(m_setup, newest, at("2026-03-02T14:00:00Z"))[0].word, "");
  const auto stale = observeStale(m_setup, newest, at("2026-03-02T14:00:01Z"));
  EXPECT_EQ(stale[0].word, "stale");
  EXPECT_THAT(stale[0].toDo, testing::HasSubstr("Temperature"));
}

TEST_F(Observing, NeverNamesAcidAsARemedy) {
  for (std::size_t i = 0; i < model::kMarginCount; ++i) {
    const std::string line = toDoForMargin(m_setup, model::name(static_cast<model::MarginKind>(i)), "NH3");
    EXPECT_FALSE(line.empty());
    EXPECT_THAT(line, testing::Not(testing::HasSubstr("acid")));
  }
}

}  // namespace
}  // namespace tw::monitor
