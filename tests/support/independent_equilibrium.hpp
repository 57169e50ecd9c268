// SPDX-License-Identifier: GPL-3.0-or-later
// Equilibrium of one liquor for the independent solver, as a template over the number type.
#pragma once

#include <cstdint>
#include <limits>
#include <random>
#include <string>

#include "tests/support/independent_thermo.hpp"

namespace tw::test::independent {

using model::ComponentIndex;
using model::SetBy;

constexpr double kIonicStrengthMost = 20.0;  // mol/L, the contract's end of feasible

template <class R>
R magnitude(R x) {
  return x < R(0) ? R(-x) : x;
}
template <class R>
R epsilonOf() {
  return std::numeric_limits<R>::epsilon();
}

/// Ridders' method (IEEE Trans. Circuits Syst. 26 (1979) 979): the root of f in [a, b], where fa and fb
/// differ in sign; never leaves the bracket.
template <class R, class F>
R ridders(const F& f, R a, R b, R fa, R fb, R tolerance) {
  using std::sqrt;
  R answer = b;
  for (int i = 0; i < 200; ++i) {
    const R middle = (a + b) / R(2);
    const R fm = f(middle);
    const R root = sqrt(fm * fm - fa * fb);
    if (fm == R(0) || root == R(0)) return middle;
    const R next = middle + (middle - a) * (fa >= fb ? R(1) : R(-1)) * fm / root;
    const bool settled = i > 0 && magnitude(R(next - answer)) <= tolerance * magnitude(next);
    answer = next;
    if (settled || magnitude(R(b - a)) <= tolerance * magnitude(b)) return answer;
    const R fn = f(next);
    if (fn == R(0)) return next;
    if ((fm < R(0)) != (fn < R(0))) {
      a = middle, fa = fm, b = next, fb = fn;
    } else if ((fa < R(0)) != (fn < R(0))) {
      b = next, fb = fn;
    } else {
      a = next, fa = fn;
    }
  }
  return answer;
}

/// Everything that depends on temperature alone. Species order: bare components, OH^-, the system's.
template <class R>
struct Chemistry {
  const ChemicalSystem* system = nullptr;
  R t{}, A{};
  std::size_t n = 0;  ///< components
  struct Species {
    std::vector<double> nu;
    int z = 0;
    double setschenow = 0.0;
    R lnK{};
  };
  std::vector<Species> species;
  struct SolidRow {
    std::vector<double> nu;
    R lgKs{};
  };
  std::vector<SolidRow> solids;

  Chemistry(const ChemicalSystem& s, R t_C) : system(&s), t(t_C), A(debyeHueckel(t_C)) {
    n = s.components.size();
    for (std::size_t i = 0; i < n; ++i) {
      Species bare;
      bare.nu.assign(n, 0.0);
      bare.nu[i] = 1.0;
      bare.z = s.components[i].charge;
      bare.lnK = R(0);
      species.push_back(bare);
    }
    Species oh;
    oh.nu.assign(n, 0.0);
    oh.nu[s.proton] = -1.0;
    oh.z = -1;
    oh.lnK = lgHydroxide(s, t) * ln10<R>();
    species.push_back(oh);
    for (const auto& row : s.species) {
      const Row<R> at = rowAt(s, row.formation, row.charge, t);
      species.push_back({at.nu, row.charge, row.setschenow, at.lgK * ln10<R>()});
    }
    for (const auto& solid : s.solids) {
      const Row<R> at = rowAt<R>(s, solid.dissolution, std::nullopt, t);
      solids.push_back({at.nu, at.lgK});
    }
  }
  [[nodiscard]] std::size_t hydroxide() const { return n; }
};

enum class Mode { Absent, Activity, Total, Free, Excess, Hydroxide, Charge };

template <class R>
struct Conditions {
  std::vector<Mode> mode;
  std::vector<R> value;          ///< lg activity for Activity, mol/L otherwise
  std::vector<std::vector<model::ComponentTerm>> perMetal;
  R inertCharge{};               ///< mol/L of charge of an inert ion that is kept (signed)
  R inertIonic{};                ///< its share of the ionic strength
  std::optional<ComponentIndex> balance;  ///< in Charge mode, with its `other`
  std::string other;
  int otherCharge = 0;
};

template <class R>
struct State {
  bool ok = false;
  std::vector<R> x;          ///< ln activity; unspecified where absent
  std::vector<bool> absent;
  std::vector<R> c;          ///< per species, 0 where absent
  R I{};
  R other{};                 ///< mol/L of the inert closing ion
  bool byOther = false;
};

template <class R>
class Equilibrium {
 public:
  using Chem = Chemistry<R>;
  explicit Equilibrium(const Chem& chem) : m_chem(chem) {}

