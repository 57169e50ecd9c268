// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/bench_row.hpp"

#include <QPainter>
#include <algorithm>

#include "ui/theme/contrast.hpp"
#include "ui/theme/style.hpp"
#include "ui/widgets/condition_glyph.hpp"

namespace tw::ui {
namespace {

constexpr int kTinyPx = 12;
constexpr double kBarTop = 27.0;
constexpr double kBarHeight = 12.0;

}  // namespace

BenchRow::BenchRow(const Look& look, QWidget* parent) : QWidget(parent), m_look(look) {
  setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
}

void BenchRow::setNumber(const BenchNumber& number) {
  m_number = number;
  //: name, value, limits, age
  setAccessibleName(tr("%1 %2; %3 %4; %5").arg(number.title, number.value, number.lowText, number.highText, number.age));
  setToolTip(number.tip);
  updateGeometry();
  update();
}

void BenchRow::paintBar(QPainter& painter, const QRectF& bar) const {
  const Theme& theme = m_look.theme();
  const auto x = [&](double value) {
    const double share = (value - m_number.from) / (m_number.to - m_number.from);
    return bar.left() + std::clamp(share, 0.0, 1.0) * bar.width();
  };
  painter.setPen(QPen(theme.color(Role::Edge), 1.0));
  painter.drawLine(QPointF(bar.left(), bar.center().y()), QPointF(bar.right(), bar.center().y()));
  if (m_number.bandLow && m_number.bandHigh) {
    const QRectF band(QPointF(x(*m_number.bandLow), bar.top()), QPointF(x(*m_number.bandHigh), bar.bottom()));
    painter.fillRect(band, theme.color(Role::Band));
    painter.setPen(QPen(theme.color(Role::Edge), 1.0));
    painter.drawRect(band);
  }
  const QColor ink = m_number.pale ? theme.color(Role::Stale) : theme.color(Role::Curve);
  if (m_number.fills && m_number.at) {
    const QRectF filled(bar.left(), bar.top() + 2, std::max(x(*m_number.at) - bar.left(), 2.0), bar.height() - 4);
    if (m_number.hatched) {
      paintHatch(painter, filled, ink, 5.0, 1.4);
      painter.setPen(QPen(ink, 1.2));
      painter.drawRect(filled);
    } else {
      painter.fillRect(filled, ink);
    }
  }
  for (const BenchNumber::Mark& mark : m_number.marks) {
    if (mark.at < m_number.from || mark.at > m_number.to) continue;
    painter.setPen(QPen(theme.color(mark.role), 2.0));
    painter.drawLine(QPointF(x(mark.at), bar.top() - 2), QPointF(x(mark.at), bar.bottom() + 2));
  }
  if (!m_number.fills && m_number.at) {
    const double at = x(*m_number.at);
    painter.setPen(QPen(theme.color(Role::Surface), 1.5));
    painter.setBrush(m_number.pale ? theme.color(Role::Stale) : theme.color(Role::Ink));
    painter.drawPolygon(QPolygonF({{at, bar.center().y() + 3}, {at - 6, bar.top() - 5}, {at + 6, bar.top() - 5}}));
    painter.setBrush(Qt::NoBrush);
  }
}

void BenchRow::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  const Theme& theme = m_look.theme();
  const int inset = 6;
  const int room = width() - 2 * inset;
  const QFont valueFont = textFont(16, true);
  const int valueWidth = QFontMetrics(valueFont).horizontalAdvance(m_number.value);
  painter.setFont(valueFont);
  painter.setPen(m_number.pale ? theme.color(Role::InkSoft) : theme.color(Role::Ink));
  painter.drawText(QRect(inset, 0, room, 21), Qt::AlignRight | Qt::AlignVCenter, m_number.value);
  const QFont titleFont = textFont(kSmallPx);
  painter.setFont(titleFont);
  painter.setPen(theme.color(Role::InkSoft));
  painter.drawText(QRect(inset, 0, room - valueWidth - 6, 21), Qt::AlignLeft | Qt::AlignVCenter,
                   QFontMetrics(titleFont).elidedText(m_number.title, Qt::ElideRight, room - valueWidth - 6));
  const bool bar = hasBar();
  if (bar) paintBar(painter, QRectF(inset + 1, kBarTop, room - 2, kBarHeight));
  const QRect under(inset, bar ? 43 : 22, room, 17);
  painter.setFont(textFont(kTinyPx));
  painter.setPen(theme.color(Role::InkSoft));
  painter.drawText(under, Qt::AlignLeft | Qt::AlignVCenter, m_number.lowText);
  painter.drawText(under, Qt::AlignRight | Qt::AlignVCenter, m_number.highText);
  painter.setFont(textFont(kTinyPx, m_number.pressing));
  if (m_number.pressing) painter.setPen(theme.color(Role::Ink));
  const bool ends = !m_number.lowText.isEmpty() || !m_number.highText.isEmpty();
  painter.drawText(under, (ends ? Qt::AlignHCenter : Qt::AlignLeft) | Qt::AlignVCenter, m_number.age);
}

}  // namespace tw::ui
