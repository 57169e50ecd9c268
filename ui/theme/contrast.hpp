// SPDX-License-Identifier: GPL-3.0-or-later
// Contrast of two colours as WCAG 2.2 defines it ("relative luminance" and "contrast ratio" in its
// glossary). AA asks 4.5 for text and 3 for large text, glyphs and the edges of controls.
#pragma once

#include <QColor>

namespace tw::ui {

inline constexpr double kTextContrast = 4.5;
inline constexpr double kGraphicContrast = 3.0;

/// 0 (black) to 1 (white); alpha is ignored.
[[nodiscard]] double relativeLuminance(const QColor& color);
/// 1 to 21, the same either way round.
[[nodiscard]] double contrastRatio(const QColor& a, const QColor& b);
/// `share` of `over` laid on `under`: 0 = under, 1 = over. The result is opaque.
[[nodiscard]] QColor mixed(const QColor& under, const QColor& over, double share);

}  // namespace tw::ui
