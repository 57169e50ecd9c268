// SPDX-License-Identifier: GPL-3.0-or-later
// The sign of a condition: a small open vessel with a bed in it and a notch at the sludge line. One
// painter for every size, from a list entry to a poster.
#pragma once

#include <QRectF>

#include "model/condition.hpp"
#include "ui/theme/palette.hpp"

class QPainter;

namespace tw::ui {

/// Where the parts of a glyph lie inside `area`; tests sample pixels by it.
struct GlyphShape {
  QRectF vessel;       ///< the outline: open at the top
  QRectF bed;          ///< inside the vessel
  double line = 0.0;   ///< stroke width
  double notchY = 0.0; ///< the sludge line, a notch in the right wall
  bool doubled = false, hatched = false, arrow = false, dashed = false;
};

[[nodiscard]] GlyphShape glyphShape(const QRectF& area, model::Condition condition);
void paintGlyph(QPainter& painter, const QRectF& area, model::Condition condition, const Theme& theme);
/// The same in one given colour, for reversed surroundings.
void paintGlyph(QPainter& painter, const QRectF& area, model::Condition condition, const QColor& ink,
                const QColor& ground);

/// Parallel strokes at 45 degrees over `area`, `spacing` apart: the mark of the bed everywhere.
void paintHatch(QPainter& painter, const QRectF& area, const QColor& ink, double spacing, double width);

}  // namespace tw::ui
