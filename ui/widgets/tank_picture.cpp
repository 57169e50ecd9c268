// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/tank_picture.hpp"

#include <QPainter>
#include <QPainterPath>
#include <algorithm>
#include <cmath>

#include "ui/theme/contrast.hpp"
#include "ui/theme/style.hpp"
#include "ui/widgets/condition_glyph.hpp"

namespace tw::ui {
namespace {

constexpr double kFreeboard = 0.11;   // empty height above the liquor, of the inner height
constexpr double kFootHeight = 9.0;   // px: what the tank stands on
constexpr double kPaledShare = 0.30;  // how much of the liquor's colour a stale picture keeps
constexpr double kSlimmest = 3.0;     // px: a bed that exists is seen
constexpr int kWordsWidth = 104;      // px beside the large picture
constexpr double kNoChange = 0.02;    // a mark closer than this to the bed says nothing new
constexpr double kTallest = 0.86;     // height of a tank to its width, at most

QPainterPath vesselPath(const TankShape& shape) {
  const QRectF& o = shape.outer;
  const QRectF& i = shape.inner;
  const double lip = shape.wall * 1.1;
  QPainterPath path(QPointF(o.left() - lip, o.top()));
  path.lineTo(i.left(), o.top());
  path.lineTo(i.bottomLeft());
  path.lineTo(i.bottomRight());
  path.lineTo(i.right(), o.top());
  path.lineTo(o.right() + lip, o.top());
  path.lineTo(o.right() + lip, o.top() + shape.wall * 0.9);
  path.lineTo(o.right(), o.top() + shape.wall * 0.9);
  path.lineTo(o.bottomRight());
  path.lineTo(o.bottomLeft());
  path.lineTo(o.left(), o.top() + shape.wall * 0.9);
  path.lineTo(o.left() - lip, o.top() + shape.wall * 0.9);
  path.closeSubpath();
  return path;
}

void paintFeet(QPainter& painter, const TankShape& shape, const QColor& ink) {
  const double width = shape.wall * 2.2;
  const double inset = shape.outer.width() * 0.08;
  painter.fillRect(QRectF(shape.outer.left() + inset, shape.outer.bottom(), width, kFootHeight), ink);
  painter.fillRect(QRectF(shape.outer.right() - inset - width, shape.outer.bottom(), width, kFootHeight), ink);
}

void paintLiquor(QPainter& painter, const TankShape& shape, const TankLook& look, const Theme& theme) {
  const QColor ground = theme.color(Role::Surface);
  const QColor real = look.liquor.isValid() ? look.liquor : theme.color(Role::Band);
  const QColor color = look.stale ? mixed(ground, real, kPaledShare) : real;
  painter.fillRect(shape.liquor, color);
  painter.setPen(QPen(mixed(color, theme.color(Role::Ink), 0.45), 1.5));
  painter.drawLine(shape.liquor.topLeft(), shape.liquor.topRight());
}

void paintBed(QPainter& painter, const TankShape& shape, const TankLook& look, const Theme& theme) {
  if (shape.bed.isEmpty()) return;
  const QColor ground = theme.color(Role::Surface);
  const auto condition = look.stale ? model::Condition::Stale : look.condition.value_or(model::Condition::Fine);
  const QColor ink = theme.condition(condition);
  painter.fillRect(shape.gap, theme.color(Role::Gap));
  const double spacing = std::clamp(shape.inner.width() / 26.0, 6.0, 9.0);
  if (look.condition == model::Condition::Sludging && !look.stale) {
    painter.fillRect(shape.bed, theme.color(Role::SludgingFill));
    paintHatch(painter, shape.bed, theme.color(Role::SludgingInk), spacing * 1.4, 1.8);
    return;
  }
  painter.fillRect(shape.bed, mixed(ground, ink, 0.14));
  paintHatch(painter, shape.bed, ink, spacing, 1.7);
  if (look.doubtful) {  // the second direction says: do not trust this height
    painter.save();
    painter.translate(shape.bed.left() + shape.bed.right(), 0);
    painter.scale(-1, 1);
    paintHatch(painter, shape.bed, ink, spacing * 2, 1.2);
    painter.restore();
  }
  painter.setPen(QPen(ink, 2.0));
  painter.drawLine(shape.bed.topLeft() + QPointF(0, 1), shape.bed.topRight() + QPointF(0, 1));
}

void paintHorizon(QPainter& painter, const TankShape& shape, const TankLook& look, const Theme& theme) {
  if (!look.bedAtHorizon || shape.bed.isEmpty() || look.condition == model::Condition::Sludging) return;
  if (look.bed && std::abs(*look.bedAtHorizon - *look.bed) < kNoChange) return;
  const double y = shape.yOf(std::clamp(*look.bedAtHorizon, 0.02, 1.0));
  const QLineF mark(shape.inner.left() + 2, y, shape.inner.right() - 2, y);
  painter.setPen(QPen(theme.color(Role::Surface), 4.0));  // a halo, so that it shows on any liquor
  painter.drawLine(mark);
  QPen pen(theme.color(Role::Ink), 1.6);
  pen.setDashPattern({4.0, 3.0});
  painter.setPen(pen);
  painter.drawLine(mark);
}

struct Tick {
  double bed;
  double length;
  Role role;
  QString word;
};

void paintScale(QPainter& painter, const TankShape& shape, const TankLook& look, const Theme& theme) {
  const Tick ticks[] = {{kBedAtCaution, 8.0, Role::Caution, look.cautionWord},
                        {kBedAtAct, 11.0, Role::Act, look.actWord},
                        {1.0, 0.0, Role::Ink, look.lineWord}};
  const double x = shape.outer.right() + 2.0;
  for (const Tick& tick : ticks) {
    const double y = shape.yOf(tick.bed);
    painter.setPen(QPen(theme.color(tick.role), 2.2));
    if (tick.length > 0.0) painter.drawLine(QPointF(x, y), QPointF(x + tick.length, y));
    if (!look.scaleWords) continue;
    painter.setFont(textFont(kSmallPx));
    painter.setPen(theme.color(tick.role));
    painter.drawText(QRectF(x + 16, y - 12, kWordsWidth - 16, 24), Qt::AlignLeft | Qt::AlignVCenter, tick.word);
  }
  const double y = shape.yOf(1.0);
  const double depth = shape.wall * 1.15;
  painter.setPen(Qt::NoPen);
  painter.setBrush(theme.color(Role::Ink));
  painter.drawPolygon(QPolygonF({{shape.inner.right() - depth * 0.8, y},
                                 {shape.outer.right() + depth, y - depth},
                                 {shape.outer.right() + depth, y + depth}}));
  painter.setBrush(Qt::NoBrush);
}

void paintOutline(QPainter& painter, const TankShape& shape, const TankLook& look, const Theme& theme) {
  const QColor ink = look.stale ? theme.color(Role::Stale) : theme.color(Role::Ink);
  if (look.inService && !look.stale) {
    painter.setPen(Qt::NoPen);
    painter.setBrush(ink);
    painter.drawPath(vesselPath(shape));
    painter.setBrush(Qt::NoBrush);
    return;
  }
  QPen pen(ink, look.stale ? 2.2 : 1.6);
  if (look.stale) pen.setDashPattern({4.0, 3.0});
  painter.setPen(pen);
  painter.setBrush(theme.color(Role::Surface));
  painter.drawPath(vesselPath(shape));
  painter.setBrush(Qt::NoBrush);
}

}  // namespace

double TankShape::yOf(double bedShare) const {
  return inner.bottom() - bedShare * (inner.bottom() - surfaceY);
}

TankShape tankShape(const QRectF& area, const TankLook& look) {
  TankShape shape;
  const double words = look.scaleWords ? kWordsWidth : 0.0;
  shape.groundY = area.bottom() - 3.0;
  shape.wall = std::clamp(std::min(area.width(), area.height()) * 0.03, 4.0, 8.0);
  const double sides = shape.wall * 2.0 + 10.0;  // lips, ticks and air
  const double width = area.width() - 2 * sides - words;
  const double height = std::min(area.height() - kFootHeight - 6.0, width * kTallest);
  const double bottom = shape.groundY - kFootHeight;
  shape.outer = QRectF(area.left() + sides, bottom - height, width, height);
  shape.inner = shape.outer.adjusted(shape.wall, 0, -shape.wall, -shape.wall);
  shape.surfaceY = shape.inner.top() + shape.inner.height() * kFreeboard;
  if (!look.inService) return shape;
  const double gap = std::clamp(shape.inner.height() * 0.035, 4.0, 8.0);
  double top = shape.inner.bottom();
  const bool sludging = look.condition == model::Condition::Sludging;
  if (sludging || look.bed) {
    top = sludging ? shape.inner.top() : shape.yOf(std::clamp(*look.bed, 0.0, 1.0));
    top = std::min(top, shape.inner.bottom() - kSlimmest);
    shape.bed = QRectF(QPointF(shape.inner.left(), top), shape.inner.bottomRight());
    const double gapTop = std::max(top - gap, shape.inner.top());
    shape.gap = QRectF(shape.inner.left(), gapTop, shape.inner.width(), top - gapTop);
    top = gapTop;
  }
  if (top > shape.surfaceY) {
    shape.liquor = QRectF(shape.inner.left(), shape.surfaceY, shape.inner.width(), top - shape.surfaceY);
  }
  return shape;
}

void paintTank(QPainter& painter, const QRectF& area, const TankLook& look, const Theme& theme) {
  const TankShape shape = tankShape(area, look);
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing);
  const QColor feet = look.inService && !look.stale ? theme.color(Role::Ink) : theme.color(Role::Stale);
  paintFeet(painter, shape, feet);
  if (!look.inService) {
    paintOutline(painter, shape, look, theme);
    painter.setFont(textFont(kTextPx));
    painter.setPen(theme.color(Role::InkSoft));
    painter.drawText(shape.inner, Qt::AlignCenter | Qt::TextWordWrap, look.emptyWord);
    painter.restore();
    return;
  }
  painter.fillRect(shape.inner, theme.color(Role::Surface));
  if (!shape.liquor.isEmpty()) paintLiquor(painter, shape, look, theme);
  paintBed(painter, shape, look, theme);
  paintHorizon(painter, shape, look, theme);
  paintOutline(painter, shape, look, theme);
  paintScale(painter, shape, look, theme);
  painter.restore();
}

}  // namespace tw::ui
