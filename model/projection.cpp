// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/projection.hpp"

#include <algorithm>
#include <cmath>

namespace tw::model {
namespace {

constexpr std::size_t kFewestPoints = 3;  // two points always lie on a line: no error to judge it by
constexpr double kLevelWithinSigmas = 2.0;  // about 95 % two-sided for a slope that is really zero

}  // namespace

std::optional<StraightLine> fitLine(const std::vector<TrendPoint>& points, double minSpan_h) {
  if (points.size() < kFewestPoints) return std::nullopt;
  const auto [first, last] =
      std::minmax_element(points.begin(), points.end(),
                          [](const TrendPoint& a, const TrendPoint& b) { return a.hours < b.hours; });
  const double span_h = last->hours - first->hours;
  if (!(span_h >= minSpan_h) || !(span_h > 0.0)) return std::nullopt;

  // Sums about the means: times may count from any far origin.
  const auto n = static_cast<double>(points.size());
  double meanTime = 0.0, meanValue = 0.0;
  for (const TrendPoint& p : points) {
    meanTime += (p.hours - first->hours) / n;
    meanValue += p.value / n;
  }
  double sxx = 0.0, sxy = 0.0;
  for (const TrendPoint& p : points) {
    const double x = p.hours - first->hours - meanTime;
    sxx += x * x;
    sxy += x * (p.value - meanValue);
  }
  StraightLine line;
  line.points = static_cast<int>(points.size());
  line.slope_per_h = sxy / sxx;
  line.value = meanValue + line.slope_per_h * (span_h - meanTime);

  double residualSquares = 0.0;
  for (const TrendPoint& p : points) {
    const double x = p.hours - first->hours - meanTime;
    const double residual = p.value - meanValue - line.slope_per_h * x;
    residualSquares += residual * residual;
  }
  // Two degrees of freedom are spent on intercept and slope (Draper & Smith, ch. 1).
  line.slopeSigma = std::sqrt(residualSquares / (n - 2.0) / sxx);
  if (!std::isfinite(line.slope_per_h) || !std::isfinite(line.value)) return std::nullopt;
  return line;
}

std::optional<double> hoursUntil(const StraightLine& line, double limit) {
  if (line.value <= limit) return std::nullopt;
  if (line.slope_per_h >= 0.0) return std::nullopt;
  if (-line.slope_per_h <= kLevelWithinSigmas * line.slopeSigma) return std::nullopt;
  return (limit - line.value) / line.slope_per_h;
}

}  // namespace tw::model
