// SPDX-License-Identifier: GPL-3.0-or-later
// The plant's memory. A narrow interface, so that a database server can stand behind it as well; the
// SQLite form is opened by openStore(). io/store/STORE.md describes every table, column and invariant.
//
// Rows are only ever added. Each call is one transaction unless it runs inside Writer's group. A call
// that returns a value has made it durable (or, inside a group, will have when the group commits).
// Faults are of kind Machine: `store_failed` with SQLite's words and the statement's purpose; those of
// kind Input (`reading_invalid`, `event_invalid` and the ones named below) are the caller's to mend.
// One thread at a time per Store object.
#pragma once

#include <cstdint>
#include <filesystem>
#include <functional>
#include <map>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "io/wire/time.hpp"
#include "model/result.hpp"

namespace tw::io {

enum class ReadingState { Accepted, Suspicious, Refused, Superseded };
[[nodiscard]] const char* name(ReadingState state);
[[nodiscard]] std::optional<ReadingState> readingState(const std::string& name);

struct NewReading {
  std::string tank, channel;
  StampedTime sampledAt;
  std::optional<double> value;  ///< canonical; absent only for a refused text that is no number
  std::string unit;             ///< canonical unit
  std::string entered, enteredUnit;
  std::string inputs;           ///< JSON object of burette inputs, or empty
  std::string op, source;
  ReadingState state = ReadingState::Accepted;
  std::string reason;           ///< why suspicious, refused or corrected
  Instant receivedAt{};
};

struct Reading : NewReading {
  std::int64_t id = 0;
  std::optional<std::int64_t> supersedes;
};

enum class AddOutcome { Stored, Duplicate, Conflict };
struct Added {
  AddOutcome outcome = AddOutcome::Stored;
  std::int64_t id = 0;  ///< of the new row, or of the row it duplicates
};

struct EventRow {
  std::int64_t id = 0;
  std::string tank, kind;
  StampedTime at;
  std::string stock;
  std::optional<double> amount;
  std::string unit, op, lot, note, source;
  Instant receivedAt{};
};

struct ResultRow {
  std::int64_t id = 0;
  std::string tank;
  Instant sampledAt{}, computedAt{};
  std::string recipeSha256;    ///< resolved recipe in force
  std::string programVersion;
  std::string condition;       ///< word as the chemistry alone judges it
  bool doubtful = false, reliable = true;
  bool historic = false;       ///< was not the newest when it was computed
  std::optional<double> pM, ph, temperature_C, bed, ionicStrength;
  /// Judged number of each margin that exists, by margin name.
  std::map<std::string, double> margins;
  std::string values;          ///< JSON: channel and ratio values used, in channel units
  std::string json;            ///< the whole `solve --json` object
  std::vector<std::int64_t> readings;  ///< ids of the readings it used
};

struct RecipeInForce {
  std::string tank, recipeId, sha256;
  Instant since{};
  std::string by, reason;
};

struct AlarmRow {
  std::int64_t id = 0;
  std::string tank, kind, subject, word, priority, state, unit, toDo;
  Instant raisedAt{};
  std::optional<Instant> clearedAt, acknowledgedAt;
  std::string acknowledgedBy, comment;
  std::optional<double> value, limit;
  bool historic = false;
};

/// A liquor whose readings are stored and whose result is not: work to do, also after a crash.
struct PendingLiquor {
  std::string tank;
  Instant sampledAt{};
  /// Which marking this is; a later one gets another number. 0 = whichever stands.
  std::int64_t mark = 0;
};

class Store {
 public:
  virtual ~Store() = default;

  /// Runs `work` in one transaction; rolled back when it returns a fault. Nested calls join it.
  virtual model::Result<model::Done> transaction(
      const std::function<model::Result<model::Done>(Store&)>& work) = 0;

