// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/tank_picture.hpp"

#include <gtest/gtest.h>

#include <QImage>
#include <QPainter>

#include "tests/ui/qt_environment.hpp"

namespace tw::ui {
namespace {

constexpr QRectF kArea(0, 0, 300, 240);
const QColor kLiquor(0x1d, 0x4e, 0x89);

TankLook look(double bed) {
  TankLook made;
  made.bed = bed;
  made.liquor = kLiquor;
  made.condition = model::Condition::Fine;
  return made;
}

QImage drawn(const TankLook& tank, ThemeName name) {
  test::needQt();
  const Theme theme(name);
  QImage image(kArea.size().toSize(), QImage::Format_RGB32);
  image.fill(theme.color(Role::Window));
  QPainter painter(&image);
  paintTank(painter, kArea, tank, theme);
  return image;
}

TEST(TankPicture, BedIsAsHighAsTheUsedMargin) {
  for (const double bed : {0.1, 0.5, 0.75, 0.9}) {
    const TankShape shape = tankShape(kArea, look(bed));
    EXPECT_NEAR(shape.bed.height() / (shape.inner.bottom() - shape.surfaceY), bed, 1e-6);
  }
}

TEST(TankPicture, AGapPartsTheBedFromTheLiquor) {
  for (const ThemeName name : {ThemeName::Light, ThemeName::Dark}) {
    const TankShape shape = tankShape(kArea, look(0.4));
    const QImage image = drawn(look(0.4), name);
    EXPECT_GE(shape.gap.height(), 4.0);
    EXPECT_DOUBLE_EQ(shape.gap.bottom(), shape.bed.top());
    EXPECT_DOUBLE_EQ(shape.liquor.bottom(), shape.gap.top());
    EXPECT_EQ(image.pixelColor(shape.gap.center().toPoint()), Theme(name).color(Role::Gap));
    EXPECT_EQ(image.pixelColor(shape.liquor.center().toPoint()), kLiquor);
  }
}

TEST(TankPicture, BedIsHatched) {
  const TankShape shape = tankShape(kArea, look(0.5));
  const QImage image = drawn(look(0.5), ThemeName::Light);
  int changes = 0;
  const int y = static_cast<int>(shape.bed.center().y());
  for (int x = static_cast<int>(shape.bed.left()) + 2; x < static_cast<int>(shape.bed.right()) - 2; ++x) {
    if (image.pixel(x, y) != image.pixel(x + 1, y)) ++changes;
  }
  EXPECT_GT(changes, 20);
}

TEST(TankPicture, AThinBedIsStillSeen) {
  EXPECT_GE(tankShape(kArea, look(0.001)).bed.height(), 3.0);
}

TEST(TankPicture, SludgingReachesTheRimAndLeavesNoLiquor) {
  TankLook full = look(1.0);
  full.condition = model::Condition::Sludging;
  const TankShape shape = tankShape(kArea, full);
  EXPECT_NEAR(shape.bed.top(), shape.inner.top(), 1e-6);
  EXPECT_TRUE(shape.liquor.isEmpty());
}

TEST(TankPicture, StaleIsPaled) {
  TankLook old = look(0.3);
  old.stale = true;
  old.condition = model::Condition::Stale;
  const TankShape shape = tankShape(kArea, old);
  const QColor seen = drawn(old, ThemeName::Light).pixelColor(shape.liquor.center().toPoint());
  EXPECT_GT(seen.lightness(), kLiquor.lightness() + 60);
}

TEST(TankPicture, OutOfServiceIsAnEmptyOutline) {
  TankLook away = look(0.3);
  away.inService = false;
  const TankShape shape = tankShape(kArea, away);
  EXPECT_TRUE(shape.bed.isEmpty());
  EXPECT_TRUE(shape.liquor.isEmpty());
  EXPECT_EQ(drawn(away, ThemeName::Light).pixelColor(shape.inner.topLeft().toPoint() + QPoint(20, 20)),
            Theme(ThemeName::Light).color(Role::Window));  // whatever lies behind it
}

TEST(TankPicture, WithoutAResultThereIsLiquorAndNoBed) {
  TankLook fresh = look(0.0);
  fresh.bed.reset();
  fresh.condition.reset();
  const TankShape shape = tankShape(kArea, fresh);
  EXPECT_TRUE(shape.bed.isEmpty());
  EXPECT_NEAR(shape.liquor.bottom(), shape.inner.bottom(), 1e-6);
}

TEST(TankPicture, TheHorizonMarkIsAThinLineAtItsHeight) {
  TankLook rising = look(0.3);
  const TankShape shape = tankShape(kArea, rising);
  const QImage before = drawn(rising, ThemeName::Light);
  rising.bedAtHorizon = 0.6;
  const QImage after = drawn(rising, ThemeName::Light);
  const auto rowDiffers = [&](double y) {
    for (int x = static_cast<int>(shape.inner.left()) + 10; x < static_cast<int>(shape.inner.right()) - 10; ++x) {
      if (before.pixel(x, static_cast<int>(y)) != after.pixel(x, static_cast<int>(y))) return true;
    }
    return false;
  };
  EXPECT_TRUE(rowDiffers(shape.yOf(0.6)));
  EXPECT_FALSE(rowDiffers(shape.yOf(0.6) - 8));
  EXPECT_FALSE(rowDiffers(shape.yOf(0.6) + 8));
}

}  // namespace
}  // namespace tw::ui
