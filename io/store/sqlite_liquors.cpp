// SPDX-License-Identifier: GPL-3.0-or-later
// Which liquors are still to be solved, and which have to be solved again.
#include "io/store/sqlite_store.hpp"

namespace tw::io::store {

// A new mark each time: whoever settles an earlier one leaves this one standing.
void SqliteStore::markPending(const std::string& tank, Instant sampledAt) {
  m_db.use("mark a liquor as pending",
           "INSERT OR REPLACE INTO pending_liquor (tank, sampled_at, waiting) VALUES (?1, ?2, 0)")
      .bind(tank, sampledAt)
      .run();
}

void SqliteStore::markUsersPending(std::int64_t readingId) {
  std::vector<PendingLiquor> users;
  {
    Statement row = m_db.use("look for results that used a reading",
                             "SELECT r.tank, r.sampled_at FROM result_reading u"
                             " JOIN result r ON r.id = u.result_id WHERE u.reading_id = ?1" TW_CURRENT_RESULT);
    row.bind(readingId);
    while (row.next()) users.push_back({.tank = row.text(0), .sampledAt = row.instant(1)});
  }
  for (const PendingLiquor& user : users) markPending(user.tank, user.sampledAt);
}

model::Result<std::vector<PendingLiquor>> SqliteStore::pendingLiquors(std::size_t limit) {
  Statement row = m_db.use("read the pending liquors",
                           "SELECT tank, sampled_at, mark FROM pending_liquor WHERE waiting = 0"
                           " ORDER BY sampled_at, tank LIMIT ?1");
  row.bind(sqlLimit(limit));
  std::vector<PendingLiquor> pending;
  while (row.next()) {
    pending.push_back({.tank = row.text(0), .sampledAt = row.instant(1), .mark = row.integer(2)});
  }
  return m_db.finish(std::move(pending));
}

model::Result<std::int64_t> SqliteStore::settleLiquor(const PendingLiquor& liquor,
                                                      const std::optional<ResultRow>& result) {
  return write([&]() -> model::Result<std::int64_t> {
    std::int64_t id = 0;
    if (result) {
      id = insertResult(*result);
      m_db.use("take a liquor off the pending list",
               "DELETE FROM pending_liquor WHERE tank = ?1 AND sampled_at = ?2 AND (?3 = 0 OR mark = ?3)")
          .bind(liquor.tank, liquor.sampledAt, liquor.mark)
          .run();
    } else {
      withdrawCurrentResult(liquor);
      m_db.use("let a liquor wait for what it lacks",
               "UPDATE pending_liquor SET waiting = 1"
               " WHERE tank = ?1 AND sampled_at = ?2 AND (?3 = 0 OR mark = ?3)")
          .bind(liquor.tank, liquor.sampledAt, liquor.mark)
          .run();
    }
    return id;
  });
}

// What was solved before does not follow from the readings that are accepted now.
void SqliteStore::withdrawCurrentResult(const PendingLiquor& liquor) {
  m_db.use("withdraw a result",
           "INSERT INTO result_withdrawn (result_id)"
           " SELECT r.id FROM result r WHERE r.tank = ?1 AND r.sampled_at = ?2" TW_CURRENT_RESULT)
      .bind(liquor.tank, liquor.sampledAt)
      .run();
}

// Let F be the accepted reading of the channel in force at `from` (the one that has just come, late or as
// a correction) and N the next one after it. Between F and N every liquor must rest on F. Those that do
// not are found from the readings they can rest on instead: what stands between F and the accepted
// reading before it (that one included), superseded or not. A result that rests on something older still
// was marked when the reading in between came. Liquors that were incomplete in that stretch may be
// complete now, so they are woken as well.
model::Result<std::size_t> SqliteStore::markLaterPending(const std::string& tank, const std::string& channel,
                                                         Instant from) {
  return write([&]() -> model::Result<std::size_t> {
    std::optional<Instant> next;
    {
      Statement row = m_db.use("look for the next reading of a channel",
                               "SELECT r.sampled_at FROM reading r WHERE r.tank = ?1 AND r.channel = ?2"
                               " AND r.state = 'accepted' AND r.sampled_at > ?3"
                               " AND NOT EXISTS (SELECT 1 FROM supersession s WHERE s.old_id = r.id)"
                               " ORDER BY r.sampled_at LIMIT 1");
      row.bind(tank, channel, from);
      if (row.next()) next = row.instant(0);
    }
    std::vector<std::int64_t> outdated;
    {
      Statement row = m_db.use("look for the readings that one replaces",
                               "SELECT r.id, EXISTS (SELECT 1 FROM supersession s WHERE s.old_id = r.id)"
                               " FROM reading r WHERE r.tank = ?1 AND r.channel = ?2 AND r.state = 'accepted'"
                               " AND r.sampled_at <= ?3 ORDER BY r.sampled_at DESC, r.id DESC");
      row.bind(tank, channel, from);
      int standing = 0;
      while (standing < 2 && row.next()) {
        const bool superseded = row.boolean(1);
        if (!superseded) ++standing;
        if (superseded || standing > 1) outdated.push_back(row.integer(0));
      }
    }
    std::vector<Instant> later;
    for (const std::int64_t id : outdated) {
      Statement row = m_db.use("look for later results that used a reading",
                               "SELECT r.sampled_at FROM result_reading u JOIN result r ON r.id = u.result_id"
                               " WHERE u.reading_id = ?1 AND r.tank = ?2 AND r.sampled_at >= ?3"
                               " AND (?4 IS NULL OR r.sampled_at < ?4)" TW_CURRENT_RESULT);
      row.bind(id, tank, from, next);
      while (row.next()) later.push_back(row.instant(0));
    }
    {
      Statement row = m_db.use("look for later liquors that were incomplete",
                               "SELECT sampled_at FROM pending_liquor WHERE waiting = 1 AND tank = ?1"
                               " AND sampled_at >= ?2 AND (?3 IS NULL OR sampled_at < ?3)");
      row.bind(tank, from, next);
      while (row.next()) later.push_back(row.instant(0));
    }
    for (const Instant at : later) markPending(tank, at);
    return later.size();
  });
}

}  // namespace tw::io::store
