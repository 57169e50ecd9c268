// SPDX-License-Identifier: GPL-3.0-or-later
// The document and the router must not part: every route stands in monitor/openapi.yaml and the other way
// round.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <fstream>
#include <set>
#include <string>

#include "monitor/api/api.hpp"
#include "tests/monitor/support/temp_shop.hpp"

namespace tw::monitor {
namespace {

/// "GET /api/v1/tanks" ... of the document's `paths`; keys of two and four blanks, as the file is written.
std::set<std::string> documented() {
  std::set<std::string> found;
  std::ifstream file(std::string(TW_SOURCE_DIR) + "/monitor/openapi.yaml");
  std::string line, path;
  bool inPaths = false;
  while (std::getline(file, line)) {
    if (!line.empty() && line[0] != ' ' && line[0] != '#') inPaths = line.starts_with("paths:");
    if (!inPaths) continue;
    if (line.starts_with("  /")) path = line.substr(2, line.find(':') - 2);
    if (line.starts_with("    get:")) found.insert("GET " + path);
    if (line.starts_with("    post:")) found.insert("POST " + path);
  }
  return found;
}

TEST(OpenApi, NamesEveryRouteAndNoOther) {
  test::TempShop shop;
  test::FakeClock clock("2026-03-02T07:00:00Z");
  io::Loop loop;
  const Plant plant = shop.plant();
  const auto zone = *io::TimeZone::named("UTC");
  auto writable = shop.store();
  auto opened = io::openStore(shop.shop().dataDir, io::StoreMode::ReadOnly);
  const auto view = std::move(*opened);
  Board board(plant, clock, *view, {});
  Pipeline pipeline(loop, clock, plant, std::move(writable), {});
  const ApiContext context{plant, clock, zone, *view, board, pipeline, loop, {}, {}};
  const Router router = makeRouter(context);
  std::set<std::string> routes;
  for (const Route& route : router.routes()) routes.insert(route.method + " " + route.pattern);
  EXPECT_EQ(documented(), routes);
  EXPECT_GE(routes.size(), 17U);
}

}  // namespace
}  // namespace tw::monitor
