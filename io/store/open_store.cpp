// SPDX-License-Identifier: GPL-3.0-or-later
#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <cstring>

#include "io/store/data_dir.hpp"
#include "io/store/schema.hpp"
#include "io/store/sqlite_store.hpp"

namespace tw::io {

namespace {

constexpr const char* kFileName = "tankward.db";
constexpr mode_t kOwnerOnlyFile = 0600;

model::Result<std::unique_ptr<Store>> openForReading(const std::filesystem::path& file) {
  auto db = store::Database::open(file, true, false);
  if (!db) {
    db.error().code = "store_open";
    return model::fail(std::move(db.error()));
  }
  if (auto done = store::checkVersion(**db, store::schemaSteps()); !done) {
    return model::fail(std::move(done.error()));
  }
  return std::unique_ptr<Store>(std::make_unique<store::SqliteStore>(std::move(*db)));
}

/// SQLite would make the file readable for everybody; its -wal and -shm files take over this mode.
model::Result<model::Done> makeFile(const std::filesystem::path& file) {
  const int fd = ::open(file.c_str(), O_RDWR | O_CREAT | O_CLOEXEC, kOwnerOnlyFile);
  if (fd < 0) return model::fail(store::dataDirFault(file, "make the store", errno));
  ::close(fd);
  // The new name has to outlive a loss of power as well as what is written under it.
  const int dir = ::open(file.parent_path().c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC);
  if (dir < 0) return model::fail(store::dataDirFault(file, "open the folder of the store", errno));
  ::fsync(dir);
  ::close(dir);
  return model::Done{};
}

model::Result<std::unique_ptr<Store>> openForWriting(const std::filesystem::path& file) {
  if (auto made = makeFile(file); !made) return model::fail(std::move(made.error()));
  auto db = store::Database::open(file, false, true);
  if (db) {
    (*db)->execute("use a write-ahead log", "PRAGMA journal_mode = WAL");
    if (auto fault = (*db)->takeFault()) db = model::fail(std::move(*fault));
  }
  if (!db) {
    db.error().code = "store_open";
    return model::fail(std::move(db.error()));
  }
  if (auto done = store::migrate(**db, store::schemaSteps()); !done) {
    return model::fail(std::move(done.error()));
  }
  return std::unique_ptr<Store>(std::make_unique<store::SqliteStore>(std::move(*db)));
}

}  // namespace

model::Result<std::unique_ptr<Store>> openStore(const std::filesystem::path& dataDir, StoreMode mode) {
  const std::filesystem::path file = dataDir / kFileName;
  if (mode == StoreMode::ReadOnly) return openForReading(file);
  if (auto made = store::makeDataDir(dataDir); !made) {
    made.error().code = "store_open";
    return model::fail(std::move(made.error()));
  }
  return openForWriting(file);
}

const char* name(ReadingState state) {
  switch (state) {
    case ReadingState::Accepted: return "accepted";
    case ReadingState::Suspicious: return "suspicious";
    case ReadingState::Refused: return "refused";
    case ReadingState::Superseded: return "superseded";
  }
  return "";
}

std::optional<ReadingState> readingState(const std::string& word) {
  for (const ReadingState state : {ReadingState::Accepted, ReadingState::Suspicious, ReadingState::Refused,
                                   ReadingState::Superseded}) {
    if (word == name(state)) return state;
  }
  return std::nullopt;
}

}  // namespace tw::io
