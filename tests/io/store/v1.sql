-- A store as version 1 wrote it: the sample for all later migrations. Never made anew.
PRAGMA application_id = 1417114212;
PRAGMA user_version = 1;
PRAGMA foreign_keys=OFF;
BEGIN TRANSACTION;
CREATE TABLE meta (
  key   TEXT NOT NULL PRIMARY KEY,
  value TEXT NOT NULL
) STRICT, WITHOUT ROWID;
INSERT INTO meta VALUES('format','tankward-store');
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
INSERT INTO reading VALUES('T1',1772431200000,1,'copper',3.4599999999999999644,'mol/L','220','g/L',60,'','AB','drop:morning.csv','accepted','',1772431260000,NULL);
INSERT INTO reading VALUES('T1',1772431200000,2,'ph',10.199999999999999289,'mol/L','10.200000','',60,'','AB','drop:morning.csv','accepted','',1772431260000,NULL);
INSERT INTO reading VALUES('T1',1772431200000,3,'copper',0.34599999999999997424,'mol/L','22.0','g/L',60,'','AB','drop:morning.csv','accepted','decimal slipped',1772431260000,1);
INSERT INTO reading VALUES('T1',1772434800000,4,'ph',10.099999999999999644,'mol/L','10.100000','',60,'','AB','drop:morning.csv','accepted','',1772434860000,NULL);
INSERT INTO reading VALUES('T1',1772434800000,5,'copper',3.5,'mol/L','3.500000','',60,'','AB','drop:morning.csv','suspicious','',1772434860000,NULL);
CREATE TABLE supersession (
  old_id INTEGER NOT NULL PRIMARY KEY REFERENCES reading (id),
  new_id INTEGER NOT NULL REFERENCES reading (id),
  CHECK (new_id <> old_id)
) STRICT;
INSERT INTO supersession VALUES(1,3);
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
INSERT INTO event VALUES('T1',1772431800000,1,'addition',60,'aqua-ammonia',12.5,'L','AB','N-17','','http',1772431860000);
CREATE TABLE pending_liquor (
  mark       INTEGER PRIMARY KEY AUTOINCREMENT,
  tank       TEXT    NOT NULL,
  sampled_at INTEGER NOT NULL,
  waiting    INTEGER NOT NULL DEFAULT 0 CHECK (waiting IN (0, 1)),
  UNIQUE (tank, sampled_at)
) STRICT;
INSERT INTO pending_liquor VALUES(5,'T1',1772434800000,0);
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
INSERT INTO result VALUES('T1',1772431200000,1,1772431320000,'aa','0.1.0','fine',0,1,0,14.249999999999999999,NULL,NULL,NULL,NULL,'{"ph_up":1.3}','{"copper":22.0,"ph":10.2}');
CREATE TABLE result_detail (
  result_id INTEGER NOT NULL PRIMARY KEY REFERENCES result (id),
  json      TEXT    NOT NULL
) STRICT;
INSERT INTO result_detail VALUES(1,'{"recipe":"copper-ammine"}');
CREATE TABLE result_reading (
  result_id  INTEGER NOT NULL REFERENCES result (id),
  reading_id INTEGER NOT NULL REFERENCES reading (id),
  PRIMARY KEY (result_id, reading_id)
) STRICT, WITHOUT ROWID;
INSERT INTO result_reading VALUES(1,2);
INSERT INTO result_reading VALUES(1,3);
CREATE TABLE result_withdrawn (
  result_id INTEGER NOT NULL PRIMARY KEY REFERENCES result (id)
) STRICT;
CREATE TABLE recipe (
  sha256    TEXT NOT NULL PRIMARY KEY,
  recipe_id TEXT NOT NULL,
  json      TEXT NOT NULL
) STRICT;
INSERT INTO recipe VALUES('aa','copper-ammine','{"id":"copper-ammine"}');
CREATE TABLE recipe_in_force (
  id            INTEGER PRIMARY KEY,
  tank          TEXT    NOT NULL,
  since         INTEGER NOT NULL,
  recipe_id     TEXT    NOT NULL,
  recipe_sha256 TEXT    NOT NULL REFERENCES recipe (sha256),
  by_whom       TEXT    NOT NULL,
  reason        TEXT    NOT NULL
) STRICT;
INSERT INTO recipe_in_force VALUES(1,'T1',1772427600000,'copper-ammine','aa','shop file','first recipe');
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
INSERT INTO alarm VALUES(1,'T1','margin','ph_up','tight','medium','acknowledged',1772431320000,NULL,1772431500000,'MN','',0.5,0.59999999999999997779,'pH','retest pH',0);
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
INSERT INTO alarm_change VALUES(1,1,1772431320000,'','raised','tight','medium','unacknowledged',1772431320000,NULL,NULL,'','',0.5,0.59999999999999997779,'retest pH');
INSERT INTO alarm_change VALUES(2,1,1772431500000,'MN','acknowledged','tight','medium','acknowledged',1772431320000,NULL,1772431500000,'MN','',0.5,0.59999999999999997779,'retest pH');
CREATE TABLE settings (
  id     INTEGER PRIMARY KEY,
  tank   TEXT    NOT NULL,
  key    TEXT    NOT NULL,
  since  INTEGER NOT NULL,
  value  TEXT    NOT NULL,
  person TEXT    NOT NULL,
  reason TEXT    NOT NULL
) STRICT;
DELETE FROM sqlite_sequence;
INSERT INTO sqlite_sequence VALUES('pending_liquor',5);
CREATE UNIQUE INDEX reading_id ON reading (id);
CREATE INDEX reading_accepted ON reading (tank, channel, sampled_at, id) WHERE state = 'accepted';
CREATE UNIQUE INDEX event_id ON event (id);
CREATE INDEX pending_liquor_ready ON pending_liquor (sampled_at, tank) WHERE waiting = 0;
CREATE INDEX pending_liquor_waiting ON pending_liquor (tank, sampled_at) WHERE waiting = 1;
CREATE UNIQUE INDEX result_id ON result (id);
CREATE INDEX result_reading_by_reading ON result_reading (reading_id);
CREATE INDEX recipe_in_force_tank ON recipe_in_force (tank, since, id);
CREATE INDEX alarm_standing ON alarm (raised_at, id) WHERE state <> 'normal';
CREATE INDEX alarm_raised ON alarm (raised_at, id);
CREATE INDEX alarm_change_alarm ON alarm_change (alarm_id, id);
CREATE INDEX settings_key ON settings (tank, key, since, id);
CREATE TRIGGER reading_no_update BEFORE update ON reading BEGIN SELECT RAISE(ABORT, 'reading is history: no update'); END;
CREATE TRIGGER reading_no_delete BEFORE delete ON reading BEGIN SELECT RAISE(ABORT, 'reading is history: no delete'); END;
CREATE TRIGGER reading_no_replace BEFORE INSERT ON reading WHEN EXISTS (SELECT 1 FROM reading WHERE id = new.id) BEGIN SELECT RAISE(ABORT, 'reading is history: this row exists'); END;
CREATE TRIGGER supersession_no_update BEFORE update ON supersession BEGIN SELECT RAISE(ABORT, 'supersession is history: no update'); END;
CREATE TRIGGER supersession_no_delete BEFORE delete ON supersession BEGIN SELECT RAISE(ABORT, 'supersession is history: no delete'); END;
CREATE TRIGGER supersession_no_replace BEFORE INSERT ON supersession WHEN EXISTS (SELECT 1 FROM supersession WHERE old_id = new.old_id) BEGIN SELECT RAISE(ABORT, 'supersession is history: this row exists'); END;
CREATE TRIGGER event_no_update BEFORE update ON event BEGIN SELECT RAISE(ABORT, 'event is history: no update'); END;
CREATE TRIGGER event_no_delete BEFORE delete ON event BEGIN SELECT RAISE(ABORT, 'event is history: no delete'); END;
CREATE TRIGGER event_no_replace BEFORE INSERT ON event WHEN EXISTS (SELECT 1 FROM event WHERE id = new.id) BEGIN SELECT RAISE(ABORT, 'event is history: this row exists'); END;
CREATE TRIGGER result_no_update BEFORE update ON result BEGIN SELECT RAISE(ABORT, 'result is history: no update'); END;
CREATE TRIGGER result_no_delete BEFORE delete ON result BEGIN SELECT RAISE(ABORT, 'result is history: no delete'); END;
CREATE TRIGGER result_no_replace BEFORE INSERT ON result WHEN EXISTS (SELECT 1 FROM result WHERE id = new.id) BEGIN SELECT RAISE(ABORT, 'result is history: this row exists'); END;
CREATE TRIGGER result_detail_no_update BEFORE update ON result_detail BEGIN SELECT RAISE(ABORT, 'result_detail is history: no update'); END;
CREATE TRIGGER result_detail_no_delete BEFORE delete ON result_detail BEGIN SELECT RAISE(ABORT, 'result_detail is history: no delete'); END;
CREATE TRIGGER result_detail_no_replace BEFORE INSERT ON result_detail WHEN EXISTS (SELECT 1 FROM result_detail WHERE result_id = new.result_id) BEGIN SELECT RAISE(ABORT, 'result_detail is history: this row exists'); END;
CREATE TRIGGER result_withdrawn_no_update BEFORE update ON result_withdrawn BEGIN SELECT RAISE(ABORT, 'result_withdrawn is history: no update'); END;
CREATE TRIGGER result_withdrawn_no_delete BEFORE delete ON result_withdrawn BEGIN SELECT RAISE(ABORT, 'result_withdrawn is history: no delete'); END;
CREATE TRIGGER result_withdrawn_no_replace BEFORE INSERT ON result_withdrawn WHEN EXISTS (SELECT 1 FROM result_withdrawn WHERE result_id = new.result_id) BEGIN SELECT RAISE(ABORT, 'result_withdrawn is history: this row exists'); END;
CREATE TRIGGER recipe_no_update BEFORE update ON recipe BEGIN SELECT RAISE(ABORT, 'recipe is history: no update'); END;
CREATE TRIGGER recipe_no_delete BEFORE delete ON recipe BEGIN SELECT RAISE(ABORT, 'recipe is history: no delete'); END;
CREATE TRIGGER recipe_no_replace BEFORE INSERT ON recipe WHEN EXISTS (SELECT 1 FROM recipe WHERE sha256 = new.sha256) BEGIN SELECT RAISE(ABORT, 'recipe is history: this row exists'); END;
CREATE TRIGGER recipe_in_force_no_update BEFORE update ON recipe_in_force BEGIN SELECT RAISE(ABORT, 'recipe_in_force is history: no update'); END;
CREATE TRIGGER recipe_in_force_no_delete BEFORE delete ON recipe_in_force BEGIN SELECT RAISE(ABORT, 'recipe_in_force is history: no delete'); END;
CREATE TRIGGER recipe_in_force_no_replace BEFORE INSERT ON recipe_in_force WHEN EXISTS (SELECT 1 FROM recipe_in_force WHERE id = new.id) BEGIN SELECT RAISE(ABORT, 'recipe_in_force is history: this row exists'); END;
CREATE TRIGGER alarm_change_no_update BEFORE update ON alarm_change BEGIN SELECT RAISE(ABORT, 'alarm_change is history: no update'); END;
CREATE TRIGGER alarm_change_no_delete BEFORE delete ON alarm_change BEGIN SELECT RAISE(ABORT, 'alarm_change is history: no delete'); END;
CREATE TRIGGER alarm_change_no_replace BEFORE INSERT ON alarm_change WHEN EXISTS (SELECT 1 FROM alarm_change WHERE id = new.id) BEGIN SELECT RAISE(ABORT, 'alarm_change is history: this row exists'); END;
CREATE TRIGGER settings_no_update BEFORE update ON settings BEGIN SELECT RAISE(ABORT, 'settings is history: no update'); END;
CREATE TRIGGER settings_no_delete BEFORE delete ON settings BEGIN SELECT RAISE(ABORT, 'settings is history: no delete'); END;
CREATE TRIGGER settings_no_replace BEFORE INSERT ON settings WHEN EXISTS (SELECT 1 FROM settings WHERE id = new.id) BEGIN SELECT RAISE(ABORT, 'settings is history: this row exists'); END;
CREATE TRIGGER result_reading_no_update BEFORE update ON result_reading BEGIN SELECT RAISE(ABORT, 'result_reading is history: no update'); END;
CREATE TRIGGER result_reading_no_delete BEFORE delete ON result_reading BEGIN SELECT RAISE(ABORT, 'result_reading is history: no delete'); END;
CREATE TRIGGER alarm_no_delete BEFORE delete ON alarm BEGIN SELECT RAISE(ABORT, 'alarm is history: no delete'); END;
CREATE TRIGGER alarm_no_replace BEFORE INSERT ON alarm WHEN EXISTS (SELECT 1 FROM alarm WHERE id = new.id) BEGIN SELECT RAISE(ABORT, 'alarm is history: this row exists'); END;
CREATE TRIGGER alarm_no_update BEFORE update ON alarm WHEN new.id IS NOT old.id OR new.tank IS NOT old.tank OR new.kind IS NOT old.kind OR new.subject IS NOT old.subject OR new.historic IS NOT old.historic BEGIN SELECT RAISE(ABORT, 'alarm is history: no update'); END;
COMMIT;
