// SPDX-License-Identifier: GPL-3.0-or-later
// On feasible input the solver never fails, and every balance closes to 1e-12. TW_LONG=1 runs 100 000
// liquors, TW_SEED=N starts elsewhere; the seed of a failure is printed with its liquor.
#include <gtest/gtest.h>

#include <algorithm>
#include <chrono>
#include <cstdlib>
#include <iostream>
#include <map>

#include "model/analysis.hpp"
#include "tests/property/random_liquors.hpp"
#include "tests/support/independent_solver.hpp"

namespace tw::test {
namespace {

using namespace model;

constexpr double kResidualMost = 1e-12;  // the contract's, relative to sum |nu| c
// The report carries lg activities in double: reading them back costs up to
// 6 ligands x 45 lg units x ln 10 x 1.1e-16 = 7e-14 in a species.
constexpr double kReadBack = 2e-13;

TEST(Solver, NeverFailsOnFeasibleLiquors) {
  const int count = std::getenv("TW_LONG") != nullptr ? 100000 : 5000;
  const char* given = std::getenv("TW_SEED");
  const std::uint64_t first = given != nullptr ? std::strtoull(given, nullptr, 10) : 1;
  std::cout << "seeds " << first << " to " << first + static_cast<std::uint64_t>(count) - 1 << "\n";
  int failures = 0, most = 0;
  double worst = 0.0, worstOwn = 0.0;
  std::uint64_t worstSeed = 0;
  std::map<std::string, int> cells;
  std::vector<std::uint64_t> seeds = regressionSeeds();
  for (int i = 0; i < count; ++i) seeds.push_back(first + static_cast<std::uint64_t>(i));
  for (const std::uint64_t seed : seeds) {
    RandomLiquor liquor = randomLiquor(seed);
    if (seed % 5 == 0) liquor = withOtherAsComponent(std::move(liquor));
    for (const auto& cell : liquor.cells) ++cells[cell];
    const auto report = analyse(liquor.system, liquor.input, {.margins = false});
    if (!report) {
      ++failures;
      ADD_FAILURE() << report.error().code << " " << report.error().subject << " "
                    << report.error().detail << "; " << liquor.describe();
      if (failures > 200) break;
      continue;
    }
    worstOwn = std::max(worstOwn, report->solver.residual);
    most = std::max(most, report->solver.iterations);
    EXPECT_LE(report->solver.residual, kResidualMost)
        << report->solver.residualComponent << "; " << liquor.describe();
    const double residual = independentResidual(liquor.system, liquor.input, *report);
    if (residual > worst) worst = residual, worstSeed = liquor.seed;
    EXPECT_LE(residual, kResidualMost + kReadBack) << liquor.describe();
  }
  EXPECT_EQ(failures, 0);
  std::cout << seeds.size() << " liquors, " << failures << " failures, worst residual reported " << worstOwn
            << ", recomputed " << worst << " (seed " << worstSeed << "), most iterations " << most << "\n";
  for (const auto& cell : allCells()) EXPECT_GT(cells[cell], 0) << cell;
}

}  // namespace
}  // namespace tw::test
