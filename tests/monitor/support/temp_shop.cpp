// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/monitor/support/temp_shop.hpp"

#include <unistd.h>

#include <cstdlib>
#include <fstream>
#include <sstream>
#include <stdexcept>
#include <thread>

#include <fmt/format.h>

#include "monitor/pipeline/recipes_in_force.hpp"

namespace tw::test {
namespace fs = std::filesystem;

io::Instant at(const std::string& rfc3339) {
  const auto time = io::parseRfc3339(rfc3339);
  if (!time) throw std::invalid_argument("no RFC 3339 time: " + rfc3339);
  return time->at;
}

TempDir::TempDir() {
  const fs::path base = fs::path(TW_BINARY_DIR) / "test-shops";
  fs::create_directories(base);
  std::string pattern = (base / "shop-XXXXXX").string();
  if (::mkdtemp(pattern.data()) == nullptr) throw std::runtime_error("no folder for the test");
  m_path = pattern;
}

TempDir::~TempDir() {
  std::error_code ignored;
  fs::remove_all(m_path, ignored);
}

void writeFile(const fs::path& file, const std::string& text) {
  std::ofstream(file, std::ios::binary) << text;
}

std::string readFile(const fs::path& file) {
  std::ostringstream text;
  text << std::ifstream(file, std::ios::binary).rdbuf();
  return text.str();
}

TempShop::TempShop(const std::string& extra, const std::string& signIn) {
  fs::create_directories(drop());
  writeFile(config(), fmt::format(R"(format = "tankward-shop/1"
title = "Test shop"
data_dir = "data"
time_zone = "Europe/Paris"
listen = "127.0.0.1:0"
sign_in = "{}"
recipes = ["{}/baths"]

[[line]]
id = "L1"
title = "Line one"
[[line.tank]]
id = "T1"
title = "Copper 1"
recipe = "copper-ammine"
[[line.tank]]
id = "T2"
title = "Copper 2"
recipe = "copper-ammine"

[[drop]]
path = "drop"
settle_ms = 50
{})", signIn, TW_SOURCE_DIR, extra));
  auto shop = io::loadShop(config());
  if (!shop) throw std::runtime_error("shop: " + shop.error().front().detail);
  m_shop = *shop;
  auto recipes = io::loadShopRecipes(m_shop);
  if (!recipes) throw std::runtime_error("recipes: " + recipes.error().front().detail);
  m_recipes = *recipes;
}

void TempShop::dropFile(const std::string& name, const std::string& text) const {
  const fs::path made = dir() / name;
  writeFile(made, text);
  fs::rename(made, drop() / name);
}

std::unique_ptr<io::Store> TempShop::store() const {
  auto opened = io::openStore(m_shop.dataDir, io::StoreMode::ReadWrite);
  if (!opened) throw std::runtime_error(opened.error().detail);
  const auto known = monitor::registerRecipes(plant(), **opened, io::Instant{});
  if (!known) throw std::runtime_error(known.error().detail);
  return std::move(*opened);
}

std::string wideTable(int rows, const std::string& first, int step_min, const std::string& tank) {
  std::string text = "time,tank,operator,copper,ammonia,ph,temperature\n";
  io::Instant time = at(first);
  for (int i = 0; i < rows; ++i) {
    text += fmt::format("{},{},mk,{:.4f},85,10.2,40\n", io::toRfc3339(time), tank, 22.0 - 1.0 * i / rows);
    time += std::chrono::minutes(step_min);
  }
  return text;
}

bool waitUntil(const std::function<bool()>& done, std::chrono::seconds patience) {
  constexpr std::chrono::milliseconds kStep{20};
  for (auto waited = std::chrono::milliseconds(0); waited < patience; waited += kStep) {
    if (done()) return true;
    std::this_thread::sleep_for(kStep);
  }
  return done();
}

}  // namespace tw::test