  /// Closes ionic strength by the first root on the way up from 0.
  State<R> solve(const Conditions<R>& conditions, const State<R>* near = nullptr) {
    if (m_chem.system->activityModel == ActivityModel::Conditional) {
      State<R> s = atIonicStrength(conditions, R(0), near);
      if (s.ok) s.I = ionicStrength(conditions, s);
      return s;
    }
    State<R> low = atIonicStrength(conditions, R(0), near);
    if (!low.ok) return low;
    R from = R(0);
    while (from < R(kIonicStrengthMost)) {
      const R to = from + R(0.25) * (from + R(0.004));
      const R end = to > R(kIonicStrengthMost) ? R(kIonicStrengthMost) : to;
      State<R> high = atIonicStrength(conditions, end, &low);
      if (!high.ok) return high;
      if (ionicStrength(conditions, high) <= end) return refine(conditions, from, end, low, high);
      low = high;
      from = end;
    }
    low.ok = false;
    return low;
  }

  /// Largest |sum nu c - T| / sum |nu| c of the balances at given ln activities and ionic strength, and the
  /// relative error of that ionic strength. A component that is absent has no balance. `s.byOther` says
  /// that the `other` ion closes, `s.other` how much of an inert one there is.
  R worstResidual(const Conditions<R>& k, State<R>& s) {
    setGammas(s.I);
    setUp(k, s.absent, s.byOther && k.balance.has_value());
    residuals(s.x, false);
    R worst = R(0);
    for (std::size_t e = 0; e < m_equations.size(); ++e) {
      R sum = -m_equations[e].constant, size = R(0);
      const std::size_t i = m_unknown[e];
      const bool excess = k.mode[i] == Mode::Excess;  // n_k T_k is part of T_i: measured against T_i
      for (const auto& [j, w] : m_equations[e].terms) {
        sum += w * m_c[j];
        size += excess ? R(0) : R(magnitude(w) * m_c[j]);
      }
      for (const std::size_t j : m_active) {
        if (excess) size += magnitude(R(m_chem.species[j].nu[i])) * m_c[j];
      }
      worst = std::max(worst, magnitude(R(sum / size)));
    }
    s.c = m_c;
    if (k.balance && s.absent[*k.balance] && s.other > R(0)) {
      R size = s.other * magnitude(R(k.otherCharge));
      for (std::size_t j = 0; j < s.c.size(); ++j) size += s.c[j] * magnitude(R(m_chem.species[j].z));
      worst = std::max(worst, magnitude(R((charge(k, s) + s.other * R(k.otherCharge)) / size)));
    }
    if (m_chem.system->activityModel == ActivityModel::Conditional) return worst;
    return std::max(worst, magnitude(R(ionicStrength(k, s) / s.I - R(1))));
  }

  /// Largest |d ln a| per relative error of one balance, at a solved state.
  double condition(const Conditions<R>& conditions, const State<R>& s) {
    setUp(conditions, s.absent, s.byOther);
    const std::size_t m = m_unknown.size();
    if (m == 0) return 0.0;
    setGammas(s.I);
    std::vector<R> x = s.x;
    residuals(x, true);
    double worst = 0.0;
    for (std::size_t k = 0; k < m; ++k) {
      std::vector<R> J = m_J;
      std::vector<R> b(m, R(0));
      b[k] = R(2);  // r = ln(S+/S-) is twice the residual relative to S+ + S-
      if (!eliminate(J, b, m)) return 1e300;
      for (const R& dx : b) worst = std::max(worst, static_cast<double>(magnitude(dx)));
    }
    return worst;
  }

