// SPDX-License-Identifier: GPL-3.0-or-later
// One tank: the bench on the left, strips over time on the right, the analysis of a point beside them.
#pragma once

#include <QBoxLayout>
#include <QComboBox>
#include <QLabel>
#include <QPushButton>
#include <QTimer>
#include <QScrollArea>
#include <QWidget>
#include <map>
#include <set>
#include <string>

#include "ui/client/api_client.hpp"
#include "ui/client/shop_data.hpp"
#include "ui/views/tank/analysis_panel.hpp"
#include "ui/views/tank/bench_panel.hpp"
#include "ui/widgets/flow_layout.hpp"
#include "ui/widgets/strips.hpp"

namespace tw::ui {

class TankView : public QWidget {
  Q_OBJECT

 public:
  TankView(const Look& look, const ShopData& shopData, ApiClient& client, const Format& format,
           QWidget* parent = nullptr);
  void setTank(const std::string& tank);
  [[nodiscard]] const std::string& tank() const { return m_id; }
  void refreshAges();
  /// The trend has arrived and is drawn.
  [[nodiscard]] bool ready() const { return m_pending == 0 && m_drawn; }
  [[nodiscard]] Strips* strips() const { return m_strips; }
  [[nodiscard]] AnalysisPanel* analysis() const { return m_analysis; }

 Q_SIGNALS:
  void acknowledgeWanted(qint64 alarm);
  void stepWanted(int by);

 protected:
  void resizeEvent(QResizeEvent* event) override;

 private:
  enum Part : unsigned { kResults = 1, kReadings = 2, kEvents = 4, kAlarms = 8, kAll = 15 };

  void fitPanes();
  QWidget* stripSide();
  QWidget* spanRow();
  void listenToClient();
  void askSince(const QDateTime& since);
  void arrived(Part part);
  void redraw();
  /// Brings the fold buttons up to date; answers the ids that are folded away.
  std::set<std::string> fillFolds(const StripSet& set);
  void fillMargins(const io::wire::TankView& tank);
  void rangeShown(double from);
  void chooseResult(qint64 id, const std::string& sampledAt);
  void takeResult(const io::wire::ResultView& result);
  void takeReading(const io::wire::ReadingView& reading);
  void takeAlarms();

  const ShopData& m_data;
  ApiClient& m_client;
  const Format& m_format;
  std::string m_id, m_margin;
  TankHistory m_history;
  QDateTime m_since;                       ///< the trend is loaded from here
  unsigned m_pending = 0;
  bool m_drawn = false, m_fresh = true;
  std::map<std::string, bool> m_foldChoice;///< what a person folded or unfolded
  qint64 m_chosen = 0;
  QTimer m_soon;                           ///< several pushes make one redraw

  QBoxLayout* m_panes;
  QWidget* m_side;
  BenchPanel* m_bench;
  QComboBox* m_margins;
  QWidget* m_folds;
  std::map<std::string, QPushButton*> m_foldButtons;
  Strips* m_strips;
  QLabel* m_trouble;
  AnalysisPanel* m_analysis;
  std::map<Strips::Span, QPushButton*> m_spans;
};

}  // namespace tw::ui
