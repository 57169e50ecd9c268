// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/condition.hpp"

#include <algorithm>
#include <cmath>

namespace tw::model {
namespace {

constexpr std::array<const char*, 6> kConditionNames = {"fine",  "drifting", "tight",
                                                        "brink", "sludging", "stale"};

// Heights of the bed (DESIGN section 5) and the lowest one that is drawn at all.
constexpr double kBedLeast = 0.02;
constexpr double kBedAtTarget = 0.1;
constexpr double kBedAtCaution = 0.5;
constexpr double kBedAtAct = 0.75;
constexpr double kBedAtLine = 1.0;

double clampBed(double height) { return std::clamp(height, kBedLeast, kBedAtLine); }

/// Height at x on the leg from (x0, h0) to (x1, h1), running on beyond both ends.
double onLeg(double x, double x0, double h0, double x1, double h1) {
  return x1 == x0 ? h1 : h0 + (h1 - h0) * (x - x0) / (x1 - x0);
}

/// Which of the two limits a margin is inside; Fine when beyond both.
Condition inside(double margin, const MarginLimit& limit) {
  if (margin <= limit.act) return Condition::Brink;
  if (margin <= limit.caution) return Condition::Tight;
  return Condition::Fine;
}

void addMargin(Judgement& judgement, const char* code, const std::string& subject, double margin,
               const MarginLimit& limit) {
  const Condition found = inside(margin, limit);
  if (found == Condition::Fine) return;
  const double passed = found == Condition::Brink ? limit.act : limit.caution;
  judgement.findings.push_back({found, code, subject, margin, passed});
}

const Solid* watched(const ChemicalSystem& system, const std::string& id) {
  const auto at = std::find_if(system.solids.begin(), system.solids.end(),
                               [&](const Solid& solid) { return solid.id == id; });
  return at == system.solids.end() ? nullptr : &*at;
}

/// The margin that the bath's limit applies to: the smallest over the sludge solids that have no
/// limits of their own.
std::optional<double> bathMargin(const ChemicalSystem& system, const MarginSet& set) {
  if (!set.smallest) return std::nullopt;
  const Solid* nearest = watched(system, set.smallest->solid);
  if (nearest == nullptr || nearest->limits.empty()) return set.smallest->judged();
  std::optional<double> least;
  for (const auto& [id, margin] : set.bySolid) {
    const Solid* solid = watched(system, id);
    if (!margin || solid == nullptr || solid->role != SolidRole::Sludge) continue;
    if (!solid->limits.empty()) continue;
    if (!least || margin->judged() < *least) least = margin->judged();
  }
  return least;
}

void judgeSolids(Judgement& judgement, const ChemicalSystem& system, const LiquorReport& report) {
  for (const SolidState& state : report.solids) {
    if (!state.lgSaturation) continue;
    if (state.role == SolidRole::Sludge && *state.lgSaturation > state.threshold) {
      judgement.findings.push_back(
          {Condition::Sludging, "solid", state.id, *state.lgSaturation, state.threshold});
    }
    const Solid* solid = watched(system, state.id);
    if (solid == nullptr || !solid->saturationLimit) continue;
    // Saturation rises towards trouble, a margin falls: turn both signs.
    const MarginLimit& limit = *solid->saturationLimit;
    const Condition found = inside(-*state.lgSaturation, {-limit.caution, -limit.act});
    if (found == Condition::Fine) continue;
    judgement.findings.push_back({found, "solid", state.id, *state.lgSaturation,
                                  found == Condition::Brink ? limit.act : limit.caution});
  }
  for (const Solid& solid : system.solids) {
    for (const auto& [kind, limit] : solid.limits) {
      for (const auto& [id, margin] : report.margin(kind).bySolid) {
        if (id == solid.id && margin) addMargin(judgement, "solid", id, margin->judged(), limit);
      }
    }
  }
}

void judgeGuard(Judgement& judgement, const GuardValue& guarded) {
  const Guard& g = guarded.guard;
  const double x = guarded.value;
  const auto add = [&](Condition condition, double limit) {
    judgement.findings.push_back({condition, "guard", g.id, x, limit});
  };
  if (g.actLow && x < *g.actLow) {
    add(Condition::Brink, *g.actLow);
  } else if (g.actHigh && x > *g.actHigh) {
    add(Condition::Brink, *g.actHigh);
  } else if (g.cautionLow && x < *g.cautionLow) {
    add(Condition::Tight, *g.cautionLow);
  } else if (g.cautionHigh && x > *g.cautionHigh) {
    add(Condition::Tight, *g.cautionHigh);
  }
}

/// Bed of one side of a guard, x falling towards trouble. A guard has no line: past its last limit the
/// last leg runs on. Without a target the leg between the limits runs back; with one limit and no
/// target there is no scale to measure by.
std::optional<double> guardSideBed(double x, std::optional<double> target,
                                   std::optional<double> caution, std::optional<double> act) {
  const bool targetBeyond =
      target && (!caution || *target > *caution) && (!act || *target > *act);
  if (caution && act && *caution > *act) {
    if (x > *caution && targetBeyond) {
      return clampBed(onLeg(x, *target, kBedAtTarget, *caution, kBedAtCaution));
    }
    return clampBed(onLeg(x, *caution, kBedAtCaution, *act, kBedAtAct));
  }
  if (!targetBeyond) return std::nullopt;
  if (act) return clampBed(onLeg(x, *target, kBedAtTarget, *act, kBedAtAct));
  if (caution) return clampBed(onLeg(x, *target, kBedAtTarget, *caution, kBedAtCaution));
  return std::nullopt;
}

std::optional<double> negated(std::optional<double> x) {
  return x ? std::optional<double>(-*x) : std::nullopt;
}

void raise(std::optional<double>& worst, std::optional<double> height) {
  if (height && (!worst || *height > *worst)) worst = height;
}

}  // namespace

const char* name(Condition condition) {
  return kConditionNames.at(static_cast<std::size_t>(condition));
}

std::optional<Condition> condition(const std::string& name) {
  for (std::size_t i = 0; i < kConditionNames.size(); ++i) {
    if (name == kConditionNames[i]) return static_cast<Condition>(i);
  }
  return std::nullopt;
}

Judgement judge(const ChemicalSystem& system, const LiquorReport& report, const MarginLimits& limits,
                const std::vector<GuardValue>& guards) {
  Judgement judgement;
  judgement.doubtful = !report.reliable;
  judgeSolids(judgement, system, report);
  for (std::size_t i = 0; i < kMarginCount; ++i) {
    const auto kind = static_cast<MarginKind>(i);
    const std::optional<double> margin = bathMargin(system, report.margin(kind));
    if (limits[i] && margin) addMargin(judgement, "margin", name(kind), *margin, *limits[i]);
  }
  for (const GuardValue& guarded : guards) judgeGuard(judgement, guarded);

  std::stable_sort(judgement.findings.begin(), judgement.findings.end(),
                   [](const Finding& a, const Finding& b) { return a.condition > b.condition; });
  if (!judgement.findings.empty()) judgement.condition = judgement.findings.front().condition;
  return judgement;
}

double bedOf(double margin, double atTarget, const MarginLimit& limit) {
  const double start = atTarget > limit.caution ? atTarget : 2.0 * limit.caution;
  if (margin > limit.caution) {
    return clampBed(onLeg(margin, start, kBedAtTarget, limit.caution, kBedAtCaution));
  }
  if (margin > limit.act) {
    return clampBed(onLeg(margin, limit.caution, kBedAtCaution, limit.act, kBedAtAct));
  }
  return clampBed(onLeg(margin, limit.act, kBedAtAct, 0.0, kBedAtLine));
}

std::optional<double> bed(const LiquorReport& report, const LiquorReport& atTarget,
                          const MarginLimits& limits, const std::vector<GuardValue>& guards) {
  // Past a line the margins may be absent, but all of the bed is used.
  for (const SolidState& state : report.solids) {
    if (state.role == SolidRole::Sludge && state.lgSaturation && *state.lgSaturation >= state.threshold) {
      return kBedAtLine;
    }
  }
  std::optional<double> worst;
  for (std::size_t i = 0; i < kMarginCount; ++i) {
    if (!limits[i] || !report.margins[i].smallest) continue;
    // A dilution is a factor: its line stands at 1, where nothing is added.
    const double line = static_cast<MarginKind>(i) == MarginKind::Dilution ? 1.0 : 0.0;
    const MarginLimit limit{limits[i]->caution - line, limits[i]->act - line};
    const auto& target = atTarget.margins[i].smallest;
    raise(worst, bedOf(report.margins[i].smallest->judged() - line,
                       target ? target->judged() - line : limit.caution, limit));
  }
  for (const GuardValue& guarded : guards) {
    const Guard& g = guarded.guard;
    raise(worst, guardSideBed(guarded.value, guarded.target, g.cautionLow, g.actLow));
    raise(worst, guardSideBed(-guarded.value, negated(guarded.target), negated(g.cautionHigh),
                              negated(g.actHigh)));
  }
  return worst;
}

}  // namespace tw::model
