// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/client/api_client.hpp"

#include <QCoreApplication>
#include <QNetworkReply>
#include <QPointer>
#include <QThreadPool>
#include <QUrlQuery>
#include <algorithm>
#include <memory>
#include <utility>

#include "ui/client/decode.hpp"

namespace tw::ui {
namespace {

/// Bodies above this are read on the thread pool: some 2 ms of parsing on a slow shop PC.
constexpr qsizetype kLongBody = 32 * 1024;
/// Points of a trend asked for at most: five years of hourly results.
constexpr int kMostPoints = 45000;

QString timeParameter(const QDateTime& at) { return at.toUTC().toString(Qt::ISODateWithMs); }

}  // namespace

ApiClient::ApiClient(const QUrl& base, const QByteArray& token, const ClientTimes& times, QObject* parent)
    : QObject(parent), m_base(base), m_token(token), m_times(times) {
  m_network.setParent(this);
  m_live.setParent(this);
  connect(&m_live, &QWebSocket::connected, this, &ApiClient::liveOpened);
  connect(&m_live, &QWebSocket::disconnected, this, &ApiClient::liveClosed);
  connect(&m_live, &QWebSocket::textMessageReceived, this, &ApiClient::takeLive);
  connect(&m_live, &QWebSocket::pong, this, &ApiClient::answered);
  m_pulse.setInterval(m_times.pulse_ms);
  connect(&m_pulse, &QTimer::timeout, this, &ApiClient::pulse);
  m_retry.setSingleShot(true);
  connect(&m_retry, &QTimer::timeout, this, [this] {
    refresh();
    openLive();
  });
  m_dueSoon.setSingleShot(true);
  m_dueSoon.setInterval(400);  // a bench sheet brings several readings at once
  connect(&m_dueSoon, &QTimer::timeout, this, &ApiClient::askDue);
  m_pause_ms = m_times.retryFirst_ms;
}

ApiClient::~ApiClient() {
  m_live.disconnect(this);
  m_live.abort();
}

void ApiClient::feed(ApiClient& client, ShopData& data) {
  connect(&client, &ApiClient::linkChanged, &data, &ShopData::setLink);
  connect(&client, &ApiClient::shopArrived, &data, &ShopData::setShop);
  connect(&client, &ApiClient::tanksArrived, &data, &ShopData::setTanks);
  connect(&client, &ApiClient::alarmsArrived, &data, &ShopData::setAlarms);
  connect(&client, &ApiClient::dueArrived, &data, &ShopData::setDue);
  connect(&client, &ApiClient::liveArrived, &data, &ShopData::applyLive);
  connect(&client, &ApiClient::acknowledged, &data, &ShopData::applyAlarm);
}

void ApiClient::start() {
  refresh();
  openLive();
  m_pulse.start();
}

QNetworkRequest ApiClient::request(const QString& path, int timeout_ms) const {
  const QUrl relative(path);
  QUrl url = m_base;
  url.setPath(m_base.path() + QStringLiteral("/api/v1") + relative.path());
  url.setQuery(relative.query());
  QNetworkRequest made(url);
  made.setTransferTimeout(timeout_ms > 0 ? timeout_ms : m_times.answer_ms);
  made.setRawHeader("Accept", "application/json");
  if (!m_token.isEmpty()) made.setRawHeader("Authorization", "Bearer " + m_token);
  return made;
}

void ApiClient::get(const QString& path, Body done, Failure failed, int timeout_ms) {
  QNetworkReply* reply = m_network.get(request(path, timeout_ms));
  connect(reply, &QNetworkReply::finished, this,
          [this, reply, done = std::move(done), failed = std::move(failed)] { finish(reply, done, failed); });
}

void ApiClient::finish(QNetworkReply* reply, const Body& done, const Failure& failed) {
  reply->deleteLater();
  const QByteArray body = reply->readAll();
  const int status = reply->attribute(QNetworkRequest::HttpStatusCodeAttribute).toInt();
  if (status == 0) {  // no answer at all
    failed(reply->errorString());
    lost();
    return;
  }
  answered();
  if (status >= 200 && status < 300) {
    done(body);
    return;
  }
  const std::string why = problemText(body);
  failed(why.empty() ? reply->errorString() : QString::fromStdString(why));
}

template <class Value>
void ApiClient::read(const QByteArray& body, model::Result<Value> (*decode)(const QByteArray&),
                     std::function<void(const Value&)> done, Failure failed) {
  const auto deliver = [this, done = std::move(done), failed = std::move(failed)](const auto& value) {
    if (value) {
      done(*value);
      return;
    }
    const QString why = QString::fromStdString(value.error().detail);
    if (failed) failed(why);
    Q_EMIT badAnswer(why);
  };
  if (body.size() < kLongBody) {
    deliver(decode(body));
    return;
  }
  QThreadPool::globalInstance()->start([self = QPointer<ApiClient>(this), body, decode, deliver] {
    auto value = std::make_shared<model::Result<Value>>(decode(body));
    // The client may have gone meanwhile; the application object has not.
    QMetaObject::invokeMethod(qApp, [self, value, deliver] {
      if (self) deliver(*value);
    });
  });
}

void ApiClient::refresh() {
  const Failure ignore = [](const QString&) {};
  get(QStringLiteral("/shop"), [this](const QByteArray& body) {
    read<ShopView>(body, decodeShop, [this](const auto& shop) { Q_EMIT shopArrived(shop); }, {});
  }, ignore);
  get(QStringLiteral("/tanks"), [this](const QByteArray& body) {
    read<std::vector<io::wire::TankView>>(
        body, decodeTanks, [this](const auto& tanks) { Q_EMIT tanksArrived(tanks); }, {});
  }, ignore);
  get(QStringLiteral("/alarms"), [this](const QByteArray& body) {
    read<std::vector<io::wire::AlarmView>>(
        body, decodeAlarms, [this](const auto& alarms) { Q_EMIT alarmsArrived(alarms); }, {});
  }, ignore);
  askDue();
}

void ApiClient::askDue() {
  get(QStringLiteral("/due"), [this](const QByteArray& body) {
    read<std::vector<DueView>>(body, decodeDue, [this](const auto& due) { Q_EMIT dueArrived(due); }, {});
  }, [](const QString&) {});
}

void ApiClient::askHistory(const std::string& tank, const QDateTime& since) {
  const QString base = QStringLiteral("/tanks/") + QString::fromStdString(tank);
  const QString query = QStringLiteral("?since=%1&limit=%2").arg(timeParameter(since)).arg(kMostPoints);
  const Failure failed = [this, tank](const QString& why) { Q_EMIT historyFailed(tank, why); };
  get(base + QStringLiteral("/results") + query + QStringLiteral("&compact=true"),
      [this, tank, failed](const QByteArray& body) {
        read<std::vector<io::wire::ResultView>>(
            body, decodeResults, [this, tank](const auto& rows) { Q_EMIT resultsArrived(tank, rows); }, failed);
      }, failed);
  get(base + QStringLiteral("/readings") + query, [this, tank, failed](const QByteArray& body) {
    read<std::vector<io::wire::ReadingView>>(
        body, decodeReadings, [this, tank](const auto& rows) { Q_EMIT readingsArrived(tank, rows); }, failed);
  }, failed);
  get(base + QStringLiteral("/events?since=") + timeParameter(since),
      [this, tank, failed](const QByteArray& body) {
        read<std::vector<EventView>>(
            body, decodeEvents, [this, tank](const auto& rows) { Q_EMIT eventsArrived(tank, rows); }, failed);
      }, failed);
  get(QStringLiteral("/alarms?all=true"), [this, failed](const QByteArray& body) {
    read<std::vector<io::wire::AlarmView>>(
        body, decodeAlarms, [this](const auto& rows) { Q_EMIT alarmHistoryArrived(rows); }, failed);
  }, failed);
}

void ApiClient::askAnalysis(const std::string& tank, qint64 result, const std::string& sampledAt) {
  const Failure failed = [this, result](const QString& why) { Q_EMIT analysisFailed(result, why); };
  const QString at = QString::fromStdString(sampledAt);
  // `until` keeps the answer to one sample time; a service that does not know it sends the rest as well.
  const QString path = QStringLiteral("/tanks/%1/results?since=%2&until=%2").arg(QString::fromStdString(tank), at);
  get(path, [this, result, failed](const QByteArray& body) {
    QThreadPool::globalInstance()->start([self = QPointer<ApiClient>(this), body, result, failed] {
      auto value = std::make_shared<model::Result<AnalysisView>>(decodeAnalysis(body, result));
      QMetaObject::invokeMethod(qApp, [self, value, failed] {
        if (!self) return;
        if (*value) {
          Q_EMIT self->analysisArrived(**value);
        } else {
          failed(QString::fromStdString(value->error().detail));
        }
      });
    });
  }, failed);
}

void ApiClient::acknowledge(qint64 alarm, const std::string& op, const std::string& comment) {
  QNetworkRequest made = request(QStringLiteral("/alarms/%1/acknowledge").arg(alarm), 0);
  made.setHeader(QNetworkRequest::ContentTypeHeader, QByteArrayLiteral("application/json"));
  const Failure failed = [this, alarm](const QString& why) { Q_EMIT acknowledgeFailed(alarm, why); };
  QNetworkReply* reply = m_network.post(made, encodeAcknowledge(op, comment));
  connect(reply, &QNetworkReply::finished, this, [this, reply, failed] {
    finish(reply, [this, failed](const QByteArray& body) {
      read<io::wire::AlarmView>(body, decodeAlarm, [this](const auto& view) { Q_EMIT acknowledged(view); }, failed);
    }, failed);
  });
}

void ApiClient::openLive() {
  if (m_live.state() != QAbstractSocket::UnconnectedState) return;
  QUrl url = m_base;
  url.setScheme(m_base.scheme() == QLatin1String("https") ? QStringLiteral("wss") : QStringLiteral("ws"));
  url.setPath(m_base.path() + QStringLiteral("/api/v1/live"));
  QNetworkRequest made(url);
  if (!m_token.isEmpty()) made.setRawHeader("Authorization", "Bearer " + m_token);
  m_live.open(made);
}

void ApiClient::liveOpened() {
  m_liveOpen = true;
  answered();
  setLink(Link::Live);
}

void ApiClient::liveClosed() {
  const bool was = std::exchange(m_liveOpen, false);
  if (was) {
    lost();
  } else if (!m_retry.isActive() && m_link != Link::Lost) {
    m_retry.start(m_times.retryMost_ms);  // answers come without pushes: try the pushes again later
  }
}

void ApiClient::takeLive(const QString& message) {
  answered();
  const auto live = decodeLive(message.toUtf8());
  if (!live) {
    Q_EMIT badAnswer(QString::fromStdString(live.error().detail));
    return;
  }
  Q_EMIT liveArrived(*live);
  if (live->type == "reading" || live->type == "result") m_dueSoon.start();
}

void ApiClient::pulse() {
  m_quiet_ms += m_times.pulse_ms;
  if (m_link == Link::Lost) return;
  if (m_quiet_ms > m_times.silence_ms) {
    lost();
    return;
  }
  if (m_liveOpen) {
    m_live.ping();
    return;
  }
  if (m_asking || m_link == Link::Connecting) return;
  m_asking = true;
  get(QStringLiteral("/tanks"), [this](const QByteArray& body) {
    m_asking = false;
    read<std::vector<io::wire::TankView>>(
        body, decodeTanks, [this](const auto& tanks) { Q_EMIT tanksArrived(tanks); }, {});
  }, [this](const QString&) { m_asking = false; }, m_times.silence_ms);
}

void ApiClient::answered() {
  m_quiet_ms = 0;
  m_pause_ms = m_times.retryFirst_ms;
  if (m_link == Link::Connecting || m_link == Link::Lost) {
    const bool back = m_link == Link::Lost;
    setLink(m_liveOpen ? Link::Live : Link::Asking);
    if (back) {
      m_retry.stop();
      refresh();  // whatever was pushed meanwhile has been missed
      openLive();
    }
  }
}

void ApiClient::lost() {
  setLink(Link::Lost);
  m_asking = false;
  m_liveOpen = false;  // before the abort: its signal must not count as a second loss
  if (m_live.state() != QAbstractSocket::UnconnectedState) m_live.abort();
  if (m_retry.isActive()) return;
  m_retry.start(m_pause_ms);
  m_pause_ms = std::min(m_pause_ms * 2, m_times.retryMost_ms);
}

void ApiClient::setLink(Link link) {
  if (m_link == link) return;
  m_link = link;
  Q_EMIT linkChanged(link);
}

}  // namespace tw::ui
