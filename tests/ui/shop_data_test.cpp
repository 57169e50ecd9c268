// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/client/shop_data.hpp"

#include <gtest/gtest.h>

#include "tests/ui/qt_environment.hpp"
#include "tests/ui/samples.hpp"

namespace tw::ui {
namespace {

std::vector<std::string> ids(const std::vector<io::wire::TankView>& tanks) {
  std::vector<std::string> all;
  for (const auto& tank : tanks) all.push_back(tank.id);
  return all;
}

TEST(ShopData, APushedConditionNeverMovesATank) {
  test::needQt();
  ShopData data([] { return test::noon(); });
  data.setTanks({test::copperTank("T1", "fine"), test::copperTank("T2", "fine")});
  io::wire::LiveMessage message;
  message.type = "condition";
  message.condition = test::copperTank("T1", "sludging");
  data.applyLive(message);
  EXPECT_EQ(ids(data.tanks()), (std::vector<std::string>{"T1", "T2"}));
  EXPECT_EQ(data.tank("T1")->condition, "sludging");
}

TEST(ShopData, RunsOnTheClockOfTheService) {
  test::needQt();
  ShopData data([] { return test::noon() - 3'600'000; });  // this PC is an hour slow
  ShopView shop;
  shop.now = "2026-03-02T12:00:00Z";
  data.setShop(shop);
  EXPECT_EQ(data.now().toMSecsSinceEpoch(), test::noon());
}

TEST(ShopData, AnAlarmLeavesTheListWhenItIsNormal) {
  test::needQt();
  ShopData data([] { return test::noon(); });
  auto low = test::alarm(1, "T1", "stale", "copper", "stale");
  low.priority = "low";
  data.applyAlarm(low);
  data.applyAlarm(test::alarm(2, "T1", "margin", "ph_up", "brink"));
  ASSERT_EQ(data.alarms().size(), 2U);
  EXPECT_EQ(data.alarms().front().id, 2);  // high before low
  low.state = "normal";
  data.applyAlarm(low);
  ASSERT_EQ(data.alarms().size(), 1U);
  EXPECT_EQ(data.alarms().front().id, 2);
}

}  // namespace
}  // namespace tw::ui
