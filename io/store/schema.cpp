// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/store/schema.hpp"

namespace tw::io::store {

namespace {

model::Fault unfit(const Database& db, const char* code, std::string detail) {
  return {.code = code,
          .subject = "store",
          .detail = std::move(detail),
          .where = db.file().string(),
          .kind = model::FaultKind::Machine};
}

/// True when the file holds nothing yet.
bool isEmpty(Database& db) {
  Statement statement = db.use("look into the store", "SELECT count(*) FROM sqlite_schema");
  return statement.next() && statement.integer(0) == 0;
}

bool bearsOurId(Database& db) {
  Statement statement = db.use("read the store's id", "PRAGMA application_id");
  return statement.next() && statement.integer(0) == kApplicationId;
}

/// The fault of a file that no step can start from.
std::optional<model::Fault> judge(Database& db, int current) {
  const bool ours = bearsOurId(db) || isEmpty(db);
  const int version = db.userVersion();
  if (auto fault = db.takeFault()) {
    fault->code = "store_open";
    return fault;
  }
  if (!ours) return unfit(db, "store_open", "this file is a database of another program");
  if (version > current) {
    return unfit(db, "store_newer",
                 "the store is of version " + std::to_string(version) +
                     ", made by a later program; this one reads up to " + std::to_string(current));
  }
  return std::nullopt;
}

}  // namespace

const std::vector<std::string>& schemaSteps() {
  static const std::vector<std::string> steps = {schemaStep1()};
  return steps;
}

model::Result<model::Done> migrate(Database& db, const std::vector<std::string>& steps) {
  const int current = static_cast<int>(steps.size());
  if (auto fault = judge(db, current)) return model::fail(std::move(*fault));
  for (int version = db.userVersion(); version < current; ++version) {
    Transaction guard(db);
    // Another process may have taken this step while we waited for the lock.
    if (db.userVersion() == version) {
      db.execute("set the store's id", "PRAGMA application_id = " + std::to_string(kApplicationId));
      db.execute("bring the store to version " + std::to_string(version + 1),
                 steps[static_cast<std::size_t>(version)]);
      db.execute("set the store's version", "PRAGMA user_version = " + std::to_string(version + 1));
    }
    if (auto done = guard.commit(); !done) return done;
  }
  return db.finish(model::Done{});
}

model::Result<model::Done> checkVersion(Database& db, const std::vector<std::string>& steps) {
  const int current = static_cast<int>(steps.size());
  if (auto fault = judge(db, current)) return model::fail(std::move(*fault));
  if (const int version = db.userVersion(); version < current) {
    return model::fail(unfit(db, "store_open",
                             "the store is of version " + std::to_string(version) + " and this program reads " +
                                 std::to_string(current) +
                                 ": start the service once, it brings the store up to date"));
  }
  return db.finish(model::Done{});
}

}  // namespace tw::io::store
