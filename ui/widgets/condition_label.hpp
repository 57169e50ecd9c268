// SPDX-License-Identifier: GPL-3.0-or-later
// Glyph and word of a condition side by side, in its colour; sludging is reversed.
#pragma once

#include <QWidget>
#include <optional>

#include "model/condition.hpp"
#include "ui/theme/look.hpp"

namespace tw::ui {

class ConditionLabel : public QWidget {
  Q_OBJECT

 public:
  explicit ConditionLabel(const Look& look, QWidget* parent = nullptr);
  /// `text` is the word as shown; without a condition only the text. `stale` adds the second mark.
  void setCondition(std::optional<model::Condition> condition, const QString& text, bool stale);
  /// Height of the glyph, px; the word is in proportion.
  void setGlyphSize(int pixels);
  [[nodiscard]] QSize sizeHint() const override;
  [[nodiscard]] QSize minimumSizeHint() const override { return sizeHint(); }

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  [[nodiscard]] QFont wordFont() const;

  const Look& m_look;
  std::optional<model::Condition> m_condition;
  QString m_text;
  bool m_stale = false;
  int m_glyph = 30;
};

}  // namespace tw::ui
