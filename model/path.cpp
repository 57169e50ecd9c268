// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/path.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

namespace tw::model {

namespace {

constexpr double kSteep = 1.0;       // lg units in one step: halve it
constexpr double kFlat = 0.35;       // lg units: lengthen the next
constexpr double kOnLine = 1e-13;    // lg units: rounding of a saturation of order 10
constexpr double kShortest = 1e-5;   // of the range: steps are not made shorter
constexpr double kHumpSlack = 0.05;  // lg units: humps this far under the line are climbed to make sure

struct Point {
  double s = 0.0;
  std::vector<double> above;
};

/// Root of one solid's curve in (a, b), above(a) < 0 <= above(b): regula falsi with Illinois' weight
/// (Dowell & Jarratt, BIT 11 (1971) 168), halving whenever it gains less than half in three steps.
double refine(Path& path, std::size_t k, double a, double fa, double b, double fb,
              std::vector<double>& scratch) {
  int side = 0;
  double width = b - a;
  for (int n = 0; n < 200 && fb > kOnLine; ++n) {
    double s = (a * fb - b * fa) / (fb - fa);
    if (n % 3 == 2) {
      if (b - a > 0.5 * width) s = 0.5 * (a + b);
      width = b - a;
    }
    if (!(s > a && s < b)) s = 0.5 * (a + b);
    if (!(s > a && s < b)) break;  // neighbours in double precision
    const bool feasible = path.at(s, scratch) && !std::isnan(scratch[k]);
    const double f = feasible ? scratch[k] : fb;
    if (feasible && std::abs(f) <= kOnLine) return s;
    if (f < 0.0) {
      a = s;
      fa = f;
      if (side == -1) fb *= 0.5;
      side = -1;
    } else {
      b = s;
      fb = f;
      if (side == 1) fa *= 0.5;
      side = 1;
    }
  }
  return b;
}

/// Climbs the hump of one curve between `left` and `right` by golden section; where its top is on or over
/// the line, the crossing before it.
std::optional<double> climb(Path& path, std::size_t k, const Point& left, const Point& right,
                            std::vector<double>& scratch) {
  constexpr double kGolden = 0.3819660112501051;
  double a = left.s, b = right.s;
  const auto valueAt = [&](double s) {
    return path.at(s, scratch) && !std::isnan(scratch[k]) ? scratch[k] : -HUGE_VAL;
  };
  double s1 = a + kGolden * (b - a), s2 = b - kGolden * (b - a);
  double f1 = valueAt(s1), f2 = valueAt(s2);
  while (b - a > 1e-7 * (1.0 + std::abs(b))) {
    const double top = std::max(f1, f2);
    if (top >= 0.0) {
      return refine(path, k, left.s, left.above[k], f1 >= f2 ? s1 : s2, top, scratch);
    }
    if (f1 > f2) {
      b = std::exchange(s2, s1);
      f2 = f1;
      s1 = a + kGolden * (b - a);
      f1 = valueAt(s1);
    } else {
      a = std::exchange(s1, s2);
      f1 = f2;
      s2 = b - kGolden * (b - a);
      f2 = valueAt(s2);
    }
  }
  return std::nullopt;
}

/// Top of the parabola through three points whose middle one is highest.
double parabolaTop(const Point& p, const Point& q, const Point& r, std::size_t k) {
  const double dp = q.s - p.s, dr = r.s - q.s;
  const double rise = (q.above[k] - p.above[k]) / dp, fall = (r.above[k] - q.above[k]) / dr;
  const double curvature = (fall - rise) / (dp + dr);
  const double slope = (rise * dr + fall * dp) / (dp + dr);
  return curvature < 0.0 ? q.above[k] - slope * slope / (4.0 * curvature) : q.above[k];
}

class Search {
 public:
  Search(Path& path, std::size_t count, const PathRange& range)
      : m_path(path), m_range(range), m_crossing(count), m_open(count, 1) {}

  std::vector<std::optional<double>> run();

 private:
  [[nodiscard]] bool begin();
  [[nodiscard]] double change(const Point& next) const;
  void look(const Point& next);
  void accept(Point& next);
  [[nodiscard]] bool anyOpen() const {
    return std::any_of(m_open.begin(), m_open.end(), [](char open) { return open != 0; });
  }

  Path& m_path;
  PathRange m_range;
  std::vector<std::optional<double>> m_crossing;
  std::vector<char> m_open;  ///< still looked for
  Point m_before, m_last;    ///< the two points passed
  bool m_hasBefore = false;
  std::vector<double> m_scratch;
};

bool Search::begin() {
  m_last.above.resize(m_open.size());
  m_scratch.resize(m_open.size());
  if (!m_path.at(0.0, m_last.above)) return false;
  for (std::size_t k = 0; k < m_open.size(); ++k) {
    if (m_last.above[k] == 0.0) m_crossing[k] = 0.0;
    m_open[k] = m_last.above[k] < 0.0;  // NaN: the solid cannot form, and a path adds no component
  }
  return m_range.end > 0.0;
}

double Search::change(const Point& next) const {
  double largest = 0.0;
  for (std::size_t k = 0; k < m_open.size(); ++k) {
    const double d = std::abs(next.above[k] - m_last.above[k]);
    if (m_open[k] && d > largest) largest = d;
  }
  return largest;
}

/// Looks for crossings in the step to `next` and for humps around the last point.
void Search::look(const Point& next) {
  for (std::size_t k = 0; k < m_open.size(); ++k) {
    if (!m_open[k]) continue;
    const double f0 = m_last.above[k], f1 = next.above[k];
    const bool falls = f1 < f0 || std::isnan(f1);
    if (m_hasBefore && falls && f0 >= m_before.above[k]) {
      const double top = std::isnan(f1) ? f0 : parabolaTop(m_before, m_last, next, k);
      if (f0 + 2.0 * (top - f0) + kHumpSlack > 0.0)
        m_crossing[k] = climb(m_path, k, m_before, next, m_scratch);
    }
    if (!m_crossing[k] && f1 >= 0.0) m_crossing[k] = refine(m_path, k, m_last.s, f0, next.s, f1, m_scratch);
    if (m_crossing[k]) m_open[k] = 0;
  }
}

void Search::accept(Point& next) {
  std::swap(m_before, m_last);
  std::swap(m_last, next);
  m_hasBefore = true;
}

std::vector<std::optional<double>> Search::run() {
  if (!begin()) return m_crossing;
  Point next;
  next.above.resize(m_open.size());
  m_before.above.resize(m_open.size());
  const double shortest = kShortest * m_range.end;
  double step = m_range.firstStep;
  while (anyOpen() && m_last.s < m_range.end) {
    // A remainder shorter than a tenth of the step would only waste a solve.
    next.s = m_last.s + 1.1 * step >= m_range.end ? m_range.end : m_last.s + step;
    const bool feasible = m_path.at(next.s, next.above);
    const double moved = feasible ? change(next) : HUGE_VAL;
    const double width = next.s - m_last.s;
    if ((!feasible || moved > kSteep) && width > shortest) {
      step = 0.5 * width;
      continue;
    }
    if (!feasible) break;
    look(next);
    accept(next);
    step = std::max(width, shortest);
    if (moved < kFlat) step = std::min(1.6 * step, m_range.largestStep);
  }
  return m_crossing;
}

}  // namespace

std::vector<std::optional<double>> firstCrossings(Path& path, std::size_t count, const PathRange& range) {
  return Search(path, count, range).run();
}

}  // namespace tw::model
