// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/line/entries.hpp"

#include <algorithm>
#include <cmath>

#include "ui/words/words.hpp"

namespace tw::ui {
namespace {

/// Worst first; a stale tank comes after everything that is known to be bad.
int rank(model::Condition condition) {
  switch (condition) {
    case model::Condition::Sludging: return 0;
    case model::Condition::Brink: return 1;
    case model::Condition::Tight: return 2;
    case model::Condition::Stale: return 3;
    case model::Condition::Drifting: return 4;
    case model::Condition::Fine: return 5;
  }
  return 5;
}

QString dueText(const DueView& due) { return Words::channelShort(due.channel, due.title); }

/// Read off an instrument; everything else is titrated or otherwise analysed.
bool isRead(const std::string& channel) { return channel == "ph" || channel == "temperature"; }

}  // namespace

std::vector<StripEntry> Entries::needSomebody() const {
  std::vector<StripEntry> rows;
  for (const io::wire::TankView& tank : m_data.tanks()) {
    const auto condition = Words::conditionOf(tank);
    if (!tank.inService || !condition || *condition == model::Condition::Fine) continue;
    rows.push_back({tank.id, tank.id, condition, QString::fromStdString(tank.title),
                    m_reasons.headline(tank, m_data.now()), {}, {}, false});
  }
  std::stable_sort(rows.begin(), rows.end(), [](const StripEntry& a, const StripEntry& b) {
    return rank(*a.condition) < rank(*b.condition);
  });
  return rows;
}

std::vector<StripEntry> Entries::toAcknowledge() const {
  std::vector<StripEntry> rows;
  for (const io::wire::AlarmView& alarm : m_data.alarms()) {
    if (!unacknowledged(alarm)) continue;
    const io::wire::TankView* tank = m_data.tank(alarm.tank);
    const QString title = tank != nullptr ? QString::fromStdString(tank->title)
                                          : QString::fromStdString(alarm.tank.empty() ? alarm.subject : alarm.tank);
    const QString what = m_reasons.alarm(alarm, tank);
    const QString since = m_format.age(instant(alarm.raisedAt), m_data.now());
    const QString detail = alarm.state == "returned_unacknowledged" ? tr("back to normal; %1").arg(what) : what;
    rows.push_back({std::to_string(alarm.id), alarm.tank, model::condition(alarm.word),
                    tr("%1, %2").arg(title, since), detail, tr("acknowledge"),
                    tr("raised %1").arg(m_format.clockWithOffset(instant(alarm.raisedAt))),
                    alarm.priority == "high"});
  }
  return rows;
}

std::vector<StripEntry> Entries::due() const {
  std::vector<StripEntry> rows;
  for (const DueView& due : m_data.due()) {
    const QDateTime at = instant(due.dueAt);
    const double hours = std::abs(static_cast<double>(m_data.now().secsTo(at)) / 3600.0);
    const QString when = !at.isValid()  ? tr("never measured")
                         : due.overdue ? tr("overdue by %1").arg(m_format.span(hours))
                                       : tr("in %1").arg(m_format.span(hours));
    const QString last = due.lastAt.empty()
                             ? when
                             : tr("%1; last %2").arg(when, m_format.clock(instant(due.lastAt), m_data.now()));
    rows.push_back({due.tank + '/' + due.channel, due.tank, std::nullopt,
                    tr("%1: %2").arg(QString::fromStdString(due.tankTitle), dueText(due)), last, {},
                    tr("due %1").arg(m_format.clockWithOffset(at)), due.overdue});
  }
  return rows;
}

TankHelp Entries::helpFor(const io::wire::TankView& tank) const {
  if (tank.inService) {
    for (const io::wire::AlarmView& alarm : m_data.alarms()) {
      if (alarm.tank == tank.id && unacknowledged(alarm)) {
        return {TankHelp::Kind::Acknowledge, tr("acknowledge alarm\u2026"), alarm.id};
      }
    }
    for (const DueView& due : m_data.due()) {
      if (due.tank == tank.id && due.overdue) {
        const QString text = isRead(due.channel) ? tr("read %1") : tr("titrate %1");
        return {TankHelp::Kind::Titrate, text.arg(dueText(due)), 0};
      }
    }
  }
  return {TankHelp::Kind::OpenTank, tr("open"), 0};
}

}  // namespace tw::ui
