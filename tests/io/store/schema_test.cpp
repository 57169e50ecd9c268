// SPDX-License-Identifier: GPL-3.0-or-later
#include <sys/stat.h>
#include <sys/wait.h>

#include <fstream>
#include <sstream>

#include "io/store/schema.hpp"
#include "tests/io/store/store_fixture.hpp"

namespace tw::io::test {
namespace {

std::unique_ptr<store::Database> rawDatabase(const std::filesystem::path& dataDir) {
  return must(store::Database::open(dataDir / "tankward.db", false, true));
}

std::string read(const std::filesystem::path& file) {
  std::ifstream stream(file);
  std::ostringstream text;
  text << stream.rdbuf();
  return text.str();
}

TEST(Schema, ANewStoreIsOfTheCurrentVersionAndSafelySet) {
  TempFolder folder;
  const auto dir = folder.path() / "data";
  const auto store = must(openStore(dir, StoreMode::ReadWrite));
  const auto db = rawDatabase(dir);
  EXPECT_EQ(db->userVersion(), static_cast<int>(store::schemaSteps().size()));
  auto mode = db->use("test", "PRAGMA journal_mode");
  ASSERT_TRUE(mode.next());
  EXPECT_EQ(mode.text(0), "wal");
  auto sync = db->use("test", "PRAGMA synchronous");
  ASSERT_TRUE(sync.next());
  EXPECT_EQ(sync.integer(0), 2);  // FULL
  auto keys = db->use("test", "PRAGMA foreign_keys");
  ASSERT_TRUE(keys.next());
  EXPECT_EQ(keys.integer(0), 1);
}

TEST(Schema, OnlyTheOwnerMayReadTheFiles) {
  TempFolder folder;
  const auto dir = folder.path() / "data";
  const auto store = must(openStore(dir, StoreMode::ReadWrite));
  must(store->addReadings({make("copper", minute(0), 1.0)}));
  struct stat status {};
  ASSERT_EQ(::stat(dir.c_str(), &status), 0);
  EXPECT_EQ(status.st_mode & 0777, 0700u);
  for (const char* file : {"tankward.db", "tankward.db-wal", "tankward.db-shm"}) {
    ASSERT_EQ(::stat((dir / file).c_str(), &status), 0) << file;
    EXPECT_EQ(status.st_mode & 0777, 0600u) << file;
  }
}

// One row per kind of history: no statement, also from outside the program, changes, deletes or replaces it.
TEST(Schema, HistoryCannotBeRewritten) {
  TempFolder folder;
  const auto store = must(openStore(folder.path(), StoreMode::ReadWrite));
  const auto added = must(store->addReadings({make("copper", minute(0), 1.0)}));
  must(store->correctReading(added[0].id, make("copper", minute(0), 2.0)));
  EventRow event;
  event.tank = "T1";
  event.kind = "dump";
  must(store->addEvents({event}));
  must(store->settleLiquor({.tank = "T1", .sampledAt = minute(0)}, resultOf(minute(0), {added[0].id})));
  must(store->settleLiquor({.tank = "T1", .sampledAt = minute(0)}, std::nullopt));
  must(store->putRecipe("aa", "r", "{}"));
  must(store->setRecipeInForce({"T1", "r", "aa", minute(0), "shop", ""}));
  must(store->saveAlarm({}, minute(0), "", "raised"));
  const auto db = rawDatabase(folder.path());
  db->execute("test", "INSERT INTO settings (tank, key, since, value, person, reason)"
                      " VALUES ('T1', 'k', 0, '1', '', '')");
  ASSERT_FALSE(db->failed());
  for (const std::string table :
       {"reading", "supersession", "event", "result", "result_detail", "result_reading", "result_withdrawn",
        "recipe", "recipe_in_force", "alarm_change", "settings"}) {
    std::string column;
    {
      db->execute("test", "DROP VIEW IF EXISTS columns_of; CREATE TEMP VIEW columns_of AS"
                          " SELECT name FROM pragma_table_info('" + table + "')");
      auto name = db->use("test", "SELECT name FROM columns_of LIMIT 1");
      ASSERT_TRUE(name.next());
      column = name.text(0);
    }
    for (const std::string& sql :
         {"UPDATE " + table + " SET " + column + " = " + column, "DELETE FROM " + table,
          "REPLACE INTO " + table + " SELECT * FROM " + table}) {
      // There the row is its key: the same again.
      if (table == "result_reading" && sql.starts_with("REPLACE")) continue;
      db->execute("test", sql);
      const auto fault = db->takeFault();
      ASSERT_TRUE(fault) << sql;
      EXPECT_THAT(fault->detail, testing::HasSubstr("is history")) << sql;
    }
  }
  for (const char* sql : {"DELETE FROM alarm", "REPLACE INTO alarm SELECT * FROM alarm",
                          "UPDATE alarm SET subject = 'other'"}) {
    db->execute("test", sql);
    EXPECT_TRUE(db->takeFault()) << sql;
  }
}

// tests/io/store/v1.sql was written by version 1 and is never made anew.
TEST(Schema, AStoreOfVersion1IsBroughtUpToDateWithAllItsRows) {
  TempFolder folder;
  const std::string sample = read(std::filesystem::path(TW_SOURCE_DIR) / "tests/io/store/v1.sql");
  ASSERT_FALSE(sample.empty());
  rawDatabase(folder.path())->execute("test", sample);
  ASSERT_EQ(rawDatabase(folder.path())->userVersion(), 1);
  const auto store = must(openStore(folder.path(), StoreMode::ReadWrite));
  EXPECT_EQ(rawDatabase(folder.path())->userVersion(), static_cast<int>(store::schemaSteps().size()));
  const auto readings = must(store->readings("T1", Instant::min()));
  ASSERT_EQ(readings.size(), 5u);
  EXPECT_EQ(readings[0].state, ReadingState::Superseded);
  EXPECT_EQ(readings[0].entered, "220");
  EXPECT_EQ(readings[0].sampledAt, (StampedTime{minute(0), 60min}));
  const auto newest = must(store->newestAccepted("T1", minute(60)));
  EXPECT_EQ(newest.size(), 2u);
  EXPECT_EQ(newest.at("copper").value, 0.346);
  EXPECT_EQ(newest.at("copper").supersedes, readings[0].id);
  const ResultRow result = must(store->newestResult("T1")).value();
  EXPECT_EQ(result.pM, 14.25);
  EXPECT_EQ(result.margins.at("ph_up"), 1.3);
  EXPECT_EQ(must(store->pendingLiquors(0)).size(), 1u);
  EXPECT_EQ(must(store->events("T1", Instant::min())).at(0).amount, 12.5);
  EXPECT_EQ(must(store->recipeInForce("T1", minute(0)))->sha256, "aa");
  EXPECT_EQ(must(store->recipeJson("aa")), "{\"id\":\"copper-ammine\"}");
  EXPECT_EQ(must(store->alarms(false)).at(0).acknowledgedBy, "MN");
}

TEST(Schema, AStepThatFailsLeavesTheVersionBefore) {
  TempFolder folder;
  std::vector<std::string> steps = store::schemaSteps();
  const int current = static_cast<int>(steps.size());
  steps.push_back("CREATE TABLE extra (a INTEGER) STRICT; INSERT INTO no_such_table VALUES (1);");
  const auto db = rawDatabase(folder.path());
  const auto outcome = store::migrate(*db, steps);
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().code, "store_failed");
  EXPECT_EQ(db->userVersion(), current);
  auto extra = db->use("test", "SELECT 1 FROM sqlite_schema WHERE name = 'extra'");
  EXPECT_FALSE(extra.next());
  EXPECT_TRUE(openStore(folder.path(), StoreMode::ReadWrite));
}

TEST(Schema, AStoreOfALaterVersionIsLeftAlone) {
  TempFolder folder;
  must(openStore(folder.path(), StoreMode::ReadWrite));
  rawDatabase(folder.path())->execute("test", "PRAGMA user_version = 99");
  for (const StoreMode mode : {StoreMode::ReadWrite, StoreMode::ReadOnly}) {
    const auto outcome = openStore(folder.path(), mode);
    ASSERT_FALSE(outcome);
    EXPECT_EQ(outcome.error().code, "store_newer");
    EXPECT_EQ(outcome.error().kind, model::FaultKind::Machine);
  }
  EXPECT_EQ(rawDatabase(folder.path())->userVersion(), 99);
}

TEST(Schema, WhatIsNoStoreIsNotOpened) {
  TempFolder folder;
  const auto outcomeOf = [&](StoreMode mode) {
    const auto outcome = openStore(folder.path(), mode);
    return outcome ? std::string("opened") : outcome.error().code;
  };
  EXPECT_EQ(outcomeOf(StoreMode::ReadOnly), "store_open");  // nothing there: a reader makes nothing
  EXPECT_FALSE(std::filesystem::exists(folder.path() / "tankward.db"));
  std::ofstream(folder.path() / "tankward.db") << "Sehr geehrte Damen und Herren, dies ist keine Datenbank.";
  EXPECT_EQ(outcomeOf(StoreMode::ReadOnly), "store_open");
  EXPECT_EQ(outcomeOf(StoreMode::ReadWrite), "store_open");
  std::filesystem::remove(folder.path() / "tankward.db");
  rawDatabase(folder.path())->execute("test", "CREATE TABLE songs (title TEXT)");
  EXPECT_EQ(outcomeOf(StoreMode::ReadOnly), "store_open");
  EXPECT_EQ(outcomeOf(StoreMode::ReadWrite), "store_open");
}

TEST(Schema, AnEmptyFileBecomesAStoreForAWriterOnly) {
  TempFolder folder;
  std::ofstream(folder.path() / "tankward.db").flush();
  EXPECT_FALSE(openStore(folder.path(), StoreMode::ReadOnly));
  EXPECT_TRUE(openStore(folder.path(), StoreMode::ReadWrite));
}

TEST(Schema, AReaderSeesALiveStoreAndCannotWrite) {
  TempFolder folder;
  const auto writer = must(openStore(folder.path(), StoreMode::ReadWrite));
  must(writer->addReadings({make("copper", minute(0), 1.0)}));
  const auto reader = must(openStore(folder.path(), StoreMode::ReadOnly));
  EXPECT_EQ(must(reader->readings("T1", Instant::min())).size(), 1u);
  must(writer->addReadings({make("copper", minute(1), 1.0)}));
  EXPECT_EQ(must(reader->readings("T1", Instant::min())).size(), 2u);
  const auto outcome = reader->addReadings({make("copper", minute(2), 1.0)});
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().code, "store_failed");
}

