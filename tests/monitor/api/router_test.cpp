// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/api/router.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>
#include <stdexcept>

namespace tw::monitor {
namespace {

Request request(const std::string& method, const std::string& target) {
  Request made;
  made.method = method;
  setTarget(made, target);
  made.host = "127.0.0.1:8484";
  return made;
}

class Routing : public testing::Test {
 protected:
  Routing() {
    m_router.add("GET", "/api/v1/tanks/{id}", [](const Request&, const PathValues& path, const Reply& reply) {
      reply({200, path.at("id"), "text/plain", {}});
    });
    m_router.add("POST", "/api/v1/tanks/{id}/readings",
                 [](const Request&, const PathValues&, const Reply& reply) { reply({201, "", "", {}}); });
    m_router.add("GET", "/broken", [](const Request&, const PathValues&, const Reply&) {
      throw std::runtime_error("a bug");
    });
  }
  Response answer(const Request& asked) const {
    Response got;
    m_router.handle(asked, [&](Response response) { got = std::move(response); });
    return got;
  }
  Router m_router;
};

TEST_F(Routing, FindsThePathAndDecodesItsParts) {
  EXPECT_EQ(answer(request("GET", "/api/v1/tanks/L2-T4?x=1")).body, "L2-T4");
  EXPECT_EQ(answer(request("GET", "/api/v1/tanks/a%2Fb%20c")).body, "a/b c");
  EXPECT_EQ(answer(request("POST", "/api/v1/tanks/T1/readings")).status, 201);
}

TEST_F(Routing, AnswersWhatItDoesNotKnowWithAProblemDocument) {
  const Response none = answer(request("GET", "/api/v1/nothing"));
  EXPECT_EQ(none.status, 404);
  EXPECT_EQ(none.contentType, "application/problem+json");
  const auto body = nlohmann::json::parse(none.body);
  EXPECT_EQ(body["type"], "about:blank");
  EXPECT_EQ(body["status"], 404);
  EXPECT_EQ(body["code"], "not_found");
  EXPECT_EQ(answer(request("GET", "/api/v1/tanks/")).status, 404);
  EXPECT_EQ(answer(request("GET", "")).status, 404);
}

TEST_F(Routing, NamesTheMethodsAPathAnswers) {
  const Response wrong = answer(request("DELETE", "/api/v1/tanks/T1"));
  EXPECT_EQ(wrong.status, 405);
  EXPECT_EQ(wrong.headers.at("Allow"), "GET");
}

TEST_F(Routing, TurnsABugIntoAnAnswer) { EXPECT_EQ(answer(request("GET", "/broken")).status, 500); }

struct Caller {
  const char* host;
  const char* origin;
  bool allowed;
};
class Origins : public testing::TestWithParam<Caller> {};
TEST_P(Origins, KeepsPagesOfOtherPlacesAway) {
  Request asked = request("GET", "/");
  asked.host = GetParam().host;
  asked.origin = GetParam().origin;
  EXPECT_EQ(Router::allowed(asked), GetParam().allowed);
}
INSTANTIATE_TEST_SUITE_P(Table, Origins,
                         testing::Values(Caller{"127.0.0.1:8484", "", true}, Caller{"localhost:8484", "", true},
                                         Caller{"[::1]:8484", "", true}, Caller{"", "", true},
                                         Caller{"shop.example:8484", "", false},
                                         Caller{"127.evil.example", "", false},
                                         Caller{"127.0.0.1:8484", "http://127.0.0.1:8484", true},
                                         Caller{"127.0.0.1:8484", "http://127.0.0.1:9999", false},
                                         Caller{"127.0.0.1:8484", "https://page.example", false},
                                         Caller{"127.0.0.1:8484", "null", false}));

TEST(Target, KeepsThePlusSignOfATime) {
  const Request asked = request("GET", "/p?since=2026-03-02T07:00:00+01:00&limit=5&flag&x=%zz");
  EXPECT_EQ(asked.path, "/p");
  EXPECT_EQ(asked.query.at("since"), "2026-03-02T07:00:00+01:00");
  EXPECT_EQ(asked.query.at("limit"), "5");
  EXPECT_EQ(asked.query.at("flag"), "");
  EXPECT_EQ(asked.query.at("x"), "%zz");
}

}  // namespace
}  // namespace tw::monitor
