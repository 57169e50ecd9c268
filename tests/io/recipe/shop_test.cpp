// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/shop.hpp"

#include <gtest/gtest.h>

#include "files.hpp"
#include "io/recipe/check.hpp"

namespace tw::io {
namespace {

using test::Folder;
using test::kConstants;
using test::kRecipe;
using test::lineOf;
using test::shown;
using test::with;

const char* kShop = R"(format = "tankward-shop/1"
title = "Invented shop"
data_dir = "data"
time_zone = "Europe/Paris"
listen = "127.0.0.1:8484"
sign_in = "none"
recipes = ["baths"]

[[line]]
id = "L2"
title = "Barrel line 2"

[[line.tank]]
id = "L2-T4"
title = "Copper 4"
recipe = "sample-bath"
volume_L = 800
liquor_color = "#1d4e89"

[line.tank.limits]
ph_up = { caution = 0.8, act = 0.4 }

[line.tank.balance]
drag_out_L_h = 0.4
evaporation_L_h = 1.0
copper = { electrons = 2, efficiency = 0.98 }

[[line.tank.channel]]
id = "copper"
target = 23
every_h = 12

[[line.tank.watch]]
solid = "Cu(OH)2 fresh"
threshold = 0.4
threshold_sigma = 0.1
threshold_from = "jar test 2026-03-02"

[[line.tank]]
id = "L2-T5"
recipe = "sample-bath"
in_service = false

[[drop]]
path = "drop"
settle_ms = 250
decimal = ","

[[serial]]
port = "/dev/ttyUSB0"
baud = 19200
data_bits = 7
parity = "even"
tank = "L2-T4"
frame = "columns"
columns = ["ph", "temperature"]
checksum = "xor"
every_s = 30

[[route]]
id = "day"
kind = "mail"
smtp = "smtp://127.0.0.1:2525"
from = "tankward@example.org"
to = ["a@example.org", "b@example.org"]
min_priority = "high"

[[route]]
id = "night"
kind = "webhook"
url = "http://127.0.0.1:9000/notice"
token_file = "token"
after = "day"
escalate_after_min = 30
)";

class ShopFile : public testing::Test {
 protected:
  void SetUp() override {
    m_folder.write("baths/constants/a.toml", kConstants);
    m_folder.write("baths/sample.toml", kRecipe);
  }
  std::filesystem::path write(const std::string& text) { return m_folder.write("tankward.toml", text); }
  Folder m_folder;
};

TEST_F(ShopFile, IsReadWithAllItsParts) {
  const auto shop = loadShop(write(kShop));
  ASSERT_TRUE(shop) << shown(shop.error());
  EXPECT_EQ(shop->dataDir, m_folder.path() / "data");
  EXPECT_EQ(shop->timeZone, "Europe/Paris");
  EXPECT_EQ(shop->signIn, "none");
  ASSERT_EQ(shop->lines.size(), 1u);
  ASSERT_EQ(shop->lines[0].tanks.size(), 2u);
  const Tank* tank = shop->tank("L2-T4");
  ASSERT_NE(tank, nullptr);
  EXPECT_EQ(tank->lineId, "L2");
  EXPECT_EQ(tank->volume_L, 800.0);
  EXPECT_EQ(tank->channels.at("copper").target, 23.0);
  EXPECT_EQ(tank->watch.at("Cu(OH)2 fresh").threshold, 0.4);
  EXPECT_EQ(tank->balance.at("drag_out_L_h"), 0.4);
  EXPECT_EQ(tank->balance.at("copper.electrons"), 2.0);
  EXPECT_FALSE(shop->tank("L2-T5")->inService);
  EXPECT_EQ(shop->tank("L9"), nullptr);
  ASSERT_EQ(shop->drops.size(), 1u);
  EXPECT_EQ(shop->drops[0].path, m_folder.path() / "drop");
  EXPECT_EQ(shop->drops[0].settle_ms, 250);
  ASSERT_EQ(shop->serials.size(), 1u);
  EXPECT_EQ(shop->serials[0].baud, 19200);
  EXPECT_EQ(shop->serials[0].dataBits, 7);
  EXPECT_EQ(shop->serials[0].parity, "even");
  EXPECT_EQ(shop->serials[0].frame, FrameKind::Columns);
  ASSERT_EQ(shop->routes.size(), 2u);
  EXPECT_EQ(shop->routes[0].settings.at("to"), "a@example.org\nb@example.org");
  EXPECT_EQ(shop->routes[1].after, "day");
  EXPECT_EQ(shop->routes[1].minPriority, "medium");
}

TEST_F(ShopFile, TakesItsRecipesFromItsFolders) {
  const auto shop = loadShop(write(kShop));
  ASSERT_TRUE(shop);
  const auto recipes = loadShopRecipes(*shop);
  ASSERT_TRUE(recipes) << shown(recipes.error());
  EXPECT_EQ(recipes->size(), 1u);
  EXPECT_TRUE(recipes->contains("sample-bath"));
}

TEST_F(ShopFile, ATankChangesItsRecipeById) {
  const auto shop = loadShop(write(kShop));
  ASSERT_TRUE(shop);
  const auto recipes = loadShopRecipes(*shop);
  ASSERT_TRUE(recipes);
  const Recipe& recipe = recipes->at("sample-bath");
  const Recipe own = recipeForTank(recipe, *shop->tank("L2-T4"));
  EXPECT_EQ(own.volume_L, 800.0);
  EXPECT_EQ(own.channel("copper")->target, 23.0);
  EXPECT_EQ(own.channel("copper")->low, 18.0);
  EXPECT_EQ(own.channel("copper")->every_h, 12.0);
  EXPECT_EQ(own.limits[0]->caution, 0.8);
  EXPECT_EQ(own.limits[2]->caution, 0.30);
  EXPECT_EQ(own.system.solids[0].threshold, 0.4);
  EXPECT_EQ(own.resolvedSha256, recipe.resolvedSha256);
  const Recipe plain = recipeForTank(recipe, *shop->tank("L2-T5"));
  EXPECT_EQ(plain.volume_L, 900.0);
  EXPECT_EQ(plain.channel("copper")->target, 22.0);
}

TEST_F(ShopFile, OverridesMayBeTablesNamedById) {
  const std::string text =
      with(kShop, "[[line.tank.channel]]\nid = \"copper\"", "[line.tank.channel.copper]");
  const auto shop = loadShop(write(text));
  ASSERT_TRUE(shop) << shown(shop.error());
  EXPECT_EQ(shop->tank("L2-T4")->channels.at("copper").target, 23.0);
}

TEST_F(ShopFile, ListensElsewhereOnlyWithTlsAndSignIn) {
  const auto isSafe = [&](const std::string& text) {
    const auto shop = loadShop(write(text));
    if (!shop) {
      EXPECT_EQ(shop.error()[0].code, "unsafe_listen") << shown(shop.error());
    }
    return shop.has_value();
  };
  const std::string open = with(kShop, "127.0.0.1:8484", "0.0.0.0:8484");
  const std::string tls = open + "\n[tls]\ncert = \"c.pem\"\nkey = \"k.pem\"\n";
  EXPECT_FALSE(isSafe(open));
  EXPECT_FALSE(isSafe(with(open, "sign_in = \"none\"", "sign_in = \"required\"")));
  EXPECT_FALSE(isSafe(tls));
  EXPECT_TRUE(isSafe(with(tls, "sign_in = \"none\"", "sign_in = \"required\"")));
  EXPECT_TRUE(isSafe(with(tls, "sign_in = \"none\"\n", "")));  // required is the default
  EXPECT_FALSE(isSafe(with(kShop, "127.0.0.1:8484", "127.0.0.1.example.org:8484")));
  EXPECT_FALSE(isSafe(with(kShop, "127.0.0.1:8484", "[::]:8484")));
  for (const char* own : {"127.0.0.1:0", "127.8.9.1:80", "[::1]:8484", "localhost:8484"}) {
    EXPECT_TRUE(isSafe(with(kShop, "127.0.0.1:8484", own))) << own;
  }
}

struct FaultRow {
  const char* id;
  const char* from;
  const char* to;
  const char* code;
  const char* near;
  const char* says;
};
void PrintTo(const FaultRow& row, std::ostream* out) { *out << row.id; }
class BadShop : public ShopFile, public testing::WithParamInterface<FaultRow> {};

TEST_P(BadShop, NamesFileLineValueAndExpectation) {
  const auto& row = GetParam();
  const std::string text = with(kShop, row.from, row.to);
  const auto file = write(text);
  const auto faults = checkPath(file);
  const std::string where = file.string() + ":" + std::to_string(lineOf(text, row.near));
  bool found = false;
  for (const auto& fault : faults) {
    found = found || (fault.code == row.code && fault.where == where &&
                      fault.detail.find(row.says) != std::string::npos);
  }
  EXPECT_TRUE(found) << "expected " << where << " [" << row.code << "] " << row.says << "\n" << shown(faults);
}

INSTANTIATE_TEST_SUITE_P(
    Table, BadShop,
    testing::Values(
        FaultRow{"typo", "time_zone", "timezone", "unknown_key", "timezone", "did you mean \"time_zone\"?"},
        FaultRow{"no_data_dir", "data_dir = \"data\"\n", "", "missing_key", "format", "data_dir is missing"},
        FaultRow{"zone", "Europe/Paris", "Europe Paris", "bad_time_zone", "time_zone", "Europe/Paris"},
        FaultRow{"address", "127.0.0.1:8484", "127.0.0.1", "bad_address", "listen", "address:port"},
        FaultRow{"port", ":8484", ":84840", "bad_address", "listen", "84840"},
        FaultRow{"sign_in", "\"none\"", "\"never\"", "unknown_value", "sign_in", "required, none"},
        FaultRow{"folder", "[\"baths\"]", "[\"bath\"]", "cannot_read", "recipes", "\"bath\""},
        FaultRow{"recipe", "recipe = \"sample-bath\"", "recipe = \"sampel-bath\"", "unknown_recipe",
                 "[[line.tank]]", "did you mean \"sample-bath\"?"},
        FaultRow{"color", "#1d4e89", "#1d4e8", "bad_color", "liquor_color", "#rrggbb"},
        FaultRow{"same_tank", "id = \"L2-T5\"", "id = \"L2-T4\"", "duplicate",
                 "[[line.tank]]\nid = \"L2-T4\"\nrecipe", "twice"},
        FaultRow{"limit_order", "caution = 0.8, act = 0.4", "caution = 0.4, act = 0.8", "bad_limit", "ph_up",
                 "act is 0.8"},
        FaultRow{"override_channel", "id = \"copper\"", "id = \"coper\"", "unknown_channel", "[[line.tank]]",
                 "did you mean \"copper\"?"},
        FaultRow{"override_window", "target = 23", "target = 33", "bad_window", "[[line.tank]]", "target 33"},
        FaultRow{"override_solid", "solid = \"Cu(OH)2 fresh\"", "solid = \"Cu(OH)2 frsh\"", "unknown_solid",
                 "[[line.tank]]", "Cu(OH)2 fresh"},
        FaultRow{"baud", "baud = 19200", "baud = 12345", "unknown_value", "baud", "12345"},
        FaultRow{"data_bits", "data_bits = 7", "data_bits = 9", "unknown_value", "data_bits", "5, 6, 7, 8"},
        FaultRow{"parity", "\"even\"", "\"evn\"", "unknown_value", "parity", "did you mean \"even\"?"},
        FaultRow{"serial_tank", "tank = \"L2-T4\"", "tank = \"L2-T6\"", "unknown_tank", "tank = \"L2-T6\"",
                 "L2-T4"},
        FaultRow{"columns", "columns = [\"ph\", \"temperature\"]\n", "", "missing_key", "[[serial]]",
                 "columns"},
        FaultRow{"pattern", "frame = \"columns\"", "frame = \"pattern\"", "missing_key", "[[serial]]",
                 "named group"},
        FaultRow{"decimal", "decimal = \",\"", "decimal = \";\"", "unknown_value", "decimal", "\";\""},
        FaultRow{"route_kind", "kind = \"mail\"", "kind = \"maul\"", "unknown_value", "maul",
                 "did you mean \"mail\"?"},
        FaultRow{"route_key", "url = \"http", "uri = \"http", "missing_key", "[[route]]\nid = \"night\"",
                 "url is missing"},
        FaultRow{"route_after", "after = \"day\"", "after = \"dya\"", "unknown_route", "after",
                 "did you mean \"day\"?"},
        FaultRow{"secret", "token_file = \"token\"", "token = \"abc\"", "secret_in_file",
                 "token =", "token_file"},
        FaultRow{"priority", "\"high\"", "\"urgent\"", "unknown_value", "min_priority", "high, medium, low"}),
    [](const auto& row) { return std::string(row.param.id); });

}  // namespace
}  // namespace tw::io
