// SPDX-License-Identifier: GPL-3.0-or-later
// How to read the pictures: the six words with their glyphs, the bed, its mark, the limits.
#pragma once

#include <QWidget>

#include "ui/theme/look.hpp"

namespace tw::ui {

class Legend : public QWidget {
  Q_OBJECT

 public:
  explicit Legend(const Look& look, QWidget* parent = nullptr);
  [[nodiscard]] QSize sizeHint() const override { return {900, 34}; }
  [[nodiscard]] QSize minimumSizeHint() const override { return {200, 34}; }

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  const Look& m_look;
};

}  // namespace tw::ui
