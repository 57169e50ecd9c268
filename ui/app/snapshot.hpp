// SPDX-License-Identifier: GPL-3.0-or-later
// Grabs views into PNG files without a screen: waits for the data, at most 15 s a view.
#pragma once

#include <QObject>
#include <QStringList>
#include <QTimer>

#include "ui/app/options.hpp"
#include "ui/client/shop_data.hpp"

namespace tw::ui {

class MainWindow;

class Snapshot : public QObject {
  Q_OBJECT

 public:
  Snapshot(const DeskOptions& options, MainWindow& window, const ShopData& data, QObject* parent = nullptr);
  void start();

 Q_SIGNALS:
  /// Exit status as in FORMATS section 6; `message` is empty when all is well.
  void finished(int status, const QString& message);

 private:
  void step();
  void showNext();
  void grab();
  void end(int status, const QString& message);

  const DeskOptions& m_options;
  MainWindow& m_window;
  const ShopData& m_data;
  QStringList m_left;
  QTimer m_ticks;
  int m_waited_ms = 0, m_settled = 0;
  bool m_shown = false;
};

}  // namespace tw::ui
