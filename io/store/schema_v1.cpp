// SPDX-License-Identifier: GPL-3.0-or-later
// Version 1: readings, events, results, recipes, alarms, liquors to solve, settings. STORE.md explains
// every table and column. Times are milliseconds since 1970-01-01T00:00:00Z.
#include "io/store/schema.hpp"

namespace tw::io::store {

namespace {

constexpr const char* kTables = R"sql(
CREATE TABLE meta (
  key   TEXT NOT NULL PRIMARY KEY,
  value TEXT NOT NULL
) STRICT, WITHOUT ROWID;

-- Clustered by tank and time: a trend is one run of pages.
CREATE TABLE reading (
  tank           TEXT    NOT NULL,
  sampled_at     INTEGER NOT NULL,
  id             INTEGER NOT NULL,
  channel        TEXT    NOT NULL,
  value          REAL,
  unit           TEXT    NOT NULL,
  entered        TEXT    NOT NULL,
  entered_unit   TEXT    NOT NULL,
  offset_min     INTEGER NOT NULL,
  inputs         TEXT    NOT NULL,
  operator       TEXT    NOT NULL,
  source         TEXT    NOT NULL,
  state          TEXT    NOT NULL CHECK (state IN ('accepted', 'suspicious', 'refused', 'superseded')),
  reason         TEXT    NOT NULL,
  received_at    INTEGER NOT NULL,
  supersedes     INTEGER REFERENCES reading (id),
  CHECK (value IS NOT NULL OR state IN ('refused', 'superseded')),
  PRIMARY KEY (tank, sampled_at, id)
) STRICT, WITHOUT ROWID;
CREATE UNIQUE INDEX reading_id ON reading (id);
CREATE INDEX reading_accepted ON reading (tank, channel, sampled_at, id) WHERE state = 'accepted';

-- A reading is superseded when it stands here; its own row never changes.
CREATE TABLE supersession (
  old_id INTEGER NOT NULL PRIMARY KEY REFERENCES reading (id),
  new_id INTEGER NOT NULL REFERENCES reading (id),
  CHECK (new_id <> old_id)
) STRICT;

CREATE TABLE event (
  tank        TEXT    NOT NULL,
  at          INTEGER NOT NULL,
  id          INTEGER NOT NULL,
  kind        TEXT    NOT NULL,
  offset_min  INTEGER NOT NULL,
  stock       TEXT    NOT NULL,
  amount      REAL,
  unit        TEXT    NOT NULL,
  operator    TEXT    NOT NULL,
  lot         TEXT    NOT NULL,
  note        TEXT    NOT NULL,
  source      TEXT    NOT NULL,
  received_at INTEGER NOT NULL,
  PRIMARY KEY (tank, at, id)
) STRICT, WITHOUT ROWID;
CREATE UNIQUE INDEX event_id ON event (id);

-- AUTOINCREMENT: a mark is never used twice, so settling an old one cannot take off a newer one.
CREATE TABLE pending_liquor (
  mark       INTEGER PRIMARY KEY AUTOINCREMENT,
  tank       TEXT    NOT NULL,
  sampled_at INTEGER NOT NULL,
  waiting    INTEGER NOT NULL DEFAULT 0 CHECK (waiting IN (0, 1)),
  UNIQUE (tank, sampled_at)
) STRICT;
CREATE INDEX pending_liquor_ready ON pending_liquor (sampled_at, tank) WHERE waiting = 0;
CREATE INDEX pending_liquor_waiting ON pending_liquor (tank, sampled_at) WHERE waiting = 1;

-- The long JSON stands apart, so that a trend reads short rows.
CREATE TABLE result (
  tank           TEXT    NOT NULL,
  sampled_at     INTEGER NOT NULL,
  id             INTEGER NOT NULL,
  computed_at    INTEGER NOT NULL,
  recipe_sha256  TEXT    NOT NULL,
  program_version TEXT   NOT NULL,
  condition      TEXT    NOT NULL,
  doubtful       INTEGER NOT NULL CHECK (doubtful IN (0, 1)),
  reliable       INTEGER NOT NULL CHECK (reliable IN (0, 1)),
  historic       INTEGER NOT NULL CHECK (historic IN (0, 1)),
  pm             REAL,
  ph             REAL,
  temperature_c  REAL,
  bed            REAL,
  ionic_strength REAL,
  margins        TEXT    NOT NULL,
  channel_values TEXT    NOT NULL,
  PRIMARY KEY (tank, sampled_at, id)
) STRICT, WITHOUT ROWID;
CREATE UNIQUE INDEX result_id ON result (id);
CREATE TABLE result_detail (
  result_id INTEGER NOT NULL PRIMARY KEY REFERENCES result (id),
  json      TEXT    NOT NULL
) STRICT;
CREATE TABLE result_reading (
  result_id  INTEGER NOT NULL REFERENCES result (id),
  reading_id INTEGER NOT NULL REFERENCES reading (id),
  PRIMARY KEY (result_id, reading_id)
) STRICT, WITHOUT ROWID;
CREATE INDEX result_reading_by_reading ON result_reading (reading_id);
CREATE TABLE result_withdrawn (
  result_id INTEGER NOT NULL PRIMARY KEY REFERENCES result (id)
) STRICT;

CREATE TABLE recipe (
  sha256    TEXT NOT NULL PRIMARY KEY,
  recipe_id TEXT NOT NULL,
  json      TEXT NOT NULL
) STRICT;
CREATE TABLE recipe_in_force (
  id            INTEGER PRIMARY KEY,
  tank          TEXT    NOT NULL,
  since         INTEGER NOT NULL,
  recipe_id     TEXT    NOT NULL,
  recipe_sha256 TEXT    NOT NULL REFERENCES recipe (sha256),
  by_whom       TEXT    NOT NULL,
  reason        TEXT    NOT NULL
) STRICT;
CREATE INDEX recipe_in_force_tank ON recipe_in_force (tank, since, id);

CREATE TABLE alarm (
  id              INTEGER PRIMARY KEY,
  tank            TEXT    NOT NULL,
  kind            TEXT    NOT NULL,
  subject         TEXT    NOT NULL,
  word            TEXT    NOT NULL,
  priority        TEXT    NOT NULL,
  state           TEXT    NOT NULL,
  raised_at       INTEGER NOT NULL,
  cleared_at      INTEGER,
  acknowledged_at INTEGER,
  acknowledged_by TEXT    NOT NULL,
  comment         TEXT    NOT NULL,
  value           REAL,
  limit_value     REAL,
  unit            TEXT    NOT NULL,
  to_do           TEXT    NOT NULL,
  historic        INTEGER NOT NULL CHECK (historic IN (0, 1))
) STRICT;
CREATE INDEX alarm_standing ON alarm (raised_at, id) WHERE state <> 'normal';
CREATE INDEX alarm_raised ON alarm (raised_at, id);
CREATE TABLE alarm_change (
  id              INTEGER PRIMARY KEY,
  alarm_id        INTEGER NOT NULL REFERENCES alarm (id),
  at              INTEGER NOT NULL,
  by_whom         TEXT    NOT NULL,
  change          TEXT    NOT NULL,
  word            TEXT    NOT NULL,
  priority        TEXT    NOT NULL,
  state           TEXT    NOT NULL,
  raised_at       INTEGER NOT NULL,
  cleared_at      INTEGER,
  acknowledged_at INTEGER,
  acknowledged_by TEXT    NOT NULL,
  comment         TEXT    NOT NULL,
  value           REAL,
  limit_value     REAL,
  to_do           TEXT    NOT NULL
) STRICT;
CREATE INDEX alarm_change_alarm ON alarm_change (alarm_id, id);

CREATE TABLE settings (
  id     INTEGER PRIMARY KEY,
  tank   TEXT    NOT NULL,
  key    TEXT    NOT NULL,
  since  INTEGER NOT NULL,
  value  TEXT    NOT NULL,
  person TEXT    NOT NULL,
  reason TEXT    NOT NULL
) STRICT;
CREATE INDEX settings_key ON settings (tank, key, since, id);

INSERT INTO meta (key, value) VALUES ('format', 'tankward-store');
)sql";

struct Kept {
  const char* table;
  const char* key;  ///< what a row is known by
};

/// History: rows that are added and never changed or deleted, whoever asks.
constexpr Kept kHistory[] = {
    {"reading", "id"},         {"supersession", "old_id"},       {"event", "id"},
    {"result", "id"},          {"result_detail", "result_id"},   {"result_withdrawn", "result_id"},
    {"recipe", "sha256"},      {"recipe_in_force", "id"},        {"alarm_change", "id"},
    {"settings", "id"},
};

std::string refuse(const std::string& table, const std::string& doing, const std::string& when) {
  return "CREATE TRIGGER " + table + "_no_" + doing + " BEFORE " + doing + " ON " + table + when +
         " BEGIN SELECT RAISE(ABORT, '" + table + " is history: no " + doing + "'); END;\n";
}

/// INSERT OR REPLACE deletes without asking a DELETE trigger, so a known key is refused here.
std::string refuseReplacement(const Kept& kept) {
  const std::string table = kept.table;
  const std::string key = kept.key;
  return "CREATE TRIGGER " + table + "_no_replace BEFORE INSERT ON " + table + " WHEN EXISTS (SELECT 1 FROM " +
         table + " WHERE " + key + " = new." + key + ") BEGIN SELECT RAISE(ABORT, '" + table +
         " is history: this row exists'); END;\n";
}

std::string triggers() {
  std::string sql;
  for (const Kept& kept : kHistory) {
    sql += refuse(kept.table, "update", "") + refuse(kept.table, "delete", "") + refuseReplacement(kept);
  }
  sql += refuse("result_reading", "update", "") + refuse("result_reading", "delete", "");
  sql += refuse("alarm", "delete", "") + refuseReplacement({"alarm", "id"});
  // An alarm's row moves with its state, but stays the alarm of the same cause.
  sql += refuse("alarm", "update",
                " WHEN new.id IS NOT old.id OR new.tank IS NOT old.tank OR new.kind IS NOT old.kind"
                " OR new.subject IS NOT old.subject OR new.historic IS NOT old.historic");
  return sql;
}

}  // namespace

std::string schemaStep1() { return kTables + triggers(); }

}  // namespace tw::io::store
