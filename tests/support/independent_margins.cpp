// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/support/independent_margins.hpp"

#include <cmath>

namespace tw::test::independent {
namespace {

using model::MarginKind;

constexpr Scan kPhStep = 0.05L;
constexpr Scan kKelvinStep = 1.0L;
constexpr Scan kGainMost = 10.0L;     // mol/L
constexpr Scan kDilutionMost = 1000.0L;

std::vector<Scan> evenly(Scan length, Scan step) {
  std::vector<Scan> grid = {0};
  if (length <= Scan(0)) return grid;
  const auto count = static_cast<int>(std::ceil(length / step));
  for (int i = 1; i <= count; ++i) grid.push_back(length * Scan(i) / Scan(count));
  return grid;
}

Path phPath(const Chemistry<Scan>& chem, const Closed& closed, int direction) {
  Path path;
  const Scan room = direction > 0 ? Scan(15) - closed.ph : closed.ph;
  path.grid = evenly(room, kPhStep);
  path.at = [&chem, closed, direction](Scan u, const State<Scan>* near) {
    return placeOf(chem, heldPh(closed, closed.totals, closed.ph + Scan(direction) * u), near, near == nullptr);
  };
  path.value = [](Scan u) { return u; };
  return path;
}

Path lossPath(const Chemistry<Scan>& chem, const Closed& closed, std::size_t ligand) {
  Path path;
  const Scan total = closed.totals[ligand];
  for (int i = 0; i < 100; ++i) path.grid.push_back(total * Scan(i) / Scan(100));
  Scan left = total * Scan(0.01L);
  for (int i = 0; i < 50; ++i) {
    left *= Scan(0.6L);
    path.grid.push_back(total - left);
  }
  path.grid.push_back(total);
  path.at = [&chem, closed, ligand](Scan u, const State<Scan>* near) {
    std::vector<Scan> totals = closed.totals;
    totals[ligand] = std::max(Scan(0), totals[ligand] - u);
    return placeOf(chem, heldPh(closed, totals, closed.ph), near, near == nullptr);
  };
  path.value = [](Scan u) { return u; };
  return path;
}

Path gainPath(const Chemistry<Scan>& chem, const Closed& closed, std::size_t metal) {
  Path path;
  const Scan total = closed.totals[metal];
  path.grid = {0};
  Scan u = std::max(total * Scan(0.02L), Scan(1e-14L));
  while (u < kGainMost) {
    path.grid.push_back(u);
    u += Scan(0.08L) * (total + u);
  }
  path.grid.push_back(kGainMost);
  path.at = [&chem, closed, metal](Scan v, const State<Scan>* near) {
    std::vector<Scan> totals = closed.totals;
    totals[metal] += v;
    return placeOf(chem, heldPh(closed, totals, closed.ph), near, near == nullptr);
  };
  path.value = [](Scan v) { return v; };
  return path;
}

Path temperaturePath(const Closed& closed, int direction) {
  Path path;
  const Scan room = direction > 0 ? Scan(100) - closed.t : closed.t;
  path.grid = evenly(room, kKelvinStep);
  path.at = [closed, direction](Scan u, const State<Scan>* near) {
    const Chemistry<Scan> there(*closed.system, closed.t + Scan(direction) * u);
    return placeOf(there, keptTotals(closed, closed.totals, closed.other), near, near == nullptr);
  };
  path.value = [](Scan u) { return u; };
  return path;
}

Path dilutionPath(const Chemistry<Scan>& chem, const Closed& closed) {
  Path path;
  using std::log;
  path.grid = evenly(log(kDilutionMost), Scan(0.05L));
  path.at = [&chem, closed](Scan u, const State<Scan>* near) {
    std::vector<Scan> totals = closed.totals;
    const Scan factor = std::exp(u);
    for (Scan& total : totals) total /= factor;
    return placeOf(chem, keptTotals(closed, totals, closed.other / factor), near, near == nullptr);
  };
  path.value = [](Scan u) { return std::exp(u); };
  return path;
}

struct Options {
  std::optional<Scan> whole;  ///< what `fraction` is a fraction of
};

ReferenceMarginSet marginsAlong(const ChemicalSystem& system, const Path& path, const Options& options) {
  std::vector<bool> sludge;
  for (const auto& solid : system.solids) sludge.push_back(solid.role == model::SolidRole::Sludge);
  const auto crossings = firstCrossings(path, sludge);
  ReferenceMarginSet set;
  for (std::size_t s = 0; s < crossings.size(); ++s) {
    if (!sludge[s]) continue;
    set.undecided = set.undecided || crossings[s].undecided;
    OptionalMargin margin;
    if (crossings[s].u) {
      ReferenceMargin m;
      m.value = static_cast<double>(path.value(*crossings[s].u));
      if (options.whole && *options.whole > Scan(0)) {
        m.fraction = static_cast<double>(*crossings[s].u / *options.whole);
      }
      m.solid = system.solids[s].id;
      // 1e-14 relative error in a balance, through the condition number, over the slope of the curve.
      const Scan slope = std::max(magnitude(crossings[s].slope), Scan(1e-12L));
      m.tolerance = static_cast<double>(Scan(1e-14L * crossings[s].condition + 1e-12L) / slope);
      if (path.value(Scan(1)) != Scan(1)) m.tolerance *= m.value;
      margin = m;
    }
    set.bySolid.push_back({system.solids[s].id, margin});
    if (margin && (!set.smallest || margin->value < set.smallest->value)) set.smallest = margin;
  }
  return set;
}

/// [OH^-] at a pH of the held-pH path.
Scan hydroxideAt(const Chemistry<Scan>& chem, const Closed& closed, Scan ph) {
  const Place place = placeOf(chem, heldPh(closed, closed.totals, ph), nullptr, false);
  return place.state.c[chem.hydroxide()];
}

void findLigandLoss(const Chemistry<Scan>& chem, const Closed& closed, Reference& out) {
  const ChemicalSystem& system = *closed.system;
  auto& all = out.margins[static_cast<std::size_t>(MarginKind::LigandLoss)];
  const auto take = [&](const std::string& name, const ReferenceMarginSet& set) {
    all.undecided = all.undecided || set.undecided;
    all.byLigand.push_back({name, set.smallest});
    const bool smaller = set.smallest && (!all.smallest || *set.smallest->fraction < *all.smallest->fraction);
    if (smaller) all.smallest = set.smallest;
  };
  for (const std::size_t ligand : system.ligands) {
    const std::string& name = system.components[ligand].formula;
    const Scan total = closed.totals[ligand];
    if (total <= Scan(0)) {
      all.byLigand.push_back({name, std::nullopt});
      continue;
    }
    take(name, marginsAlong(system, lossPath(chem, closed, ligand), {total}));
  }
  if (!system.hydroxideIsLigand) return;
  ReferenceMarginSet set = out.margins[static_cast<std::size_t>(MarginKind::PhDown)];
  if (set.smallest) {
    const Scan now = hydroxideAt(chem, closed, closed.ph);
    const Scan then = hydroxideAt(chem, closed, closed.ph - Scan(set.smallest->value));
    set.smallest->tolerance *= static_cast<double>(now) * 2.4;
    set.smallest->value = static_cast<double>(now - then);
    set.smallest->fraction = static_cast<double>((now - then) / now);
  }
  take(model::kHydroxide, set);
}

}  // namespace

void findMargins(const Closed& closed, Reference& out) {
  const ChemicalSystem& system = *closed.system;
  const Chemistry<Scan> chem(system, closed.t);
  const auto set = [&](MarginKind kind) -> ReferenceMarginSet& {
    return out.margins[static_cast<std::size_t>(kind)];
  };
  set(MarginKind::PhUp) = marginsAlong(system, phPath(chem, closed, +1), {});
  set(MarginKind::PhDown) = marginsAlong(system, phPath(chem, closed, -1), {});
  findLigandLoss(chem, closed, out);
  set(MarginKind::MetalGain) =
      marginsAlong(system, gainPath(chem, closed, system.metal), {closed.totals[system.metal]});
  set(MarginKind::Warming) = marginsAlong(system, temperaturePath(closed, +1), {});
  set(MarginKind::Cooling) = marginsAlong(system, temperaturePath(closed, -1), {});
  set(MarginKind::Dilution) = marginsAlong(system, dilutionPath(chem, closed), {});
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    if (!system.components[i].isMetal || i == system.metal) continue;
    const auto second = marginsAlong(system, gainPath(chem, closed, i), {closed.totals[i]});
    out.metalGain.push_back({system.components[i].formula, second.smallest});
    if (second.undecided) set(MarginKind::MetalGain).undecided = true;
  }
}

}  // namespace tw::test::independent
