// SPDX-License-Identifier: GPL-3.0-or-later
// A layout that sets widgets side by side and begins a new row when one is full.
#pragma once

#include <QLayout>
#include <QList>

namespace tw::ui {

class FlowLayout : public QLayout {
 public:
  explicit FlowLayout(int gap) : m_gap(gap) {}
  ~FlowLayout() override;

  void addItem(QLayoutItem* item) override { m_items.append(item); }
  [[nodiscard]] int count() const override { return static_cast<int>(m_items.size()); }
  [[nodiscard]] QLayoutItem* itemAt(int index) const override { return m_items.value(index); }
  QLayoutItem* takeAt(int index) override;
  [[nodiscard]] Qt::Orientations expandingDirections() const override { return {}; }
  [[nodiscard]] bool hasHeightForWidth() const override { return true; }
  [[nodiscard]] int heightForWidth(int width) const override { return place(QRect(0, 0, width, 0), false); }
  void setGeometry(const QRect& rect) override;
  [[nodiscard]] QSize sizeHint() const override { return minimumSize(); }
  [[nodiscard]] QSize minimumSize() const override;

 private:
  int place(const QRect& rect, bool move) const;

  int m_gap;
  QList<QLayoutItem*> m_items;
};

}  // namespace tw::ui
