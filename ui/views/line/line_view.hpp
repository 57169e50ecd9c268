// SPDX-License-Identifier: GPL-3.0-or-later
// The start view: every line of the shop as it stands, tanks in hoist order, never reordered.
#pragma once

#include <QScrollArea>
#include <QVBoxLayout>
#include <QWidget>
#include <vector>

#include "ui/views/line/attention_strip.hpp"
#include "ui/views/line/tank_card.hpp"

namespace tw::ui {

class LineView : public QWidget {
  Q_OBJECT

 public:
  LineView(const Look& look, const ShopData& shopData, const Format& format, QWidget* parent = nullptr);
  /// Ages and what is due move on with the clock.
  void refreshAges();
  [[nodiscard]] const std::vector<TankCard*>& cards() const { return m_cards; }

 Q_SIGNALS:
  void tankOpened(const std::string& tank);
  void acknowledgeWanted(qint64 alarm);

 private:
  void rebuildIfChanged();
  void rebuild();
  QWidget* lineRow(const std::string& line, const QString& title);

  const Look& m_look;
  const ShopData& m_data;
  const Format& m_format;
  AttentionStrip* m_strip;
  QVBoxLayout* m_lines;
  std::vector<TankCard*> m_cards;
  std::vector<std::string> m_built;  ///< line and tank ids the rows were built from
};

}  // namespace tw::ui
