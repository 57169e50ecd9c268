// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/share_bars.hpp"

#include <QPainter>
#include <QStringList>
#include <algorithm>

#include "ui/theme/style.hpp"

namespace tw::ui {
namespace {

constexpr int kRow = 38;

}  // namespace

ShareBars::ShareBars(const Look& look, QWidget* parent) : QWidget(parent), m_look(look) {
  setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
}

void ShareBars::setShares(const std::vector<Share>& shares) {
  m_shares = shares;
  QStringList said;
  for (const Share& share : shares) said << tr("%1 %2").arg(share.label, share.text);
  setAccessibleName(said.join(QStringLiteral(", ")));
  updateGeometry();
  update();
}

QSize ShareBars::sizeHint() const { return {240, std::max(kRow * static_cast<int>(m_shares.size()), 1)}; }

void ShareBars::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  const Theme& theme = m_look.theme();
  painter.setFont(textFont(14));
  int y = 0;
  for (const Share& share : m_shares) {
    const QRect line(0, y, width(), 20);
    painter.setPen(theme.color(Role::Ink));
    painter.drawText(line, Qt::AlignLeft | Qt::AlignVCenter, share.label);
    painter.drawText(line, Qt::AlignRight | Qt::AlignVCenter, share.text);
    const QRectF track(0, y + 22, width(), 7);
    painter.fillRect(track, theme.color(Role::Band));
    painter.fillRect(QRectF(track.left(), track.top(), track.width() * std::clamp(share.fraction, 0.0, 1.0), track.height()),
                     theme.color(Role::Curve));
    y += kRow;
  }
}

}  // namespace tw::ui
