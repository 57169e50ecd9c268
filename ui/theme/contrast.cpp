// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/theme/contrast.hpp"

#include <algorithm>
#include <cmath>

namespace tw::ui {
namespace {

// WCAG 2.2, "relative luminance": sRGB channel to linear light.
double linear(double channel) {
  return channel <= 0.04045 ? channel / 12.92 : std::pow((channel + 0.055) / 1.055, 2.4);
}

}  // namespace

double relativeLuminance(const QColor& color) {
  return 0.2126 * linear(color.redF()) + 0.7152 * linear(color.greenF()) + 0.0722 * linear(color.blueF());
}

double contrastRatio(const QColor& a, const QColor& b) {
  const double first = relativeLuminance(a);
  const double second = relativeLuminance(b);
  return (std::max(first, second) + 0.05) / (std::min(first, second) + 0.05);
}

QColor mixed(const QColor& under, const QColor& over, double share) {
  const auto blend = [share](int from, int to) {
    return static_cast<int>(std::lround(from + (to - from) * share));
  };
  return QColor(blend(under.red(), over.red()), blend(under.green(), over.green()),
                blend(under.blue(), over.blue()));
}

}  // namespace tw::ui
