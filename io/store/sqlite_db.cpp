// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/store/sqlite_db.hpp"

#include <sqlite3.h>

#include <stdexcept>

namespace tw::io::store {

namespace {

/// How long a statement waits for another process to let go of the write lock.
constexpr int kBusyWait_ms = 5000;

model::Fault sqliteFault(const std::filesystem::path& file, const std::string& purpose, int code,
                         const char* words) {
  return {.code = "store_failed",
          .subject = purpose,
          .detail = "could not " + purpose + ": " + words + " (SQLite " + std::to_string(code) + ")",
          .where = file.string(),
          .kind = model::FaultKind::Machine};
}

}  // namespace

// ---- Statement

Statement::Statement(Database& db, sqlite3_stmt* handle, const char* purpose, bool* inUse)
    : m_db(db), m_handle(handle), m_purpose(purpose), m_inUse(inUse) {
  if (m_inUse != nullptr) *m_inUse = true;
}

Statement::Statement(Statement&& other) noexcept
    : m_db(other.m_db),
      m_handle(std::exchange(other.m_handle, nullptr)),
      m_purpose(other.m_purpose),
      m_inUse(std::exchange(other.m_inUse, nullptr)) {}

Statement::~Statement() {
  if (m_handle != nullptr) {
    sqlite3_reset(m_handle);
    sqlite3_clear_bindings(m_handle);
  }
  if (m_inUse != nullptr) *m_inUse = false;
}

void Statement::check(int code) {
  if (code != SQLITE_OK) m_db.fail(m_purpose, code);
}

bool Statement::next() {
  if (m_handle == nullptr || m_db.failed()) return false;
  const int code = sqlite3_step(m_handle);
  if (code == SQLITE_ROW) return true;
  if (code != SQLITE_DONE) m_db.fail(m_purpose, code);
  return false;
}

std::int64_t Statement::runForId() {
  std::int64_t id = 0;
  while (next()) id = integer(0);
  return id;
}

void Statement::bindOne(int index, std::int64_t value) {
  if (m_handle != nullptr) check(sqlite3_bind_int64(m_handle, index, value));
}
void Statement::bindOne(int index, double value) {
  if (m_handle != nullptr) check(sqlite3_bind_double(m_handle, index, value));
}
void Statement::bindOne(int index, std::string_view value) {
  if (m_handle == nullptr) return;
  // An empty view may hold a null pointer, which SQLite would take for NULL.
  const char* bytes = value.empty() ? "" : value.data();
  check(sqlite3_bind_text64(m_handle, index, bytes, value.size(), SQLITE_TRANSIENT, SQLITE_UTF8));
}
void Statement::bindNull(int index) {
  if (m_handle != nullptr) check(sqlite3_bind_null(m_handle, index));
}

bool Statement::isNull(int column) const { return sqlite3_column_type(m_handle, column) == SQLITE_NULL; }
std::int64_t Statement::integer(int column) const { return sqlite3_column_int64(m_handle, column); }
double Statement::real(int column) const { return sqlite3_column_double(m_handle, column); }
std::string Statement::text(int column) const {
  const void* bytes = sqlite3_column_text(m_handle, column);
  if (bytes == nullptr) return {};
  return {static_cast<const char*>(bytes), static_cast<std::size_t>(sqlite3_column_bytes(m_handle, column))};
}
Instant Statement::instant(int column) const { return Instant(std::chrono::milliseconds(integer(column))); }
std::optional<double> Statement::maybeReal(int column) const {
  return isNull(column) ? std::nullopt : std::optional(real(column));
}
std::optional<std::int64_t> Statement::maybeInteger(int column) const {
  return isNull(column) ? std::nullopt : std::optional(integer(column));
}
std::optional<Instant> Statement::maybeInstant(int column) const {
  return isNull(column) ? std::nullopt : std::optional(instant(column));
}

// ---- Database

model::Result<std::unique_ptr<Database>> Database::open(const std::filesystem::path& file, bool readOnly,
                                                        bool create) {
  std::unique_ptr<Database> db(new Database(file));
  const int access = readOnly ? SQLITE_OPEN_READONLY
                              : SQLITE_OPEN_READWRITE | (create ? SQLITE_OPEN_CREATE : 0);
  const int code = sqlite3_open_v2(file.c_str(), &db->m_handle, access | SQLITE_OPEN_NOMUTEX, nullptr);
  if (code != SQLITE_OK) {
    const char* words = db->m_handle != nullptr ? sqlite3_errmsg(db->m_handle) : sqlite3_errstr(code);
    return model::fail(sqliteFault(file, "open the store", code, words));
  }
  sqlite3_extended_result_codes(db->m_handle, 1);
  sqlite3_busy_timeout(db->m_handle, kBusyWait_ms);
  db->execute("set up the store", "PRAGMA foreign_keys = ON; PRAGMA synchronous = FULL;");
  if (auto fault = db->takeFault()) return model::fail(std::move(*fault));
  return db;
}

Database::~Database() {
  for (auto& [sql, cached] : m_cache) sqlite3_finalize(cached.handle);
  sqlite3_close_v2(m_handle);
}

Statement Database::use(const char* purpose, const char* sql) {
  Cached& cached = m_cache[sql];
  if (cached.inUse) throw std::logic_error(std::string("statement still on loan: ") + purpose);
  if (cached.handle == nullptr && !failed()) {
    const int code =
        sqlite3_prepare_v3(m_handle, sql, -1, SQLITE_PREPARE_PERSISTENT, &cached.handle, nullptr);
    if (code != SQLITE_OK) fail(purpose, code);
  }
  return {*this, cached.handle, purpose, &cached.inUse};
}

void Database::execute(const std::string& purpose, const std::string& sql) {
  if (failed()) return;
  const int code = executeQuietly(sql.c_str());
  if (code != SQLITE_OK) fail(purpose, code);
}

int Database::executeQuietly(const char* sql) {
  return sqlite3_exec(m_handle, sql, nullptr, nullptr, nullptr);
}

void Database::fail(const std::string& purpose, int code) {
  if (!failed()) m_fault = sqliteFault(m_file, purpose, code, sqlite3_errmsg(m_handle));
}

void Database::fail(model::Fault fault) {
  if (!failed()) m_fault = std::move(fault);
}

int Database::userVersion() {
  Statement statement = use("read the store's version", "PRAGMA user_version");
  return statement.next() ? static_cast<int>(statement.integer(0)) : 0;
}

// ---- Transaction

Transaction::Transaction(Database& db) : m_db(db), m_depth(db.m_depth) {
  if (m_db.failed()) return;
  if (m_depth > 0 && sqlite3_get_autocommit(m_db.m_handle) != 0) {
    // A savepoint now would begin, and its release commit, a transaction of its own.
    m_db.fail({.code = "store_failed",
               .subject = "begin a transaction",
               .detail = "the transaction around this one was given up after an earlier error",
               .where = m_db.m_file.string(),
               .kind = model::FaultKind::Machine});
    return;
  }
  const std::string sql = m_depth == 0 ? "BEGIN IMMEDIATE" : "SAVEPOINT s" + std::to_string(m_depth);
  m_db.execute("begin a transaction", sql);
  if (m_db.failed()) return;
  m_open = true;
  ++m_db.m_depth;
}

Transaction::~Transaction() {
  if (!m_open) return;
  rollBack();
  (void)m_db.takeFault();  // what stuck belongs to what has just been undone
}

model::Result<model::Done> Transaction::commit() {
  if (m_open && !m_db.failed()) {
    if (sqlite3_get_autocommit(m_db.m_handle) != 0) {
      m_db.fail({.code = "store_failed",
                 .subject = "commit",
                 .detail = "the transaction was given up after an earlier error",
                 .where = m_db.m_file.string(),
                 .kind = model::FaultKind::Machine});
    } else {
      m_db.execute("commit", m_depth == 0 ? "COMMIT" : "RELEASE s" + std::to_string(m_depth));
    }
  }
  auto fault = m_db.takeFault();
  if (!fault && m_open) {
    m_open = false;
    --m_db.m_depth;
    return model::Done{};
  }
  if (m_open) rollBack();
  if (!fault) throw std::logic_error("commit without an open transaction");
  return model::fail(std::move(*fault));
}

void Transaction::rollBack() {
  m_open = false;
  --m_db.m_depth;
  if (sqlite3_get_autocommit(m_db.m_handle) != 0) return;  // SQLite has rolled back already
  if (m_depth == 0) {
    m_db.executeQuietly("ROLLBACK");
  } else {
    const std::string name = "s" + std::to_string(m_depth);
    m_db.executeQuietly(("ROLLBACK TO " + name + "; RELEASE " + name).c_str());
  }
}

}  // namespace tw::io::store
