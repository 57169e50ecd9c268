// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/cli/demo_shop.hpp"

#include <fmt/format.h>

#include <iterator>

namespace tw::monitor::cli {
namespace {

std::vector<ChannelStory> copperAmmine(double ammoniaLoss) {
  return {{"copper", 0.012, 0.0, "copper-sulfate", 1.0},
          {"ammonia", ammoniaLoss, 0.0, "aqua-ammonia", 1.0},
          {"ph", 0.0, 0.05, "", 1.0},
          {"temperature", 0.0, 0.8, "", 1.0}};
}

std::vector<ChannelStory> nickelCitrate(double citrateLoss) {
  return {{"nickel", 0.020, 0.0, "nickel-sulfate", 1.0},
          {"citrate", citrateLoss, 0.0, "trisodium-citrate", 1.0},
          {"ammonia", 0.030, 0.0, "aqua-ammonia", 1.0},
          {"ph", 0.0, 0.04, "", 1.0},
          {"temperature", 0.0, 0.7, "", 1.0}};
}

std::vector<ChannelStory> electrolessCopper() {
  return {{"copper", 0.30, 0.0, "copper-sulfate", 1.0},
          {"edta", 0.008, 0.0, "tetrasodium-edta", 1.0},
          {"caustic", 0.35, 0.0, "caustic-soda", 1.0},
          {"formaldehyde", 0.0, 0.08, "", 1.0},
          {"temperature", 0.0, 0.5, "", 1.0}};
}

TankStory tank(const char* id, const char* title, const char* line, const char* recipe, const char* color,
               double volume, std::vector<ChannelStory> channels) {
  TankStory story;
  story.id = id;
  story.title = title;
  story.lineId = line;
  story.recipeId = recipe;
  story.color = color;
  story.volume_L = volume;
  story.channels = std::move(channels);
  return story;
}

}  // namespace

std::vector<TankStory> demoTanks() {
  constexpr const char* kGreen = "#3f8f6b";
  constexpr const char* kDeepBlue = "#1d4e89";
  constexpr const char* kPaleBlue = "#6fa3c8";
  std::vector<TankStory> tanks;
  tanks.push_back(tank("L1-T1", "Nickel 1", "L1", "nickel-citrate-ammonia", kGreen, 600, nickelCitrate(0.010)));
  tanks.push_back(tank("L1-T2", "Nickel 2", "L1", "nickel-citrate-ammonia", kGreen, 600, nickelCitrate(0.012)));
  tanks.back().neglectedForDays = 6.0;
  tanks.back().neglectFactor = 2.3;
  tanks.push_back(
      tank("L1-T3", "Electroless copper 1", "L1", "electroless-copper-edta", kPaleBlue, 400, electrolessCopper()));
  tanks.push_back(tank("L2-T1", "Copper 1", "L2", "copper-ammine", kDeepBlue, 900, copperAmmine(0.030)));
  tanks.push_back(tank("L2-T2", "Copper 2", "L2", "copper-ammine", kDeepBlue, 900, copperAmmine(0.028)));
  tanks.back().neglectedForDays = 7.0;
  tanks.back().neglectFactor = 4.4;
  tanks.push_back(tank("L2-T3", "Copper 3", "L2", "copper-ammine", kDeepBlue, 900, copperAmmine(0.030)));
  tanks.back().silentForHours = 60.0;
  tanks.push_back(tank("L2-T4", "Copper 4", "L2", "copper-ammine", kDeepBlue, 1200, copperAmmine(0.030)));
  tanks.back().neglectedForDays = 8.6;
  tanks.back().neglectFactor = 5.5;
  tanks.push_back(tank("L2-T5", "Copper 5", "L2", "copper-ammine", kDeepBlue, 1200, copperAmmine(0.030)));
  tanks.back().inService = false;
  tanks.back().silentForHours = 24.0 * 9.0;
  return tanks;
}

std::string demoShopFile(const std::vector<TankStory>& tanks) {
  std::string text;
  const std::back_insert_iterator<std::string> out(text);
  fmt::format_to(out, R"(# An invented shop: nothing in it is a real plant, and its numbers are made up.
format = "tankward-shop/1"
title = "Invented plating shop"
data_dir = "data"
time_zone = "Europe/Berlin"
listen = "127.0.0.1:8484"
sign_in = "none"
recipes = ["baths"]
constants = "baths/constants"

[[drop]]
path = "drop"
settle_ms = 300

# A pH meter on Copper 1. Uncomment where there is one.
#[[serial]]
#port = "/dev/ttyUSB0"
#baud = 9600
#tank = "L2-T1"
#frame = "named"
#every_s = 5
)");
  std::string line;
  for (const TankStory& story : tanks) {
    if (story.lineId != line) {
      line = story.lineId;
      fmt::format_to(out, "\n[[line]]\nid = \"{}\"\ntitle = \"{}\"\n", line,
                     line == "L1" ? "Rack line 1" : "Barrel line 2");
    }
    fmt::format_to(out,
                   "\n[[line.tank]]\nid = \"{}\"\ntitle = \"{}\"\nrecipe = \"{}\"\nvolume_L = {}\n"
                   "liquor_color = \"{}\"\nin_service = {}\n",
                   story.id, story.title, story.recipeId, story.volume_L, story.color,
                   story.inService ? "true" : "false");
  }
  return text;
}

}  // namespace tw::monitor::cli
