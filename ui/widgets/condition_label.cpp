// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/condition_label.hpp"

#include <QFontMetrics>
#include <QPainter>

#include "ui/theme/style.hpp"
#include "ui/widgets/condition_glyph.hpp"

namespace tw::ui {
namespace {

constexpr int kGap = 7;
constexpr int kPad = 6;

}  // namespace

ConditionLabel::ConditionLabel(const Look& look, QWidget* parent) : QWidget(parent), m_look(look) {
  setSizePolicy(QSizePolicy::Fixed, QSizePolicy::Fixed);
}

void ConditionLabel::setCondition(std::optional<model::Condition> condition, const QString& text, bool stale) {
  m_condition = condition;
  m_text = text;
  m_stale = stale && condition != model::Condition::Stale;
  setAccessibleName(text);
  updateGeometry();
  update();
}

void ConditionLabel::setGlyphSize(int pixels) {
  m_glyph = pixels;
  updateGeometry();
}

QFont ConditionLabel::wordFont() const { return textFont(std::max(kTextPx, m_glyph * 6 / 10), true); }

QSize ConditionLabel::sizeHint() const {
  const int word = QFontMetrics(wordFont()).horizontalAdvance(m_text);
  const int glyphs = (m_condition ? m_glyph + kGap : 0) + (m_stale ? m_glyph + kGap : 0);
  return {glyphs + word + 2 * kPad, m_glyph + 4};
}

void ConditionLabel::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.setRenderHint(QPainter::Antialiasing);
  const Theme& theme = m_look.theme();
  const bool reversed = m_condition == model::Condition::Sludging;
  const QColor ink = reversed ? theme.color(Role::SludgingInk)
                     : m_condition ? theme.condition(*m_condition)
                                   : theme.color(Role::InkSoft);
  if (reversed) {
    painter.setPen(Qt::NoPen);
    painter.setBrush(theme.color(Role::SludgingFill));
    painter.drawRoundedRect(rect(), 5, 5);
  }
  double x = reversed ? kPad : 0;
  const double y = (height() - m_glyph) / 2.0;
  if (m_condition) {
    paintGlyph(painter, QRectF(x, y, m_glyph, m_glyph), *m_condition, ink,
               reversed ? theme.color(Role::SludgingFill) : theme.color(Role::Surface));
    x += m_glyph + kGap;
  }
  painter.setFont(wordFont());
  painter.setPen(ink);
  const int word = painter.fontMetrics().horizontalAdvance(m_text);
  painter.drawText(QRectF(x, 0, word + 4, height()), Qt::AlignLeft | Qt::AlignVCenter, m_text);
  if (m_stale) {
    x += word + kGap;
    paintGlyph(painter, QRectF(x, y, m_glyph, m_glyph), model::Condition::Stale,
               reversed ? ink : theme.color(Role::Stale),
               reversed ? theme.color(Role::SludgingFill) : theme.color(Role::Surface));
  }
}

}  // namespace tw::ui
