// SPDX-License-Identifier: GPL-3.0-or-later
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>

#include "io/wire/solve_json.hpp"

namespace tw::io::wire {
namespace {

model::ChemicalSystem sampleSystem() {
  model::ChemicalSystem system;
  system.solids.resize(2);
  system.solids[0].id = "Cu(OH)2 fresh";
  system.solids[1].id = "odd, \"quoted\"";
  return system;
}

std::vector<model::SweepPoint> samplePoints() {
  model::LiquorReport liquor;
  liquor.ph = 10.25;
  liquor.pM = 14.5;
  liquor.solids = {{"Cu(OH)2 fresh", model::SolidRole::Sludge, -2.0, 0.0},
                   {"odd, \"quoted\"", model::SolidRole::Aged, std::nullopt, 0.0}};
  std::vector<model::SweepPoint> points(3);
  points[0].x = 9.0;
  points[0].liquor = liquor;
  points[0].shares = {{"Cu^2+", 0.1 + 0.2}, {"CuOH^+", 0.5}};
  points[1].x = 9.5;
  points[2].x = 1e-7;
  points[2].liquor = liquor;
  points[2].shares = {{"Cu(NH3)4^2+", 0.75}};
  return points;
}

TEST(SweepCsv, HasTheColumnsOfTheContractAndEmptyCellsWhereThereIsNothing) {
  EXPECT_EQ(
      sweepCsv(sampleSystem(), samplePoints()),
      "x,ph,pM,lg_saturation:Cu(OH)2 fresh,\"lg_saturation:odd, \"\"quoted\"\"\",share:Cu^2+,share:CuOH^+,"
      "share:Cu(NH3)4^2+\n"
      "9,10.25,14.5,-2,,0.30000000000000004,0.5,\n"
      "9.5,,,,,,,\n"
      "1e-07,10.25,14.5,-2,,,,0.75\n");
}

TEST(SweepJson, SaysTheSame) {
  const auto json = nlohmann::json::parse(sweepJson(sampleSystem(), samplePoints()));
  ASSERT_EQ(json.size(), 3u);
  EXPECT_EQ(json[0]["x"], 9.0);
  EXPECT_EQ(json[0]["share:Cu^2+"].get<double>(), 0.1 + 0.2);
  EXPECT_EQ(json[0]["lg_saturation:Cu(OH)2 fresh"], -2.0);
  EXPECT_TRUE(json[1]["ph"].is_null());
  EXPECT_EQ(json[1].size(), json[2].size());
}

}  // namespace
}  // namespace tw::io::wire
