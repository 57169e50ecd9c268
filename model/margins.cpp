// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/margins.hpp"

#include <algorithm>
#include <cmath>

#include "model/path.hpp"
#include "model/physical.hpp"

namespace tw::model {

namespace {

constexpr double kLowestPh = 0.0, kHighestPh = 15.0;
constexpr double kLargestGain_mol_L = 10.0;
constexpr double kLargestDilution = 1000.0;

using Crossings = std::vector<std::optional<double>>;

/// Shared by all paths: which solids are followed, and the neighbour to start from.
class LiquorPath : public Path {
 public:
  LiquorPath(ClosedLiquor& liquor, const std::vector<std::size_t>& followed)
      : m_liquor(liquor), m_followed(followed), m_estimate(liquor.start()) {}

  bool at(double s, std::vector<double>& above) override {
    if (!moveTo(s)) return false;
    for (std::size_t k = 0; k < m_followed.size(); ++k) {
      const std::size_t solid = m_followed[k];
      above[k] = m_liquor.lgSaturation(solid) - m_liquor.system().solids[solid].threshold;
    }
    return true;
  }

 protected:
  virtual bool moveTo(double s) = 0;
  ClosedLiquor& m_liquor;
  const std::vector<std::size_t>& m_followed;
  Estimate m_estimate;
};

/// s: pH units up (sign 1) or down (sign -1).
class PhPath final : public LiquorPath {
 public:
  PhPath(ClosedLiquor& liquor, const std::vector<std::size_t>& followed, double sign)
      : LiquorPath(liquor, followed), m_sign(sign) {}

 private:
  bool moveTo(double s) override {
    return m_liquor.moveToPh(m_liquor.ph() + m_sign * s, m_liquor.totals(), m_estimate);
  }
  double m_sign;
};

/// s up to 1 takes 15/16 of the ligand evenly, then each unit leaves a tenth of what is left: the last
/// crumbs decide where a strong complex holds all the metal. At the end nothing is left.
class LigandPath final : public LiquorPath {
 public:
  static constexpr double kEnd = 16.0;
  LigandPath(ClosedLiquor& liquor, const std::vector<std::size_t>& followed, ComponentIndex ligand)
      : LiquorPath(liquor, followed), m_ligand(ligand), m_totals(liquor.totals()) {}
  static double left(double s) {
    constexpr double kKnee = 1.0 / 16.0;
    if (s >= kEnd) return 0.0;
    return s <= 1.0 ? 1.0 - s * (1.0 - kKnee) : kKnee * std::pow(10.0, 1.0 - s);
  }

 private:
  bool moveTo(double s) override {
    m_totals[m_ligand] = m_liquor.totals()[m_ligand] * left(s);
    return m_liquor.moveToPh(m_liquor.ph(), m_totals, m_estimate);
  }
  ComponentIndex m_ligand;
  Totals m_totals;
};

/// Metal added: scale (e^s - 1), so that a trace and ten moles are both a few steps.
class MetalPath final : public LiquorPath {
 public:
  MetalPath(ClosedLiquor& liquor, const std::vector<std::size_t>& followed, ComponentIndex metal)
      : LiquorPath(liquor, followed), m_metal(metal), m_totals(liquor.totals()) {}
  [[nodiscard]] double scale() const { return 0.1 * m_liquor.totals()[m_metal]; }
  [[nodiscard]] double end() const { return std::log1p(kLargestGain_mol_L / scale()); }
  [[nodiscard]] double gain(double s) const { return scale() * std::expm1(s); }

 private:
  bool moveTo(double s) override {
    m_totals[m_metal] = m_liquor.totals()[m_metal] + gain(s);
    return m_liquor.moveToPh(m_liquor.ph(), m_totals, m_estimate);
  }
  ComponentIndex m_metal;
  Totals m_totals;
};

/// s: K warmer (sign 1) or colder (sign -1).
class TemperaturePath final : public LiquorPath {
 public:
  TemperaturePath(ClosedLiquor& liquor, const std::vector<std::size_t>& followed, double sign)
      : LiquorPath(liquor, followed), m_sign(sign) {}

 private:
  bool moveTo(double s) override {
    const double t_C = std::clamp(m_liquor.temperature_C() + m_sign * s, kColdest_C, kHottest_C);
    return m_liquor.moveClosed(t_C, 1.0, m_estimate);
  }
  double m_sign;
};

/// s: ln of the dilution factor.
class DilutionPath final : public LiquorPath {
 public:
  using LiquorPath::LiquorPath;

