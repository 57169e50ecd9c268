// SPDX-License-Identifier: GPL-3.0-or-later
// Margins for the independent solver: a fine scan of every solid's curve, then Ridders' method.
#pragma once

#include <algorithm>
#include <functional>

#include "tests/support/independent_equilibrium.hpp"
#include "tests/support/independent_solver.hpp"

namespace tw::test::independent {

using Scan = long double;  // 64-bit mantissa: plenty for a margin to 1e-6, and fast

inline std::optional<Scan> lgSaturation(const Chemistry<Scan>& chem, const State<Scan>& s,
                                        std::size_t solid) {
  Scan lg = -chem.solids[solid].lgKs;
  for (std::size_t i = 0; i < chem.n; ++i) {
    const double nu = chem.solids[solid].nu[i];
    if (nu == 0.0) continue;
    if (s.absent[i]) return std::nullopt;
    lg += Scan(nu) * s.x[i] / ln10<Scan>();
  }
  return lg;
}

/// A closed liquor: totals known, ready to be changed.
struct Closed {
  const ChemicalSystem* system = nullptr;
  Scan t = 25;
  Scan ph = 7;
  std::vector<Scan> totals;
  Scan other = 0;            ///< inert `other` ion, mol/L
  int otherCharge = 0;
  std::string otherName;
  /// Where `other` is a component of its own: which, and the total it has in any case.
  std::optional<std::size_t> otherComponent;
  Scan otherLeast = 0;
};

/// Height over the sludge line of every solid at one place of a path; nullopt where no liquor exists.
struct Place {
  bool exists = false;
  std::vector<Scan> over;  ///< lg saturation - threshold, -infinity where a component is absent
  State<Scan> state;
  double condition = 0.0;
};

inline Conditions<Scan> keptTotals(const Closed& closed, const std::vector<Scan>& totals, Scan other) {
  Conditions<Scan> k;
  const std::size_t n = closed.system->components.size();
  k.mode.assign(n, Mode::Total);
  k.perMetal.assign(n, {});
  k.value = totals;
  for (std::size_t i = 0; i < n; ++i) {
    if (i != closed.system->proton && totals[i] == Scan(0)) k.mode[i] = Mode::Absent;
  }
  k.inertCharge = other * Scan(closed.otherCharge);
  k.inertIonic = other * Scan(closed.otherCharge * closed.otherCharge) / 2;
  return k;
}

/// pH held, the other totals kept, the charge closed by the balance ion where there is one.
inline Conditions<Scan> heldPh(const Closed& closed, const std::vector<Scan>& totals, Scan ph) {
  Conditions<Scan> k = keptTotals(closed, totals, Scan(0));
  const ChemicalSystem& system = *closed.system;
  k.mode[system.proton] = Mode::Activity;
  k.value[system.proton] = -ph;
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    if (system.components[i].setBy != SetBy::Balance) continue;
    k.mode[i] = Mode::Charge;
    k.balance = i;
    k.other = closed.otherName;
    k.otherCharge = closed.otherCharge;
  }
  if (closed.otherComponent && k.balance) {
    k.value[*closed.otherComponent] = closed.otherLeast;
    k.mode[*closed.otherComponent] = closed.otherLeast > Scan(0) ? Mode::Total : Mode::Absent;
  }
  return k;
}

/// One way of changing a closed liquor, as a function of u growing from 0 (the liquor itself).
struct Path {
  std::vector<Scan> grid;                   ///< u, ascending, grid[0] = 0
  std::function<Place(Scan, const State<Scan>*)> at;
  std::function<Scan(Scan)> value;          ///< the margin's value at u
};

inline Place placeOf(const Chemistry<Scan>& chem, const Conditions<Scan>& k, const State<Scan>* near,
                     bool withCondition) {
  Place place;
  Equilibrium<Scan> equilibrium(chem);
  place.state = equilibrium.solve(k, near);
  place.exists = place.state.ok;
  if (!place.exists) return place;
  for (std::size_t s = 0; s < chem.solids.size(); ++s) {
    const auto lg = lgSaturation(chem, place.state, s);
    place.over.push_back(lg ? Scan(*lg - Scan(chem.system->solids[s].threshold))
                            : -std::numeric_limits<Scan>::infinity());
  }
  if (withCondition) place.condition = equilibrium.condition(k, place.state);
  return place;
}

struct Crossing {
  std::optional<Scan> u;
  bool undecided = false;
  Scan slope = 0;
  double condition = 0.0;
};

