// SPDX-License-Identifier: GPL-3.0-or-later
// GET: what is known.
#include <charconv>
#include <utility>

#include <nlohmann/json.hpp>

#include "io/wire/api_json.hpp"
#include "monitor/api/api.hpp"
#include "monitor/pipeline/views.hpp"

namespace tw::monitor {
namespace {

using nlohmann::json;

/// The most rows one answer carries; clients page with `since`.
constexpr std::size_t kMostRows = 100000;
/// Whole analyses are some 4 kB each.
constexpr std::size_t kMostAnalyses = 20000;

struct Range {
  io::Instant since{};
  std::size_t limit = 0;
};

model::Result<Range> range(const ApiContext& context, const Request& request, std::size_t most) {
  Range out;
  out.limit = most;
  if (const auto since = request.query.find("since"); since != request.query.end()) {
    const auto at = io::parseTime(since->second, context.zone);
    if (!at) return model::fail(at.error());
    out.since = at->at;
  }
  if (const auto limit = request.query.find("limit"); limit != request.query.end()) {
    const std::string& text = limit->second;
    const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), out.limit);
    if (error != std::errc{} || end != text.data() + text.size() || out.limit == 0) {
      return model::fail(model::Fault{"limit_unreadable", "limit",
                                      "'" + text + "': a whole number above 0 was expected", ""});
    }
    out.limit = std::min(out.limit, most);
  }
  return out;
}

bool isTrue(const Request& request, const char* name) {
  const auto at = request.query.find(name);
  return at != request.query.end() && (at->second == "true" || at->second == "1" || at->second.empty());
}

template <class T>
json orNull(const std::optional<T>& value) {
  return value ? json(*value) : json(nullptr);
}

std::string dump(const json& value) {
  return value.dump(-1, ' ', false, json::error_handler_t::replace);
}

Response shop(const ApiContext& context) {
  json lines = json::array();
  for (const io::Line& line : context.plant.shop().lines) {
    lines.push_back({{"id", line.id}, {"title", line.title}});
  }
  const json body = {{"title", context.plant.shop().title},
                     {"time_zone", context.plant.shop().timeZone},
                     {"sign_in", context.plant.shop().signIn},
                     {"version", TW_VERSION},
                     {"now", io::toRfc3339(context.clock.now())},
                     {"lines", std::move(lines)}};
  return jsonResponse(dump(body));
}

Response tanks(const ApiContext& context) {
  json body = json::array();
  for (const auto& view : context.board.tanks()) body.push_back(view);
  return jsonResponse(dump(body));
}

Response tank(const ApiContext& context, const std::string& id) {
  const auto view = context.board.tank(id);
  if (!view) return unknownTank(id);
  const TankFacts* facts = context.board.facts(id);
  // The analysis is kept as text: it goes into the object as it is, not through a parser.
  std::string body = dump(json(*view));
  body.pop_back();
  body += ",\"result\":" + (facts->newest && !facts->newest->json.empty() ? facts->newest->json : "null") + "}";
  return jsonResponse(std::move(body));
}

Response readings(const ApiContext& context, const Request& request, const std::string& id) {
  const TankSetup* setup = context.plant.tank(id);
  if (setup == nullptr) return unknownTank(id);
  const auto wanted = range(context, request, kMostRows);
  if (!wanted) return problem(400, wanted.error().code, wanted.error().detail);
  auto rows = context.store.readings(id, wanted->since, 0);
  if (!rows) return problem(rows.error());
  const std::size_t skip = rows->size() > wanted->limit ? rows->size() - wanted->limit : 0;
  json body = json::array();
  for (std::size_t i = skip; i < rows->size(); ++i) body.push_back(readingView(setup, (*rows)[i]));
  return jsonResponse(dump(body));
}

/// A stored analysis with the row's own members in front; both are JSON objects as text.
std::string wholeResult(const io::ResultRow& row) {
  const json members = {{"id", row.id},
                        {"tank", row.tank},
                        {"sampled_at", io::toRfc3339(row.sampledAt)},
                        {"computed_at", io::toRfc3339(row.computedAt)},
                        {"program_version", row.programVersion},
                        {"bed", orNull(row.bed)},
                        {"historic", row.historic},
                        {"readings", row.readings}};
  std::string text = dump(members);
  text.pop_back();
  text += ",\"values\":" + (row.values.empty() ? "{}" : row.values);
  const std::size_t open = row.json.find('{');
  if (open == std::string::npos) return text + "}";
  const std::size_t first = row.json.find_first_not_of(" \n\t\r", open + 1);
  const bool empty = first == std::string::npos || row.json[first] == '}';
  return text + (empty ? "" : ",") + row.json.substr(open + 1);
}

