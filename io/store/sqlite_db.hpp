// SPDX-License-Identifier: GPL-3.0-or-later
// Private to io/store/: one SQLite connection, its cached statements and a transaction guard.
//
// Errors stick: the first failing step is kept as a fault, every later step of the same operation does
// nothing and yields no row, and the operation ends with takeFault(). So a loop over rows stays a loop,
// and nothing can go on after a full disk. One thread at a time.
#pragma once

#include <cstdint>
#include <filesystem>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <unordered_map>
#include <utility>

#include "io/wire/time.hpp"
#include "model/result.hpp"

struct sqlite3;
struct sqlite3_stmt;

namespace tw::io::store {

class Database;

/// A prepared statement on loan from the cache; handed back reset. Parameters are bound in order.
class Statement {
 public:
  Statement(Database& db, sqlite3_stmt* handle, const char* purpose, bool* inUse);
  Statement(Statement&& other) noexcept;
  Statement& operator=(Statement&&) = delete;
  ~Statement();

  template <class... Values>
  Statement& bind(const Values&... values) {
    int index = 0;
    (bindOne(++index, values), ...);
    return *this;
  }
  /// True when a row stands ready; false at the end or on an error, which sticks to the database.
  bool next();
  /// Runs a statement that gives no rows.
  void run() {
    while (next()) {
    }
  }

  /// Runs a statement that returns the id of the row it made or changed; 0 when there is none. To the
  /// very end, because foreign keys are only judged there.
  [[nodiscard]] std::int64_t runForId();

  [[nodiscard]] bool isNull(int column) const;
  [[nodiscard]] std::int64_t integer(int column) const;
  [[nodiscard]] double real(int column) const;
  [[nodiscard]] std::string text(int column) const;
  [[nodiscard]] bool boolean(int column) const { return integer(column) != 0; }
  [[nodiscard]] Instant instant(int column) const;
  [[nodiscard]] std::optional<double> maybeReal(int column) const;
  [[nodiscard]] std::optional<std::int64_t> maybeInteger(int column) const;
  [[nodiscard]] std::optional<Instant> maybeInstant(int column) const;

 private:
  void bindOne(int index, std::int64_t value);
  void bindOne(int index, int value) { bindOne(index, std::int64_t{value}); }
  void bindOne(int index, bool value) { bindOne(index, std::int64_t{value ? 1 : 0}); }
  void bindOne(int index, double value);
  void bindOne(int index, std::string_view value);
  void bindOne(int index, const std::string& value) { bindOne(index, std::string_view(value)); }
  void bindOne(int index, const char* value) { bindOne(index, std::string_view(value)); }
  void bindOne(int index, Instant value) { bindOne(index, std::int64_t{value.time_since_epoch().count()}); }
  void bindNull(int index);
  template <class T>
  void bindOne(int index, const std::optional<T>& value) {
    if (value) {
      bindOne(index, *value);
    } else {
      bindNull(index);
    }
  }
  void check(int code);

  Database& m_db;
  sqlite3_stmt* m_handle;
  const char* m_purpose;
  bool* m_inUse;
};

class Database {
 public:
  /// Opens `file`; with `create` it is made when absent. Sets foreign keys and the wait for a lock.
  static model::Result<std::unique_ptr<Database>> open(const std::filesystem::path& file, bool readOnly,
                                                       bool create);
  ~Database();
  Database(const Database&) = delete;
  Database& operator=(const Database&) = delete;

  /// `purpose` completes "could not ..."; `sql` must be a literal (it is the cache's key by address).
  /// Asking for a statement that is still on loan is a bug and throws std::logic_error.
  [[nodiscard]] Statement use(const char* purpose, const char* sql);
  /// Runs one or several statements without rows, uncached; errors stick.
  void execute(const std::string& purpose, const std::string& sql);

  [[nodiscard]] bool failed() const { return m_fault.has_value(); }
  [[nodiscard]] std::optional<model::Fault> takeFault() { return std::exchange(m_fault, std::nullopt); }
  /// Keeps the first error of an operation.
  void fail(const std::string& purpose, int code);
  void fail(model::Fault fault);

  /// `value`, or the fault that stuck while it was gathered.
  template <class T>
  model::Result<T> finish(T value) {
    if (auto fault = takeFault()) return model::fail(std::move(*fault));
    return value;
  }

  [[nodiscard]] int userVersion();
  [[nodiscard]] const std::filesystem::path& file() const { return m_file; }

 private:
  friend class Transaction;
  struct Cached {
    sqlite3_stmt* handle = nullptr;
    bool inUse = false;
  };
  explicit Database(std::filesystem::path file) : m_file(std::move(file)) {}
  /// Runs without touching the sticking fault (it is what a roll-back needs).
  int executeQuietly(const char* sql);

  std::filesystem::path m_file;
  sqlite3* m_handle = nullptr;
  std::unordered_map<const char*, Cached> m_cache;
  std::optional<model::Fault> m_fault;
  int m_depth = 0;  ///< open guards; the outermost is a transaction, the others savepoints
};

/// Rolls back unless committed. Inside another guard it is a savepoint: it joins the outer transaction
/// and can still be undone alone.
class Transaction {
 public:
  explicit Transaction(Database& db);
  ~Transaction();
  Transaction(const Transaction&) = delete;
  Transaction& operator=(const Transaction&) = delete;

  /// Rolls back and gives the fault when anything stuck since the beginning, or when SQLite had to give
  /// up the whole transaction (full disk, read or write error).
  model::Result<model::Done> commit();

 private:
  void rollBack();
  Database& m_db;
  int m_depth;
  bool m_open = false;
};

}  // namespace tw::io::store
