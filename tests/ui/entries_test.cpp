// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/line/entries.hpp"

#include <gtest/gtest.h>

#include "tests/ui/qt_environment.hpp"
#include "tests/ui/samples.hpp"

namespace tw::ui {
namespace {

struct Shop {
  Shop() : format(QLocale(QLocale::English, QLocale::UnitedKingdom)), data([] { return test::noon(); }) {
    test::needQt();
  }
  Format format;
  ShopData data;
};

std::vector<std::string> keys(const std::vector<StripEntry>& rows) {
  std::vector<std::string> all;
  for (const StripEntry& row : rows) all.push_back(row.key);
  return all;
}

TEST(NeedSomebody, IsWorstFirstAndInShopOrderWithinAWord) {
  Shop shop;
  auto away = test::copperTank("T6", "brink");
  away.inService = false;
  shop.data.setTanks({test::copperTank("T1", "fine"), test::copperTank("T2", "drifting"), test::copperTank("T3", "tight"),
                      test::copperTank("T4", "sludging"), test::copperTank("T5", "stale"), away,
                      test::copperTank("T7", "tight"), test::copperTank("T8", "brink")});
  EXPECT_EQ(keys(Entries(shop.data, shop.format).needSomebody()),
            (std::vector<std::string>{"T4", "T8", "T3", "T7", "T5", "T2"}));
}

TEST(ToAcknowledge, LeavesOutWhatSomebodyHasAnswered) {
  Shop shop;
  shop.data.setTanks({test::copperTank("T1", "brink")});
  auto answered = test::alarm(2, "T1", "margin", "ph_up", "tight");
  answered.state = "acknowledged";
  auto back = test::alarm(3, "T1", "stale", "copper", "stale");
  back.state = "returned_unacknowledged";
  shop.data.setAlarms({test::alarm(1, "T1", "margin", "ligand_loss", "brink"), answered, back});
  const auto rows = Entries(shop.data, shop.format).toAcknowledge();
  EXPECT_EQ(keys(rows), (std::vector<std::string>{"1", "3"}));
  EXPECT_EQ(rows[0].action, QStringLiteral("acknowledge"));
  EXPECT_TRUE(rows[1].detail.startsWith(QStringLiteral("back to normal")));
}

TEST(Due, SaysByHowMuchAWorkIsLate) {
  Shop shop;
  shop.data.setDue({{"T1", "Copper 1", "copper", "Copper metal", "2026-03-02T05:00:00Z", "2026-03-01T05:00:00Z", true},
                    {"T1", "Copper 1", "ph", "pH", "2026-03-02T15:30:00Z", "", false}});
  const auto rows = Entries(shop.data, shop.format).due();
  ASSERT_EQ(rows.size(), 2U);
  EXPECT_EQ(rows[0].detail, QStringLiteral("overdue by 7 h; last 1 Mar 06:00"));
  EXPECT_TRUE(rows[0].urgent);
  EXPECT_EQ(rows[1].detail, QStringLiteral("in 3 h"));
  EXPECT_FALSE(rows[1].urgent);
}

TEST(Help, ReadsAnInstrumentAndTitratesTheRest) {
  Shop shop;
  const auto tank = test::copperTank("T1", "fine");
  shop.data.setTanks({tank});
  shop.data.setDue({{"T1", "Copper 1", "ph", "pH at bath temperature", "2026-03-02T05:00:00Z", "", true}});
  EXPECT_EQ(Entries(shop.data, shop.format).helpFor(tank).text, QStringLiteral("read pH"));
  shop.data.setDue({{"T1", "Copper 1", "ammonia", "Free ammonia, as NH3", "2026-03-02T05:00:00Z", "", true}});
  EXPECT_EQ(Entries(shop.data, shop.format).helpFor(tank).text, QStringLiteral("titrate Free ammonia"));
}

TEST(Help, PrefersAnAlarmToATitrationToOpening) {
  Shop shop;
  const auto tank = test::copperTank("T1", "brink");
  shop.data.setTanks({tank});
  const Entries entries(shop.data, shop.format);
  EXPECT_EQ(entries.helpFor(tank).kind, TankHelp::Kind::OpenTank);
  shop.data.setDue({{"T1", "Copper 1", "copper", "Copper metal", "2026-03-02T05:00:00Z", "", true}});
  EXPECT_EQ(entries.helpFor(tank).kind, TankHelp::Kind::Titrate);
  EXPECT_EQ(entries.helpFor(tank).text, QStringLiteral("titrate Copper metal"));
  shop.data.setAlarms({test::alarm(9, "T1", "margin", "ligand_loss", "brink")});
  EXPECT_EQ(entries.helpFor(tank).kind, TankHelp::Kind::Acknowledge);
  EXPECT_EQ(entries.helpFor(tank).alarm, 9);
}

}  // namespace
}  // namespace tw::ui
