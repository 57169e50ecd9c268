// SPDX-License-Identifier: GPL-3.0-or-later
// `tankward export`: what the store knows of a tank, in a form that `load` and a drop folder read back.
#include <nlohmann/json.hpp>

#include <ostream>

#include "io/store/export.hpp"
#include "monitor/cli/commands.hpp"
#include "monitor/cli/open_shop.hpp"

namespace tw::monitor::cli {
namespace {

model::Fault inputFault(const char* code, const std::string& subject, const std::string& detail) {
  return {code, subject, detail, "", model::FaultKind::Input};
}

/// Results in the order of time, each the whole object of `solve --json` with where it belongs.
model::Result<nlohmann::ordered_json> resultsJson(io::Store& store, const std::string& tank, io::Instant since) {
  auto rows = store.results(tank, since, 0, true);
  if (!rows) return model::fail(rows.error());
  nlohmann::ordered_json all = nlohmann::ordered_json::array();
  for (const io::ResultRow& row : *rows) {
    nlohmann::ordered_json one = {{"id", row.id},
                                  {"tank", row.tank},
                                  {"sampled_at", io::toRfc3339(row.sampledAt)},
                                  {"computed_at", io::toRfc3339(row.computedAt)},
                                  {"readings", row.readings}};
    one.update(nlohmann::ordered_json::parse(row.json));
    all.push_back(std::move(one));
  }
  return all;
}

}  // namespace

int exportRows(const ExportOptions& options, Streams& streams) {
  auto opened = openShop(options.config);
  if (!opened) return report(streams, opened.error());
  const io::Tank* tank = opened->shop.tank(options.tank);
  if (tank == nullptr) {
    return report(streams, inputFault("unknown_tank", options.tank, "the shop has no such tank"));
  }
  io::Instant since{};
  if (!options.since.empty()) {
    const auto parsed = io::parseRfc3339(options.since);
    if (!parsed) {
      return report(streams, inputFault("time_unreadable", options.since,
                                        "--since wants RFC 3339, e.g. 2026-03-02T06:00:00Z"));
    }
    since = parsed->at;
  }
  auto store = io::openStore(opened->shop.dataDir, io::StoreMode::ReadOnly);
  if (!store) return report(streams, store.error());
  auto readings = (*store)->readings(options.tank, since);
  if (!readings) return report(streams, readings.error());
  const io::Recipe recipe = io::recipeForTank(opened->recipes.at(tank->recipeId), *tank);
  if (!options.json) {
    streams.out << io::exportCsv(*readings, recipe);
    return 0;
  }
  auto results = resultsJson(**store, options.tank, since);
  if (!results) return report(streams, results.error());
  nlohmann::ordered_json document = nlohmann::ordered_json::object();
  document["readings"] = nlohmann::ordered_json::parse(io::exportJson(*readings, recipe));
  document["results"] = std::move(*results);
  streams.out << document.dump(2) << "\n";
  return 0;
}

}  // namespace tw::monitor::cli
