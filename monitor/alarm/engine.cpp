// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/alarm/engine.hpp"

#include <algorithm>
#include <array>
#include <tuple>
#include <utility>

namespace tw::monitor {
namespace {

constexpr std::array<const char*, 4> kStateNames = {"normal", "unacknowledged", "acknowledged",
                                                    "returned_unacknowledged"};

bool holds(AlarmState state) {
  return state == AlarmState::Unacknowledged || state == AlarmState::Acknowledged;
}

void takeFigures(io::AlarmRow& alarm, const Observation& seen) {
  alarm.value = seen.value;
  alarm.limit = seen.limit;
  alarm.unit = seen.unit;
  alarm.toDo = seen.toDo;
}

void takeWord(io::AlarmRow& alarm, const std::string& word) {
  alarm.word = word;
  alarm.priority = priorityOf(word);
}

io::AlarmRow newAlarm(const Observation& seen, io::Instant now) {
  io::AlarmRow alarm;
  alarm.tank = seen.tank;
  alarm.kind = seen.kind;
  alarm.subject = seen.subject;
  alarm.raisedAt = now;
  alarm.state = name(next(AlarmState::Normal, AlarmEvent::Stands));
  takeWord(alarm, seen.word);
  takeFigures(alarm, seen);
  return alarm;
}

void raiseAgain(io::AlarmRow& alarm, AlarmEvent event, const Observation& seen, io::Instant now) {
  alarm.state = name(next(alarmState(alarm.state), event));
  alarm.raisedAt = now;
  alarm.clearedAt.reset();
  alarm.acknowledgedAt.reset();
  alarm.acknowledgedBy.clear();
  alarm.comment.clear();
  takeWord(alarm, seen.word);
}

}  // namespace

const char* name(AlarmState state) { return kStateNames.at(static_cast<std::size_t>(state)); }

AlarmState alarmState(const std::string& name) {
  for (std::size_t i = 0; i < kStateNames.size(); ++i) {
    if (name == kStateNames[i]) return static_cast<AlarmState>(i);
  }
  return AlarmState::Normal;
}

AlarmState next(AlarmState state, AlarmEvent event) {
  switch (event) {
    case AlarmEvent::Stands:
      return state == AlarmState::Acknowledged ? state : AlarmState::Unacknowledged;
    case AlarmEvent::Worse:
      return AlarmState::Unacknowledged;
    case AlarmEvent::Clears:
      if (state == AlarmState::Unacknowledged) return AlarmState::ReturnedUnacknowledged;
      return state == AlarmState::Acknowledged ? AlarmState::Normal : state;
    case AlarmEvent::Acknowledge:
      if (state == AlarmState::Unacknowledged) return AlarmState::Acknowledged;
      return state == AlarmState::ReturnedUnacknowledged ? AlarmState::Normal : state;
    case AlarmEvent::Suppress:
      return AlarmState::Normal;
  }
  return state;
}

const char* priorityOf(const std::string& word) {
  if (word == "brink" || word == "sludging") return "high";
  return word == "drifting" ? "low" : "medium";
}

int severityOf(const std::string& word) {
  if (word.empty()) return 0;
  if (word == "drifting") return 1;
  if (word == "brink") return 3;
  if (word == "sludging") return 4;
  return 2;  // tight, and the kinds that have one word only
}

io::AlarmRow* AlarmEngine::find(const std::string& tank, const std::string& kind,
                                const std::string& subject) {
  const auto at = std::find_if(m_alarms.begin(), m_alarms.end(), [&](const io::AlarmRow& alarm) {
    return alarm.tank == tank && alarm.kind == kind && alarm.subject == subject;
  });
  return at == m_alarms.end() ? nullptr : &*at;
}

void AlarmEngine::drop(const io::AlarmRow& alarm) {
  m_alarms.erase(m_alarms.begin() + (&alarm - m_alarms.data()));
}

std::vector<AlarmChange> AlarmEngine::observe(const std::vector<Observation>& observations,
                                              io::Instant now) {
  std::vector<AlarmChange> changes;
  for (const Observation& seen : observations) {
    io::AlarmRow* alarm = find(seen.tank, seen.kind, seen.subject);
    if (alarm == nullptr) {
      if (seen.word.empty()) continue;
      m_alarms.push_back(newAlarm(seen, now));
      changes.push_back({m_alarms.back(), "raised"});
      continue;
    }
    const AlarmState state = alarmState(alarm->state);
    const int before = severityOf(alarm->word);
    const int passed = severityOf(seen.word);
    if (!holds(state)) {
      if (passed == 0) continue;
      raiseAgain(*alarm, AlarmEvent::Stands, seen, now);
      takeFigures(*alarm, seen);
      changes.push_back({*alarm, "raised again"});
    } else if (passed > before) {
      raiseAgain(*alarm, AlarmEvent::Worse, seen, now);
      takeFigures(*alarm, seen);
      changes.push_back({*alarm, "worse"});
    } else if (seen.heldWord.empty()) {
      alarm->state = name(next(state, AlarmEvent::Clears));
      alarm->clearedAt = now;
      alarm->value = seen.value;
      changes.push_back({*alarm, "cleared"});
      if (alarmState(alarm->state) == AlarmState::Normal) drop(*alarm);
    } else if (severityOf(seen.heldWord) < before) {
      takeWord(*alarm, seen.heldWord);
      takeFigures(*alarm, seen);
      changes.push_back({*alarm, "eased"});
    } else {
      takeFigures(*alarm, seen);
    }
  }
  return changes;
}

std::vector<AlarmChange> AlarmEngine::suppress(const std::string& tank, io::Instant now) {
  std::vector<AlarmChange> changes;
  for (io::AlarmRow& alarm : m_alarms) {
    if (alarm.tank != tank) continue;
    alarm.state = name(next(alarmState(alarm.state), AlarmEvent::Suppress));
    if (!alarm.clearedAt) alarm.clearedAt = now;
    changes.push_back({alarm, "suppressed"});
  }
  std::erase_if(m_alarms, [&](const io::AlarmRow& alarm) { return alarm.tank == tank; });
  return changes;
}

std::optional<AlarmChange> AlarmEngine::acknowledge(std::int64_t id, const std::string& person,
                                                    const std::string& comment, io::Instant now) {
  const auto at = std::find_if(m_alarms.begin(), m_alarms.end(),
                               [&](const io::AlarmRow& alarm) { return alarm.id == id; });
  if (at == m_alarms.end() || id == 0) return std::nullopt;
  const AlarmState before = alarmState(at->state);
  const AlarmState after = next(before, AlarmEvent::Acknowledge);
  if (after == before) return AlarmChange{*at, ""};
  at->state = name(after);
  at->acknowledgedAt = now;
  at->acknowledgedBy = person;
  at->comment = comment;
  const AlarmChange change{*at, "acknowledged"};
  if (after == AlarmState::Normal) m_alarms.erase(at);
  return change;
}

void AlarmEngine::assignId(const std::string& tank, const std::string& kind, const std::string& subject,
                           std::int64_t id) {
  io::AlarmRow* alarm = find(tank, kind, subject);
  if (alarm != nullptr && alarm->id == 0) alarm->id = id;
}

std::vector<io::AlarmRow> AlarmEngine::standing() const {
  std::vector<io::AlarmRow> rows = m_alarms;
  std::stable_sort(rows.begin(), rows.end(), [](const io::AlarmRow& a, const io::AlarmRow& b) {
    const auto rank = [](const io::AlarmRow& alarm) {
      return std::make_tuple(alarm.state == name(AlarmState::Unacknowledged) ? 0 : 1,
                             -severityOf(alarm.word), alarm.raisedAt);
    };
    return rank(a) < rank(b);
  });
  return rows;
}

std::vector<io::AlarmRow> AlarmEngine::standing(const std::string& tank) const {
  std::vector<io::AlarmRow> rows = standing();
  std::erase_if(rows, [&](const io::AlarmRow& alarm) { return alarm.tank != tank; });
  return rows;
}

}  // namespace tw::monitor
