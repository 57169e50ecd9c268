// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/board.hpp"

#include <algorithm>
#include <utility>

#include <fmt/format.h>

#include "io/log.hpp"
#include "monitor/pipeline/views.hpp"

namespace tw::monitor {
namespace {

/// What must change before clients are told: not the hours of a forecast, which run by themselves.
std::string signature(const io::wire::TankView& view) {
  std::string text = fmt::format("{}|{}|{}|{}|{}|{}", view.condition, view.stale, view.doubtful, view.reliable,
                                 view.inService, view.sampledAt);
  for (const auto& reason : view.reasons) {
    text += fmt::format("|{}:{}:{}", reason.code, reason.subject, reason.word);
  }
  for (const auto& channel : view.channels) {
    text += fmt::format("|{}={}@{}{}", channel.id, channel.value.value_or(0.0), channel.sampledAt,
                        channel.tooOld);
  }
  for (const auto& alarm : view.alarms) text += fmt::format("|{}:{}:{}", alarm.id, alarm.state, alarm.word);
  if (view.bed) text += fmt::format("|{}", *view.bed);
  return text;
}

}  // namespace

Board::Board(const Plant& plant, const io::Clock& clock, io::Store& store, Outlets outlets)
    : m_plant(plant), m_clock(clock), m_store(store), m_outlets(std::move(outlets)) {
  for (const auto& setup : plant.tanks()) {
    Place& place = m_places[setup->tank.id];
    place.setup = setup.get();
    place.relaxed = relaxed(setup->recipe);
    place.facts.inService = setup->tank.inService;
  }
}

model::Result<model::Done> Board::load() {
  const auto standing = m_store.alarms(false);
  if (!standing) return model::fail(standing.error());
  m_alarms = AlarmEngine(*standing);
  for (auto& [id, place] : m_places) {
    const auto done = read(place);
    if (!done) return done;
    const auto events = m_store.events(id, io::Instant{});
    if (!events) return model::fail(events.error());
    for (const io::EventRow& event : *events) takeEvent(place, event);
  }
  silenceStrangers();
  for (auto& [id, place] : m_places) judge(place);
  return model::Done{};
}

void Board::silenceStrangers() {
  const io::Shop& shop = m_plant.shop();
  std::set<std::string> links;
  for (const io::SerialPort& port : shop.serials) links.insert(port.port);
  for (const io::DropFolder& drop : shop.drops) links.insert(drop.path.string());
  for (const io::AlarmRow& alarm : m_alarms.standing()) {
    if (!alarm.tank.empty() && !m_places.contains(alarm.tank)) {
      emit(m_alarms.suppress(alarm.tank, m_clock.now()));
    } else if (alarm.kind == kind::kLink && !links.contains(alarm.subject)) {
      emit(m_alarms.observe({observeLink(alarm.tank, alarm.subject, true)}, m_clock.now()));
    }
  }
}

model::Result<model::Done> Board::read(Place& place) {
  const std::string& tank = place.setup->tank.id;
  auto readings = m_store.newestAccepted(tank, io::Instant::max());
  if (!readings) return model::fail(readings.error());
  place.facts.readings = std::move(*readings);
  place.facts.trend.clear();
  place.facts.newest.reset();
  place.facts.stored.reset();
  place.facts.values.clear();
  const auto newest = m_store.newestResult(tank);
  if (!newest) return model::fail(newest.error());
  if (!*newest) return model::Done{};
  const auto recent = m_store.results(tank, (*newest)->sampledAt - kTrendWindow, 0, false);
  if (!recent) return model::fail(recent.error());
  for (const io::ResultRow& row : *recent) place.facts.trend[row.sampledAt] = row.margins;
  takeNewest(place, **newest);
  return model::Done{};
}

void Board::takeNewest(Place& place, const io::ResultRow& row) {
  auto stored = readReport(row.json);
  if (!stored) {
    io::log(io::LogLevel::Error, "stored_result_unreadable",
            {{"tank", row.tank}, {"id", std::to_string(row.id)}, {"detail", stored.error().detail}});
  }
  place.facts.newest = row;
  place.facts.stored = stored ? std::optional<StoredReport>(std::move(*stored)) : std::nullopt;
  place.facts.values = readValues(row.values);
  place.facts.unsolved.reset();
}

void Board::takeEvent(Place& place, const io::EventRow& event) {
  if (event.kind == "dump") place.facts.chapter = std::max(place.facts.chapter, event.at.at);
  if (event.kind == "out_of_service") place.facts.inService = false;
  if (event.kind == "in_service") place.facts.inService = true;
}

void Board::onReadings(const std::vector<io::Reading>& stored) {
  std::set<std::string> touched;
  for (const io::Reading& reading : stored) {
    const auto place = m_places.find(reading.tank);
    if (place == m_places.end()) continue;
    auto live = message("reading", reading.tank);
    live.reading = readingView(place->second.setup, reading);
    m_outlets.push(std::move(live));
    if (reading.state != io::ReadingState::Accepted) continue;
    auto [known, fresh] = place->second.facts.readings.try_emplace(reading.channel, reading);
    if (fresh || reading.sampledAt.at >= known->second.sampledAt.at) {
      known->second = reading;
      touched.insert(reading.tank);
    }
  }
  for (const std::string& tank : touched) judge(m_places.at(tank));
}

void Board::onEvents(const std::vector<io::EventRow>& stored) {
  for (const io::EventRow& event : stored) {
    const auto place = m_places.find(event.tank);
    if (place == m_places.end()) continue;
    takeEvent(place->second, event);
    judge(place->second);
  }
}

void Board::onResult(const io::ResultRow& row) {
  const auto at = m_places.find(row.tank);
  if (at == m_places.end()) return;
  Place& place = at->second;
  auto live = message("result", row.tank);
  live.result = resultView(place.setup, row);
  m_outlets.push(std::move(live));

  MarginTrend& trend = place.facts.trend;
  trend[row.sampledAt] = row.margins;
  trend.erase(trend.begin(), trend.lower_bound(trend.rbegin()->first - kTrendWindow));
  const bool newest = !place.facts.newest || row.sampledAt >= place.facts.newest->sampledAt;
  if (newest) takeNewest(place, row);
  // A newer liquor is on its way: judging this one would alarm about the past.
  if (newest && !row.historic) judge(place);
}

void Board::onUnsolved(const io::PendingLiquor& liquor, const model::Fault& fault) {
  const auto at = m_places.find(liquor.tank);
  if (at == m_places.end()) return;
  // The store has withdrawn what was solved for this time before.
  const auto done = reload(liquor.tank);
  if (!done) io::log(io::LogLevel::Error, "tank_unreadable", {{"detail", done.error().detail}});
  Place& place = at->second;
  if (place.facts.newest && place.facts.newest->sampledAt > liquor.sampledAt) return;
  place.facts.unsolved = fault;
  judge(place);
}

model::Result<model::Done> Board::reload(const std::string& tank) {
  const auto place = m_places.find(tank);
  if (place == m_places.end()) return model::Done{};
  const auto done = read(place->second);
  if (!done) return done;
  judge(place->second);
  return model::Done{};
}

void Board::onLink(const std::string& tank, const std::string& link, bool up, const std::string& reason) {
  io::log(up ? io::LogLevel::Info : io::LogLevel::Warning, up ? "link_up" : "link_lost",
          {{"link", link}, {"tank", tank}, {"reason", reason}});
  m_links[link] = up;
  auto live = message("link", tank);
  live.link = link;
  live.linkState = up ? "up" : "lost";
  m_outlets.push(std::move(live));
  const auto place = m_places.find(tank);
  if (place == m_places.end()) {
    emit(m_alarms.observe({observeLink(tank, link, up)}, m_clock.now()));
    return;
  }
  std::erase(place->second.facts.lostLinks, link);
  if (!up) place->second.facts.lostLinks.push_back(link);
  judge(place->second);
}

void Board::tick() {
  for (auto& [id, place] : m_places) judge(place);
}

void Board::judge(Place& place) {
  const io::Instant now = m_clock.now();
  const TankSetup& setup = *place.setup;
  TankFacts& facts = place.facts;
  if (!facts.inService) {
    emit(m_alarms.suppress(setup.tank.id, now));
  } else {
    std::vector<Observation> seen;
    if (facts.stored) seen = observeResult(setup, place.relaxed, *facts.stored, facts.values);
    std::map<std::string, double> fresh = facts.values;
    std::erase_if(fresh, [&](const auto& value) { return setup.recipe.channel(value.first) != nullptr; });
    const LiquorPick pick = pickLiquor(setup, facts.readings, now);
    if (!pick.complete()) fresh.clear();
    for (const auto& [channel, canonical] : pick.values()) {
      fresh[channel] = inUnit(*setup.recipe.channel(channel), canonical);
    }
    for (auto& each : observeWindows(setup, fresh)) seen.push_back(std::move(each));
    for (auto& each : observeStale(setup, facts.readings, now)) seen.push_back(std::move(each));
    for (const auto& [link, up] : m_links) {
      const auto& serials = m_plant.shop().serials;
      const bool mine = std::any_of(serials.begin(), serials.end(), [&](const io::SerialPort& port) {
        return port.port == link && port.tank == setup.tank.id;
      });
      if (mine) seen.push_back(observeLink(setup.tank.id, link, up));
    }
    emit(m_alarms.observe(seen, now));
  }
  pushIfChanged(place);
}

void Board::emit(std::vector<AlarmChange> changes) {
  for (const AlarmChange& change : changes) {
    io::log(io::LogLevel::Info, "alarm",
            {{"tank", change.alarm.tank},
             {"kind", change.alarm.kind},
             {"subject", change.alarm.subject},
             {"word", change.alarm.word},
             {"change", change.change},
             {"state", change.alarm.state}});
  }
  if (!changes.empty()) m_outlets.save(std::move(changes));
}

std::optional<AlarmChange> Board::acknowledge(std::int64_t id, const std::string& person,
                                              const std::string& comment) {
  return m_alarms.acknowledge(id, person, comment, m_clock.now());
}

void Board::assignAlarmId(const io::AlarmRow& saved) {
  m_alarms.assignId(saved.tank, saved.kind, saved.subject, saved.id);
}

void Board::alarmSaved(const AlarmChange& change) {
  auto live = message("alarm", change.alarm.tank);
  live.alarm = alarmView(change.alarm);
  m_outlets.push(std::move(live));
  const auto place = m_places.find(change.alarm.tank);
  if (place != m_places.end()) pushIfChanged(place->second);
}

void Board::pushIfChanged(Place& place) {
  place.view = viewOf(place);
  std::string text = signature(place.view);
  if (text == place.pushed) return;
  place.pushed = std::move(text);
  auto live = message("condition", place.setup->tank.id);
  live.condition = place.view;
  m_outlets.push(std::move(live));
}

io::wire::TankView Board::viewOf(const Place& place) const {
  std::vector<io::AlarmRow> alarms = m_alarms.standing(place.setup->tank.id);
  // An alarm shows once it is durable: only then has it an id to acknowledge it by.
  std::erase_if(alarms, [](const io::AlarmRow& alarm) { return alarm.id == 0; });
  return tankView(*place.setup, place.facts, alarms, m_clock.now());
}

io::wire::LiveMessage Board::message(const std::string& type, const std::string& tank) const {
  io::wire::LiveMessage live;
  live.type = type;
  live.tank = tank;
  live.at = io::toRfc3339(m_clock.now());
  return live;
}

std::optional<io::wire::TankView> Board::tank(const std::string& id) const {
  const auto place = m_places.find(id);
  if (place == m_places.end()) return std::nullopt;
  return place->second.view;
}

std::vector<io::wire::TankView> Board::tanks() const {
  std::vector<io::wire::TankView> views;
  for (const auto& setup : m_plant.tanks()) views.push_back(m_places.at(setup->tank.id).view);
  return views;
}

std::vector<DueView> Board::due() const {
  std::vector<DueView> all;
  for (const auto& setup : m_plant.tanks()) {
    const Place& place = m_places.at(setup->tank.id);
    for (auto& each : dueOf(*setup, place.facts, m_clock.now())) all.push_back(std::move(each));
  }
  std::stable_sort(all.begin(), all.end(), [](const DueView& a, const DueView& b) { return a.at < b.at; });
  return all;
}

std::vector<io::wire::AlarmView> Board::standingAlarms() const {
  std::vector<io::wire::AlarmView> views;
  for (const io::AlarmRow& alarm : m_alarms.standing()) {
    if (alarm.id != 0) views.push_back(alarmView(alarm));
  }
  return views;
}

const TankFacts* Board::facts(const std::string& tank) const {
  const auto place = m_places.find(tank);
  return place == m_places.end() ? nullptr : &place->second.facts;
}

}  // namespace tw::monitor
