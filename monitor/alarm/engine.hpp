// SPDX-License-Identifier: GPL-3.0-or-later
// The alarm life cycle after IEC 62682 / ISA-18.2 (state table from memory of the standard): normal,
// unacknowledged, acknowledged, returned unacknowledged. Pure: state + observation + time -> changes.
// Timers, store and notices are the caller's.
//
// There is one alarm per tank, kind and subject. A condition that gets worse (tight to brink) makes an
// acknowledged alarm unacknowledged again: it asks for another response.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "io/store/store.hpp"

namespace tw::monitor {

/// Kinds of alarm, as stored and sent.
namespace kind {
inline constexpr const char* kMargin = "margin";
inline constexpr const char* kGuard = "guard";
inline constexpr const char* kSolid = "solid";
inline constexpr const char* kWindow = "window";
inline constexpr const char* kStale = "stale";
inline constexpr const char* kLink = "link";
}  // namespace kind

enum class AlarmState { Normal, Unacknowledged, Acknowledged, ReturnedUnacknowledged };
[[nodiscard]] const char* name(AlarmState state);
/// An unknown name is read as Normal.
[[nodiscard]] AlarmState alarmState(const std::string& name);

enum class AlarmEvent { Stands, Worse, Clears, Acknowledge, Suppress };
/// The state table. Stands = the condition holds (still or again).
[[nodiscard]] AlarmState next(AlarmState state, AlarmEvent event);

/// What is known of one (tank, kind, subject) now.
struct Observation {
  std::string tank, kind, subject;
  /// Word of the limit that is passed: "tight", "brink", "sludging", or the kind ("window", "stale",
  /// "link"); empty = none.
  std::string word;
  /// The same with the deadband counted: what a standing alarm still holds on to. Never milder than word.
  std::string heldWord;
  std::optional<double> value, limit;
  std::string unit, toDo;
};

/// high: brink, sludging; medium: tight, window, stale, link (FORMATS section 4); low: drifting.
[[nodiscard]] const char* priorityOf(const std::string& word);
/// Order of words, 0 = none; a larger number is worse.
[[nodiscard]] int severityOf(const std::string& word);

struct AlarmChange {
  io::AlarmRow alarm;  ///< as it is after the change
  /// "raised", "raised again", "worse", "eased", "cleared", "acknowledged", "suppressed"
  std::string change;
};

class AlarmEngine {
 public:
  AlarmEngine() = default;
  /// State from before a restart: the alarms whose state is not normal.
  explicit AlarmEngine(std::vector<io::AlarmRow> standing) : m_alarms(std::move(standing)) {}

  /// Takes what is known now; what is not observed stays as it is. A changed value alone is no change.
  std::vector<AlarmChange> observe(const std::vector<Observation>& observations, io::Instant now);
  /// Alarms of a tank taken out of service fall silent; they are judged afresh when it returns.
  std::vector<AlarmChange> suppress(const std::string& tank, io::Instant now);
  /// nullopt when no standing alarm has this id. Acknowledging twice changes nothing and is no error:
  /// the alarm is returned with an empty `change`.
  std::optional<AlarmChange> acknowledge(std::int64_t id, const std::string& person,
                                         const std::string& comment, io::Instant now);

  /// The store has given a new alarm its id.
  void assignId(const std::string& tank, const std::string& kind, const std::string& subject,
                std::int64_t id);

  /// Not normal ones, worst first: unacknowledged before the rest, then word, then age.
  [[nodiscard]] std::vector<io::AlarmRow> standing() const;
  [[nodiscard]] std::vector<io::AlarmRow> standing(const std::string& tank) const;

 private:
  io::AlarmRow* find(const std::string& tank, const std::string& kind, const std::string& subject);
  void drop(const io::AlarmRow& alarm);
  std::vector<io::AlarmRow> m_alarms;
};

}  // namespace tw::monitor