Response results(const ApiContext& context, const Request& request, const std::string& id) {
  const TankSetup* setup = context.plant.tank(id);
  if (setup == nullptr) return unknownTank(id);
  const bool compact = isTrue(request, "compact");
  const auto wanted = range(context, request, compact ? kMostRows : kMostAnalyses);
  if (!wanted) return problem(400, wanted.error().code, wanted.error().detail);
  const auto rows = context.store.results(id, wanted->since, wanted->limit, !compact);
  if (!rows) return problem(rows.error());
  if (compact) {
    json body = json::array();
    for (const io::ResultRow& row : *rows) body.push_back(resultView(setup, row));
    return jsonResponse(dump(body));
  }
  std::string body = "[";
  for (const io::ResultRow& row : *rows) {
    if (body.size() > 1) body += ",";
    body += wholeResult(row);
  }
  return jsonResponse(body + "]");
}

Response events(const ApiContext& context, const Request& request, const std::string& id) {
  if (context.plant.tank(id) == nullptr) return unknownTank(id);
  const auto wanted = range(context, request, kMostRows);
  if (!wanted) return problem(400, wanted.error().code, wanted.error().detail);
  const auto rows = context.store.events(id, wanted->since);
  if (!rows) return problem(rows.error());
  json body = json::array();
  for (const io::EventRow& row : *rows) {
    body.push_back({{"id", row.id},
                    {"tank", row.tank},
                    {"event", row.kind},
                    {"time", io::toRfc3339(row.at.at, row.at.offset)},
                    {"stock", row.stock},
                    {"amount", orNull(row.amount)},
                    {"unit", row.unit},
                    {"operator", row.op},
                    {"lot", row.lot},
                    {"note", row.note}});
  }
  return jsonResponse(dump(body));
}

Response alarms(const ApiContext& context, const Request& request) {
  json body = json::array();
  for (const auto& view : context.board.standingAlarms()) body.push_back(view);
  if (isTrue(request, "all")) {
    const auto rows = context.store.alarms(true, kMostRows);
    if (!rows) return problem(rows.error());
    for (const io::AlarmRow& row : *rows) {
      if (alarmState(row.state) == AlarmState::Normal) body.push_back(alarmView(row));
    }
  }
  return jsonResponse(dump(body));
}

Response due(const ApiContext& context) {
  json body = json::array();
  for (const DueView& each : context.board.due()) {
    body.push_back({{"tank", each.tank},
                    {"tank_title", each.tankTitle},
                    {"channel", each.channel},
                    {"title", each.title},
                    {"due_at", each.dueAt},
                    {"overdue", each.overdue},
                    {"last_at", orNull(each.lastAt)}});
  }
  return jsonResponse(dump(body));
}

Response recipe(const ApiContext& context, const std::string& sha256) {
  const auto text = context.store.recipeJson(sha256);
  if (!text) return problem(text.error());
  if (!*text) return problem(404, "recipe_unknown", "the store holds no recipe '" + sha256 + "'");
  return jsonResponse(**text);
}

}  // namespace

void addReadRoutes(Router& router, const ApiContext& c) {
  const std::string root = kApiRoot;
  const auto get = [&](const std::string& pattern, auto answer) {
    router.add("GET", pattern, [answer](const Request& request, const PathValues& path, const Reply& reply) {
      reply(answer(request, path));
    });
  };
  get(root + "/shop", [&c](const Request&, const PathValues&) { return shop(c); });
  get(root + "/tanks", [&c](const Request&, const PathValues&) { return tanks(c); });
  get(root + "/tanks/{id}", [&c](const Request&, const PathValues& p) { return tank(c, p.at("id")); });
  get(root + "/tanks/{id}/readings",
      [&c](const Request& r, const PathValues& p) { return readings(c, r, p.at("id")); });
  get(root + "/tanks/{id}/results",
      [&c](const Request& r, const PathValues& p) { return results(c, r, p.at("id")); });
  get(root + "/tanks/{id}/events",
      [&c](const Request& r, const PathValues& p) { return events(c, r, p.at("id")); });
  get(root + "/alarms", [&c](const Request& r, const PathValues&) { return alarms(c, r); });
  get(root + "/due", [&c](const Request&, const PathValues&) { return due(c); });
  get(root + "/recipes/{sha256}",
      [&c](const Request&, const PathValues& p) { return recipe(c, p.at("sha256")); });
  get(root + "/live", [](const Request&, const PathValues&) {
    Response answer = problem(426, "upgrade_required", "this is a WebSocket");
    answer.headers["Upgrade"] = "websocket";
    return answer;
  });
  get("/healthz", [](const Request&, const PathValues&) {
    return Response{200, "ok\n", "text/plain; charset=utf-8", {}};
  });
  get("/metrics", [&c](const Request&, const PathValues&) {
    return Response{200, c.metrics(), "text/plain; version=0.0.4; charset=utf-8", {}};
  });
}

}  // namespace tw::monitor
