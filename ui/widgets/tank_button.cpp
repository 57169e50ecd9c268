// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/tank_button.hpp"

#include <QKeyEvent>
#include <QPainter>

namespace tw::ui {

TankButton::TankButton(const Look& look, QWidget* parent) : QAbstractButton(parent), m_look(look) {
  setFocusPolicy(Qt::StrongFocus);
  setCursor(Qt::PointingHandCursor);
  setAttribute(Qt::WA_Hover);
  setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Expanding);
}

void TankButton::setTank(const TankLook& look) {
  m_tank = look;
  update();
}

void TankButton::keyPressEvent(QKeyEvent* event) {
  if (event->key() == Qt::Key_Return || event->key() == Qt::Key_Enter) {
    click();
    return;
  }
  QAbstractButton::keyPressEvent(event);
}

void TankButton::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  const Theme& theme = m_look.theme();
  if (underMouse() && !hasFocus()) painter.fillRect(rect(), theme.color(Role::Raised));
  const double ground = height() - 3.0;
  painter.setPen(QPen(theme.color(Role::Edge), 2.0));  // the shop floor runs on under the whole line
  painter.drawLine(QPointF(0, ground), QPointF(width(), ground));
  paintTank(painter, QRectF(rect()), m_tank, theme);
  if (hasFocus()) {
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setPen(QPen(theme.color(Role::Focus), 3.0));
    painter.setBrush(Qt::NoBrush);
    painter.drawRoundedRect(QRectF(rect()).adjusted(2, 2, -2, -2), 5, 5);
  }
}

}  // namespace tw::ui
