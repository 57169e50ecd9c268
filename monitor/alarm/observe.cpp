// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/alarm/observe.hpp"

#include <algorithm>
#include <cmath>
#include <set>
#include <tuple>
#include <utility>

#include "monitor/alarm/to_do.hpp"

namespace tw::monitor {
namespace {

using model::Finding;
using Key = std::pair<std::string, std::string>;  // kind, subject

double widened(double limit) { return limit + kMarginDeadband * std::abs(limit); }

model::MarginLimit widened(const model::MarginLimit& limit) {
  return {widened(limit.caution), widened(limit.act)};
}

/// A window narrower than its own uncertainty must still let go somewhere.
constexpr double kWidestBand = 0.25;  // of high - low

/// What a window gives way by before an alarm lets go.
double windowBand(double u, double low, double high) {
  const double width = std::abs(high - low);
  return std::min(std::max(u, kWindowDeadband * width), kWidestBand * width);
}

struct Windowed {
  std::string id, title, unit;
  double low = 0.0, high = 0.0, u = 0.0;
};

std::vector<Windowed> windowed(const io::Recipe& recipe, const std::map<std::string, double>& values) {
  std::vector<Windowed> all;
  const auto relative = [&](const std::string& id) {
    const io::Channel* channel = recipe.channel(id);
    const auto value = values.find(id);
    if (channel == nullptr || value == values.end() || value->second == 0.0) return 0.0;
    return uncertainty(*channel, value->second) / std::abs(value->second);
  };
  for (const io::Channel& channel : recipe.channels) {
    const auto value = values.find(channel.id);
    if (value == values.end()) continue;
    all.push_back({channel.id, channel.title, channel.unit, channel.low, channel.high,
                   uncertainty(channel, value->second)});
  }
  for (const io::Ratio& ratio : recipe.ratios) {
    const auto value = values.find(ratio.id);
    if (value == values.end()) continue;
    const double u = std::abs(value->second) * std::hypot(relative(ratio.of), relative(ratio.to));
    all.push_back({ratio.id, ratio.title, "", ratio.low, ratio.high, u});
  }
  return all;
}

/// Guards that let go later: each limit moved by the deadband towards the target.
std::vector<model::GuardValue> relaxedGuards(const io::Recipe& recipe,
                                             const std::map<std::string, double>& values,
                                             std::vector<model::GuardValue> guards) {
  const std::vector<Windowed> windows = windowed(recipe, values);
  for (model::GuardValue& guarded : guards) {
    const auto at = std::find_if(windows.begin(), windows.end(),
                                 [&](const Windowed& w) { return w.id == guarded.guard.id; });
    if (at == windows.end()) continue;
    const double band = windowBand(at->u, at->low, at->high);
    for (auto* limit : {&guarded.guard.cautionLow, &guarded.guard.actLow}) {
      if (*limit) **limit += band;
    }
    for (auto* limit : {&guarded.guard.cautionHigh, &guarded.guard.actHigh}) {
      if (*limit) **limit -= band;
    }
  }
  return guards;
}

/// Every subject a recipe's result can raise an alarm for.
std::set<Key> subjects(const io::Recipe& recipe) {
  std::set<Key> keys;
  for (std::size_t i = 0; i < model::kMarginCount; ++i) {
    if (recipe.limits[i]) keys.emplace(kind::kMargin, model::name(static_cast<model::MarginKind>(i)));
  }
  for (const model::Solid& solid : recipe.system.solids) {
    const bool limited = !solid.limits.empty() || solid.saturationLimit;
    if (limited || solid.role == model::SolidRole::Sludge) keys.emplace(kind::kSolid, solid.id);
  }
  for (const io::Channel& channel : recipe.channels) {
    if (channel.guard) keys.emplace(kind::kGuard, channel.id);
  }
  for (const io::Ratio& ratio : recipe.ratios) {
    if (ratio.guard) keys.emplace(kind::kGuard, ratio.id);
  }
  return keys;
}

/// The worst finding of each subject; findings come worst first.
std::map<Key, Finding> worstByKey(const model::Judgement& judgement) {
  std::map<Key, Finding> worst;
  for (const Finding& finding : judgement.findings) {
    worst.try_emplace({finding.code, finding.subject}, finding);
  }
  return worst;
}

std::pair<std::string, std::string> titleAndUnit(const io::Recipe& recipe, const std::string& id) {
  if (const io::Channel* channel = recipe.channel(id)) return {channel->title, channel->unit};
  for (const io::Ratio& ratio : recipe.ratios) {
    if (ratio.id == id) return {ratio.title, ""};
  }
  return {id, ""};
}

const char* marginUnit(const std::string& margin) {
  if (margin == "ph_up" || margin == "ph_down") return "pH";
  return margin == "warming" || margin == "cooling" ? "K" : "";
}

void describe(Observation& seen, const TankSetup& setup, const StoredReport& stored, const Finding& finding) {
  seen.value = finding.value;
  seen.limit = finding.limit;
  if (seen.kind == kind::kMargin) {
    seen.unit = marginUnit(seen.subject);
    const auto margin = model::marginKind(seen.subject);
    const auto& smallest = stored.report.margin(*margin).smallest;
    seen.toDo = toDoForMargin(setup, seen.subject, smallest ? smallest->ligand : std::string{});
  } else if (seen.kind == kind::kSolid) {
    seen.toDo = toDoForSolid(seen.subject, finding.condition == model::Condition::Sludging);
  } else {
    const auto [title, unit] = titleAndUnit(setup.recipe, seen.subject);
    seen.unit = unit;
    seen.toDo = toDoForValue(title, finding.value <= finding.limit);
  }
}

}  // namespace

RelaxedLimits relaxed(const io::Recipe& recipe) {
  RelaxedLimits out{recipe.system, recipe.limits};
  for (auto& limit : out.limits) {
    if (limit) limit = widened(*limit);
  }
  for (model::Solid& solid : out.system.solids) {
    for (auto& [margin, limit] : solid.limits) limit = widened(limit);
    if (solid.saturationLimit) {
      solid.saturationLimit->caution -= kSaturationDeadband;
      solid.saturationLimit->act -= kSaturationDeadband;
    }
  }
  return out;
}

std::vector<Observation> observeResult(const TankSetup& setup, const RelaxedLimits& relaxedLimits,
                                       const StoredReport& stored,
                                       const std::map<std::string, double>& values) {
  const std::vector<model::GuardValue> guards = guardsOf(setup.recipe, values);
  const model::Judgement strict =
      model::judge(setup.recipe.system, stored.report, setup.recipe.limits, guards);
  model::LiquorReport report = stored.report;
  for (model::SolidState& solid : report.solids) solid.threshold -= kSaturationDeadband;
  const model::Judgement held = model::judge(relaxedLimits.system, report, relaxedLimits.limits,
                                             relaxedGuards(setup.recipe, values, guards));

  const auto strictByKey = worstByKey(strict);
  const auto heldByKey = worstByKey(held);
  const bool sludging = strict.condition == model::Condition::Sludging;
  std::vector<Observation> seen;
  for (const Key& key : subjects(setup.recipe)) {
    if (key.first == kind::kMargin && sludging) continue;
    Observation each;
    each.tank = setup.tank.id;
    std::tie(each.kind, each.subject) = key;
    const auto passed = strictByKey.find(key);
    const auto holds = heldByKey.find(key);
    if (passed != strictByKey.end()) {
      each.word = each.heldWord = model::name(passed->second.condition);
      describe(each, setup, stored, passed->second);
    }
    if (holds != heldByKey.end()) {
      each.heldWord = model::name(holds->second.condition);
      if (passed == strictByKey.end()) describe(each, setup, stored, holds->second);
    }
    seen.push_back(std::move(each));
  }
  return seen;
}

std::vector<Observation> observeWindows(const TankSetup& setup, const std::map<std::string, double>& values) {
  const model::Judgement guarded =
      model::judge(setup.recipe.system, {}, {}, guardsOf(setup.recipe, values));
  std::vector<Observation> seen;
  for (const Windowed& window : windowed(setup.recipe, values)) {
    const double x = values.at(window.id);
    const double band = windowBand(window.u, window.low, window.high);
    const bool guardsAffair =
        std::any_of(guarded.findings.begin(), guarded.findings.end(),
                    [&](const Finding& finding) { return finding.subject == window.id; });
    Observation each;
    each.tank = setup.tank.id;
    each.kind = kind::kWindow;
    each.subject = window.id;
    each.value = x;
    each.unit = window.unit;
    const bool low = x < 0.5 * (window.low + window.high);
    each.limit = low ? window.low : window.high;
    each.toDo = toDoForValue(window.title, low);
    if (!guardsAffair) {
      if (x < window.low || x > window.high) each.word = kind::kWindow;
      if (x < window.low + band || x > window.high - band) each.heldWord = kind::kWindow;
    }
    seen.push_back(std::move(each));
  }
  return seen;
}

std::vector<Observation> observeStale(const TankSetup& setup,
                                      const std::map<std::string, io::Reading>& newest, io::Instant now) {
  const LiquorPick pick = pickLiquor(setup, newest, now);
  std::vector<std::string> titles;
  for (const Lacking& lacking : pick.lacking) {
    titles.push_back(titleAndUnit(setup.recipe, lacking.channel).first);
  }
  const auto observation = [&](const std::string& subject, const std::vector<std::string>& what) {
    Observation each;
    each.tank = setup.tank.id;
    each.kind = kind::kStale;
    each.subject = subject;
    if (!what.empty()) {
      each.word = each.heldWord = kind::kStale;
      each.toDo = toDoForStale(what);
    }
    return each;
  };
  std::vector<Observation> seen = {observation("liquor", titles)};
  for (const io::Channel& channel : setup.recipe.channels) {
    const bool needed =
        std::find(setup.needed.begin(), setup.needed.end(), channel.id) != setup.needed.end();
    if (needed || !channel.guard) continue;
    const bool fresh = pick.used.contains(channel.id);
    seen.push_back(observation(channel.id, fresh ? std::vector<std::string>{}
                                                 : std::vector<std::string>{channel.title}));
  }
  return seen;
}

Observation observeLink(const std::string& tank, const std::string& link, bool up) {
  Observation each;
  each.tank = tank;
  each.kind = kind::kLink;
  each.subject = link;
  if (!up) {
    each.word = each.heldWord = kind::kLink;
    each.toDo = toDoForLink(tank, link);
  }
  return each;
}

}  // namespace tw::monitor