constexpr Scan kTouch = 1e-5L;  // closer to the line than this, rounding decides

/// First u at which each solid reaches its line.
inline std::vector<Crossing> firstCrossings(const Path& path, const std::vector<bool>& wanted) {
  const std::size_t solids = wanted.size();
  std::vector<Crossing> found(solids);
  std::vector<Place> places;
  std::vector<Scan> us;
  const auto refine = [&](std::size_t s, Scan a, Scan b, Scan fa, Scan fb, const State<Scan>& near) {
    State<Scan> last = near;
    const auto f = [&](const Scan& u) {
      const Place p = path.at(u, &last);
      if (p.exists) last = p.state;
      const Scan over = p.exists ? p.over[s] : Scan(-50);
      return over < Scan(-50) ? Scan(-50) : over;
    };
    Scan u = b;
    if (fb > Scan(0)) {
      u = ridders(f, a, b, fa < Scan(-50) ? Scan(-50) : fa, fb, Scan(1e-15L));
    }
    found[s].u = u;
    const Scan h = std::max(Scan(1e-7L) * (b - a), Scan(1e-12L) * u);
    const Scan before = f(u > h ? u - h : u), after = f(u + h);
    found[s].slope = (after - before) / (u > h ? 2 * h : h);
  };
  for (std::size_t g = 0; g < path.grid.size(); ++g) {
    bool open = false;
    for (std::size_t s = 0; s < solids; ++s) open = open || (wanted[s] && !found[s].u);
    if (!open) break;
    Scan u = path.grid[g];
    Place p = path.at(u, places.empty() ? nullptr : &places.back().state);
    bool last = false;
    if (!p.exists) {
      if (places.empty()) break;
      // The end of what is feasible lies between: walk to it by halves.
      Scan good = us.back(), bad = u;
      for (int i = 0; i < 60; ++i) {
        const Scan mid = (good + bad) / 2;
        Place q = path.at(mid, &places.back().state);
        if (q.exists) {
          good = mid;
          p = std::move(q);
        } else {
          bad = mid;
        }
      }
      u = good;
      last = true;
      if (!p.exists) break;
    }
    places.push_back(std::move(p));
    us.push_back(u);
    const std::size_t k = places.size() - 1;
    for (std::size_t s = 0; s < solids; ++s) {
      if (!wanted[s] || found[s].u) continue;
      const Scan here = places[k].over[s];
      if (k == 0) {
        if (here >= Scan(0)) found[s].u = Scan(0);
        if (magnitude(here) < kTouch) found[s].undecided = true;
        continue;
      }
      if (here >= Scan(0)) {
        refine(s, us[k - 1], u, places[k - 1].over[s], here, places[k - 1].state);
      } else if (here > -kTouch && (last || g + 1 == path.grid.size())) {
        found[s].undecided = true;
      }
      // A hump between the points: the curve rose, then fell, close under the line.
      if (found[s].u || k < 2) continue;
      const Scan left = places[k - 2].over[s], middle = places[k - 1].over[s];
      if (!(middle >= left && middle >= here) || middle < Scan(-1)) continue;
      Scan a = us[k - 2], b = u;
      State<Scan> near = places[k - 1].state;
      const auto f = [&](Scan v) {
        const Place q = path.at(v, &near);
        return q.exists ? q.over[s] : Scan(-50);
      };
      const Scan ratio = 0.6180339887498949L;
      Scan c = b - ratio * (b - a), d = a + ratio * (b - a), fc = f(c), fd = f(d);
      for (int i = 0; i < 45 && fc < Scan(0) && fd < Scan(0); ++i) {
        if (fc > fd) {
          b = d, d = c, fd = fc, c = b - ratio * (b - a), fc = f(c);
        } else {
          a = c, c = d, fc = fd, d = a + ratio * (b - a), fd = f(d);
        }
      }
      const Scan top = std::max(fc, fd), at = fc > fd ? c : d;
      if (magnitude(top) < kTouch) found[s].undecided = true;
      if (top >= Scan(0)) refine(s, us[k - 2], at, left, top, near);
    }
    if (last) break;
  }
  for (auto& crossing : found) {
    if (!crossing.u || path.grid.empty()) continue;
    if (*crossing.u > Scan(0)) crossing.condition = path.at(*crossing.u, nullptr).condition;
    const Scan end = path.grid.back();
    if (end - *crossing.u < Scan(1e-6L) * end) crossing.undecided = true;
  }
  return found;
}

void findMargins(const Closed& closed, Reference& out);

}  // namespace tw::test::independent