  /// Identity is tank, sample time (ms), channel and canonical value (relative 1e-9): the same again is
  /// a Duplicate. Same identity but another value, while one is accepted: a Conflict, kept as
  /// suspicious. Marks the liquor (tank, sample time) as pending in the same transaction when anything
  /// accepted was stored. Refused rows without a value never conflict and are identified by their text.
  /// A value that was refused before and comes again judged better is stored and supersedes the refused
  /// row. `reading_invalid`: no tank or channel, a value that is not finite or missing where one must be.
  virtual model::Result<std::vector<Added>> addReadings(const std::vector<NewReading>& readings) = 0;
  /// A new row that supersedes `id`, which becomes `superseded`. An accepted correction also supersedes
  /// every other accepted reading of its tank, channel and time: the person has decided. A correction in
  /// state Refused strikes the reading out. Marks as pending the liquor, the one the old row belonged to
  /// and every sample time whose current result used a row that is superseded now. Faults
  /// `reading_unknown`, `already_superseded`.
  virtual model::Result<std::int64_t> correctReading(std::int64_t id, const NewReading& corrected) = 0;
  /// A suspicious reading becomes accepted (a row that supersedes it), by a person; the rest as for a
  /// correction. Same faults, and `not_suspicious`.
  virtual model::Result<std::int64_t> confirmReading(std::int64_t id, const std::string& person,
                                                     Instant at) = 0;
  virtual model::Result<std::optional<Reading>> reading(std::int64_t id) = 0;
  /// All states, by sample time then id; `limit` keeps the first ones from `since` on, 0 = all.
  virtual model::Result<std::vector<Reading>> readings(const std::string& tank, Instant since,
                                                       std::size_t limit = 0) = 0;
  /// Per channel the newest accepted reading with sample time <= at.
  virtual model::Result<std::map<std::string, Reading>> newestAccepted(const std::string& tank,
                                                                       Instant at) = 0;

  /// Identity: tank, time, kind, stock, amount, note. Duplicates are skipped; ids of all in order.
  virtual model::Result<std::vector<Added>> addEvents(const std::vector<EventRow>& events) = 0;
  virtual model::Result<std::vector<EventRow>> events(const std::string& tank, Instant since) = 0;

  /// Liquors to solve, by sample time; `limit` 0 = all.
  virtual model::Result<std::vector<PendingLiquor>> pendingLiquors(std::size_t limit) = 0;
  /// Stores the result and takes the liquor off the pending list, in one transaction. A later row for
  /// the same tank and sample time replaces the earlier one for readers; both are kept. Without a result
  /// (the liquor was incomplete) an earlier one is withdrawn from readers, and the liquor waits until
  /// something it may lack arrives (addReadings, markLaterPending). Hand in the PendingLiquor that
  /// pendingLiquors() gave: if it was marked again since, it stays on the list. Id of the result or 0.
  virtual model::Result<std::int64_t> settleLiquor(const PendingLiquor& liquor,
                                                   const std::optional<ResultRow>& result) = 0;
  /// To be called for each (tank, channel, sample time) that has just been stored or corrected. Marks
  /// every sample time of the tank from `from` up to the next accepted reading of the channel whose
  /// current result used a reading of the channel other than the one in force at `from` (an older or a
  /// superseded one), and wakes the incomplete liquors of that stretch. Returns how many were marked.
  virtual model::Result<std::size_t> markLaterPending(const std::string& tank, const std::string& channel,
                                                      Instant from) = 0;
  /// Current results by sample time; `json` filled only when asked for. `limit` keeps the newest.
  virtual model::Result<std::vector<ResultRow>> results(const std::string& tank, Instant since,
                                                        std::size_t limit, bool withJson) = 0;
  virtual model::Result<std::optional<ResultRow>> newestResult(const std::string& tank) = 0;

  /// Keeps a resolved recipe under its hash; known hashes are left alone.
  virtual model::Result<model::Done> putRecipe(const std::string& sha256, const std::string& recipeId,
                                               const std::string& json) = 0;
  virtual model::Result<std::optional<std::string>> recipeJson(const std::string& sha256) = 0;
  virtual model::Result<model::Done> setRecipeInForce(const RecipeInForce& row) = 0;
  virtual model::Result<std::optional<RecipeInForce>> recipeInForce(const std::string& tank,
                                                                    Instant at) = 0;

  /// Inserts (id 0) or updates an alarm and journals the change; returns its id.
  virtual model::Result<std::int64_t> saveAlarm(const AlarmRow& alarm, Instant at, const std::string& by,
                                                const std::string& change) = 0;
  /// Alarms whose state is not "normal" (all = false), or every one, newest first.
  virtual model::Result<std::vector<AlarmRow>> alarms(bool all, std::size_t limit = 0) = 0;
};

enum class StoreMode { ReadWrite, ReadOnly };
/// `data_dir/tankward.db` in WAL mode, synchronous FULL; made (0700 folder, 0600 file) and migrated to
/// the current `user_version` when ReadWrite. Faults `store_open`, `store_newer` (made by a later
/// version).
model::Result<std::unique_ptr<Store>> openStore(const std::filesystem::path& dataDir, StoreMode mode);

/// `data_dir/lock`: one service at a time. Held until destroyed. Fault `store_locked` names the pid.
class StoreLock {
 public:
  static model::Result<StoreLock> take(const std::filesystem::path& dataDir);
  StoreLock(StoreLock&& other) noexcept;
  StoreLock& operator=(StoreLock&& other) noexcept;
  ~StoreLock();

 private:
  explicit StoreLock(int fd) : m_fd(fd) {}
  int m_fd = -1;
};

}  // namespace tw::io
