// SPDX-License-Identifier: GPL-3.0-or-later
#include <gtest/gtest.h>

#include <chrono>
#include <cstdio>
#include <string>

#include "io/drop/table.hpp"

namespace {

std::string two(int n) { return (n < 10 ? "0" : "") + std::to_string(n); }

/// A minute a row, in UTC, decimal commas.
std::string history(int rows) {
  std::string text = "time;tank;operator;copper;ammonia;ph;temperature\n";
  for (int i = 0; i < rows; ++i) {
    text += std::to_string(2020 + i / 483'840) + '-' + two(i / 40'320 % 12 + 1) + '-' + two(i / 1440 % 28 + 1) + 'T' +
            two(i / 60 % 24) + ':' + two(i % 60) + ":00Z;L2-T4;kb;22,1;85,0;10,21;41,5\n";
  }
  return text;
}

}  // namespace

TEST(ParseTableLarge, ReadsHalfAMillionRows) {
  const tw::io::TimeZone zone = *tw::io::TimeZone::named("Europe/Paris");
  const std::string text = history(500'000);
  const auto begin = std::chrono::steady_clock::now();
  const auto batch = tw::io::parseTable(text, "x.csv", zone);
  const std::chrono::duration<double> took = std::chrono::steady_clock::now() - begin;
  EXPECT_EQ(batch.readings.size(), 2'000'000U);
  EXPECT_TRUE(batch.refused.empty());
  EXPECT_EQ(batch.readings.back().value, 41.5);
  std::printf("500 000 rows in %.2f s\n", took.count());
}
