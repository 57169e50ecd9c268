// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/tank_view.hpp"

#include <algorithm>
#include <utility>

#include "monitor/alarm/engine.hpp"
#include "monitor/alarm/observe.hpp"
#include "monitor/pipeline/liquor.hpp"
#include "monitor/pipeline/views.hpp"

namespace tw::monitor {
namespace {

using io::wire::ChannelView;
using io::wire::ReasonView;
using io::wire::TankView;
using model::Condition;
using Hours = std::chrono::duration<double, std::ratio<3600>>;

std::chrono::milliseconds hours(double h) {
  return std::chrono::duration_cast<std::chrono::milliseconds>(Hours(h));
}

class Builder {
 public:
  Builder(const TankSetup& setup, const TankFacts& facts, const std::vector<io::AlarmRow>& alarms,
          io::Instant now)
      : m_setup(setup), m_recipe(setup.recipe), m_facts(facts), m_alarms(alarms), m_now(now) {}

  TankView build() {
    identity();
    channels();
    for (const io::AlarmRow& alarm : m_alarms) m_view.alarms.push_back(alarmView(alarm));
    result();
    judge();
    holdByAlarms();
    forecast();
    staleness();
    windows();
    for (const std::string& link : m_facts.lostLinks) {
      m_view.reasons.push_back({"link", link, "link", {}, {}, {}});
    }
    reliability();
    m_view.condition = model::name(m_condition);
    return std::move(m_view);
  }

 private:
  void identity() {
    const io::Tank& tank = m_setup.tank;
    m_view.id = tank.id;
    m_view.title = tank.title;
    m_view.lineId = tank.lineId;
    m_view.lineTitle = m_setup.lineTitle;
    m_view.recipeId = m_recipe.id;
    m_view.recipeTitle = m_recipe.title;
    m_view.metal = m_recipe.metal;
    m_view.liquorColor = tank.liquorColor;
    m_view.confidence = m_recipe.confidence;
    m_view.unreliableBecause = m_recipe.unreliableBecause;
    m_view.hazards = m_recipe.hazards;
    m_view.inService = m_facts.inService;
    m_view.volume_L = m_setup.volume_L();
    m_view.horizon_h = m_recipe.horizon_h;
  }

  void guardLimits(ChannelView& view, const std::optional<model::Guard>& guard) const {
    if (!guard) return;
    view.guardCautionLow = guard->cautionLow;
    view.guardActLow = guard->actLow;
    view.guardCautionHigh = guard->cautionHigh;
    view.guardActHigh = guard->actHigh;
  }

  void channels() {
    for (const io::Channel& channel : m_recipe.channels) {
      ChannelView view;
      view.id = channel.id;
      view.title = channel.title;
      view.unit = channel.unit;
      view.low = channel.low;
      view.target = channel.target;
      view.high = channel.high;
      view.every_h = channel.every_h;
      view.maxAge_h = channel.maxAge_h;
      guardLimits(view, channel.guard);
      const auto reading = m_facts.readings.find(channel.id);
      if (reading != m_facts.readings.end() && reading->second.value) {
        const io::Instant at = reading->second.sampledAt.at;
        view.value = inUnit(channel, *reading->second.value);
        view.sampledAt = io::toRfc3339(at);
        view.source = reading->second.source;
        view.tooOld = Hours(m_now - at).count() > channel.maxAge_h;
        if (channel.every_h) view.dueAt = io::toRfc3339(at + hours(*channel.every_h));
      } else if (channel.every_h) {
        view.dueAt = io::toRfc3339(m_now);
      }
      m_view.channels.push_back(std::move(view));
    }
    for (const io::Ratio& ratio : m_recipe.ratios) {
      ChannelView view;
      view.id = ratio.id;
      view.title = ratio.title;
      view.ratio = true;
      view.low = ratio.low;
      view.target = ratio.target;
      view.high = ratio.high;
      view.maxAge_h = m_recipe.maxReadingAge_h;
      guardLimits(view, ratio.guard);
      const auto value = m_facts.values.find(ratio.id);
      if (value != m_facts.values.end()) {
        view.value = value->second;
        view.sampledAt = io::toRfc3339(m_facts.newest->sampledAt);
      }
      m_view.channels.push_back(std::move(view));
    }
  }

  void result() {
    if (!m_facts.newest) return;
    const io::ResultRow& row = *m_facts.newest;
    m_view.sampledAt = io::toRfc3339(row.sampledAt);
    m_view.pM = row.pM;
    m_view.ph = row.ph;
    m_view.temperature_C = row.temperature_C;
    m_view.bed = row.bed;
    m_view.reliable = row.reliable;
    m_view.doubtful = row.doubtful || !row.reliable;
    if (m_facts.stored) m_view.margins = marginViews(*m_facts.stored, m_recipe.limits);
  }

  void judge() {
    if (!m_facts.stored) return;
    const model::Judgement judgement = model::judge(m_recipe.system, m_facts.stored->report, m_recipe.limits,
                                                    guardsOf(m_recipe, m_facts.values));
    m_condition = judgement.condition;
    for (const model::Finding& finding : judgement.findings) {
      m_view.reasons.push_back({finding.code, finding.subject, model::name(finding.condition), finding.value,
                                finding.limit, std::nullopt});
    }
  }

