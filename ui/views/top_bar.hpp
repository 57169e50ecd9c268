// SPDX-License-Identifier: GPL-3.0-or-later
// The head of the window: shop, the two views, how the desk stands to the service, who acts, theme.
#pragma once

#include <QFrame>
#include <QLabel>
#include <QLineEdit>
#include <QPushButton>

#include "ui/client/shop_data.hpp"
#include "ui/theme/look.hpp"
#include "ui/words/format.hpp"

namespace tw::ui {

class TopBar : public QFrame {
  Q_OBJECT

 public:
  TopBar(const Look& look, const ShopData& shopData, const Format& format, QWidget* parent = nullptr);
  void refresh();
  void setCurrentView(const QString& view);  ///< "line" | "tank"
  [[nodiscard]] QString operatorName() const { return m_operator->text().trimmed(); }
  void setOperatorName(const QString& name) { m_operator->setText(name); }
  [[nodiscard]] QLabel* linkLabel() const { return m_link; }

 Q_SIGNALS:
  void viewWanted(const QString& view);
  void themeSwitched();

 protected:
  void paintEvent(QPaintEvent* event) override;
  void resizeEvent(QResizeEvent* event) override;

 private:
  const Look& m_look;
  const ShopData& m_data;
  const Format& m_format;
  QLabel* m_title;
  QPushButton* m_line;
  QPushButton* m_tank;
  QLabel* m_link;
  QLabel* m_who;
  QLineEdit* m_operator;
  QPushButton* m_theme;
};

}  // namespace tw::ui
