// SPDX-License-Identifier: GPL-3.0-or-later
// The one place that talks to the service. Asynchronous on the GUI thread; long bodies are read on the
// thread pool. Plain values come out as signals; the last data are kept by ShopData.
//
// Reads are repeated until they succeed: a lost service is asked again after 0.25 s, 0.5 s ... 4 s.
// Writes are sent once, and their outcome is always signalled, so that typed input can stay on screen.
#pragma once

#include <QHash>
#include <QNetworkAccessManager>
#include <QTimer>
#include <QUrl>
#include <QWebSocket>
#include <functional>
#include <string>
#include <vector>

#include "model/result.hpp"
#include "ui/client/desk_values.hpp"
#include "ui/client/shop_data.hpp"

class QNetworkReply;

namespace tw::ui {

/// Times of the client, ms. The defaults show a lost service within 2 s.
struct ClientTimes {
  int answer_ms = 8000;      ///< an ordinary answer
  int silence_ms = 1400;     ///< without any sign of life the service counts as lost
  int pulse_ms = 300;        ///< how often a sign of life is asked for
  int retryFirst_ms = 250;
  int retryMost_ms = 4000;
};

class ApiClient : public QObject {
  Q_OBJECT

 public:
  /// `base` like http://127.0.0.1:8484; `token` is sent as Bearer when not empty.
  ApiClient(const QUrl& base, const QByteArray& token, const ClientTimes& times = {},
            QObject* parent = nullptr);
  ~ApiClient() override;

  /// Connects a client to the data it feeds.
  static void feed(ApiClient& client, ShopData& data);

 public Q_SLOTS:
  void start();
  /// Trend of one tank since a time: results, readings, events and alarms each come when they come.
  void askHistory(const std::string& tank, const QDateTime& since);
  /// The whole analysis of one result.
  void askAnalysis(const std::string& tank, qint64 result, const std::string& sampledAt);
  void acknowledge(qint64 alarm, const std::string& op, const std::string& comment);

 Q_SIGNALS:
  void linkChanged(tw::ui::Link link);
  void shopArrived(const tw::ui::ShopView& shop);
  void tanksArrived(const std::vector<tw::io::wire::TankView>& tanks);
  void alarmsArrived(const std::vector<tw::io::wire::AlarmView>& alarms);
  void dueArrived(const std::vector<tw::ui::DueView>& due);
  void liveArrived(const tw::io::wire::LiveMessage& message);
  void resultsArrived(const std::string& tank, const std::vector<tw::io::wire::ResultView>& results);
  void readingsArrived(const std::string& tank, const std::vector<tw::io::wire::ReadingView>& readings);
  void eventsArrived(const std::string& tank, const std::vector<tw::ui::EventView>& events);
  void alarmHistoryArrived(const std::vector<tw::io::wire::AlarmView>& alarms);
  void historyFailed(const std::string& tank, const QString& why);
  void analysisArrived(const tw::ui::AnalysisView& analysis);
  void analysisFailed(qint64 result, const QString& why);
  void acknowledged(const tw::io::wire::AlarmView& alarm);
  void acknowledgeFailed(qint64 alarm, const QString& why);
  /// An answer that could not be read; for the log and the header.
  void badAnswer(const QString& what);

 private:
  using Body = std::function<void(const QByteArray&)>;
  using Failure = std::function<void(const QString&)>;

  [[nodiscard]] QNetworkRequest request(const QString& path, int timeout_ms) const;
  void get(const QString& path, Body done, Failure failed, int timeout_ms = 0);
  void finish(QNetworkReply* reply, const Body& done, const Failure& failed);
  template <class Value>
  void read(const QByteArray& body, model::Result<Value> (*decode)(const QByteArray&),
            std::function<void(const Value&)> done, Failure failed);
  void refresh();
  void askDue();
  void openLive();
  void liveOpened();
  void liveClosed();
  void takeLive(const QString& message);
  void pulse();
  void answered();
  void lost();
  void setLink(Link link);

  QUrl m_base;
  QByteArray m_token;
  ClientTimes m_times;
  QNetworkAccessManager m_network;
  QWebSocket m_live;
  QTimer m_pulse, m_retry, m_dueSoon;
  qint64 m_quiet_ms = 0;     ///< since the last sign of life, counted in pulses
  int m_pause_ms = 0;        ///< before the next try
  bool m_liveOpen = false;
  bool m_asking = false;     ///< a pulse's answer is outstanding
  Link m_link = Link::Connecting;
};

}  // namespace tw::ui
