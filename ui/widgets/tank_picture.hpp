// SPDX-License-Identifier: GPL-3.0-or-later
// The tank seen from the side. Inside its walls: the liquor in its own colour; on the floor the hatched
// bed, whose height is the share of margin used; between them a pale gap, so that nobody takes the bed
// for real sludge. A notch in the wall marks the sludge line, ticks the caution and act limits, and a
// thin dashed line where the bed will stand at the end of the horizon.
#pragma once

#include <QColor>
#include <QRectF>
#include <QString>
#include <optional>

#include "model/condition.hpp"
#include "ui/theme/palette.hpp"

class QPainter;

namespace tw::ui {

/// Heights of the limits on the scale of the bed (DESIGN section 5).
inline constexpr double kBedAtCaution = 0.5;
inline constexpr double kBedAtAct = 0.75;

/// What a picture shows.
struct TankLook {
  std::optional<double> bed;           ///< used margin, 0..1; nullopt = nothing computed
  std::optional<double> bedAtHorizon;
  QColor liquor;
  std::optional<model::Condition> condition;
  bool stale = false;      ///< paled, dashed outline
  bool inService = true;   ///< false: an empty outline
  bool doubtful = false;   ///< cross-hatched bed
  bool scaleWords = false; ///< names beside notch and ticks, for the large picture
  QString cautionWord, actWord, lineWord, horizonWord;  ///< with scaleWords
  QString emptyWord;       ///< inside an empty outline
};

/// Where the parts lie; tests sample pixels by it.
struct TankShape {
  QRectF outer;             ///< walls and floor included
  QRectF inner;             ///< between the walls, from rim to floor
  QRectF liquor, gap, bed;  ///< from top to floor; empty when not drawn
  double wall = 0.0;
  double surfaceY = 0.0;    ///< of the liquor, which is the sludge line of the bed's scale
  double groundY = 0.0;     ///< the shop floor
  /// Height on the bed's scale to y.
  [[nodiscard]] double yOf(double bedShare) const;
};

[[nodiscard]] TankShape tankShape(const QRectF& area, const TankLook& look);
void paintTank(QPainter& painter, const QRectF& area, const TankLook& look, const Theme& theme);

}  // namespace tw::ui