  /// An alarm inside its deadband keeps the word up: the condition must not flicker at a limit.
  void holdByAlarms() {
    for (const io::AlarmRow& alarm : m_alarms) {
      const AlarmState state = alarmState(alarm.state);
      const bool stands = state == AlarmState::Unacknowledged || state == AlarmState::Acknowledged;
      const auto word = model::condition(alarm.word);
      if (!stands || !word || *word == Condition::Stale || *word <= m_condition) continue;
      if (alarm.kind != kind::kMargin && alarm.kind != kind::kGuard && alarm.kind != kind::kSolid) continue;
      m_condition = *word;
      m_view.reasons.insert(m_view.reasons.begin(),
                            {alarm.kind, alarm.subject, alarm.word, alarm.value, alarm.limit, std::nullopt});
    }
  }

  void forecast() {
    m_view.projection = project(m_recipe, m_setup.atTarget, m_facts.trend, m_facts.chapter, m_now);
    if (!m_view.projection || !m_view.projection->hoursToCaution || !m_view.reliable) return;
    if (*m_view.projection->hoursToCaution > m_recipe.horizon_h || m_condition > Condition::Drifting) return;
    m_condition = Condition::Drifting;
    const auto kind = model::marginKind(m_view.projection->margin);
    const auto& limit = m_recipe.limits[static_cast<std::size_t>(*kind)];
    m_view.reasons.push_back({"forecast", m_view.projection->margin, model::name(Condition::Drifting),
                              std::nullopt, limit ? std::optional<double>(limit->caution) : std::nullopt,
                              m_view.projection->hoursToCaution});
  }

  void staleness() {
    const LiquorPick pick = pickLiquor(m_setup, m_facts.readings, m_now);
    for (const Lacking& lacking : pick.lacking) {
      ReasonView reason{"stale", lacking.channel, "stale", {}, {}, {}};
      const auto reading = m_facts.readings.find(lacking.channel);
      if (lacking.tooOld && reading != m_facts.readings.end()) {
        reason.hours = Hours(m_now - reading->second.sampledAt.at).count();
        reason.limit = m_recipe.channel(lacking.channel)->maxAge_h;
      }
      m_view.reasons.push_back(std::move(reason));
    }
    if (pick.complete() && m_facts.newest) return;
    m_view.stale = true;
    if (m_condition <= Condition::Drifting) m_condition = Condition::Stale;
  }

  void windows() {
    std::map<std::string, double> fresh;
    for (const ChannelView& channel : m_view.channels) {
      if (channel.value && !channel.tooOld) fresh[channel.id] = *channel.value;
    }
    for (const Observation& seen : observeWindows(m_setup, fresh)) {
      if (seen.word.empty()) continue;
      m_view.reasons.push_back({"window", seen.subject, "window", seen.value, seen.limit, std::nullopt});
    }
  }

  void reliability() {
    if (m_facts.unsolved) {
      m_view.doubtful = true;
      m_view.reasons.push_back(
          {"unreliable", m_facts.unsolved->code + ":" + m_facts.unsolved->subject, "", {}, {}, {}});
    }
    if (m_view.reliable || !m_facts.stored) return;
    for (const std::string& warning : m_facts.stored->report.warnings) {
      const bool undermines = warning.starts_with("activity_model_out_of_range") ||
                              warning.starts_with("interaction_missing") ||
                              warning.starts_with("no_enthalpy_far");
      if (undermines) m_view.reasons.push_back({"unreliable", warning, "", {}, {}, {}});
    }
  }

  const TankSetup& m_setup;
  const io::Recipe& m_recipe;
  const TankFacts& m_facts;
  const std::vector<io::AlarmRow>& m_alarms;
  io::Instant m_now;
  TankView m_view;
  Condition m_condition = Condition::Fine;
};

}  // namespace

io::wire::TankView tankView(const TankSetup& setup, const TankFacts& facts,
                            const std::vector<io::AlarmRow>& alarms, io::Instant now) {
  return Builder(setup, facts, alarms, now).build();
}

std::vector<DueView> dueOf(const TankSetup& setup, const TankFacts& facts, io::Instant now) {
  std::vector<DueView> due;
  if (!facts.inService) return due;
  for (const io::Channel& channel : setup.recipe.channels) {
    if (!channel.every_h) continue;
    DueView view;
    view.tank = setup.tank.id;
    view.tankTitle = setup.tank.title;
    view.channel = channel.id;
    view.title = channel.title;
    view.at = now;
    const auto reading = facts.readings.find(channel.id);
    if (reading != facts.readings.end()) {
      view.at = reading->second.sampledAt.at + hours(*channel.every_h);
      view.lastAt = io::toRfc3339(reading->second.sampledAt.at);
    }
    view.dueAt = io::toRfc3339(view.at);
    view.overdue = view.at <= now;
    due.push_back(std::move(view));
  }
  return due;
}

}  // namespace tw::monitor
