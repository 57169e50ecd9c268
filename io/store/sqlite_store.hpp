// SPDX-License-Identifier: GPL-3.0-or-later
// Private to io/store/: the SQLite form of Store. What the calls mean stands in io/store/store.hpp; its
// parts lie in sqlite_readings.cpp, sqlite_liquors.cpp, sqlite_results.cpp, sqlite_records.cpp.
#pragma once

#include <memory>
#include <utility>

#include "io/store/sqlite_db.hpp"
#include "io/store/store.hpp"

namespace tw::io::store {

class SqliteStore final : public Store {
 public:
  explicit SqliteStore(std::unique_ptr<Database> db) : m_owned(std::move(db)), m_db(*m_owned) {}

  model::Result<model::Done> transaction(
      const std::function<model::Result<model::Done>(Store&)>& work) override;

  model::Result<std::vector<Added>> addReadings(const std::vector<NewReading>& readings) override;
  model::Result<std::int64_t> correctReading(std::int64_t id, const NewReading& corrected) override;
  model::Result<std::int64_t> confirmReading(std::int64_t id, const std::string& person, Instant at) override;
  model::Result<std::optional<Reading>> reading(std::int64_t id) override;
  model::Result<std::vector<Reading>> readings(const std::string& tank, Instant since,
                                               std::size_t limit) override;
  model::Result<std::map<std::string, Reading>> newestAccepted(const std::string& tank, Instant at) override;

  model::Result<std::vector<Added>> addEvents(const std::vector<EventRow>& events) override;
  model::Result<std::vector<EventRow>> events(const std::string& tank, Instant since) override;

  model::Result<std::vector<PendingLiquor>> pendingLiquors(std::size_t limit) override;
  model::Result<std::int64_t> settleLiquor(const PendingLiquor& liquor,
                                           const std::optional<ResultRow>& result) override;
  model::Result<std::size_t> markLaterPending(const std::string& tank, const std::string& channel,
                                              Instant from) override;
  model::Result<std::vector<ResultRow>> results(const std::string& tank, Instant since, std::size_t limit,
                                                bool withJson) override;
  model::Result<std::optional<ResultRow>> newestResult(const std::string& tank) override;

  model::Result<model::Done> putRecipe(const std::string& sha256, const std::string& recipeId,
                                       const std::string& json) override;
  model::Result<std::optional<std::string>> recipeJson(const std::string& sha256) override;
  model::Result<model::Done> setRecipeInForce(const RecipeInForce& row) override;
  model::Result<std::optional<RecipeInForce>> recipeInForce(const std::string& tank, Instant at) override;

  model::Result<std::int64_t> saveAlarm(const AlarmRow& alarm, Instant at, const std::string& by,
                                        const std::string& change) override;
  model::Result<std::vector<AlarmRow>> alarms(bool all, std::size_t limit) override;

 private:
  /// Runs `work` (which returns Result<T>) in one transaction, or one savepoint of the open one.
  template <class Work>
  auto write(Work work) -> decltype(work()) {
    Transaction guard(m_db);
    if (auto fault = m_db.takeFault()) return model::fail(std::move(*fault));
    auto value = work();
    if (!value) return value;
    if (auto done = guard.commit(); !done) return model::fail(std::move(done.error()));
    return value;
  }

  // Steps of the calls above, inside their transaction; errors stick to m_db.
  Added addReading(const NewReading& reading);
  std::int64_t insertReading(const NewReading& reading, ReadingState state, const std::string& reason,
                             std::optional<std::int64_t> supersedes);
  void supersede(std::int64_t oldId, std::int64_t newId);
  /// What a person accepts replaces every other accepted reading of its tank, channel and time.
  void supersedeRivals(const NewReading& reading, std::int64_t newId);
  void markPending(const std::string& tank, Instant sampledAt);
  /// Every current result that used this reading has to be solved again.
  void markUsersPending(std::int64_t readingId);
  std::optional<Reading> findReading(std::int64_t id);
  model::Result<Reading> replaceable(std::int64_t id);
  Added addEvent(const EventRow& event);
  std::int64_t insertResult(const ResultRow& result);
  void withdrawCurrentResult(const PendingLiquor& liquor);
  void insertAlarmChange(const AlarmRow& alarm, std::int64_t id, Instant at, const std::string& by,
                         const std::string& change);

  std::unique_ptr<Database> m_owned;
  Database& m_db;
};

/// Condition on `result r`: the newest row of its sample time, and not withdrawn.
#define TW_CURRENT_RESULT                                                                          \
  " AND NOT EXISTS (SELECT 1 FROM result n WHERE n.tank = r.tank AND n.sampled_at = r.sampled_at"  \
  " AND n.id > r.id) AND NOT EXISTS (SELECT 1 FROM result_withdrawn w WHERE w.result_id = r.id)"

/// What the caller can mend: the store itself is well.
[[nodiscard]] inline model::Fault inputFault(std::string code, std::string subject, std::string detail) {
  return {.code = std::move(code), .subject = std::move(subject), .detail = std::move(detail), .where = {}};
}

/// SQLite's way to say "all".
[[nodiscard]] inline std::int64_t sqlLimit(std::size_t limit) {
  return limit == 0 ? -1 : static_cast<std::int64_t>(limit);
}

}  // namespace tw::io::store
