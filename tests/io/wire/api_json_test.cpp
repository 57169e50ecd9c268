// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/wire/api_json.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <nlohmann/json.hpp>

namespace tw::io::wire {
namespace {

using nlohmann::json;

AlarmView sampleAlarm() {
  AlarmView alarm;
  alarm.id = 7;
  alarm.tank = "L2-T4";
  alarm.kind = "margin";
  alarm.subject = "ligand_loss";
  alarm.word = "tight";
  alarm.priority = "medium";
  alarm.state = "unacknowledged";
  alarm.raisedAt = "2026-03-02T06:00:00Z";
  alarm.value = 0.28;
  alarm.limit = 0.30;
  alarm.toDo = "Add ammonia.";
  return alarm;
}

TankView sampleTank() {
  TankView tank;
  tank.id = "L2-T4";
  tank.lineId = "L2";
  tank.liquorColor = "#1d4e89";
  tank.hazards = {"ammonia", "hot"};
  tank.volume_L = 900;
  tank.condition = "tight";
  tank.stale = true;
  tank.reasons = {{"margin", "ligand_loss", "tight", 0.28, 0.30, std::nullopt}};
  tank.bed = 0.52;
  tank.projection = ProjectionView{};
  tank.projection->margin = "ligand_loss";
  tank.projection->slope_per_day = -0.05;
  tank.projection->hoursToAct = 31.5;
  tank.sampledAt = "2026-03-02T06:00:00Z";
  tank.pM = 14.2;
  tank.margins = {{"ligand_loss", 0.28, 1.4, std::nullopt, "Cu(OH)2 fresh", "NH3", LimitPair{0.3, 0.15}},
                  {"ph_up", 1.3, std::nullopt, std::nullopt, "Cu(OH)2 fresh", "", std::nullopt}};
  tank.channels.resize(2);
  tank.channels[0].id = "copper";
  tank.channels[0].value = 21.9;
  tank.channels[0].dueAt = "2026-03-03T06:00:00Z";
  tank.channels[0].guardActLow = 10.0;
  tank.channels[1].id = "ammonia-to-copper";
  tank.channels[1].ratio = true;
  tank.alarms = {sampleAlarm()};
  return tank;
}

ReadingView sampleReading() {
  ReadingView reading;
  reading.id = 41;
  reading.tank = "L2-T4";
  reading.channel = "copper";
  reading.op = "KB";
  reading.entered = "22,1";
  reading.value = 22.1;
  reading.supersedes = 40;
  reading.inputs = R"({"V":12.3,"blank":0.05})";
  return reading;
}

ResultView sampleResult() {
  ResultView result;
  result.id = 9;
  result.tank = "L2-T4";
  result.historic = true;
  result.pM = 0.1 + 0.2;
  result.readings = {41, 42};
  result.values.resize(1);
  result.values[0].id = "copper";
  result.json = R"({"pM":14.2})";
  return result;
}

template <class T>
void expectRoundTrip(const T& view) {
  const json once = view;
  const json again = json::parse(once.dump()).template get<T>();
  EXPECT_EQ(once, again);
}

TEST(ApiJson, GoesThereAndBack) {
  expectRoundTrip(sampleTank());
  expectRoundTrip(sampleReading());
  expectRoundTrip(sampleResult());
  expectRoundTrip(sampleAlarm());
  expectRoundTrip(TankView{});
  expectRoundTrip(ReadingView{});
  expectRoundTrip(ResultView{});
  LiveMessage message;
  message.type = "alarm";
  message.alarm = sampleAlarm();
  expectRoundTrip(message);
  message.condition = sampleTank();
  message.reading = sampleReading();
  message.result = sampleResult();
  message.link = "serial:/dev/ttyUSB0";
  message.linkState = "lost";
  expectRoundTrip(message);
}

TEST(ApiJson, KeepsEveryMemberOnTheWay) {
  const TankView tank = json(sampleTank()).get<TankView>();
  EXPECT_EQ(tank.hazards, (std::vector<std::string>{"ammonia", "hot"}));
  EXPECT_TRUE(tank.stale);
  EXPECT_EQ(tank.reasons.at(0).limit, 0.30);
  EXPECT_FALSE(tank.reasons.at(0).hours);
  EXPECT_EQ(tank.projection->hoursToAct, 31.5);
  EXPECT_FALSE(tank.projection->hoursToLine);
  EXPECT_EQ(tank.margins.at(0).limit->act, 0.15);
  EXPECT_FALSE(tank.margins.at(1).limit);
  EXPECT_EQ(tank.channels.at(0).guardActLow, 10.0);
  EXPECT_TRUE(tank.channels.at(1).ratio);
  EXPECT_EQ(tank.alarms.at(0).toDo, "Add ammonia.");
  const ReadingView reading = json(sampleReading()).get<ReadingView>();
  EXPECT_EQ(reading.op, "KB");
  EXPECT_EQ(reading.supersedes, 40);
  EXPECT_EQ(json::parse(reading.inputs).at("V"), 12.3);
  const ResultView result = json(sampleResult()).get<ResultView>();
  EXPECT_EQ(result.pM, 0.1 + 0.2);
  EXPECT_EQ(result.readings, (std::vector<std::int64_t>{41, 42}));
  EXPECT_EQ(result.json, R"({"pM":14.2})");
}

TEST(ApiJson, NamesFieldsInSnakeCase) {
  const json tank = sampleTank();
  for (const char* key : {"line_id", "liquor_color", "volume_L", "horizon_h", "sampled_at", "pM",
                          "temperature_C", "unreliable_because", "in_service"}) {
    EXPECT_TRUE(tank.contains(key)) << key;
  }
  EXPECT_TRUE(tank["channels"][0].contains("max_age_h"));
  EXPECT_TRUE(tank["channels"][0].contains("guard_act_low"));
  EXPECT_TRUE(tank["projection"].contains("hours_to_caution"));
  EXPECT_TRUE(json(sampleReading()).contains("operator"));
  EXPECT_TRUE(json(sampleReading())["inputs"].is_object());
  EXPECT_TRUE(json(sampleResult())["json"].is_object());
}

TEST(ApiJson, AnAbsentNumberIsNull) {
  TankView tank;
  tank.ph = std::nan("");
  const json out = tank;
  EXPECT_TRUE(out["pM"].is_null());
  EXPECT_TRUE(out["ph"].is_null());
  EXPECT_TRUE(out["projection"].is_null());
  EXPECT_TRUE(json(ReadingView{})["inputs"].is_null());
}

TEST(ApiJson, IgnoresFieldsItDoesNotKnow) {
  json tank = sampleTank();
  tank["from_a_later_version"] = 1;
  EXPECT_EQ(tank.get<TankView>().id, "L2-T4");
}

TEST(ApiJson, ThrowsOnAMissingOrWrongField) {
  json missing = sampleTank();
  missing.erase("margins");
  EXPECT_THROW((void)missing.get<TankView>(), json::exception);
  json wrong = sampleTank();
  wrong["volume_L"] = "900";
  EXPECT_THROW((void)wrong.get<TankView>(), json::exception);
  wrong = sampleTank();
  wrong["channels"] = 3;
  EXPECT_THROW((void)wrong.get<TankView>(), json::exception);
  EXPECT_THROW((void)json("text").get<AlarmView>(), json::exception);
}

}  // namespace
}  // namespace tw::io::wire