 private:
  bool moveTo(double s) override {
    return m_liquor.moveClosed(m_liquor.temperature_C(), std::exp(s), m_estimate);
  }
};

class MarginFinder {
 public:
  explicit MarginFinder(ClosedLiquor& liquor) : m_liquor(liquor), m_system(liquor.system()) {
    for (std::size_t s = 0; s < m_system.solids.size(); ++s) {
      const Solid& solid = m_system.solids[s];
      if (solid.role == SolidRole::Sludge || !solid.limits.empty()) m_followed.push_back(s);
    }
  }
  Margins find();

 private:
  [[nodiscard]] bool off(MarginKind kind) const {
    return std::find(m_system.marginsOff.begin(), m_system.marginsOff.end(), kind) !=
           m_system.marginsOff.end();
  }
  [[nodiscard]] bool anySludge();
  [[nodiscard]] MarginSet setOf(const std::vector<std::optional<Margin>>& bySolid) const;
  [[nodiscard]] MarginSet nothing() const {
    return setOf(std::vector<std::optional<Margin>>(m_followed.size()));
  }
  template <class ValueAt>
  [[nodiscard]] MarginSet read(const Crossings& crossings, const ValueAt& valueAt) const;
  [[nodiscard]] MarginSet ph(double sign);
  [[nodiscard]] MarginSet temperature(double sign);
  [[nodiscard]] MarginSet dilution();
  [[nodiscard]] MarginSet metalGain(ComponentIndex metal);
  [[nodiscard]] MarginSet ligandLoss(ComponentIndex ligand);
  [[nodiscard]] MarginSet hydroxideLoss(const MarginSet& phDown);
  [[nodiscard]] MarginSet allLigands(const MarginSet& phDown);

