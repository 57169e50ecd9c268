// SPDX-License-Identifier: GPL-3.0-or-later
// The desk's window: head, banner of a lost service, and one view at a time.
#pragma once

#include <QLabel>
#include <QPointer>
#include <QStackedWidget>
#include <QTimer>
#include <QWidget>

#include "ui/client/api_client.hpp"
#include "ui/theme/look.hpp"
#include "ui/views/acknowledge_dialog.hpp"
#include "ui/views/line/line_view.hpp"
#include "ui/views/tank/tank_view.hpp"
#include "ui/views/top_bar.hpp"

namespace tw::ui {

class MainWindow : public QWidget {
  Q_OBJECT

 public:
  MainWindow(Look& look, ShopData& shopData, ApiClient& client, const Format& format, QWidget* parent = nullptr);

  /// "line" | "tank".
  void showView(const QString& view);
  void openTank(const std::string& tank);
  [[nodiscard]] QString currentView() const;
  /// The current view has all its data and can be grabbed.
  [[nodiscard]] bool ready() const;
  [[nodiscard]] LineView* lineView() const { return m_line; }
  [[nodiscard]] TankView* tankView() const { return m_tank; }
  [[nodiscard]] AcknowledgeDialog* dialog() const { return m_dialog; }

 public Q_SLOTS:
  void acknowledge(qint64 alarm);
  void switchTheme();
  /// Next or previous tank in the shop's order.
  void stepTank(int by);

 Q_SIGNALS:
  /// The program applies the theme to the whole application.
  void themeChanged();

 private:
  void refreshLink();
  void addShortcuts();
  [[nodiscard]] std::string firstTank() const;

  Look& m_look;
  ShopData& m_data;
  ApiClient& m_client;
  const Format& m_format;
  TopBar* m_top;
  QLabel* m_banner;
  QStackedWidget* m_views;
  LineView* m_line;
  TankView* m_tank;
  QTimer m_ages;
  QPointer<AcknowledgeDialog> m_dialog;
};

}  // namespace tw::ui
