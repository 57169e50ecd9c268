// SPDX-License-Identifier: GPL-3.0-or-later
#include <cmath>

#include "io/store/sqlite_store.hpp"

namespace tw::io::store {

namespace {

/// Two canonical values are the same reading within this (FORMATS section 5): the last digits that a
/// conversion there and back may change.
constexpr double kSameValue_rel = 1e-9;

bool sameValue(double a, double b) {
  return std::abs(a - b) <= kSameValue_rel * std::max(std::abs(a), std::abs(b));
}

#define TW_READING_COLUMNS                                                                              \
  "r.id, r.tank, r.channel, r.sampled_at, r.offset_min, r.value, r.unit, r.entered, r.entered_unit, "   \
  "r.inputs, r.operator, r.source, r.state, r.reason, r.received_at, r.supersedes, "                    \
  "EXISTS (SELECT 1 FROM supersession s WHERE s.old_id = r.id)"

/// A row of TW_READING_COLUMNS.
Reading readingOf(const Statement& row) {
  Reading reading;
  reading.id = row.integer(0);
  reading.tank = row.text(1);
  reading.channel = row.text(2);
  reading.sampledAt = {row.instant(3), std::chrono::minutes(row.integer(4))};
  reading.value = row.maybeReal(5);
  reading.unit = row.text(6);
  reading.entered = row.text(7);
  reading.enteredUnit = row.text(8);
  reading.inputs = row.text(9);
  reading.op = row.text(10);
  reading.source = row.text(11);
  reading.state = row.boolean(16) ? ReadingState::Superseded
                                  : readingState(row.text(12)).value_or(ReadingState::Refused);
  reading.reason = row.text(13);
  reading.receivedAt = row.instant(14);
  reading.supersedes = row.maybeInteger(15);
  return reading;
}

/// What is already known of the same tank, time and channel, as far as it matters for a new row.
struct Known {
  std::optional<std::int64_t> same;         ///< the row this one repeats
  std::optional<std::int64_t> sameRefused;  ///< the same value, refused before
  std::optional<std::int64_t> rival;        ///< an accepted row with another value
};

/// The fault of a row that must not reach a table; nullopt = fine.
std::optional<model::Fault> invalid(const NewReading& reading) {
  const bool mayLackValue = reading.state == ReadingState::Refused || reading.state == ReadingState::Superseded;
  std::string why;
  if (reading.tank.empty() || reading.channel.empty()) why = "a reading needs a tank and a channel";
  if (reading.value && !std::isfinite(*reading.value)) why = "the value is not finite";
  if (!reading.value && !mayLackValue) why = "only a refused reading may lack a value";
  if (why.empty()) return std::nullopt;
  return inputFault("reading_invalid", reading.channel,
                    why + " (tank '" + reading.tank + "', entered '" + reading.entered + "')");
}

bool usable(const NewReading& reading) {
  return reading.state == ReadingState::Accepted || reading.state == ReadingState::Suspicious;
}

Known known(Database& db, const NewReading& reading) {
  Statement row = db.use("look for the same reading",
                         "SELECT r.id, r.value, r.entered, r.state,"
                         " EXISTS (SELECT 1 FROM supersession s WHERE s.old_id = r.id)"
                         " FROM reading r WHERE r.tank = ?1 AND r.sampled_at = ?2 AND r.channel = ?3"
                         " ORDER BY r.id");
  row.bind(reading.tank, reading.sampledAt.at, reading.channel);
  Known found;
  bool onlyDeclared = true;  // nothing here but rows that came as superseded, from an export
  while (row.next()) {
    const std::int64_t id = row.integer(0);
    const auto value = row.maybeReal(1);
    const bool refused = row.text(3) == name(ReadingState::Refused);
    const bool current = !row.boolean(4);
    const bool accepted = row.text(3) == name(ReadingState::Accepted);
    onlyDeclared = onlyDeclared && row.text(3) == name(ReadingState::Superseded);
    const bool same = reading.value ? value && sameValue(*value, *reading.value)
                                    : !value && row.text(2) == reading.entered;
    if (same && refused && usable(reading)) {
      if (current) found.sameRefused = id;
    } else if (same && (!found.same || (current && accepted))) {
      found.same = id;
    } else if (!same && current && accepted) {
      found.rival = id;
    }
  }
  // A suspicious reading and its confirmation have the same value: after the first has been read back,
  // the second is still missing.
  if (onlyDeclared && reading.state != ReadingState::Superseded) found.same.reset();
  return found;
}

}  // namespace

model::Result<std::vector<Added>> SqliteStore::addReadings(const std::vector<NewReading>& readings) {
  for (const NewReading& reading : readings) {
    if (auto fault = invalid(reading)) return model::fail(std::move(*fault));
  }
  return write([&]() -> model::Result<std::vector<Added>> {
    std::vector<Added> added;
    added.reserve(readings.size());
    for (const NewReading& reading : readings) added.push_back(addReading(reading));
    return added;
  });
}

Added SqliteStore::addReading(const NewReading& reading) {
  const Known found = known(m_db, reading);
  if (found.same) return {AddOutcome::Duplicate, *found.same};
  if (usable(reading) && found.rival) {
    const std::string conflict = "another value than reading " + std::to_string(*found.rival);
    const std::string reason = reading.reason.empty() ? conflict : reading.reason + "; " + conflict;
    return {AddOutcome::Conflict, insertReading(reading, ReadingState::Suspicious, reason, std::nullopt)};
  }
  const std::int64_t id = insertReading(reading, reading.state, reading.reason, found.sameRefused);
  if (found.sameRefused) supersede(*found.sameRefused, id);
  if (reading.state == ReadingState::Accepted) markPending(reading.tank, reading.sampledAt.at);
  return {AddOutcome::Stored, id};
}

std::int64_t SqliteStore::insertReading(const NewReading& reading, ReadingState state,
                                        const std::string& reason, std::optional<std::int64_t> supersedes) {
  Statement row = m_db.use("store a reading",
                           "INSERT INTO reading (id, tank, channel, sampled_at, offset_min, value, unit, entered,"
                           " entered_unit, inputs, operator, source, state, reason, received_at, supersedes)"
                           " VALUES ((SELECT coalesce(max(id), 0) + 1 FROM reading), ?1, ?2, ?3, ?4, ?5, ?6, ?7,"
                           " ?8, ?9, ?10, ?11, ?12, ?13, ?14, ?15) RETURNING id");
  row.bind(reading.tank, reading.channel, reading.sampledAt.at,
           std::int64_t{reading.sampledAt.offset.count()}, reading.value, reading.unit, reading.entered,
           reading.enteredUnit, reading.inputs, reading.op, reading.source, name(state), reason,
           reading.receivedAt, supersedes);
  return row.runForId();
}

void SqliteStore::supersede(std::int64_t oldId, std::int64_t newId) {
  m_db.use("supersede a reading", "INSERT INTO supersession (old_id, new_id) VALUES (?1, ?2)")
      .bind(oldId, newId)
      .run();
}

void SqliteStore::supersedeRivals(const NewReading& reading, std::int64_t newId) {
  std::vector<std::int64_t> rivals;
  {
    Statement row = m_db.use("look for accepted readings of the same time",
                             "SELECT r.id FROM reading r WHERE r.tank = ?1 AND r.channel = ?2"
                             " AND r.sampled_at = ?3 AND r.state = 'accepted' AND r.id <> ?4"
                             " AND NOT EXISTS (SELECT 1 FROM supersession s WHERE s.old_id = r.id)");
    row.bind(reading.tank, reading.channel, reading.sampledAt.at, newId);
    while (row.next()) rivals.push_back(row.integer(0));
  }
  for (const std::int64_t rival : rivals) {
    supersede(rival, newId);
    markUsersPending(rival);
  }
}

model::Result<Reading> SqliteStore::replaceable(std::int64_t id) {
  std::optional<Reading> found = findReading(id);
  if (auto fault = m_db.takeFault()) return model::fail(std::move(*fault));
  const std::string subject = std::to_string(id);
  if (!found) {
    return model::fail(inputFault("reading_unknown", subject, "there is no reading " + subject));
  }
  if (found->state == ReadingState::Superseded) {
    return model::fail(inputFault(
        "already_superseded", subject,
        "reading " + subject + " was replaced before: correct the one that replaced it"));
  }
  return std::move(*found);
}

model::Result<std::int64_t> SqliteStore::correctReading(std::int64_t id, const NewReading& corrected) {
  if (auto fault = invalid(corrected)) return model::fail(std::move(*fault));
  return write([&]() -> model::Result<std::int64_t> {
    const auto old = replaceable(id);
    if (!old) return model::fail(old.error());
    const std::int64_t newId = insertReading(corrected, corrected.state, corrected.reason, id);
    supersede(id, newId);
    markUsersPending(id);
    if (corrected.state == ReadingState::Accepted) {
      supersedeRivals(corrected, newId);
      markPending(corrected.tank, corrected.sampledAt.at);
    }
    // The time the old one leaves (it may be another) has lost a reading.
    if (old->state == ReadingState::Accepted) markPending(old->tank, old->sampledAt.at);
    return newId;
  });
}

model::Result<std::int64_t> SqliteStore::confirmReading(std::int64_t id, const std::string& person, Instant at) {
  return write([&]() -> model::Result<std::int64_t> {
    auto old = replaceable(id);
    if (!old) return model::fail(old.error());
    if (old->state != ReadingState::Suspicious) {
      const std::string subject = std::to_string(id);
      return model::fail(inputFault(
          "not_suspicious", subject,
          "reading " + subject + " is " + name(old->state) + ": nothing to confirm"));
    }
    NewReading confirmed = *old;
    confirmed.op = person;
    confirmed.receivedAt = at;
    const std::string reason = old->reason.empty() ? "confirmed" : "confirmed: " + old->reason;
    const std::int64_t newId = insertReading(confirmed, ReadingState::Accepted, reason, id);
    supersede(id, newId);
    supersedeRivals(confirmed, newId);
    markPending(confirmed.tank, confirmed.sampledAt.at);
    return newId;
  });
}

std::optional<Reading> SqliteStore::findReading(std::int64_t id) {
  Statement row = m_db.use("read a reading", "SELECT " TW_READING_COLUMNS " FROM reading r WHERE r.id = ?1");
  row.bind(id);
  return row.next() ? std::optional(readingOf(row)) : std::nullopt;
}

model::Result<std::optional<Reading>> SqliteStore::reading(std::int64_t id) {
  return m_db.finish(findReading(id));
}

model::Result<std::vector<Reading>> SqliteStore::readings(const std::string& tank, Instant since,
                                                          std::size_t limit) {
  Statement row = m_db.use("read the readings of a tank",
                           "SELECT " TW_READING_COLUMNS " FROM reading r WHERE r.tank = ?1"
                           " AND r.sampled_at >= ?2 ORDER BY r.sampled_at, r.id LIMIT ?3");
  row.bind(tank, since, sqlLimit(limit));
  std::vector<Reading> readings;
  while (row.next()) readings.push_back(readingOf(row));
  return m_db.finish(std::move(readings));
}

// Two walks along the index of accepted readings: from channel to channel, and in each from `at` back to
// the first one that nothing supersedes. Neither looks at the rest of the history.
model::Result<std::map<std::string, Reading>> SqliteStore::newestAccepted(const std::string& tank, Instant at) {
  Statement row = m_db.use(
      "read the newest accepted readings",
      "WITH RECURSIVE known (channel) AS ("
      " SELECT min(channel) FROM reading WHERE tank = ?1 AND state = 'accepted'"
      " UNION ALL"
      " SELECT (SELECT min(n.channel) FROM reading n WHERE n.tank = ?1 AND n.state = 'accepted'"
      "  AND n.channel > known.channel) FROM known WHERE known.channel IS NOT NULL)"
      " SELECT " TW_READING_COLUMNS
      " FROM known JOIN reading r ON r.id = ("
      "  SELECT a.id FROM reading a WHERE a.tank = ?1 AND a.state = 'accepted' AND a.channel = known.channel"
      "   AND a.sampled_at <= ?2 AND NOT EXISTS (SELECT 1 FROM supersession s WHERE s.old_id = a.id)"
      "  ORDER BY a.sampled_at DESC, a.id DESC LIMIT 1)"
      " WHERE known.channel IS NOT NULL");
  row.bind(tank, at);
  std::map<std::string, Reading> newest;
  while (row.next()) {
    Reading reading = readingOf(row);
    newest.emplace(reading.channel, std::move(reading));
  }
  return m_db.finish(std::move(newest));
}

}  // namespace tw::io::store
