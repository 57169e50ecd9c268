// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/alarm_keeper.hpp"

#include <algorithm>
#include <iterator>
#include <set>
#include <utility>

#include "io/log.hpp"

namespace tw::monitor {
namespace {

/// A new occurrence; every other change belongs to the one before it.
bool raises(const AlarmChange& change) { return change.change == "raised"; }

}  // namespace

void AlarmKeeper::save(std::vector<AlarmChange> changes) {
  for (AlarmChange& change : changes) m_waiting.push_back({std::move(change), m_clock.now(), {}});
  flush();
}

void AlarmKeeper::save(AlarmChange change, std::function<void(model::Result<model::Done>)> then) {
  m_waiting.push_back({std::move(change), m_clock.now(), std::move(then)});
  flush();
}

void AlarmKeeper::flush() {
  if (m_busy || m_waiting.empty()) return;
  auto batch = std::make_shared<std::vector<Entry>>(std::make_move_iterator(m_waiting.begin()),
                                                    std::make_move_iterator(m_waiting.end()));
  m_waiting.clear();
  m_busy = true;
  const auto ids = std::make_shared<std::map<Key, std::int64_t>>(m_ids);
  const auto job = [batch, ids](io::Store& store) -> model::Result<model::Done> {
    for (Entry& entry : *batch) {
      io::AlarmRow& alarm = entry.change.alarm;
      std::int64_t& known = (*ids)[Key{alarm.tank, alarm.kind, alarm.subject}];
      if (raises(entry.change)) {
        known = 0;
      } else if (alarm.id != 0) {
        known = alarm.id;
      }
      alarm.id = known;
      const std::string& by = entry.change.change == "acknowledged" ? alarm.acknowledgedBy : "service";
      const auto saved = store.saveAlarm(alarm, entry.at, by, entry.change.change);
      if (!saved) return model::fail(saved.error());
      known = alarm.id = *saved;
    }
    return model::Done{};
  };
  const bool taken = m_pipeline.write(job, [this, batch, ids](const model::Result<model::Done>& done) {
    if (done) m_ids = *ids;
    onDone(std::move(*batch), done);
  });
  if (taken) return;
  m_busy = false;
  m_waiting.insert(m_waiting.begin(), std::make_move_iterator(batch->begin()),
                   std::make_move_iterator(batch->end()));
}

void AlarmKeeper::onDone(std::vector<Entry> batch, const model::Result<model::Done>& done) {
  m_busy = false;
  if (!done) {
    io::log(io::LogLevel::Error, "alarms_not_stored", {{"detail", done.error().detail}});
    for (Entry& entry : batch) {
      if (entry.then) std::exchange(entry.then, {})(done);
      if (raises(entry.change)) entry.change.alarm.id = 0;
    }
    // Kept for the next flush: the minute timer's, or the next alarm's.
    m_waiting.insert(m_waiting.begin(), std::make_move_iterator(batch.begin()),
                     std::make_move_iterator(batch.end()));
    return;
  }
  assignIds(batch);
  for (const Entry& entry : batch) {
    m_outlets.saved(entry.change);
    if (entry.then) entry.then(done);
  }
  flush();
}

/// Of each key only the newest occurrence still wants its id, and none whose successor waits to be saved.
void AlarmKeeper::assignIds(const std::vector<Entry>& batch) {
  std::set<Key> done;
  const auto keyOf = [](const Entry& entry) {
    return Key{entry.change.alarm.tank, entry.change.alarm.kind, entry.change.alarm.subject};
  };
  for (const Entry& later : m_waiting) {
    if (raises(later.change)) done.insert(keyOf(later));
  }
  for (auto entry = batch.rbegin(); entry != batch.rend(); ++entry) {
    if (done.insert(keyOf(*entry)).second) m_outlets.assignId(entry->change.alarm);
  }
}

}  // namespace tw::monitor
