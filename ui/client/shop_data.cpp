// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/client/shop_data.hpp"

#include <algorithm>

#include "ui/words/format.hpp"

namespace tw::ui {
namespace {

enum Part : unsigned { kShop = 1, kTanks = 2, kAlarms = 4, kDue = 8 };

}  // namespace

int priorityRank(const io::wire::AlarmView& alarm) {
  return alarm.priority == "high" ? 0 : alarm.priority == "medium" ? 1 : 2;
}

bool unacknowledged(const io::wire::AlarmView& alarm) {
  return alarm.state == "unacknowledged" || alarm.state == "returned_unacknowledged";
}

ShopData::ShopData(Clock clock, QObject* parent) : QObject(parent), m_clock(std::move(clock)) {}

const io::wire::TankView* ShopData::tank(const std::string& id) const {
  const auto found = std::find_if(m_tanks.begin(), m_tanks.end(), [&](const auto& t) { return t.id == id; });
  return found == m_tanks.end() ? nullptr : &*found;
}

QDateTime ShopData::now() const { return QDateTime::fromMSecsSinceEpoch(m_clock() + m_ahead_ms, Qt::UTC); }

void ShopData::heard(const std::string& serviceTime) {
  const QDateTime at = instant(serviceTime);
  if (at.isValid()) m_ahead_ms = at.toMSecsSinceEpoch() - m_clock();
  m_lastHeard = now();
}

void ShopData::setShop(const ShopView& shop) {
  m_shop = shop;
  m_arrived |= kShop;
  heard(shop.now);
  Q_EMIT shopChanged();
}

void ShopData::setTanks(const std::vector<io::wire::TankView>& tanks) {
  m_tanks = tanks;
  m_arrived |= kTanks;
  heard({});
  Q_EMIT tanksChanged();
}

void ShopData::setAlarms(const std::vector<io::wire::AlarmView>& alarms) {
  m_alarms = alarms;
  m_arrived |= kAlarms;
  heard({});
  Q_EMIT alarmsChanged();
}

void ShopData::setDue(const std::vector<DueView>& due) {
  m_due = due;
  m_arrived |= kDue;
  heard({});
  Q_EMIT dueChanged();
}

void ShopData::setLink(Link link) {
  if (m_link == link) return;
  m_link = link;
  Q_EMIT linkChanged();
}

void ShopData::applyAlarm(const io::wire::AlarmView& alarm) {
  std::erase_if(m_alarms, [&](const auto& known) { return known.id == alarm.id; });
  if (alarm.state != "normal") {
    // Worst first, as the service lists them: by priority, then the older one.
    const auto place = std::find_if(m_alarms.begin(), m_alarms.end(), [&](const auto& other) {
      const int mine = priorityRank(alarm);
      const int theirs = priorityRank(other);
      return mine < theirs || (mine == theirs && alarm.raisedAt < other.raisedAt);
    });
    m_alarms.insert(place, alarm);
  }
  Q_EMIT alarmsChanged();
}

void ShopData::applyLive(const io::wire::LiveMessage& message) {
  heard(message.type == "hello" ? message.at : std::string{});
  if (message.condition) {
    const auto found = std::find_if(m_tanks.begin(), m_tanks.end(),
                                    [&](const auto& tank) { return tank.id == message.condition->id; });
    if (found != m_tanks.end()) {  // a tank keeps its place: the order is the shop's
      *found = *message.condition;
      Q_EMIT tankChanged(found->id);
    }
  }
  if (message.alarm) applyAlarm(*message.alarm);
  if (message.reading) Q_EMIT readingArrived(*message.reading);
  if (message.result) Q_EMIT resultArrived(*message.result);
}

}  // namespace tw::ui
