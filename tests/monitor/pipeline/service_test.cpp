// SPDX-License-Identifier: GPL-3.0-or-later
// The whole chain with real files, store, threads and sockets; only the clock is false.
#include <fcntl.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <stdlib.h>
#include <unistd.h>

#include <filesystem>

#include <nlohmann/json.hpp>

#include "tests/monitor/support/client.hpp"
#include "tests/monitor/support/running_service.hpp"

namespace tw::test {
namespace {

namespace fs = std::filesystem;
using nlohmann::json;

const char* const kOneLiquor =
    "time,tank,operator,copper,ammonia,ph,temperature\n2026-03-02T06:00:00Z,T1,mk,22,85,10.2,40\n";

json tank(unsigned port, const std::string& id) { return get(port, "/api/v1/tanks/" + id).json(); }
std::size_t resultCount(unsigned port) {
  return get(port, "/api/v1/tanks/T1/results?compact=true").json().size();
}
bool taken(const TempShop& shop, const std::string& name) {
  return waitUntil([&] { return fs::exists(shop.drop() / "taken" / name); });
}

TEST(Service, TurnsADropFileIntoAResult) {
  TempShop shop;
  FakeClock clock("2026-03-02T07:00:00Z");
  RunningService service(shop, clock);
  EXPECT_EQ(tank(service.port(), "T1")["condition"], "stale");
  shop.dropFile("a.csv", kOneLiquor);
  ASSERT_TRUE(taken(shop, "a.csv"));
  ASSERT_TRUE(waitUntil([&] { return tank(service.port(), "T1")["condition"] == "fine"; }));
  const json seen = tank(service.port(), "T1");
  EXPECT_EQ(seen["sampled_at"], "2026-03-02T06:00:00Z");
  EXPECT_EQ(seen["result"]["recipe"], "copper-ammine");
  EXPECT_GT(seen["bed"].get<double>(), 0.0);
  EXPECT_FALSE(seen["margins"].empty());
}

TEST(Service, MakesAPrivateDataFolder) {
  TempShop shop;
  FakeClock clock("2026-03-02T07:00:00Z");
  RunningService service(shop, clock);
  EXPECT_EQ(fs::status(shop.shop().dataDir).permissions() & fs::perms::mask, fs::perms::owner_all);
}

TEST(Service, TakesTheSameFileTwiceAsOneReading) {
  TempShop shop;
  FakeClock clock("2026-03-02T07:00:00Z");
  RunningService service(shop, clock);
  shop.dropFile("a.csv", kOneLiquor);
  ASSERT_TRUE(taken(shop, "a.csv"));
  shop.dropFile("b.csv", kOneLiquor);
  ASSERT_TRUE(taken(shop, "b.csv"));
  ASSERT_TRUE(service.settle());
  EXPECT_EQ(get(service.port(), "/api/v1/tanks/T1/readings").json().size(), 4U);
  EXPECT_EQ(resultCount(service.port()), 1U);
}

TEST(Service, SaysWhyACellWasRefused) {
  TempShop shop;
  FakeClock clock("2026-03-02T07:00:00Z");
  RunningService service(shop, clock);
  shop.dropFile("a.csv", "time,tank,copper,ph\n2026-03-02T06:00:00Z,T1,2200,10.2\n");
  ASSERT_TRUE(taken(shop, "a.csv"));
  std::string why;
  for (const auto& entry : fs::directory_iterator(shop.drop() / "refused")) {
    if (entry.path().string().ends_with(".why.txt")) why = readFile(entry.path());
  }
  EXPECT_THAT(why, testing::HasSubstr("copper"));
  EXPECT_THAT(why, testing::HasSubstr("2200"));
  const json rows = get(service.port(), "/api/v1/tanks/T1/readings").json();
  ASSERT_EQ(rows.size(), 2U);
  EXPECT_EQ(rows[0]["state"].get<std::string>() + rows[1]["state"].get<std::string>(), "refusedaccepted");
}

TEST(Service, SolvesAThousandRowsOnceEach) {
  TempShop shop;
  FakeClock clock("2026-03-10T07:00:00Z");
  RunningService service(shop, clock);
  shop.dropFile("many.csv", wideTable(1000, "2026-03-02T06:00:00Z"));
  ASSERT_TRUE(taken(shop, "many.csv"));
  ASSERT_TRUE(waitUntil([&] { return resultCount(service.port()) == 1000; }));
  ASSERT_TRUE(service.settle());
  EXPECT_EQ(resultCount(service.port()), 1000U);
  EXPECT_EQ(get(service.port(), "/api/v1/tanks/T1/readings").json().size(), 4000U);
}

TEST(Service, RaisesAlarmsOfThePresentAndNotOfThePast) {
  TempShop shop;
  FakeClock clock("2026-03-02T07:00:00Z");
  RunningService service(shop, clock);
  // The oldest row is in trouble, the newest is not.
  shop.dropFile("a.csv", "time,tank,copper,ammonia,ph,temperature\n2026-03-01T06:00:00Z,T1,22,20,9.9,40\n"
                         "2026-03-02T06:00:00Z,T1,22,85,10.2,40\n");
  ASSERT_TRUE(taken(shop, "a.csv"));
  ASSERT_TRUE(waitUntil([&] { return resultCount(service.port()) == 2; }));
  ASSERT_TRUE(service.settle());
  for (const json& alarm : get(service.port(), "/api/v1/alarms?all=true").json()) {
    EXPECT_NE(alarm["kind"], "margin") << alarm;
    EXPECT_NE(alarm["kind"], "solid") << alarm;
  }
}

class Alarming : public testing::Test {
 protected:
  Alarming() : m_clock("2026-03-02T07:00:00Z") { start(); }
  void start() { m_service = std::make_unique<RunningService>(m_shop, m_clock); }
  void measure(const std::string& time, double ammonia) {
    const json body = {{"time", time},
                       {"operator", "mk"},
                       {"values", {{"copper", 22}, {"ammonia", ammonia}, {"ph", 10.2}, {"temperature", 40}}}};
    ASSERT_EQ(post(m_service->port(), "/api/v1/tanks/T1/readings", body.dump()).status, 201);
    ASSERT_TRUE(m_service->settle());
  }
  /// The standing alarm of a kind and subject; null when there is none.
  json alarm(const std::string& kind, const std::string& subject) {
    for (const json& each : get(m_service->port(), "/api/v1/alarms").json()) {
      if (each["tank"] == "T1" && each["kind"] == kind && each["subject"] == subject) return each;
    }
    return nullptr;
  }
  TempShop m_shop;
  FakeClock m_clock;
  std::unique_ptr<RunningService> m_service;
};

TEST_F(Alarming, RaisesAcknowledgesAndClearsAWindow) {
  measure("2026-03-02T06:00:00Z", 65);  // window 70 to 100 g/L
  json raised = alarm("window", "ammonia");
  ASSERT_FALSE(raised.is_null());
  EXPECT_EQ(raised["state"], "unacknowledged");
  EXPECT_EQ(raised["priority"], "medium");
  EXPECT_NEAR(raised["value"].get<double>(), 65.0, 1e-9);
  const std::string path = "/api/v1/alarms/" + raised["id"].dump() + "/acknowledge";
  EXPECT_EQ(post(m_service->port(), path, R"({"comment":"seen"})").status, 422);  // nobody signs for it
  const Answer acknowledged = post(m_service->port(), path, R"({"operator":"lt","comment":"seen"})");
  ASSERT_EQ(acknowledged.status, 200) << acknowledged.body;
  EXPECT_EQ(acknowledged.json()["state"], "acknowledged");
  EXPECT_EQ(acknowledged.json()["acknowledged_by"], "lt");
  measure("2026-03-02T06:30:00Z", 85);
  EXPECT_TRUE(alarm("window", "ammonia").is_null());
}

TEST_F(Alarming, SurvivesARestart) {
  measure("2026-03-02T06:00:00Z", 65);
  const json before = alarm("window", "ammonia");
  ASSERT_FALSE(before.is_null());
  m_service.reset();
  start();
  EXPECT_EQ(alarm("window", "ammonia"), before);
  EXPECT_EQ(tank(m_service->port(), "T1")["sampled_at"], "2026-03-02T06:00:00Z");
}

TEST_F(Alarming, BecomesStaleAsTimeGoesBy) {
  measure("2026-03-02T06:00:00Z", 85);
  EXPECT_EQ(tank(m_service->port(), "T1")["condition"], "fine");
  EXPECT_TRUE(alarm("stale", "liquor").is_null() ||
              alarm("stale", "liquor")["state"] == "returned_unacknowledged");
  m_clock.set("2026-03-02T16:30:00Z");
  m_service->tick();
  ASSERT_TRUE(m_service->settle());
  EXPECT_EQ(tank(m_service->port(), "T1")["condition"], "stale");
  EXPECT_EQ(alarm("stale", "liquor")["state"], "unacknowledged");
}

TEST_F(Alarming, FallsSilentOutOfService) {
  measure("2026-03-02T06:00:00Z", 65);
  ASSERT_FALSE(alarm("window", "ammonia").is_null());
  const json out = {{"time", "2026-03-02T06:30:00Z"}, {"operator", "mk"}, {"event", "out_of_service"}};
  ASSERT_EQ(post(m_service->port(), "/api/v1/tanks/T1/events", out.dump()).status, 201);
  ASSERT_TRUE(m_service->settle());
  EXPECT_TRUE(alarm("window", "ammonia").is_null());
  EXPECT_EQ(tank(m_service->port(), "T1")["in_service"], false);
}

TEST_F(Alarming, JudgesWhatACorrectionLeaves) {
  measure("2026-03-02T06:00:00Z", 65);
  json wrong;
  for (const json& row : get(m_service->port(), "/api/v1/tanks/T1/readings").json()) {
    if (row["channel"] == "ammonia") wrong = row;
  }
  const std::string path = "/api/v1/readings/" + wrong["id"].dump() + "/correct";
  const Answer corrected =
      post(m_service->port(), path, R"({"value":85,"operator":"lt","reason":"burette misread"})");
  ASSERT_EQ(corrected.status, 201) << corrected.body;
  ASSERT_TRUE(m_service->settle());
  EXPECT_EQ(alarm("window", "ammonia")["state"], "returned_unacknowledged");
  EXPECT_EQ(resultCount(m_service->port()), 1U);
  EXPECT_EQ(post(m_service->port(), path, R"({"value":86,"operator":"lt","reason":"again"})").status, 409);
}

/// The far end of a serial line: a pseudo terminal whose name the service opens.
class Instrument {
 public:
  Instrument() : m_fd(::posix_openpt(O_RDWR | O_NOCTTY)) {
    if (m_fd < 0 || ::grantpt(m_fd) != 0 || ::unlockpt(m_fd) != 0) throw std::runtime_error("no pseudo terminal");
    m_port = ::ptsname(m_fd);
  }
  ~Instrument() { unplug(); }
  Instrument(const Instrument&) = delete;
  Instrument& operator=(const Instrument&) = delete;
  [[nodiscard]] const std::string& port() const { return m_port; }
  void say(const std::string& line) const {
    ASSERT_EQ(::write(m_fd, line.data(), line.size()), static_cast<ssize_t>(line.size()));
  }
  void unplug() {
    if (m_fd >= 0) ::close(m_fd);
    m_fd = -1;
  }

