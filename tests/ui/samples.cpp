// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/ui/samples.hpp"

#include <nlohmann/json.hpp>

#include "io/wire/api_json.hpp"

namespace tw::test {

using io::wire::TankView;

long long noon() { return 1'772'452'800'000LL; }

io::wire::ChannelView channel(const std::string& id, const std::string& title, const std::string& unit, double value) {
  io::wire::ChannelView view;
  view.id = id;
  view.title = title;
  view.unit = unit;
  view.value = value;
  view.sampledAt = "2026-03-02T10:00:00Z";
  view.low = 18.0;
  view.target = 22.0;
  view.high = 26.0;
  return view;
}

io::wire::MarginView margin(const std::string& id, double judged, const std::string& ligand) {
  io::wire::MarginView view;
  view.id = id;
  view.judged = judged;
  view.ligand = ligand;
  view.solid = "Cu(OH)2 fresh";
  view.limit = io::wire::LimitPair{0.30, 0.15};
  return view;
}

TankView copperTank(const std::string& id, const std::string& condition) {
  TankView tank;
  tank.id = id;
  tank.title = "Copper " + id;
  tank.lineId = "L1";
  tank.lineTitle = "Rack line";
  tank.recipeId = "copper-ammine";
  tank.recipeTitle = "Ammoniacal copper";
  tank.metal = "Cu^2+";
  tank.liquorColor = "#1d4e89";
  tank.confidence = "published";
  tank.hazards = {"ammonia"};
  tank.volume_L = 900.0;
  tank.condition = condition;
  tank.bed = 0.4;
  tank.sampledAt = "2026-03-02T10:00:00Z";
  tank.pM = 14.2;
  tank.margins = {margin("ligand_loss", 0.52, "NH3")};
  tank.channels = {channel("copper", "Copper metal", "g/L", 22.1), channel("ammonia", "Free ammonia", "g/L", 25.0),
                   channel("ph", "pH", "pH", 20.0), channel("temperature", "Temperature", "degC", 20.0)};
  return tank;
}

io::wire::AlarmView alarm(long long id, const std::string& tank, const std::string& kind, const std::string& subject,
                          const std::string& word) {
  io::wire::AlarmView view;
  view.id = id;
  view.tank = tank;
  view.kind = kind;
  view.subject = subject;
  view.word = word;
  view.priority = "high";
  view.state = "unacknowledged";
  view.raisedAt = "2026-03-02T09:00:00Z";
  return view;
}

std::string shopBody() {
  return R"({"title":"Test hall","time_zone":"Europe/Berlin","version":"0","now":"2026-03-02T12:00:00Z",)"
         R"("lines":[{"id":"L1","title":"Rack line"}]})";
}

std::string tanksBody() {
  return nlohmann::json(std::vector<TankView>{copperTank("T1", "fine"), copperTank("T2", "brink")}).dump();
}

std::string alarmsBody() {
  return nlohmann::json(std::vector<io::wire::AlarmView>{alarm(5, "T2", "margin", "ligand_loss", "brink")}).dump();
}

std::string dueBody() {
  return R"([{"tank":"T1","tank_title":"Copper T1","channel":"copper","title":"Copper metal",)"
         R"("due_at":"2026-03-02T05:00:00Z","overdue":true,"last_at":"2026-03-01T05:00:00Z"}])";
}

}  // namespace tw::test
