// SPDX-License-Identifier: GPL-3.0-or-later
#include <algorithm>
#include <cmath>

#include <nlohmann/json.hpp>

#include "io/store/sqlite_store.hpp"

namespace tw::io::store {

namespace {

std::string marginsText(const std::map<std::string, double>& margins) {
  nlohmann::json object = nlohmann::json::object();
  for (const auto& [margin, value] : margins) {
    if (std::isfinite(value)) object[margin] = value;
  }
  return object.dump();
}

std::map<std::string, double> marginsOf(const std::string& text) {
  std::map<std::string, double> margins;
  const nlohmann::json object = nlohmann::json::parse(text, nullptr, false);
  if (!object.is_object()) return margins;
  for (const auto& [margin, value] : object.items()) {
    if (value.is_number()) margins.emplace(margin, value.get<double>());
  }
  return margins;
}

}  // namespace

std::int64_t SqliteStore::insertResult(const ResultRow& result) {
  std::int64_t id = 0;
  {
    Statement row = m_db.use(
        "store a result",
        "INSERT INTO result (id, tank, sampled_at, computed_at, recipe_sha256, program_version, condition,"
        " doubtful, reliable, historic, pm, ph, temperature_c, bed, ionic_strength, margins, channel_values)"
        " VALUES ((SELECT coalesce(max(id), 0) + 1 FROM result), ?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11,"
        " ?12, ?13, ?14, ?15, ?16) RETURNING id");
    row.bind(result.tank, result.sampledAt, result.computedAt, result.recipeSha256, result.programVersion,
             result.condition, result.doubtful, result.reliable, result.historic, result.pM, result.ph,
             result.temperature_C, result.bed, result.ionicStrength, marginsText(result.margins),
             result.values);
    id = row.runForId();
  }
  m_db.use("store a result's details", "INSERT INTO result_detail (result_id, json) VALUES (?1, ?2)")
      .bind(id, result.json)
      .run();
  for (const std::int64_t reading : result.readings) {
    m_db.use("store what a result used",
             "INSERT OR IGNORE INTO result_reading (result_id, reading_id) VALUES (?1, ?2)")
        .bind(id, reading)
        .run();
  }
  return id;
}

// Of several rows of one sample time the newest is current, unless it was withdrawn.
model::Result<std::vector<ResultRow>> SqliteStore::results(const std::string& tank, Instant since,
                                                           std::size_t limit, bool withJson) {
  Statement row = m_db.use(
      "read the results of a tank",
      "SELECT r.id, r.tank, r.sampled_at, r.computed_at, r.recipe_sha256, r.program_version, r.condition,"
      " r.doubtful, r.reliable, r.historic, r.pm, r.ph, r.temperature_c, r.bed, r.ionic_strength, r.margins,"
      " r.channel_values,"
      " CASE WHEN ?4 THEN (SELECT d.json FROM result_detail d WHERE d.result_id = r.id) ELSE '' END"
      " FROM result r WHERE r.tank = ?1 AND r.sampled_at >= ?2" TW_CURRENT_RESULT
      " ORDER BY r.sampled_at DESC, r.id DESC LIMIT ?3");
  row.bind(tank, since, sqlLimit(limit), withJson);
  std::vector<ResultRow> results;
  while (row.next()) {
    ResultRow& result = results.emplace_back();
    result.id = row.integer(0);
    result.tank = row.text(1);
    result.sampledAt = row.instant(2);
    result.computedAt = row.instant(3);
    result.recipeSha256 = row.text(4);
    result.programVersion = row.text(5);
    result.condition = row.text(6);
    result.doubtful = row.boolean(7);
    result.reliable = row.boolean(8);
    result.historic = row.boolean(9);
    result.pM = row.maybeReal(10);
    result.ph = row.maybeReal(11);
    result.temperature_C = row.maybeReal(12);
    result.bed = row.maybeReal(13);
    result.ionicStrength = row.maybeReal(14);
    result.margins = marginsOf(row.text(15));
    result.values = row.text(16);
    result.json = row.text(17);
    Statement used = m_db.use("read what a result used",
                              "SELECT reading_id FROM result_reading WHERE result_id = ?1 ORDER BY reading_id");
    used.bind(result.id);
    while (used.next()) result.readings.push_back(used.integer(0));
  }
  std::reverse(results.begin(), results.end());
  return m_db.finish(std::move(results));
}

model::Result<std::optional<ResultRow>> SqliteStore::newestResult(const std::string& tank) {
  auto newest = results(tank, Instant::min(), 1, true);
  if (!newest) return model::fail(std::move(newest.error()));
  if (newest->empty()) return std::optional<ResultRow>();
  return std::optional(std::move(newest->front()));
}

}  // namespace tw::io::store