 private:
  int m_fd;
  std::string m_port;
};

TEST(Service, ReadsAnInstrumentAndAlarmsWhenItIsUnplugged) {
  Instrument instrument;
  TempShop shop("\n[[serial]]\nport = \"" + instrument.port() +
                "\"\nbaud = 9600\ntank = \"T1\"\nframe = \"named\"\nevery_s = 0\n");
  FakeClock clock("2026-03-02T07:00:00Z");
  RunningService service(shop, clock);
  const auto readings = [&] { return get(service.port(), "/api/v1/tanks/T1/readings").json(); };
  ASSERT_TRUE(waitUntil([&] {
    instrument.say("ph=10.21 temperature=41.5\r\n");
    return readings().size() >= 2;
  }));
  EXPECT_EQ(readings()[0]["source"], "serial:" + instrument.port());
  instrument.unplug();
  ASSERT_TRUE(waitUntil([&] {
    const json seen = tank(service.port(), "T1");
    for (const json& reason : seen["reasons"]) {
      if (reason["code"] == "link" && reason["subject"] == instrument.port()) return true;
    }
    return false;
  }));
  ASSERT_TRUE(service.settle());
  bool alarmed = false;
  for (const json& alarm : get(service.port(), "/api/v1/alarms").json()) {
    alarmed = alarmed || (alarm["kind"] == "link" && alarm["tank"] == "T1" && alarm["priority"] == "medium");
  }
  EXPECT_TRUE(alarmed);
}

TEST(Service, RefusesToStartTwiceOnOneStore) {
  TempShop shop;
  FakeClock clock("2026-03-02T07:00:00Z");
  RunningService first(shop, clock);
  EXPECT_THROW(RunningService(shop, clock), std::runtime_error);
}

TEST(Service, RefusesToStartWithAChangedRecipe) {
  TempShop shop;
  FakeClock clock("2026-03-02T07:00:00Z");
  { RunningService first(shop, clock); }
  io::Loop loop;
  auto recipes = shop.recipes();
  recipes.begin()->second.resolvedSha256 = std::string(64, 'c');
  monitor::Service second(loop, clock, shop.shop(), recipes);
  const auto started = second.start();
  ASSERT_FALSE(started);
  EXPECT_EQ(started.error().code, "recipe_changed");
  EXPECT_THAT(started.error().detail, testing::HasSubstr("tankward adopt"));
}

TEST(Service, SaysWhenADropFolderIsLostAndFoundAgain) {
  TempShop shop;
  FakeClock clock("2026-03-02T07:00:00Z");
  RunningService service(shop, clock);
  ASSERT_TRUE(service.settle());
  const auto standing = [&]() -> json {
    for (const json& alarm : get(service.port(), "/api/v1/alarms").json()) {
      if (alarm["kind"] == "link") return alarm["state"];
    }
    return nullptr;
  };
  fs::rename(shop.drop(), shop.dir() / "elsewhere");
  ASSERT_TRUE(waitUntil([&] { return standing() == "unacknowledged" || standing() == "returned_unacknowledged"; }));
}

}  // namespace
}  // namespace tw::test
