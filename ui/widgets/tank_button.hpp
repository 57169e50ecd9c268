// SPDX-License-Identifier: GPL-3.0-or-later
// A tank picture that can be pressed: mouse, touch, Enter and Space open the tank.
#pragma once

#include <QAbstractButton>

#include "ui/theme/look.hpp"
#include "ui/widgets/tank_picture.hpp"

namespace tw::ui {

class TankButton : public QAbstractButton {
  Q_OBJECT

 public:
  explicit TankButton(const Look& look, QWidget* parent = nullptr);
  void setTank(const TankLook& look);
  [[nodiscard]] const TankLook& tank() const { return m_tank; }
  [[nodiscard]] QSize sizeHint() const override { return {220, 190}; }
  [[nodiscard]] QSize minimumSizeHint() const override { return {150, 92}; }

 protected:
  void paintEvent(QPaintEvent* event) override;
  void keyPressEvent(QKeyEvent* event) override;

 private:
  const Look& m_look;
  TankLook m_tank;
};

}  // namespace tw::ui