  ClosedLiquor& m_liquor;
  const ChemicalSystem& m_system;
  std::vector<std::size_t> m_followed;
};

/// Puts one margin per followed solid together: the smallest over sludge solids without limits of their own.
MarginSet MarginFinder::setOf(const std::vector<std::optional<Margin>>& bySolid) const {
  MarginSet set;
  for (std::size_t k = 0; k < m_followed.size(); ++k) {
    const Solid& solid = m_system.solids[m_followed[k]];
    set.bySolid.emplace_back(solid.id, bySolid[k]);
    const bool counts = solid.role == SolidRole::Sludge && solid.limits.empty();
    if (!counts || !bySolid[k]) continue;
    if (!set.smallest || bySolid[k]->judged() < set.smallest->judged()) set.smallest = bySolid[k];
  }
  return set;
}

template <class ValueAt>
MarginSet MarginFinder::read(const Crossings& crossings, const ValueAt& valueAt) const {
  std::vector<std::optional<Margin>> bySolid(m_followed.size());
  for (std::size_t k = 0; k < m_followed.size(); ++k) {
    if (!crossings[k]) continue;
    bySolid[k] = valueAt(*crossings[k]);
    bySolid[k]->solid = m_system.solids[m_followed[k]].id;
  }
  return setOf(bySolid);
}

Margin plain(double value) {
  Margin margin;
  margin.value = value;
  return margin;
}

MarginSet MarginFinder::ph(double sign) {
  PhPath path(m_liquor, m_followed, sign);
  const double end = sign > 0.0 ? kHighestPh - m_liquor.ph() : m_liquor.ph() - kLowestPh;
  return read(firstCrossings(path, m_followed.size(), {end, 0.01, 0.25}), plain);
}

MarginSet MarginFinder::temperature(double sign) {
  TemperaturePath path(m_liquor, m_followed, sign);
  const double end =
      sign > 0.0 ? kHottest_C - m_liquor.temperature_C() : m_liquor.temperature_C() - kColdest_C;
  return read(firstCrossings(path, m_followed.size(), {end, 0.2, 4.0}), plain);
}

MarginSet MarginFinder::dilution() {
  DilutionPath path(m_liquor, m_followed);
  return read(firstCrossings(path, m_followed.size(), {std::log(kLargestDilution), 0.01, 0.3}),
              [](double s) { return plain(std::exp(s)); });
}

MarginSet MarginFinder::metalGain(ComponentIndex metal) {
  const double total = m_liquor.totals()[metal];
  if (!(total > 0.0)) return nothing();
  MetalPath path(m_liquor, m_followed, metal);
  return read(firstCrossings(path, m_followed.size(), {path.end(), 0.01, 0.3}), [&](double s) {
    Margin margin = plain(path.gain(s));
    margin.fraction = margin.value / total;
    return margin;
  });
}

MarginSet MarginFinder::ligandLoss(ComponentIndex ligand) {
  const double total = m_liquor.totals()[ligand];
  if (!(total > 0.0)) return nothing();
  LigandPath path(m_liquor, m_followed, ligand);
  return read(firstCrossings(path, m_followed.size(), {LigandPath::kEnd, 0.005, 0.5}), [&](double s) {
    Margin margin;
    margin.fraction = 1.0 - LigandPath::left(s);
    margin.value = total * *margin.fraction;
    margin.ligand = m_system.components[ligand].formula;
    return margin;
  });
}

/// OH^- as a ligand: what is lost on the way down to the ph_down crossing.
MarginSet MarginFinder::hydroxideLoss(const MarginSet& phDown) {
  Estimate estimate = m_liquor.start();
  const std::size_t oh = m_liquor.layout().hydroxide;
  std::vector<std::optional<Margin>> bySolid(m_followed.size());
  if (!m_liquor.moveToPh(m_liquor.ph(), m_liquor.totals(), estimate)) return setOf(bySolid);
  const double now = m_liquor.now().concentration()[oh];
  for (std::size_t k = 0; k < m_followed.size(); ++k) {
    const std::optional<Margin>& down = phDown.bySolid[k].second;
    if (!down || !m_liquor.moveToPh(m_liquor.ph() - down->value, m_liquor.totals(), estimate)) continue;
    Margin margin;
    margin.value = now - m_liquor.now().concentration()[oh];
    margin.fraction = margin.value / now;
    margin.solid = down->solid;
    margin.ligand = kHydroxide;
    bySolid[k] = margin;
  }
  return setOf(bySolid);
}

/// The loss of each ligand alone; the smallest fraction is the margin.
MarginSet MarginFinder::allLigands(const MarginSet& phDown) {
  std::vector<std::optional<Margin>> bySolid(m_followed.size());
  std::vector<std::pair<std::string, std::optional<Margin>>> byLigand;
  const auto take = [&](const std::string& formula, const MarginSet& one) {
    byLigand.emplace_back(formula, one.smallest);
    for (std::size_t k = 0; k < bySolid.size(); ++k) {
      const std::optional<Margin>& margin = one.bySolid[k].second;
      if (margin && (!bySolid[k] || margin->judged() < bySolid[k]->judged())) bySolid[k] = margin;
    }
  };
  for (const ComponentIndex ligand : m_system.ligands) {
    take(m_system.components[ligand].formula, ligandLoss(ligand));
  }
  if (m_system.hydroxideIsLigand) take(kHydroxide, hydroxideLoss(phDown));
  MarginSet set = setOf(bySolid);
  set.byLigand = std::move(byLigand);
  return set;
}

/// Whether a solid of role sludge is past its line in the liquor as opened.
bool MarginFinder::anySludge() {
  Estimate estimate = m_liquor.start();
  if (!m_liquor.moveClosed(m_liquor.temperature_C(), 1.0, estimate)) return false;
  return std::any_of(m_followed.begin(), m_followed.end(), [&](std::size_t s) {
    const Solid& solid = m_system.solids[s];
    return solid.role == SolidRole::Sludge && m_liquor.lgSaturation(s) > solid.threshold;
  });
}

Margins MarginFinder::find() {
  Margins margins;
  const auto put = [&](MarginKind kind, const auto& search) {
    if (!off(kind)) margins.byKind[static_cast<std::size_t>(kind)] = search();
  };
  const std::vector<ComponentIndex> metals = metalsOf(m_system);
  margins.secondMetalGain.resize(metals.size() - 1);
  if (m_followed.empty() || anySludge()) {
    for (std::size_t k = 0; k < kMarginCount; ++k) {
      put(static_cast<MarginKind>(k), [&] { return nothing(); });
    }
    return margins;
  }
  MarginSet phDown;
  const bool lossNeedsPh = m_system.hydroxideIsLigand && !off(MarginKind::LigandLoss);
  if (!off(MarginKind::PhDown) || lossNeedsPh) phDown = ph(-1.0);
  put(MarginKind::PhUp, [&] { return ph(1.0); });
  put(MarginKind::PhDown, [&] { return phDown; });
  put(MarginKind::LigandLoss, [&] { return allLigands(phDown); });
  put(MarginKind::MetalGain, [&] { return metalGain(m_system.metal); });
  put(MarginKind::Warming, [&] { return temperature(1.0); });
  put(MarginKind::Cooling, [&] { return temperature(-1.0); });
  put(MarginKind::Dilution, [&] { return dilution(); });
  for (std::size_t k = 1; k < metals.size() && !off(MarginKind::MetalGain); ++k) {
    margins.secondMetalGain[k - 1] = metalGain(metals[k]).smallest;
  }
  return margins;
}

}  // namespace

std::vector<ComponentIndex> metalsOf(const ChemicalSystem& system) {
  std::vector<ComponentIndex> metals{system.metal};
  for (ComponentIndex i = 0; i < system.components.size(); ++i) {
    if (system.components[i].isMetal && i != system.metal) metals.push_back(i);
  }
  return metals;
}

Margins marginsOf(ClosedLiquor& liquor) { return MarginFinder(liquor).find(); }

}  // namespace tw::model
