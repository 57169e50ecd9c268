// SPDX-License-Identifier: GPL-3.0-or-later
// Events, recipes and alarms.
#include <cmath>

#include "io/store/sqlite_store.hpp"

namespace tw::io::store {

// ---- events

model::Result<std::vector<Added>> SqliteStore::addEvents(const std::vector<EventRow>& events) {
  return write([&]() -> model::Result<std::vector<Added>> {
    std::vector<Added> added;
    added.reserve(events.size());
    for (const EventRow& event : events) {
      if (event.amount && !std::isfinite(*event.amount)) {
        return model::fail(inputFault("event_invalid", event.kind, "the amount is not finite"));
      }
      added.push_back(addEvent(event));
    }
    return added;
  });
}

Added SqliteStore::addEvent(const EventRow& event) {
  {
    // The same tolerance as for readings, so that a file written and read back stays one event.
    Statement same = m_db.use("look for the same event",
                              "SELECT id FROM event WHERE tank = ?1 AND at = ?2 AND kind = ?3 AND stock = ?4"
                              " AND note = ?5 AND (amount IS ?6"
                              "  OR abs(amount - ?6) <= 1e-9 * max(abs(amount), abs(?6))) ORDER BY id LIMIT 1");
    same.bind(event.tank, event.at.at, event.kind, event.stock, event.note, event.amount);
    if (same.next()) return {AddOutcome::Duplicate, same.integer(0)};
  }
  Statement row = m_db.use("store an event",
                           "INSERT INTO event (id, tank, at, kind, offset_min, stock, amount, unit, operator, lot,"
                           " note, source, received_at) VALUES ((SELECT coalesce(max(id), 0) + 1 FROM event),"
                           " ?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12) RETURNING id");
  row.bind(event.tank, event.at.at, event.kind, std::int64_t{event.at.offset.count()}, event.stock,
           event.amount, event.unit, event.op, event.lot, event.note, event.source, event.receivedAt);
  return {AddOutcome::Stored, row.runForId()};
}

model::Result<std::vector<EventRow>> SqliteStore::events(const std::string& tank, Instant since) {
  Statement row = m_db.use("read the events of a tank",
                           "SELECT id, tank, kind, at, offset_min, stock, amount, unit, operator, lot, note,"
                           " source, received_at FROM event WHERE tank = ?1 AND at >= ?2 ORDER BY at, id");
  row.bind(tank, since);
  std::vector<EventRow> events;
  while (row.next()) {
    EventRow& event = events.emplace_back();
    event.id = row.integer(0);
    event.tank = row.text(1);
    event.kind = row.text(2);
    event.at = {row.instant(3), std::chrono::minutes(row.integer(4))};
    event.stock = row.text(5);
    event.amount = row.maybeReal(6);
    event.unit = row.text(7);
    event.op = row.text(8);
    event.lot = row.text(9);
    event.note = row.text(10);
    event.source = row.text(11);
    event.receivedAt = row.instant(12);
  }
  return m_db.finish(std::move(events));
}

// ---- recipes

model::Result<model::Done> SqliteStore::putRecipe(const std::string& sha256, const std::string& recipeId,
                                                  const std::string& json) {
  return write([&]() -> model::Result<model::Done> {
    m_db.use("keep a recipe",
             "INSERT INTO recipe (sha256, recipe_id, json) SELECT ?1, ?2, ?3"
             " WHERE NOT EXISTS (SELECT 1 FROM recipe WHERE sha256 = ?1)")
        .bind(sha256, recipeId, json)
        .run();
    return model::Done{};
  });
}

model::Result<std::optional<std::string>> SqliteStore::recipeJson(const std::string& sha256) {
  Statement row = m_db.use("read a recipe", "SELECT json FROM recipe WHERE sha256 = ?1");
  row.bind(sha256);
  std::optional<std::string> json;
  if (row.next()) json = row.text(0);
  return m_db.finish(std::move(json));
}

model::Result<model::Done> SqliteStore::setRecipeInForce(const RecipeInForce& row) {
  return write([&]() -> model::Result<model::Done> {
    const auto known = recipeJson(row.sha256);
    if (!known) return model::fail(known.error());
    if (!*known) {
      return model::fail(inputFault(
          "recipe_unknown", row.sha256,
          "the store does not hold this recipe: put it in before it comes into force"));
    }
    m_db.use("put a recipe into force",
             "INSERT INTO recipe_in_force (tank, since, recipe_id, recipe_sha256, by_whom, reason)"
             " VALUES (?1, ?2, ?3, ?4, ?5, ?6)")
        .bind(row.tank, row.since, row.recipeId, row.sha256, row.by, row.reason)
        .run();
    return model::Done{};
  });
}

model::Result<std::optional<RecipeInForce>> SqliteStore::recipeInForce(const std::string& tank, Instant at) {
  Statement row = m_db.use("read the recipe in force",
                           "SELECT tank, recipe_id, recipe_sha256, since, by_whom, reason FROM recipe_in_force"
                           " WHERE tank = ?1 AND since <= ?2 ORDER BY since DESC, id DESC LIMIT 1");
  row.bind(tank, at);
  std::optional<RecipeInForce> found;
  if (row.next()) {
    found = RecipeInForce{.tank = row.text(0),
                          .recipeId = row.text(1),
                          .sha256 = row.text(2),
                          .since = row.instant(3),
                          .by = row.text(4),
                          .reason = row.text(5)};
  }
  return m_db.finish(std::move(found));
}

// ---- alarms

model::Result<std::int64_t> SqliteStore::saveAlarm(const AlarmRow& alarm, Instant at, const std::string& by,
                                                   const std::string& change) {
  return write([&]() -> model::Result<std::int64_t> {
    std::int64_t id = 0;
    if (alarm.id == 0) {
      Statement row = m_db.use("store an alarm",
                               "INSERT INTO alarm (word, priority, state, raised_at, cleared_at, acknowledged_at,"
                               " acknowledged_by, comment, value, limit_value, unit, to_do, tank, kind, subject,"
                               " historic) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, ?14,"
                               " ?15, ?16) RETURNING id");
      row.bind(alarm.word, alarm.priority, alarm.state, alarm.raisedAt, alarm.clearedAt, alarm.acknowledgedAt,
               alarm.acknowledgedBy, alarm.comment, alarm.value, alarm.limit, alarm.unit, alarm.toDo,
               alarm.tank, alarm.kind, alarm.subject, alarm.historic);
      id = row.runForId();
    } else {
      Statement row = m_db.use("change an alarm",
                               "UPDATE alarm SET word = ?1, priority = ?2, state = ?3, raised_at = ?4,"
                               " cleared_at = ?5, acknowledged_at = ?6, acknowledged_by = ?7, comment = ?8,"
                               " value = ?9, limit_value = ?10, unit = ?11, to_do = ?12, tank = ?13, kind = ?14,"
                               " subject = ?15, historic = ?16 WHERE id = ?17 RETURNING id");
      row.bind(alarm.word, alarm.priority, alarm.state, alarm.raisedAt, alarm.clearedAt, alarm.acknowledgedAt,
               alarm.acknowledgedBy, alarm.comment, alarm.value, alarm.limit, alarm.unit, alarm.toDo,
               alarm.tank, alarm.kind, alarm.subject, alarm.historic, alarm.id);
      id = row.runForId();
    }
    if (id == 0 && !m_db.failed()) {
      const std::string subject = std::to_string(alarm.id);
      return model::fail(inputFault("alarm_unknown", subject, "there is no alarm " + subject));
    }
    insertAlarmChange(alarm, id, at, by, change);
    return id;
  });
}

void SqliteStore::insertAlarmChange(const AlarmRow& alarm, std::int64_t id, Instant at, const std::string& by,
                                    const std::string& change) {
  m_db.use("write the alarm journal",
           "INSERT INTO alarm_change (alarm_id, at, by_whom, change, word, priority, state, raised_at, cleared_at,"
           " acknowledged_at, acknowledged_by, comment, value, limit_value, to_do)"
           " VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, ?14, ?15)")
      .bind(id, at, by, change, alarm.word, alarm.priority, alarm.state, alarm.raisedAt, alarm.clearedAt,
            alarm.acknowledgedAt, alarm.acknowledgedBy, alarm.comment, alarm.value, alarm.limit, alarm.toDo)
      .run();
}

model::Result<std::vector<AlarmRow>> SqliteStore::alarms(bool all, std::size_t limit) {
#define TW_ALARM_COLUMNS                                                                             \
  "SELECT id, tank, kind, subject, word, priority, state, unit, to_do, raised_at, cleared_at,"       \
  " acknowledged_at, acknowledged_by, comment, value, limit_value, historic FROM alarm"
  // Two texts, so that the standing ones are found by their own index however long the past is.
  Statement row = all ? m_db.use("read the alarms",
                                 TW_ALARM_COLUMNS " ORDER BY raised_at DESC, id DESC LIMIT ?1")
                      : m_db.use("read the standing alarms",
                                 TW_ALARM_COLUMNS " WHERE state <> 'normal' ORDER BY raised_at DESC, id DESC"
                                                  " LIMIT ?1");
  row.bind(sqlLimit(limit));
  std::vector<AlarmRow> alarms;
  while (row.next()) {
    AlarmRow& alarm = alarms.emplace_back();
    alarm.id = row.integer(0);
    alarm.tank = row.text(1);
    alarm.kind = row.text(2);
    alarm.subject = row.text(3);
    alarm.word = row.text(4);
    alarm.priority = row.text(5);
    alarm.state = row.text(6);
    alarm.unit = row.text(7);
    alarm.toDo = row.text(8);
    alarm.raisedAt = row.instant(9);
    alarm.clearedAt = row.maybeInstant(10);
    alarm.acknowledgedAt = row.maybeInstant(11);
    alarm.acknowledgedBy = row.text(12);
    alarm.comment = row.text(13);
    alarm.value = row.maybeReal(14);
    alarm.limit = row.maybeReal(15);
    alarm.historic = row.boolean(16);
  }
  return m_db.finish(std::move(alarms));
}

}  // namespace tw::io::store