 private:
  struct Equation {
    std::vector<std::pair<std::size_t, R>> terms;  ///< species, weight
    R constant{};                                  ///< sum w c = constant
  };

  R ionicStrength(const Conditions<R>& k, const State<R>& s) const {
    R sum = R(0);
    for (std::size_t j = 0; j < s.c.size(); ++j) {
      const int z = m_chem.species[j].z;
      if (z != 0) sum += s.c[j] * R(z * z);
    }
    return sum / R(2) + k.inertIonic + s.other * R(k.otherCharge * k.otherCharge) / R(2);
  }

  State<R> refine(const Conditions<R>& k, R from, R to, State<R> low, State<R> high) {
    State<R> last = low;
    bool failed = false;
    const auto g = [&](const R& I) {
      State<R> s = atIonicStrength(k, I, &last);
      if (!s.ok) {
        failed = true;
        return R(0);
      }
      last = s;
      return R(ionicStrength(k, s) - I);
    };
    const R gLow = ionicStrength(k, low) - from, gHigh = ionicStrength(k, high) - to;
    R root = to;
    if (gHigh < R(0)) {
      root = ridders(g, from, to, gLow, gHigh, R(16) * epsilonOf<R>());
    }
    State<R> s = failed ? State<R>{} : atIonicStrength(k, root, &last);
    if (s.ok) s.I = root;
    return s;
  }

  /// Fixed ionic strength; decides which ion closes the charge.
  State<R> atIonicStrength(const Conditions<R>& k, R I, const State<R>* near) {
    setGammas(I);
    std::vector<bool> absent(m_chem.n);
    for (std::size_t i = 0; i < m_chem.n; ++i) absent[i] = k.mode[i] == Mode::Absent;
    if (!k.balance) return fixedSet(k, absent, false, near);

    const std::size_t b = *k.balance;
    std::vector<bool> without = absent;
    without[b] = true;
    State<R> bare;
    R Q = R(0);
    if (near != nullptr && near->ok && !near->byOther && !near->absent[b]) {
      State<R> s = fixedSet(k, absent, false, near, false);
      if (s.ok) return s;
    }
    bare = fixedSet(k, without, false, near);
    if (!bare.ok) return bare;
    Q = charge(k, bare);
    const int zb = m_chem.species[b].z;
    if (Q == R(0)) return bare;
    if (Q * R(zb) < R(0)) {
      State<R> start = bare;
      using std::log;
      start.x[b] = log(magnitude(Q) / R(zb < 0 ? -zb : zb));
      return fixedSet(k, absent, false, &start);
    }
    if (k.other.empty() || k.otherCharge * zb >= 0) {
      bare.ok = false;
      return bare;
    }
    for (std::size_t i = 0; i < m_chem.n; ++i) {
      if (m_chem.system->components[i].formula != k.other) continue;
      without[i] = false;  // it may have had a total of 0 until here
      using std::log;
      if (absent[i]) bare.x[i] = log(magnitude(Q));
      return fixedSet(k, without, true, &bare);
    }
    bare.other = -Q / R(k.otherCharge);
    bare.byOther = true;
    return bare;
  }

  R charge(const Conditions<R>& k, const State<R>& s) const {
    R Q = k.inertCharge;
    for (std::size_t j = 0; j < s.c.size(); ++j) Q += s.c[j] * R(m_chem.species[j].z);
    return Q;
  }

  void setGammas(R I) {
    m_lnGamma.resize(m_chem.species.size());
    for (std::size_t j = 0; j < m_chem.species.size(); ++j) {
      const auto& s = m_chem.species[j];
      m_lnGamma[j] =
          lgGamma(m_chem.system->activityModel, s.z, s.setschenow, I, m_chem.A) * ln10<R>();
    }
  }

  [[nodiscard]] bool holdsMetal(std::size_t j) const {
    const auto& system = *m_chem.system;
    for (std::size_t i = 0; i < m_chem.n; ++i) {
      const bool metal = i == system.metal || system.components[i].isMetal;
      if (metal && m_chem.species[j].nu[i] != 0.0) return true;
    }
    return false;
  }

