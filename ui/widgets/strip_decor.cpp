// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/strip_decor.hpp"

#include <algorithm>

#include "ui/theme/contrast.hpp"
#include "ui/theme/style.hpp"

namespace tw::ui {
namespace {

constexpr int kTinyPx = 12;
constexpr double kNameHeight = 20.0;

/// Text with its ground painted behind it, so that a curve does not run through the letters.
void label(QCPPainter* painter, const QPointF& at, Qt::Alignment side, const QString& text, const QColor& ink,
           const QColor& ground) {
  const QFontMetrics metrics(painter->font());
  const double width = metrics.horizontalAdvance(text) + 6.0;
  const double height = metrics.height();
  QRectF box(at, QSizeF(width, height));
  if (side.testFlag(Qt::AlignRight)) box.moveRight(at.x());
  if (side.testFlag(Qt::AlignBottom)) box.moveBottom(at.y());
  if (side.testFlag(Qt::AlignVCenter)) box.moveCenter({box.center().x(), at.y()});
  painter->fillRect(box, ground);
  painter->setPen(QPen(ink));
  painter->drawText(box, Qt::AlignCenter, text);
}

}  // namespace

StripDecor::StripDecor(QCustomPlot* plot, QCPAxisRect* rect, const Look& look, const Strip& strip,
                       const StripSet& set, const DecorWords& words, const Format& format, bool first)
    : QCPAbstractItem(plot), m_rect(rect), m_look(look), m_strip(strip), m_set(set), m_words(words),
      m_format(format), m_first(first) {
  setClipAxisRect(rect);
  setClipToAxisRect(false);  // the name stands above the curve
  setLayer(QStringLiteral("grid"));
}

void StripDecor::draw(QCPPainter* painter) {
  const QRectF box(m_rect->rect());
  painter->save();
  painter->setClipRect(box);
  drawFuture(painter, box);
  drawWindow(painter, box);
  drawLimits(painter, box);
  drawMarks(painter, box);
  painter->restore();
  drawNames(painter, box);
}

void StripDecor::drawWindow(QCPPainter* painter, const QRectF& box) const {
  if (!m_strip.low || !m_strip.high) return;
  const QRectF band(QPointF(box.left(), y(*m_strip.high)), QPointF(box.right(), y(*m_strip.low)));
  painter->fillRect(band, m_look.theme().color(Role::Band));
  painter->setPen(QPen(m_look.theme().color(Role::Edge), 1.0, Qt::DotLine));
  painter->drawLine(band.topLeft(), band.topRight());
  painter->drawLine(band.bottomLeft(), band.bottomRight());
}

void StripDecor::drawLimits(QCPPainter* painter, const QRectF& box) const {
  painter->setFont(textFont(kTinyPx));
  for (const StripLimit& limit : m_strip.limits) {
    const QColor ink = m_look.theme().color(limit.act ? Role::Act : Role::Caution);
    const double at = y(limit.value);
    painter->setPen(QPen(ink, limit.act ? 2.2 : 1.4));
    painter->drawLine(QPointF(box.left(), at), QPointF(box.right(), at));
    const QString name = limit.act ? m_words.act : m_words.caution;
    const QString value = m_strip.unit == QLatin1String("%")    ? m_format.fixed(limit.value, 0)
                          : m_strip.unit == QLatin1String("pH") ? m_format.fixed(limit.value, 2)
                                                                : m_format.number(limit.value);
    const QString text = QStringLiteral("%1 %2 %3").arg(name, value, m_strip.unit).trimmed();
    label(painter, {box.left() + 6, at}, Qt::AlignLeft | Qt::AlignVCenter, text, ink,
          m_look.theme().color(Role::Surface));
  }
}

void StripDecor::drawMarks(QCPPainter* painter, const QRectF& box) const {
  const Theme& theme = m_look.theme();
  for (const TimeMark& mark : m_set.marks) {
    const double at = x(mark.t);
    if (at < box.left() || at > box.right()) continue;
    if (mark.dump) {
      painter->setPen(QPen(theme.color(Role::Ink), 2.0, Qt::DashDotLine));
      painter->drawLine(QPointF(at, box.top()), QPointF(at, box.bottom()));
    } else {
      painter->setPen(QPen(theme.color(Role::Ink), 2.0));
      painter->drawLine(QPointF(at, box.bottom()), QPointF(at, box.bottom() - 9));
    }
  }
  for (const AlarmSpan& span : m_set.alarms) {
    if (x(span.to) < box.left()) continue;
    const double from = std::max(x(span.from), box.left());
    const double to = std::min(std::max(x(span.to), from + 3.0), box.right());
    if (to <= from) continue;
    painter->fillRect(QRectF(from, box.top(), to - from, span.high ? 6.0 : 4.0),
                      theme.color(span.high ? Role::Act : Role::Caution));
  }
}

void StripDecor::drawFuture(QCPPainter* painter, const QRectF& box) const {
  const double at = std::max(x(m_set.now), box.left());
  if (at > box.right()) return;
  const Theme& theme = m_look.theme();
  painter->fillRect(QRectF(QPointF(at, box.top()), box.bottomRight()),
                    mixed(theme.color(Role::Surface), theme.color(Role::Window), 0.7));
  painter->setPen(QPen(theme.color(Role::InkSoft), 1.0));
  painter->drawLine(QPointF(at, box.top()), QPointF(at, box.bottom()));
}

void StripDecor::drawNames(QCPPainter* painter, const QRectF& box) const {
  const Theme& theme = m_look.theme();
  const QRectF above(box.left(), box.top() - kNameHeight, box.width(), kNameHeight);
  painter->setFont(textFont(kSmallPx, true));
  painter->setPen(QPen(theme.color(Role::Ink)));
  const bool named = m_strip.unit.isEmpty() || m_strip.unit == m_strip.title;
  painter->drawText(above, Qt::AlignLeft | Qt::AlignVCenter,
                    named ? m_strip.title : m_strip.title + QStringLiteral(", ") + m_strip.unit);
  painter->setFont(textFont(kTinyPx));
  painter->setPen(QPen(theme.color(Role::InkSoft)));
  if (!m_strip.projection.empty()) {
    painter->drawText(above, Qt::AlignRight | Qt::AlignVCenter, m_words.projection);
  }
  const double at = x(m_set.now);
  if (m_first && at > box.left() && at < box.right()) {
    painter->drawText(QRectF(at - 40, above.top(), 80, above.height()), Qt::AlignCenter, m_words.now);
  }
}

StripCursor::StripCursor(QCustomPlot* plot, QCPAxisRect* rect, const Look& look)
    : QCPAbstractItem(plot), m_rect(rect), m_look(look) {
  setClipAxisRect(rect);
  setClipToAxisRect(true);
  setLayer(QStringLiteral("overlay"));
}

void StripCursor::place(std::optional<double> t, std::optional<StripPoint> nearest, const QString& text) {
  m_t = t;
  m_nearest = nearest;
  m_text = text;
}

void StripCursor::draw(QCPPainter* painter) {
  if (!m_t) return;
  const QRectF box(m_rect->rect());
  const Theme& theme = m_look.theme();
  const QCPAxis* time = m_rect->axis(QCPAxis::atBottom);
  const double at = time->coordToPixel(m_nearest ? m_nearest->t : *m_t);
  painter->setPen(QPen(theme.color(Role::Focus), 1.4));
  painter->drawLine(QPointF(at, box.top()), QPointF(at, box.bottom()));
  if (m_nearest) {
    const double level = m_rect->axis(QCPAxis::atLeft)->coordToPixel(m_nearest->value);
    painter->setPen(QPen(theme.color(Role::Focus), 2.4));
    painter->setBrush(Qt::NoBrush);
    painter->drawEllipse(QPointF(at, level), 6.0, 6.0);
  }
  if (m_text.isEmpty()) return;
  painter->setFont(textFont(kSmallPx, true));
  const bool left = at > box.center().x();
  label(painter, {left ? at - 10 : at + 10, box.bottom() - 4},
        (left ? Qt::AlignRight : Qt::AlignLeft) | Qt::AlignBottom, m_text, theme.color(Role::PressInk),
        theme.color(Role::Press));
}

}  // namespace tw::ui
