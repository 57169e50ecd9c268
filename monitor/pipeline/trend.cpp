// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/trend.hpp"

#include <algorithm>
#include <cmath>
#include <utility>
#include <vector>

#include "model/condition.hpp"
#include "model/projection.hpp"

namespace tw::monitor {
namespace {

using Hours = std::chrono::duration<double, std::ratio<3600>>;

constexpr double kHoursPerDay = 24.0;
/// A slope within this many standard errors of zero is level (as in model::hoursUntil).
constexpr double kLevelWithinSigmas = 2.0;

std::vector<model::TrendPoint> points(const MarginTrend& trend, const std::string& margin,
                                      io::Instant chapter) {
  std::vector<model::TrendPoint> out;
  if (trend.empty()) return out;
  const io::Instant newest = trend.rbegin()->first;
  for (auto at = trend.lower_bound(std::max(chapter, newest - kTrendWindow)); at != trend.end(); ++at) {
    const auto value = at->second.find(margin);
    if (value != at->second.end()) out.push_back({Hours(at->first - newest).count(), value->second});
  }
  return out;
}

struct Projected {
  io::wire::ProjectionView view;
  std::optional<double> hoursToCaution;  ///< for ordering: 0 inside the limit already
};

class Projector {
 public:
  Projector(const io::Recipe& recipe, const std::optional<model::LiquorReport>& atTarget, double age_h)
      : m_recipe(recipe), m_atTarget(atTarget), m_age_h(age_h) {}

  std::optional<Projected> margin(std::size_t index, const std::vector<model::TrendPoint>& trend) const {
    const auto line = model::fitLine(trend);
    if (!line) return std::nullopt;
    const model::MarginLimit& limit = *m_recipe.limits[index];
    // A dilution is a factor: its line stands at 1, where nothing is added.
    const double atLine = static_cast<model::MarginKind>(index) == model::MarginKind::Dilution ? 1.0 : 0.0;
    Projected out;
    out.view.margin = model::name(static_cast<model::MarginKind>(index));
    out.view.slope_per_day = line->slope_per_h * kHoursPerDay;
    out.view.horizon_h = m_recipe.horizon_h;
    out.view.hoursToCaution = fromNow(model::hoursUntil(*line, limit.caution));
    out.view.hoursToAct = fromNow(model::hoursUntil(*line, limit.act));
    out.view.hoursToLine = fromNow(model::hoursUntil(*line, atLine));
    out.hoursToCaution = line->value <= limit.caution ? std::optional<double>(0.0) : out.view.hoursToCaution;
    const bool level = std::abs(line->slope_per_h) <= kLevelWithinSigmas * line->slopeSigma;
    const double ahead_h = m_recipe.horizon_h + m_age_h;
    const double then = line->value + (level ? 0.0 : line->slope_per_h * ahead_h) - atLine;
    out.view.bedAtHorizon = model::bedOf(then, target(index, limit.caution) - atLine,
                                         {limit.caution - atLine, limit.act - atLine});
    return out;
  }

 private:
  std::optional<double> fromNow(std::optional<double> hours) const {
    return hours ? std::optional<double>(std::max(0.0, *hours - m_age_h)) : std::nullopt;
  }
  double target(std::size_t index, double otherwise) const {
    if (!m_atTarget || !m_atTarget->margins[index].smallest) return otherwise;
    return m_atTarget->margins[index].smallest->judged();
  }

  const io::Recipe& m_recipe;
  const std::optional<model::LiquorReport>& m_atTarget;
  double m_age_h;
};

bool sooner(const Projected& a, const Projected& b) {
  const bool apart = a.hoursToCaution && b.hoursToCaution && *a.hoursToCaution != *b.hoursToCaution;
  if (apart) return *a.hoursToCaution < *b.hoursToCaution;
  if (a.hoursToCaution.has_value() != b.hoursToCaution.has_value()) return a.hoursToCaution.has_value();
  return a.view.bedAtHorizon.value_or(0.0) > b.view.bedAtHorizon.value_or(0.0);
}

}  // namespace

std::optional<io::wire::ProjectionView> project(const io::Recipe& recipe,
                                                const std::optional<model::LiquorReport>& atTarget,
                                                const MarginTrend& trend, io::Instant chapter,
                                                io::Instant now) {
  if (trend.empty()) return std::nullopt;
  const double age_h = std::max(0.0, Hours(now - trend.rbegin()->first).count());
  const Projector projector(recipe, atTarget, age_h);
  std::optional<Projected> first;
  for (std::size_t i = 0; i < model::kMarginCount; ++i) {
    if (!recipe.limits[i]) continue;
    auto each = projector.margin(i, points(trend, model::name(static_cast<model::MarginKind>(i)), chapter));
    if (each && (!first || sooner(*each, *first))) first = std::move(each);
  }
  if (!first) return std::nullopt;
  return first->view;
}

}  // namespace tw::monitor