  /// Active species, unknowns and equations of one set of present components.
  void setUp(const Conditions<R>& k, const std::vector<bool>& absent, bool otherComponentCloses) {
    const std::size_t all = m_chem.species.size();
    m_active.clear();
    for (std::size_t j = 0; j < all; ++j) {
      bool present = true;
      for (std::size_t i = 0; i < m_chem.n; ++i) {
        present = present && !(absent[i] && m_chem.species[j].nu[i] != 0.0);
      }
      if (present) m_active.push_back(j);
    }
    m_unknown.clear();
    m_equations.clear();
    for (std::size_t i = 0; i < m_chem.n; ++i) {
      if (absent[i] || k.mode[i] == Mode::Activity) continue;
      m_unknown.push_back(i);
      Mode mode = k.mode[i];
      if (otherComponentCloses && m_chem.system->components[i].formula == k.other) mode = Mode::Charge;
      Equation e;
      e.constant = mode == Mode::Charge ? R(-k.inertCharge) : k.value[i];
      for (const std::size_t j : m_active) {
        const R w = weight(k, mode, i, j);
        if (w != R(0)) e.terms.push_back({j, w});
      }
      m_equations.push_back(e);
    }
  }

  [[nodiscard]] R weight(const Conditions<R>& k, Mode mode, std::size_t i, std::size_t j) const {
    const auto& s = m_chem.species[j];
    R w = R(0);
    switch (mode) {
      case Mode::Charge:
        return R(s.z);
      case Mode::Total:
        return R(s.nu[i]);
      case Mode::Free:
        return s.nu[i] > 0.0 && !holdsMetal(j) ? R(s.nu[i]) : R(0);
      case Mode::Excess:
        w = R(s.nu[i]);
        for (const auto& term : k.perMetal[i]) w -= R(term.nu) * R(s.nu[term.component]);
        return w;
      case Mode::Hydroxide:
        w = j == m_chem.hydroxide() ? R(1) : R(0);
        for (const auto& term : k.perMetal[i]) w += R(term.nu) * R(s.nu[term.component]);
        return w;
      case Mode::Absent:
      case Mode::Activity:
        break;
    }
    return w;
  }

  void concentrations(const std::vector<R>& x) {
    using std::exp;
    m_c.assign(m_chem.species.size(), R(0));
    for (const std::size_t j : m_active) {
      R lnc = m_chem.species[j].lnK - m_lnGamma[j];
      for (std::size_t i = 0; i < m_chem.n; ++i) {
        const double nu = m_chem.species[j].nu[i];
        if (nu != 0.0) lnc += R(nu) * x[i];
      }
      m_c[j] = exp(lnc);
    }
  }

  /// r = ln(S+ / S-) of every equation; with its Jacobian on request. Answers the sum of squares.
  R residuals(const std::vector<R>& x, bool jacobian) {
    using std::log;
    concentrations(x);
    const std::size_t m = m_unknown.size();
    m_r.assign(m, R(0));
    if (jacobian) m_J.assign(m * m, R(0));
    R merit = R(0);
    for (std::size_t e = 0; e < m; ++e) {
      const Equation& eq = m_equations[e];
      R plus = eq.constant < R(0) ? R(-eq.constant) : R(0);
      R minus = eq.constant > R(0) ? eq.constant : R(0);
      for (const auto& [j, w] : eq.terms) {
        if (w > R(0)) {
          plus += w * m_c[j];
        } else {
          minus -= w * m_c[j];
        }
      }
      if (!(plus > R(0)) || !(minus > R(0))) {
        m_r[e] = R(1e6);
        merit += m_r[e] * m_r[e];
        continue;
      }
      m_r[e] = log(plus / minus);
      merit += m_r[e] * m_r[e];
      if (!jacobian) continue;
      for (const auto& [j, w] : eq.terms) {
        const R share = w > R(0) ? R(w * m_c[j] / plus) : R(w * m_c[j] / minus);
        for (std::size_t u = 0; u < m; ++u) {
          const double nu = m_chem.species[j].nu[m_unknown[u]];
          if (nu != 0.0) m_J[e * m + u] += share * R(nu);
        }
      }
    }
    return merit;
  }

