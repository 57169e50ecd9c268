// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/widgets/flow_layout.hpp"

#include <QWidget>

namespace tw::ui {

FlowLayout::~FlowLayout() { qDeleteAll(m_items); }

QLayoutItem* FlowLayout::takeAt(int index) {
  return index >= 0 && index < m_items.size() ? m_items.takeAt(index) : nullptr;
}

void FlowLayout::setGeometry(const QRect& rect) {
  QLayout::setGeometry(rect);
  place(rect, true);
}

QSize FlowLayout::minimumSize() const {
  QSize size;
  for (const QLayoutItem* item : m_items) size = size.expandedTo(item->minimumSize());
  return size;
}

int FlowLayout::place(const QRect& rect, bool move) const {
  int x = rect.x();
  int y = rect.y();
  int row = 0;
  for (QLayoutItem* item : m_items) {
    if (item->widget() != nullptr && item->widget()->isHidden()) continue;
    const QSize size = item->sizeHint();
    if (x > rect.x() && x + size.width() > rect.right() + 1) {
      x = rect.x();
      y += row + m_gap;
      row = 0;
    }
    if (move) item->setGeometry(QRect(QPoint(x, y), size));
    x += size.width() + m_gap;
    row = std::max(row, size.height());
  }
  return y + row - rect.y();
}

}  // namespace tw::ui
