// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/path.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <functional>

namespace tw::test {
namespace {

using namespace model;

class Curves : public Path {
 public:
  explicit Curves(std::vector<std::function<double(double)>> curves, double feasibleUpTo = HUGE_VAL)
      : m_curves(std::move(curves)), m_feasibleUpTo(feasibleUpTo) {}
  bool at(double s, std::vector<double>& above) override {
    if (s > m_feasibleUpTo) return false;
    for (std::size_t k = 0; k < m_curves.size(); ++k) above[k] = m_curves[k](s);
    return true;
  }

 private:
  std::vector<std::function<double(double)>> m_curves;
  double m_feasibleUpTo;
};

constexpr PathRange kRange{10.0, 0.01, 0.25};

std::optional<double> crossing(std::function<double(double)> curve, double feasibleUpTo = HUGE_VAL) {
  Curves path({std::move(curve)}, feasibleUpTo);
  return firstCrossings(path, 1, kRange)[0];
}

TEST(Path, FindsAPlainCrossing) {
  EXPECT_NEAR(*crossing([](double s) { return std::expm1(s) - 3.0; }), std::log(4.0), 1e-12);
}

TEST(Path, FindsTheFirstOfTwoCrossingsCloserThanAStep) {
  // A hump that is over the line for 0.02 only, between steps of 0.25.
  const auto hump = [](double s) { return 1e-4 - (s - 3.07) * (s - 3.07); };
  EXPECT_NEAR(*crossing(hump), 3.06, 1e-9);
}

TEST(Path, HumpUnderTheLineIsNoCrossing) {
  EXPECT_FALSE(crossing([](double s) { return -1e-6 - (s - 3.07) * (s - 3.07); }));
}

TEST(Path, SeesAHumpBeforeTheFirstLongStep) {
  EXPECT_NEAR(*crossing([](double s) { return 0.001 - (s - 0.05) * (s - 0.05); }), 0.05 - std::sqrt(0.001),
              1e-9);
}

TEST(Path, FindsASteepFront) {
  EXPECT_NEAR(*crossing([](double s) { return 20.0 * std::tanh(1e4 * (s - 7.123)); }), 7.123, 1e-12);
}

TEST(Path, PastTheLineAtTheStartIsNoCrossing) {
  EXPECT_FALSE(crossing([](double s) { return 1.0 - s; }));
  EXPECT_EQ(crossing([](double s) { return s; }), 0.0);  // exactly on it
}

TEST(Path, EndsWhereNothingIsFeasible) {
  EXPECT_FALSE(crossing([](double s) { return s - 5.0; }, 4.0));
  EXPECT_NEAR(*crossing([](double s) { return s - 3.9; }, 4.0), 3.9, 1e-12);
}

TEST(Path, EachCurveHasItsOwnCrossingAndNoneForNaN) {
  Curves path({[](double s) { return s - 2.0; }, [](double) { return std::nan(""); },
               [](double s) { return s > 8.0 ? std::nan("") : s - 9.0; }, [](double s) { return s - 10.0; }});
  const auto found = firstCrossings(path, 4, kRange);
  EXPECT_NEAR(*found[0], 2.0, 1e-12);
  EXPECT_FALSE(found[1]);
  EXPECT_FALSE(found[2]);
  EXPECT_NEAR(*found[3], 10.0, 1e-12);
}

}  // namespace
}  // namespace tw::test