  /// Gaussian elimination with row pivoting; b becomes the solution. Clobbers both.
  static bool eliminate(std::vector<R>& J, std::vector<R>& b, std::size_t m) {
    for (std::size_t k = 0; k < m; ++k) {
      std::size_t pivot = k;
      for (std::size_t i = k + 1; i < m; ++i) {
        if (magnitude(J[i * m + k]) > magnitude(J[pivot * m + k])) pivot = i;
      }
      if (J[pivot * m + k] == R(0)) return false;
      if (pivot != k) {
        for (std::size_t l = 0; l < m; ++l) std::swap(J[k * m + l], J[pivot * m + l]);
        std::swap(b[k], b[pivot]);
      }
      for (std::size_t i = k + 1; i < m; ++i) {
        const R f = J[i * m + k] / J[k * m + k];
        if (f == R(0)) continue;
        for (std::size_t l = k; l < m; ++l) J[i * m + l] -= f * J[k * m + l];
        b[i] -= f * b[k];
      }
    }
    for (std::size_t k = m; k-- > 0;) {
      for (std::size_t l = k + 1; l < m; ++l) b[k] -= J[k * m + l] * b[l];
      b[k] /= J[k * m + k];
    }
    return true;
  }

  /// One damped Newton run from x. True when every r is at rounding level.
  bool newton(std::vector<R>& x) {
    const std::size_t m = m_unknown.size();
    const R goal = R(200) * epsilonOf<R>();
    R merit = residuals(x, true);
    for (int iteration = 0; iteration < 120; ++iteration) {
      R worst = R(0);
      for (const R& r : m_r) worst = std::max(worst, magnitude(r));
      if (worst <= goal) return true;
      std::vector<R> J = m_J, step = m_r;
      if (!eliminate(J, step, m)) return false;
      R longest = R(0);
      for (const R& s : step) longest = std::max(longest, magnitude(s));
      if (!(longest < R(1e8))) return false;
      R fraction = longest > R(60) ? R(R(60) / longest) : R(1);
      bool down = false;
      std::vector<R> next = x;
      for (int halving = 0; halving < 14; ++halving, fraction /= R(2)) {
        for (std::size_t u = 0; u < m; ++u) next[m_unknown[u]] = x[m_unknown[u]] - fraction * step[u];
        const R trial = residuals(next, false);
        if (trial < merit) {
          down = true;
          break;
        }
      }
      if (!down) {
        residuals(x, false);
        // Rounding level of a stiff balance: good enough when far below what is compared.
        return worst <= R(1e5) * goal;
      }
      x = next;
      merit = residuals(x, true);
    }
    return false;
  }

  State<R> fixedSet(const Conditions<R>& k, const std::vector<bool>& absent, bool otherComponentCloses,
                    const State<R>* near, bool insist = true) {
    using std::log;
    setUp(k, absent, otherComponentCloses);
    State<R> s;
    s.absent = absent;
    s.byOther = otherComponentCloses;
    s.x.assign(m_chem.n, R(0));
    std::mt19937_64 random(20260101);
    std::uniform_real_distribution<double> spread(-1.0, 1.0);
    const int tries = insist ? 400 : 1;
    for (int attempt = 0; attempt < tries && !s.ok; ++attempt) {
      for (std::size_t i = 0; i < m_chem.n; ++i) {
        const bool warm = attempt == 0 && near != nullptr && near->ok;
        R start = warm ? near->x[i] : (i == m_chem.system->proton ? R(-16) : R(-7));
        if (!warm && k.value[i] > R(0) && i != m_chem.system->proton) start = log(k.value[i]);
        if (attempt > 1) start += R(spread(random) * (attempt < 40 ? 20.0 : 90.0));
        if (k.mode[i] == Mode::Activity) start = k.value[i] * ln10<R>();
        s.x[i] = start;
      }
      s.ok = m_unknown.empty() || newton(s.x);
    }
    concentrations(s.x);
    s.c = m_c;
    return s;
  }

  const Chem& m_chem;
  std::vector<R> m_lnGamma, m_c, m_r, m_J;
  std::vector<std::size_t> m_active, m_unknown;
  std::vector<Equation> m_equations;
};

}  // namespace tw::test::independent