TEST(Schema, AReaderOpensAStoreThatNobodyHolds) {
  TempFolder folder;
  must(must(openStore(folder.path(), StoreMode::ReadWrite))->addReadings({make("copper", minute(0), 1.0)}));
  const auto reader = must(openStore(folder.path(), StoreMode::ReadOnly));
  EXPECT_EQ(must(reader->readings("T1", Instant::min())).size(), 1u);
}

// `load` and a service may both have the store open for a moment: they take turns.
TEST(Schema, TwoProcessesWriteInTurns) {
  TempFolder folder;
  must(openStore(folder.path(), StoreMode::ReadWrite));
  const auto writeAs = [&](const std::string& tank) {
    const auto store = must(openStore(folder.path(), StoreMode::ReadWrite));
    for (int t = 0; t < 200; ++t) {
      NewReading reading = make("copper", minute(t), 1.0);
      reading.tank = tank;
      must(store->addReadings({reading}));
    }
  };
  const pid_t child = ::fork();
  ASSERT_GE(child, 0);
  if (child == 0) {
    int status = 0;
    try {
      writeAs("T2");
    } catch (...) {
      status = 1;
    }
    ::_exit(status);
  }
  writeAs("T1");
  int status = -1;
  ::waitpid(child, &status, 0);
  EXPECT_EQ(status, 0);
  const auto store = must(openStore(folder.path(), StoreMode::ReadOnly));
  std::vector<std::int64_t> ids;
  for (const char* tank : {"T1", "T2"}) {
    const auto readings = must(store->readings(tank, Instant::min()));
    EXPECT_EQ(readings.size(), 200u);
    for (const Reading& reading : readings) ids.push_back(reading.id);
  }
  std::sort(ids.begin(), ids.end());
  EXPECT_EQ(std::adjacent_find(ids.begin(), ids.end()), ids.end());
}

}  // namespace
}  // namespace tw::io::test
