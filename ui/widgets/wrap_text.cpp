// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/wrap_text.hpp"

#include <QPainter>
#include <QTextLayout>

#include "ui/theme/style.hpp"

namespace tw::ui {

WrapText::WrapText(const Look& look, int pixelSize, int lines, QWidget* parent)
    : QWidget(parent), m_look(look), m_lines(lines) {
  setFont(textFont(pixelSize));
  setFixedHeight(QFontMetrics(font()).lineSpacing() * lines + 2);
  setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
}

void WrapText::setText(const QString& text) {
  if (m_text == text) return;
  m_text = text;
  setAccessibleName(text);
  setToolTip(text);
  update();
}

void WrapText::paintEvent(QPaintEvent*) {
  QPainter painter(this);
  painter.setPen(m_look.theme().color(Role::Ink));
  const QFontMetrics metrics(font());
  QTextLayout layout(m_text, font());
  layout.beginLayout();
  double y = 0.0;
  for (int count = 1; count <= m_lines; ++count) {
    QTextLine line = layout.createLine();
    if (!line.isValid()) break;
    line.setLineWidth(width());
    const bool more = count == m_lines && line.textStart() + line.textLength() < m_text.size();
    const QString words = more ? metrics.elidedText(m_text.mid(line.textStart()), Qt::ElideRight, width())
                               : m_text.mid(line.textStart(), line.textLength());
    painter.drawText(QRectF(0, y, width(), metrics.lineSpacing()), Qt::AlignLeft | Qt::AlignVCenter, words.trimmed());
    y += metrics.lineSpacing();
  }
  layout.endLayout();
}

}  // namespace tw::ui
