// SPDX-License-Identifier: GPL-3.0-or-later
// Saves alarm changes in order, one batch at a time, and gives new alarms their ids. On the loop's thread.
#pragma once

#include <deque>
#include <functional>
#include <map>
#include <string>
#include <tuple>
#include <vector>

#include "monitor/alarm/engine.hpp"
#include "monitor/pipeline/pipeline.hpp"

namespace tw::monitor {

class AlarmKeeper {
 public:
  struct Outlets {
    std::function<void(const io::AlarmRow& saved)> assignId;
    std::function<void(const AlarmChange& saved)> saved;  ///< durable; has its id
  };
  AlarmKeeper(Pipeline& pipeline, const io::Clock& clock, Outlets outlets)
      : m_pipeline(pipeline), m_clock(clock), m_outlets(std::move(outlets)) {}

  void save(std::vector<AlarmChange> changes);
  /// One change whose maker waits for it.
  void save(AlarmChange change, std::function<void(model::Result<model::Done>)> then);
  /// Tries again what a full or failing store did not take (once a minute).
  void flush();
  [[nodiscard]] bool idle() const { return m_waiting.empty() && !m_busy; }

 private:
  using Key = std::tuple<std::string, std::string, std::string>;  // tank, kind, subject
  struct Entry {
    AlarmChange change;
    io::Instant at{};
    std::function<void(model::Result<model::Done>)> then;
  };
  void onDone(std::vector<Entry> batch, const model::Result<model::Done>& done);

  void assignIds(const std::vector<Entry>& batch);

  Pipeline& m_pipeline;
  const io::Clock& m_clock;
  Outlets m_outlets;
  std::deque<Entry> m_waiting;
  std::map<Key, std::int64_t> m_ids;  ///< of the newest occurrence saved under each key
  bool m_busy = false;
};

}  // namespace tw::monitor
