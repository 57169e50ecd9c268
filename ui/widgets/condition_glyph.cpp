// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/condition_glyph.hpp"

#include <QPainter>
#include <QPainterPath>
#include <algorithm>
#include <cmath>

#include "ui/theme/contrast.hpp"

namespace tw::ui {
namespace {

constexpr double kNotchHeight = 0.16;  // of the vessel, below its rim
constexpr double kPaleShare = 0.55;    // how much of the ink is left in a paled bed

double bedShare(model::Condition condition) {
  switch (condition) {
    case model::Condition::Fine:
    case model::Condition::Drifting: return 0.18;
    case model::Condition::Tight: return 0.5;
    case model::Condition::Brink: return 0.75;
    case model::Condition::Sludging: return 1.0;
    case model::Condition::Stale: return 0.3;
  }
  return 0.0;
}

QPainterPath openVessel(const QRectF& box) {
  QPainterPath path(box.topLeft());
  path.lineTo(box.bottomLeft());
  path.lineTo(box.bottomRight());
  path.lineTo(box.topRight());
  return path;
}

void paintArrow(QPainter& painter, const GlyphShape& shape, const QColor& ink) {
  const double x = shape.vessel.center().x();
  const double foot = shape.bed.top() - shape.line * 0.8;
  const double tip = shape.vessel.top() + shape.vessel.height() * 0.22;
  const double wing = shape.vessel.width() * 0.17;
  painter.setPen(QPen(ink, shape.line * 1.1, Qt::SolidLine, Qt::FlatCap, Qt::MiterJoin));
  painter.drawLine(QPointF(x, foot), QPointF(x, tip));
  painter.drawPolyline(QPolygonF({{x - wing, tip + wing}, {x, tip}, {x + wing, tip + wing}}));
}

void paintNotch(QPainter& painter, const GlyphShape& shape, const QColor& ink) {
  const double depth = std::max(2.0, shape.vessel.width() * 0.13);
  const double x = shape.vessel.right() + shape.line * 0.5;
  painter.setPen(Qt::NoPen);
  painter.setBrush(ink);
  painter.drawPolygon(QPolygonF({{x - depth, shape.notchY},
                                 {x + depth * 0.7, shape.notchY - depth * 0.8},
                                 {x + depth * 0.7, shape.notchY + depth * 0.8}}));
  painter.setBrush(Qt::NoBrush);
}

}  // namespace

void paintHatch(QPainter& painter, const QRectF& area, const QColor& ink, double spacing, double width) {
  painter.save();
  painter.setClipRect(area, Qt::IntersectClip);
  painter.setPen(QPen(ink, width, Qt::SolidLine, Qt::FlatCap));
  const double first = std::floor((area.left() - area.height()) / spacing) * spacing;
  for (double x = first; x < area.right(); x += spacing) {
    painter.drawLine(QPointF(x, area.bottom()), QPointF(x + area.height(), area.top()));
  }
  painter.restore();
}

GlyphShape glyphShape(const QRectF& area, model::Condition condition) {
  GlyphShape shape;
  const double side = std::min(area.width(), area.height());
  shape.line = std::max(1.2, side * 0.055);
  shape.dashed = condition == model::Condition::Stale;
  shape.doubled = condition == model::Condition::Brink;
  shape.hatched = condition == model::Condition::Sludging;
  shape.arrow = condition == model::Condition::Drifting;
  if (condition == model::Condition::Tight || shape.doubled) shape.line *= 1.35;
  const QPointF corner(area.center().x() - side / 2, area.center().y() - side / 2);
  shape.vessel = QRectF(corner.x() + side * 0.14, corner.y() + side * 0.1, side * 0.7, side * 0.8);
  const double inset = shape.doubled ? shape.line * 2.4 : shape.line * 0.5;
  const QRectF inner = shape.vessel.adjusted(inset, 0, -inset, -inset);
  const double top = shape.vessel.bottom() - shape.vessel.height() * bedShare(condition);
  shape.bed = QRectF(QPointF(inner.left(), top), inner.bottomRight());
  shape.notchY = shape.vessel.top() + shape.vessel.height() * kNotchHeight;
  return shape;
}

void paintGlyph(QPainter& painter, const QRectF& area, model::Condition condition, const QColor& ink,
                const QColor& ground) {
  const GlyphShape shape = glyphShape(area, condition);
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing);
  if (shape.hatched) {
    painter.fillRect(shape.bed, ink);
    paintHatch(painter, shape.bed, ground, std::max(4.0, shape.vessel.width() * 0.22),
               std::max(1.0, shape.line * 0.7));
  } else {
    painter.fillRect(shape.bed, shape.dashed ? mixed(ground, ink, kPaleShare) : ink);
  }
  QPen pen(ink, shape.line, Qt::SolidLine, Qt::SquareCap, Qt::MiterJoin);
  if (shape.dashed) {
    pen.setDashPattern({1.6, 1.9});
    pen.setCapStyle(Qt::FlatCap);
  }
  painter.setPen(pen);
  painter.setBrush(Qt::NoBrush);
  painter.drawPath(openVessel(shape.vessel));
  if (shape.doubled) {
    const double inset = shape.line * 1.9;
    painter.setPen(QPen(ink, shape.line * 0.55, Qt::SolidLine, Qt::SquareCap, Qt::MiterJoin));
    painter.drawPath(openVessel(shape.vessel.adjusted(inset, 0, -inset, -inset)));
  }
  if (shape.arrow) paintArrow(painter, shape, ink);
  paintNotch(painter, shape, ink);
  painter.restore();
}

void paintGlyph(QPainter& painter, const QRectF& area, model::Condition condition, const Theme& theme) {
  paintGlyph(painter, area, condition, theme.condition(condition), theme.color(Role::Surface));
}

}  // namespace tw::ui
