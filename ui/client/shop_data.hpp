// SPDX-License-Identifier: GPL-3.0-or-later
// The last known state of the shop: what the service said, kept while it is away. Fed by ApiClient,
// read by every view; lives on the GUI thread.
#pragma once

#include <QDateTime>
#include <QObject>
#include <functional>
#include <vector>

#include "io/wire/api.hpp"
#include "ui/client/desk_values.hpp"

namespace tw::ui {

/// How the desk stands to the service.
enum class Link {
  Connecting,  ///< nothing heard since the start
  Live,        ///< pushes arrive
  Asking,      ///< answers arrive, pushes do not: asked every second
  Lost,        ///< nothing arrives; the last data stay on screen
};

class ShopData : public QObject {
  Q_OBJECT

 public:
  /// Milliseconds since 1970 UTC of this PC; handed in so that tests hold the clock.
  using Clock = std::function<qint64()>;
  explicit ShopData(Clock clock, QObject* parent = nullptr);

  [[nodiscard]] const ShopView& shop() const { return m_shop; }
  [[nodiscard]] const std::vector<io::wire::TankView>& tanks() const { return m_tanks; }
  [[nodiscard]] const io::wire::TankView* tank(const std::string& id) const;  ///< nullptr when unknown
  [[nodiscard]] const std::vector<io::wire::AlarmView>& alarms() const { return m_alarms; }
  [[nodiscard]] const std::vector<DueView>& due() const { return m_due; }
  [[nodiscard]] Link link() const { return m_link; }
  [[nodiscard]] QDateTime lastHeard() const { return m_lastHeard; }  ///< service time; invalid = never
  /// The service's clock: this PC's, corrected by the difference last seen.
  [[nodiscard]] QDateTime now() const;
  /// Shop, tanks, alarms and due list have each arrived once.
  [[nodiscard]] bool complete() const { return m_arrived == 0xF; }

 public Q_SLOTS:
  void setShop(const tw::ui::ShopView& shop);
  void setTanks(const std::vector<tw::io::wire::TankView>& tanks);
  void setAlarms(const std::vector<tw::io::wire::AlarmView>& alarms);
  void setDue(const std::vector<tw::ui::DueView>& due);
  void setLink(tw::ui::Link link);
  void applyLive(const tw::io::wire::LiveMessage& message);
  void applyAlarm(const tw::io::wire::AlarmView& alarm);

 Q_SIGNALS:
  void shopChanged();
  void tanksChanged();                          ///< the list as a whole
  void tankChanged(const std::string& id);      ///< one of them
  void alarmsChanged();
  void dueChanged();
  void linkChanged();
  void resultArrived(const tw::io::wire::ResultView& result);
  void readingArrived(const tw::io::wire::ReadingView& reading);

 private:
  void heard(const std::string& serviceTime);

  Clock m_clock;
  ShopView m_shop;
  std::vector<io::wire::TankView> m_tanks;
  std::vector<io::wire::AlarmView> m_alarms;
  std::vector<DueView> m_due;
  Link m_link = Link::Connecting;
  QDateTime m_lastHeard;
  qint64 m_ahead_ms = 0;  ///< service clock minus ours
  unsigned m_arrived = 0;
};

/// high 0, medium 1, low 2: the order of alarms.
[[nodiscard]] int priorityRank(const io::wire::AlarmView& alarm);
[[nodiscard]] bool unacknowledged(const io::wire::AlarmView& alarm);

}  // namespace tw::ui
