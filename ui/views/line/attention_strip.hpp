// SPDX-License-Identifier: GPL-3.0-or-later
// The strip above the line: tanks that need somebody, alarms to acknowledge, what is due.
#pragma once

#include <QFrame>

#include "ui/views/line/strip_column.hpp"

namespace tw::ui {

class AttentionStrip : public QFrame {
  Q_OBJECT

 public:
  AttentionStrip(const Look& look, const ShopData& shopData, const Format& format, QWidget* parent = nullptr);
  void refresh();

 Q_SIGNALS:
  void tankOpened(const std::string& tank);
  void acknowledgeWanted(qint64 alarm);

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  const Look& m_look;
  Entries m_entries;
  StripColumn* m_needed;
  StripColumn* m_alarms;
  StripColumn* m_due;
};

}  // namespace tw::ui
