// SPDX-License-Identifier: GPL-3.0-or-later
// The API over real loopback sockets, spoken to by a client that shares no code with it.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>
#include <set>

#include <nlohmann/json.hpp>

#include "tests/monitor/support/client.hpp"
#include "tests/monitor/support/running_service.hpp"

namespace tw::test {
namespace {

using nlohmann::json;

class Api : public testing::Test {
 protected:
  Api() : m_clock("2026-03-02T07:00:00Z"), m_service(m_shop, m_clock) {}

  Answer ask(const std::string& target) const { return get(m_service.port(), "/api/v1" + target); }
  Answer send(const std::string& target, const json& body) const {
    return post(m_service.port(), "/api/v1" + target, body.dump());
  }
  static json liquor(double copper = 22, double ammonia = 85) {
    return {{"time", "2026-03-02T06:00:00Z"},
            {"operator", "mk"},
            {"values", {{"copper", copper}, {"ammonia", ammonia}, {"ph", 10.2}, {"temperature", 40}}}};
  }

  TempShop m_shop;
  FakeClock m_clock;
  RunningService m_service;
};

TEST_F(Api, TellsOfTheShop) {
  const json shop = ask("/shop").json();
  EXPECT_EQ(shop["title"], "Test shop");
  EXPECT_EQ(shop["time_zone"], "Europe/Paris");
  EXPECT_EQ(shop["now"], "2026-03-02T07:00:00Z");
  EXPECT_EQ(shop["lines"][0]["id"], "L1");
  EXPECT_FALSE(shop["version"].get<std::string>().empty());
}

TEST_F(Api, IsHealthyAndCounts) {
  const Answer health = get(m_service.port(), "/healthz");
  EXPECT_EQ(health.status, 200);
  EXPECT_EQ(health.body, "ok\n");
  send("/tanks/T1/readings", liquor());
  ASSERT_TRUE(m_service.settle());
  const std::string metrics = get(m_service.port(), "/metrics").body;
  EXPECT_THAT(metrics, testing::HasSubstr("tankward_readings_total{outcome=\"accepted\"} "));
  EXPECT_THAT(metrics, testing::HasSubstr("tankward_results_total 1\n"));
  EXPECT_THAT(metrics, testing::HasSubstr("tankward_pending_liquors 0\n"));
}

TEST_F(Api, TakesReadingsOnceAndSaysWhatBecameOfThem) {
  const Answer first = send("/tanks/T1/readings", liquor());
  ASSERT_EQ(first.status, 201) << first.body;
  EXPECT_EQ(first.json()["accepted"], 4);
  EXPECT_EQ(first.json()["ids"].size(), 4U);
  const Answer again = send("/tanks/T1/readings", liquor());
  EXPECT_EQ(again.status, 200);
  EXPECT_EQ(again.json()["duplicates"], 4);
  EXPECT_EQ(again.json()["accepted"], 0);
}

TEST_F(Api, TakesUnitsAndBuretteNumbers) {
  const json body = {{"time", "2026-03-02T07:00:00+01:00"},
                     {"operator", "mk"},
                     {"values",
                      {{"copper", {{"V", 17.3}}},
                       {"ammonia", {{"value", 5.0}, {"unit", "mol/L"}}},
                       {"ph", 10.2},
                       {"temperature", {{"value", 104}, {"unit", "degF"}}}}}};
  const Answer answer = send("/tanks/T1/readings", body);
  ASSERT_EQ(answer.status, 201) << answer.body;
  EXPECT_EQ(answer.json()["accepted"], 4);
  std::map<std::string, json> rows;
  for (const json& row : ask("/tanks/T1/readings").json()) rows[row["channel"]] = row;
  EXPECT_NEAR(rows["temperature"]["value"].get<double>(), 40.0, 1e-9);
  EXPECT_EQ(rows["temperature"]["entered_unit"], "degF");
  EXPECT_NEAR(rows["ammonia"]["value"].get<double>(), 5.0 * 17.031, 1e-2);
  EXPECT_EQ(rows["copper"]["sampled_at"], "2026-03-02T07:00:00+01:00");
}

TEST_F(Api, RefusesPerValueAndAnswers422WhenNoneIsGood) {
  const Answer some = send("/tanks/T1/readings", liquor(2200));
  ASSERT_EQ(some.status, 201);
  EXPECT_EQ(some.json()["accepted"], 3);
  ASSERT_EQ(some.json()["refused"].size(), 1U);
  EXPECT_EQ(some.json()["refused"][0]["channel"], "copper");
  EXPECT_EQ(some.json()["refused"][0]["code"], "implausible");
  json body = liquor();
  body["values"] = {{"silver", 3.0}, {"copper", "many"}};
  const Answer none = send("/tanks/T1/readings", body);
  EXPECT_EQ(none.status, 422);
  EXPECT_THAT(none.headers, testing::HasSubstr("application/problem+json"));
  EXPECT_EQ(none.json()["refused"].size(), 2U);
  EXPECT_EQ(none.json()["code"], "nothing_usable");
}

TEST_F(Api, KeepsAConflictAsSuspiciousUntilSomeoneConfirmsIt) {
  send("/tanks/T1/readings", liquor(22));
  const Answer other = send("/tanks/T1/readings", liquor(24));
  ASSERT_EQ(other.status, 201) << other.body;
  EXPECT_EQ(other.json()["accepted"], 0);
  ASSERT_EQ(other.json()["suspicious"].size(), 1U);
  ASSERT_TRUE(m_service.settle());
  const double before = ask("/tanks/T1").json()["result"]["totals_mol_L"]["Cu^2+"];
  const std::string id = other.json()["suspicious"][0]["id"].dump();
  EXPECT_EQ(send("/readings/" + id + "/confirm", json::object()).status, 422);
  EXPECT_EQ(send("/readings/" + id + "/confirm", {{"operator", "lt"}}).status, 201);
  ASSERT_TRUE(m_service.settle());
  const double after = ask("/tanks/T1").json()["result"]["totals_mol_L"]["Cu^2+"];
  EXPECT_NEAR(after / before, 24.0 / 22.0, 1e-9);
}

TEST_F(Api, PreviewsWithoutStoring) {
  const Answer answer = send("/tanks/T1/readings?preview=true", liquor());
  ASSERT_EQ(answer.status, 200) << answer.body;
  EXPECT_EQ(answer.json()["result"]["condition"], "fine");
  EXPECT_TRUE(ask("/tanks/T1/readings").json().empty());
  json partly = liquor();
  partly["values"].erase("ammonia");
  EXPECT_EQ(send("/tanks/T1/readings?preview=true", partly).json()["code"], "missing_channel");
}

TEST_F(Api, ShowsResultsWholeAndCompact) {
  send("/tanks/T1/readings", liquor());
  ASSERT_TRUE(m_service.settle());
  const json whole = ask("/tanks/T1/results").json();
  ASSERT_EQ(whole.size(), 1U);
  EXPECT_EQ(whole[0]["tank"], "T1");
  EXPECT_EQ(whole[0]["sampled_at"], "2026-03-02T06:00:00Z");
  EXPECT_EQ(whole[0]["readings"].size(), 4U);
  EXPECT_NEAR(whole[0]["values"]["copper"].get<double>(), 22.0, 1e-9);
  EXPECT_TRUE(whole[0].contains("pM"));
  EXPECT_TRUE(whole[0].contains("species"));
  const json compact = ask("/tanks/T1/results?compact=true&since=2026-03-02T06:00:00Z").json();
  ASSERT_EQ(compact.size(), 1U);
  EXPECT_FALSE(compact[0].contains("species"));
  EXPECT_EQ(compact[0]["condition"], "fine");
  EXPECT_TRUE(ask("/tanks/T1/results?since=2026-03-02T06:00:01Z").json().empty());
  EXPECT_EQ(ask("/tanks/T1/results?since=yesterday").status, 400);
  EXPECT_EQ(ask("/tanks/T1/results?limit=0").status, 400);
}

TEST_F(Api, KeepsTheNewestWhenLimited) {
  m_clock.set("2026-03-03T07:00:00Z");
  m_shop.dropFile("a.csv", wideTable(5, "2026-03-02T06:00:00Z", 60));
  ASSERT_TRUE(waitUntil([&] { return ask("/tanks/T1/results?compact=true").json().size() == 5; }));
  const json two = ask("/tanks/T1/results?compact=true&limit=2").json();
  ASSERT_EQ(two.size(), 2U);
  EXPECT_EQ(two[0]["sampled_at"], "2026-03-02T09:00:00Z");
  EXPECT_EQ(two[1]["sampled_at"], "2026-03-02T10:00:00Z");
  EXPECT_EQ(ask("/tanks/T1/readings?limit=3").json().size(), 3U);
}

TEST_F(Api, KeepsTheRecipeThatAResultNames) {
  send("/tanks/T1/readings", liquor());
  ASSERT_TRUE(m_service.settle());
  const json result = ask("/tanks/T1/results?compact=true").json()[0];
  const Answer recipe = ask("/recipes/" + result["recipe_sha256"].get<std::string>());
  EXPECT_EQ(recipe.status, 200);
  EXPECT_TRUE(recipe.json().is_object());
  EXPECT_EQ(ask("/recipes/ab").status, 404);
}

TEST_F(Api, ListsWhatIsDueOverdueFirst) {
  send("/tanks/T1/readings", liquor());
  ASSERT_TRUE(m_service.settle());
  m_clock.set("2026-03-02T15:00:00Z");
  const json due = ask("/due").json();
  ASSERT_EQ(due.size(), 8U);
  std::set<bool> after;
  for (const json& each : due) {
    EXPECT_FALSE(after.contains(false) && each["overdue"]) << "overdue ones come first";
    after.insert(each["overdue"].get<bool>());
  }
  EXPECT_EQ(due.back()["tank"], "T1");
  EXPECT_EQ(due.back()["due_at"], "2026-03-03T06:00:00Z");
  EXPECT_EQ(due.back()["last_at"], "2026-03-02T06:00:00Z");
}

TEST_F(Api, TakesEvents) {
  const json body = {{"time", "2026-03-02T06:30:00Z"}, {"operator", "mk"}, {"event", "addition"},
                     {"stock", "aqua-ammonia"},        {"amount", 2.5},    {"unit", "L"}};
  EXPECT_EQ(send("/tanks/T1/events", body).status, 201);
  EXPECT_EQ(send("/tanks/T1/events", body).status, 200);
  const json rows = ask("/tanks/T1/events").json();
  ASSERT_EQ(rows.size(), 1U);
  EXPECT_EQ(rows[0]["stock"], "aqua-ammonia");
  EXPECT_EQ(rows[0]["operator"], "mk");
  EXPECT_EQ(rows[0]["amount"], 2.5);
  json bad = body;
  bad["event"] = "party";
  EXPECT_EQ(send("/tanks/T1/events", bad).json()["code"], "unknown_event");
}

struct Wrong {
  const char* target;
  const char* body;
  int status;
  const char* code;
};
class ApiRefusals : public Api, public testing::WithParamInterface<Wrong> {};
TEST_P(ApiRefusals, AreProblemDocuments) {
  const Answer answer = post(m_service.port(), std::string("/api/v1") + GetParam().target, GetParam().body);
  EXPECT_EQ(answer.status, GetParam().status) << answer.body;
  EXPECT_THAT(answer.headers, testing::HasSubstr("application/problem+json"));
  EXPECT_EQ(answer.json()["code"], GetParam().code);
}
INSTANTIATE_TEST_SUITE_P(
    Table, ApiRefusals,
    testing::Values(
        Wrong{"/tanks/T9/readings", "{}", 404, "unknown_tank"},
        Wrong{"/tanks/T1/readings", "{", 400, "bad_json"}, Wrong{"/tanks/T1/readings", "[]", 400, "bad_json"},
        Wrong{"/tanks/T1/readings", R"({"time":"2026-03-02T06:00:00Z","values":{"ph":10}})", 422, "operator_missing"},
        Wrong{"/tanks/T1/readings", R"({"time":"2026-03-02T06:00:00Z","operator":" ","values":{"ph":10}})", 422,
              "operator_missing"},
        Wrong{"/tanks/T1/readings", R"({"operator":"mk","values":{"ph":10}})", 422, "time_missing"},
        Wrong{"/tanks/T1/readings", R"({"time":"soon","operator":"mk","values":{"ph":10}})", 422, "time_unreadable"},
        Wrong{"/tanks/T1/readings", R"({"time":"2026-03-02T06:00:00Z","operator":"mk"})", 422, "values_missing"},
        Wrong{"/readings/999/correct", R"({"value":1,"operator":"mk","reason":"r"})", 404, "reading_unknown"},
        Wrong{"/readings/x/correct", R"({"value":1,"operator":"mk","reason":"r"})", 404, "reading_unknown"},
        Wrong{"/readings/1/correct", R"({"value":1,"operator":"mk"})", 422, "reason_missing"},
        Wrong{"/readings/999/confirm", R"({"operator":"mk"})", 404, "reading_unknown"},
        Wrong{"/alarms/999/acknowledge", R"({"operator":"mk"})", 404, "alarm_unknown"}));

TEST_F(Api, RefusesTooLargeABody) {
  const Answer answer = post(m_service.port(), "/api/v1/tanks/T1/readings", std::string(1100000, ' '));
  EXPECT_EQ(answer.status, 413);
}

TEST_F(Api, AnswersSeveralRequestsOnOneConnection) {
  Connection connection(m_service.port());
  for (int i = 0; i < 3; ++i) {
    connection.send("GET /healthz HTTP/1.1\r\nHost: localhost\r\n\r\n");
    EXPECT_THAT(connection.readUntil("ok\n"), testing::HasSubstr("200"));
  }
}

TEST_F(Api, EndsWhatIsNotHttp) {
  Connection connection(m_service.port());
  connection.send("hello there\r\n\r\n");
  EXPECT_THAT(connection.readUntil("\r\n"), testing::HasSubstr("400"));
  EXPECT_TRUE(connection.closedByPeer());
}

TEST_F(Api, KeepsForeignPagesOut) {
  EXPECT_EQ(get(m_service.port(), "/api/v1/tanks", "Origin: https://page.example\r\n").status, 403);
  EXPECT_EQ(LiveClient(m_service.port(), "Origin: https://page.example\r\n").status(), 403);
}

TEST_F(Api, PushesReadingsResultsAndConditions) {
  LiveClient live(m_service.port());
  ASSERT_EQ(live.status(), 101);
  const json hello = json::parse(live.next());
  EXPECT_EQ(hello["type"], "hello");
  EXPECT_EQ(hello["at"], "2026-03-02T07:00:00Z");
  send("/tanks/T1/readings", liquor());
  std::set<std::string> types;
  json result, condition;
  while (result.is_null() || condition.is_null()) {
    const json message = json::parse(live.next());
    types.insert(message["type"]);
    if (message["type"] == "result") result = message;
    if (message["type"] == "condition" && message["condition"]["condition"] == "fine") condition = message;
  }
  EXPECT_THAT(types, testing::IsSupersetOf({"reading", "result", "condition"}));
  EXPECT_EQ(result["tank"], "T1");
  EXPECT_EQ(result["result"]["sampled_at"], "2026-03-02T06:00:00Z");
  EXPECT_EQ(condition["condition"]["id"], "T1");
  EXPECT_FALSE(condition["condition"]["channels"].empty());
}

TEST_F(Api, PushesAlarms) {
  ASSERT_TRUE(m_service.settle());
  LiveClient live(m_service.port());
  live.next();
  send("/tanks/T1/readings", liquor(22, 65));
  for (;;) {
    const json message = json::parse(live.next());
    if (message["type"] != "alarm" || message["alarm"]["kind"] != "window") continue;
    EXPECT_EQ(message["alarm"]["subject"], "ammonia");
    EXPECT_GT(message["alarm"]["id"].get<std::int64_t>(), 0);
    return;
  }
}

TEST_F(Api, PushesAWholeFileToAClientThatListens) {
  m_clock.set("2026-03-10T07:00:00Z");
  ASSERT_TRUE(m_service.settle());
  LiveClient live(m_service.port());
  live.next();
  m_shop.dropFile("many.csv", wideTable(500, "2026-03-02T06:00:00Z"));
  std::size_t readings = 0, results = 0;
  while (readings < 2000 || results < 500) {
    const json message = json::parse(live.next());
    readings += message["type"] == "reading" ? 1U : 0U;
    results += message["type"] == "result" ? 1U : 0U;
  }
  EXPECT_EQ(readings, 2000U);
  EXPECT_EQ(results, 500U);
}

TEST(ApiSignIn, AnswersNobodyWhereSigningInIsRequired) {
  TempShop shop("", "required");
  FakeClock clock("2026-03-02T07:00:00Z");
  RunningService service(shop, clock);
  EXPECT_EQ(get(service.port(), "/api/v1/tanks").status, 401);
  EXPECT_EQ(post(service.port(), "/api/v1/tanks/T1/readings", "{}").status, 401);
  EXPECT_EQ(get(service.port(), "/healthz").status, 200);
  EXPECT_EQ(LiveClient(service.port()).status(), 401);
}

}  // namespace
}  // namespace tw::test
