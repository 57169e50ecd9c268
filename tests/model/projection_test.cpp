// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/projection.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace tw::model {
namespace {

// Expected slope, value and standard error worked by hand from the sums of Draper & Smith, Applied
// Regression Analysis, ch. 1: x 0 2 4 6 8, y 10 8 7 5 2 gives Sxx = 40, Sxy = -38, SSE = 1.1.
const std::vector<TrendPoint> kFalling = {{0, 10}, {2, 8}, {4, 7}, {6, 5}, {8, 2}};

TEST(FitLine, MatchesTheSumsWorkedByHand) {
  const auto line = fitLine(kFalling);
  ASSERT_TRUE(line);
  EXPECT_EQ(line->points, 5);
  EXPECT_NEAR(line->slope_per_h, -38.0 / 40.0, 1e-14);
  EXPECT_NEAR(line->value, 6.4 - 0.95 * 4.0, 1e-13);
  EXPECT_NEAR(line->slopeSigma, std::sqrt(1.1 / 3.0 / 40.0), 1e-13);
}

TEST(FitLine, DoesNotMindOrderOrFarOrigin) {
  std::vector<TrendPoint> moved;
  for (auto p = kFalling.rbegin(); p != kFalling.rend(); ++p) {
    moved.push_back({p->hours + 480000.0, p->value});
  }
  const auto line = fitLine(moved);
  ASSERT_TRUE(line);
  EXPECT_NEAR(line->slope_per_h, -0.95, 1e-12);
  EXPECT_NEAR(line->value, 2.6, 1e-11);
}

TEST(FitLine, NeedsThreePointsAndTheSpanAskedFor) {
  EXPECT_FALSE(fitLine({}));
  EXPECT_FALSE(fitLine({{0, 1}, {10, 2}}));
  EXPECT_FALSE(fitLine({{0, 1}, {2, 2}, {5.9, 3}}));
  EXPECT_TRUE(fitLine({{0, 1}, {2, 2}, {6.0, 3}}));
  EXPECT_TRUE(fitLine({{0, 1}, {2, 2}, {4, 3}}, 4.0));
  EXPECT_FALSE(fitLine({{3, 1}, {3, 2}, {3, 3}}, 0.0)) << "all at one time: no slope";
}

TEST(HoursUntil, RunsDownTheLineToTheLimit) {
  EXPECT_NEAR(*hoursUntil({2.6, -0.95, 0.1, 5}, 0.7), 2.0, 1e-12);
}

TEST(HoursUntil, IsNullWhenTheLineRisesOrIsLevel) {
  EXPECT_FALSE(hoursUntil({2.0, 0.5, 0.0, 5}, 1.0));
  EXPECT_FALSE(hoursUntil({2.0, 0.0, 0.0, 5}, 1.0));
}

TEST(HoursUntil, IsNullUpToTwoStandardErrorsOfSlope) {
  EXPECT_FALSE(hoursUntil({2.0, -0.5, 0.26, 5}, 1.0));
  EXPECT_FALSE(hoursUntil({2.0, -0.5, 0.25, 5}, 1.0));
  EXPECT_TRUE(hoursUntil({2.0, -0.5, 0.24, 5}, 1.0));
}

TEST(HoursUntil, IsNullAtOrBelowTheLimit) {
  EXPECT_FALSE(hoursUntil({1.0, -0.5, 0.0, 5}, 1.0));
  EXPECT_FALSE(hoursUntil({0.5, -0.5, 0.0, 5}, 1.0));
}

}  // namespace
}  // namespace tw::model
