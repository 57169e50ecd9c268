// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/condition_glyph.hpp"

#include <gtest/gtest.h>

#include <QImage>
#include <QPainter>

#include "tests/ui/qt_environment.hpp"
#include "ui/theme/contrast.hpp"

namespace tw::ui {
namespace {

using enum model::Condition;

const Theme kLight(ThemeName::Light);

QImage drawn(model::Condition condition, int side) {
  test::needQt();
  QImage image(side, side, QImage::Format_RGB32);
  image.fill(kLight.color(Role::Surface));
  QPainter painter(&image);
  paintGlyph(painter, QRectF(0, 0, side, side), condition, kLight);
  return image;
}

bool isInk(const QImage& image, QPointF at, model::Condition condition) {
  return contrastRatio(image.pixelColor(at.toPoint()), kLight.color(Role::Surface)) >
         0.6 * contrastRatio(kLight.condition(condition), kLight.color(Role::Surface));
}

class BedHeight : public ::testing::TestWithParam<std::tuple<model::Condition, double>> {};

TEST_P(BedHeight, FillsTheShareOfTheVessel) {
  const auto [condition, share] = GetParam();
  const GlyphShape shape = glyphShape(QRectF(0, 0, 200, 200), condition);
  EXPECT_NEAR((shape.vessel.bottom() - shape.bed.top()) / shape.vessel.height(), share, 1e-9);
  EXPECT_GE(shape.bed.left(), shape.vessel.left());
  EXPECT_LE(shape.bed.right(), shape.vessel.right());
}

INSTANTIATE_TEST_SUITE_P(Words, BedHeight,
                         ::testing::Values(std::tuple{Fine, 0.18}, std::tuple{Drifting, 0.18}, std::tuple{Tight, 0.5},
                                           std::tuple{Brink, 0.75}, std::tuple{Sludging, 1.0}));

TEST(Glyph, HasWallsOnThreeSidesAndIsOpenAtTheTop) {
  for (const auto condition : {Fine, Tight, Brink}) {
    const QImage image = drawn(condition, 200);
    const GlyphShape shape = glyphShape(QRectF(0, 0, 200, 200), condition);
    EXPECT_TRUE(isInk(image, {shape.vessel.left(), shape.vessel.center().y()}, condition));
    EXPECT_TRUE(isInk(image, {shape.vessel.right(), shape.vessel.center().y()}, condition));
    EXPECT_TRUE(isInk(image, {shape.vessel.center().x(), shape.vessel.bottom()}, condition));
    EXPECT_FALSE(isInk(image, {shape.vessel.center().x(), shape.vessel.top()}, condition));
  }
}

TEST(Glyph, OnlyDriftingHasAnArrowAboveItsBed) {
  const GlyphShape shape = glyphShape(QRectF(0, 0, 200, 200), Drifting);
  const QPointF shaft(shape.vessel.center().x(), shape.vessel.center().y());
  EXPECT_TRUE(isInk(drawn(Drifting, 200), shaft, Drifting));
  EXPECT_FALSE(isInk(drawn(Fine, 200), shaft, Fine));
}

TEST(Glyph, BrinkHasADoubledWallWithAirBetween) {
  const QImage image = drawn(Brink, 200);
  const GlyphShape shape = glyphShape(QRectF(0, 0, 200, 200), Brink);
  const double y = shape.vessel.top() + shape.vessel.height() * 0.2;  // above the bed
  int edges = 0;
  bool was = false;
  for (int x = 0; x < static_cast<int>(shape.vessel.center().x()); ++x) {
    const bool ink = isInk(image, {static_cast<double>(x), y}, Brink);
    if (ink && !was) ++edges;
    was = ink;
  }
  EXPECT_EQ(edges, 2);
}

TEST(Glyph, StaleHasADashedOutline) {
  const QImage image = drawn(Stale, 200);
  const GlyphShape shape = glyphShape(QRectF(0, 0, 200, 200), Stale);
  int gaps = 0;
  bool was = true;
  for (int y = static_cast<int>(shape.vessel.top()); y < static_cast<int>(shape.vessel.bottom()); ++y) {
    const bool ink = isInk(image, {shape.vessel.left(), static_cast<double>(y)}, Stale);
    if (!ink && was) ++gaps;
    was = ink;
  }
  EXPECT_GE(gaps, 3);
}

TEST(Glyph, SludgingIsHatchedToTheRim) {
  const QImage image = drawn(Sludging, 200);
  const GlyphShape shape = glyphShape(QRectF(0, 0, 200, 200), Sludging);
  int ink = 0, ground = 0;
  const int y = static_cast<int>(shape.vessel.top()) + 6;
  for (int x = static_cast<int>(shape.bed.left()) + 4; x < static_cast<int>(shape.bed.right()) - 30; ++x) {
    (isInk(image, QPointF(x, y), Sludging) ? ink : ground)++;
  }
  EXPECT_GT(ink, ground);
  EXPECT_GT(ground, 0);
}

TEST(Glyph, KeepsInsideItsAreaAtEverySize) {
  for (const int side : {16, 24, 48, 200}) {
    for (const auto condition : {Fine, Drifting, Tight, Brink, Sludging, Stale}) {
      const GlyphShape shape = glyphShape(QRectF(0, 0, side, side), condition);
      EXPECT_TRUE(QRectF(0, 0, side, side).contains(shape.vessel)) << side;
      EXPECT_GE(shape.line, 1.0);
    }
  }
}

}  // namespace
}  // namespace tw::ui
