// SPDX-License-Identifier: GPL-3.0-or-later
// Text in a fixed number of lines: wrapped, and cut with an ellipsis when it is longer. Unlike a wrapping
// QLabel it never asks for more height, so that rows of tanks keep one floor.
#pragma once

#include <QWidget>

#include "ui/theme/look.hpp"

namespace tw::ui {

class WrapText : public QWidget {
  Q_OBJECT

 public:
  WrapText(const Look& look, int pixelSize, int lines, QWidget* parent = nullptr);
  void setText(const QString& text);
  [[nodiscard]] QString text() const { return m_text; }

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  const Look& m_look;
  int m_lines;
  QString m_text;
};

}  // namespace tw::ui
