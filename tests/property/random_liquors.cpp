// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/property/random_liquors.hpp"

#include <algorithm>
#include <cmath>
#include <fstream>
#include <random>
#include <sstream>
#include <stdexcept>

#include "tests/support/independent_solver.hpp"

namespace tw::test {
namespace {

using namespace model;

constexpr double kTraceLeast = 1e-12;  // mol/L, the contract's trace metal
constexpr std::size_t kMostSpecies = 30;

class Dice {
 public:
  explicit Dice(std::uint64_t seed) : m_engine(seed * 0x9E3779B97F4A7C15ULL + 12345) { m_engine.discard(8); }
  double uniform(double a, double b) {
    return a + (b - a) * static_cast<double>(m_engine() >> 11) * 0x1.0p-53;
  }
  double logUniform(double a, double b) { return std::exp(uniform(std::log(a), std::log(b))); }
  bool chance(double p) { return uniform(0.0, 1.0) < p; }
  int pick(int a, int b) { return a + static_cast<int>(m_engine() % static_cast<std::uint64_t>(b - a + 1)); }
  double rounded(double a, double b, double step) { return std::round(uniform(a, b) / step) * step; }

 private:
  std::mt19937_64 m_engine;
};

std::string charged(const std::string& stem, int z) {
  if (z == 0) return stem;
  const std::string size = std::abs(z) == 1 ? "" : std::to_string(std::abs(z));
  return stem + "^" + size + (z > 0 ? "+" : "-");
}

/// The drawn liquor: activities of components, amounts of species.
struct Drawn {
  double t_C = 25.0, I = 0.0;
  std::vector<double> lgA;         ///< per component
  std::vector<bool> absent;
  std::vector<double> totals;
  double hydroxide = 0.0;
};

class Maker {
 public:
  explicit Maker(std::uint64_t seed) : m_dice(seed) { m_out.seed = seed; }

  RandomLiquor make() {
    m_system.activityModel = m_dice.chance(0.5) ? ActivityModel::Davies : ActivityModel::Conditional;
    drawComponents();
    drawTemperatures();
    if (m_dice.chance(0.06)) drawOwnHydroxide();
    drawSpecies();
    drawState();
    drawSolids();
    chooseSetBy();
    shuffle();
    m_out.system = m_system;
    m_out.input = m_input;
    return m_out;
  }

 private:
  bool davies() const { return m_system.activityModel == ActivityModel::Davies; }
  const char* modelName() const { return davies() ? "davies" : "conditional"; }
  void cell(const std::string& name) { m_out.cells.push_back(name + "/" + modelName()); }

  std::size_t addComponent(const std::string& stem, int z) {
    Component c;
    c.formula = charged(stem, z);
    c.charge = z;
    m_system.components.push_back(c);
    return m_system.components.size() - 1;
  }

  void drawComponents() {
    m_system.proton = addComponent("H", 1);
    m_metals.push_back(m_system.metal = addComponent("Ma", m_dice.pick(1, 3)));
    int left = m_dice.pick(0, 4);  // 2 to 6 components
    const int ligands = std::min(left, m_dice.pick(0, 3));
    static const char* const kNames[] = {"La", "Lb", "Lc"};
    for (int i = 0; i < ligands; ++i) {
      m_system.ligands.push_back(addComponent(kNames[i], m_dice.pick(-4, 0)));
    }
    left -= ligands;
    if (left > 0 && m_dice.chance(0.8)) {
      const int z = m_dice.chance(0.65) ? 1 : -1;
      m_balance = addComponent(z > 0 ? "Na" : "Cl", z);
      --left;
    }
    if (left > 0) {
      // An inert ion of fixed total. Against the balance ion's sign, or with it to make `other` close.
      m_closedByOther = m_balance && m_dice.chance(0.4);
      int z = m_dice.chance(0.5) ? 1 : -1;
      if (m_balance) z = m_closedByOther ? chargeOf(*m_balance) : -chargeOf(*m_balance);
      m_inert = addComponent("X", z);
      --left;
    }
    if (left > 0 && m_dice.chance(0.8)) {
      m_metals.push_back(addComponent("Mb", m_dice.pick(1, 3)));
      m_system.components.back().isMetal = true;
    }
    if (m_balance) {
      auto& b = m_system.components[*m_balance];
      b.setBy = SetBy::Balance;
      b.other = charged("Y", -b.charge);
      b.otherCharge = -b.charge;
    }
    m_system.hydroxideIsLigand = m_dice.chance(m_system.ligands.empty() ? 0.6 : 0.1);
  }

  int chargeOf(std::size_t i) const { return m_system.components[i].charge; }

  void drawTemperatures() {
    m_input.temperature_C = m_dice.rounded(0.0, 100.0, 0.1);
    m_state.t_C = m_input.temperature_C;
    if (!m_dice.chance(0.2)) return;
    m_system.phTakenAtSample = true;
    m_input.sampleTemperature_C = m_dice.chance(0.7) ? 25.0 : m_dice.rounded(15.0, 40.0, 0.5);
    m_state.t_C = *m_input.sampleTemperature_C;
    m_sampled = true;
  }

  Constant constant(double lgK) {
    Constant k;
    k.lgK = std::round(lgK * 1000.0) / 1000.0;
    k.sigma = 0.1;
    const double temperatures[] = {25.0, 25.0, 20.0, 30.0};
    k.T_C = temperatures[m_dice.pick(0, 3)];
    const double strengths[] = {0.0, 0.0, 0.0, 0.1, 0.5, 1.0, 2.0};
    k.I = strengths[m_dice.pick(0, 6)];
    if (m_dice.chance(0.6)) k.dH_kJ_mol = m_dice.rounded(-60.0, 40.0, 0.1);
    if (k.dH_kJ_mol && m_dice.chance(0.2)) k.dCp_J_mol_K = m_dice.rounded(-200.0, 200.0, 1.0);
    return k;
  }

  void drawOwnHydroxide() {
    Species oh;
    oh.formula = kHydroxide;
    oh.charge = -1;
    oh.formation.terms = {{m_system.proton, -1.0}};
    oh.formation.water = 1.0;
    oh.formation.K = constant(-13.8);
    oh.formation.K.dH_kJ_mol = 55.8;
    m_system.ownHydroxide = oh;
  }

  struct Part {
    std::size_t component;
    int count;
  };

  /// `protons` > 0: taken up. < 0: that many OH^-, written as OH^- or as H2O - H^+.
  void addSpecies(const std::vector<Part>& parts, int protons, double lgK) {
    if (m_system.species.size() >= kMostSpecies) return;
    Species s;
    std::string stem;
    for (const Part& part : parts) {
      s.formation.terms.push_back({part.component, static_cast<double>(part.count)});
      s.charge += part.count * chargeOf(part.component);
      const std::string& whole = m_system.components[part.component].formula;
      stem += "(" + whole.substr(0, whole.find('^')) + ")" + std::to_string(part.count);
    }
    s.charge += protons;
    s.formation.K = constant(lgK);
    if (protons > 0) {
      s.formation.terms.push_back({m_system.proton, static_cast<double>(protons)});
      stem = "H" + std::to_string(protons) + stem;
    } else if (protons < 0) {
      stem += "(OH)" + std::to_string(-protons);
      if (m_dice.chance(0.5)) {
        s.formation.hydroxide = -protons;
        s.formation.K.lgK = std::round((lgK - 14.0 * protons) * 1000.0) / 1000.0;
      } else {
        s.formation.water = -protons;
        s.formation.terms.push_back({m_system.proton, static_cast<double>(protons)});
      }
    }
    if (s.charge == 0 && s.formation.K.I == 0.0 && m_dice.chance(0.4)) {
      s.setschenow = m_dice.rounded(-0.1, 0.2, 0.01);
    }
    s.formula = charged(stem, s.charge);
    m_system.species.push_back(s);
  }

  void drawSpecies() {
    for (const std::size_t ligand : m_system.ligands) {
      double lgK = 0.0, pK = m_dice.uniform(3.0, 12.0);
      const int steps = m_dice.pick(0, std::max(1, -chargeOf(ligand)));
      for (int n = 1; n <= steps; ++n) {
        lgK += pK;
        pK -= m_dice.uniform(0.7, 4.0);
        addSpecies({{ligand, 1}}, n, lgK);
      }
    }
    for (const std::size_t metal : m_metals) drawComplexes(metal);
    // A weak pair of the balance ion; only with `conditional`, where no ionic strength is aimed at.
    if (m_balance && !davies() && !m_system.ligands.empty() && m_dice.chance(0.25)) {
      addSpecies({{*m_balance, 1}, {m_system.ligands.front(), 1}}, 0, m_dice.uniform(-1.0, 1.5));
      m_paired = true;
    }
  }

  void drawComplexes(std::size_t metal) {
    double lgBeta = 0.0;
    const double first = m_dice.uniform(2.0, 10.0);
    for (int n = 1, most = m_dice.pick(0, 4); n <= most; ++n) {
      lgBeta -= first + (n - 1) * m_dice.uniform(0.0, 2.5);
      addSpecies({{metal, 1}}, -n, lgBeta);
    }
    if (m_dice.chance(0.3)) addSpecies({{metal, 2}}, -2, -m_dice.uniform(3.0, 16.0));
    if (m_dice.chance(0.15)) addSpecies({{metal, 3}}, -4, -m_dice.uniform(6.0, 30.0));
    for (std::size_t l = 0; l < m_system.ligands.size(); ++l) {
      const std::size_t ligand = m_system.ligands[l];
      const int most = m_dice.pick(1, chargeOf(ligand) < -2 ? 2 : 6);
      // Strong as cyanide (to lg beta 45) or weak as acetate.
      double step = m_dice.chance(0.15) ? m_dice.uniform(8.0, 45.0 / most) : m_dice.uniform(0.5, 6.0);
      double lg = 0.0;
      for (int n = 1; n <= most; ++n) {
        lg += step;
        step -= m_dice.uniform(0.0, 0.7);
        addSpecies({{metal, 1}, {ligand, n}}, 0, lg);
        if (n == 1 && m_dice.chance(0.3)) addSpecies({{metal, 1}, {ligand, 1}}, -1, lg - m_dice.uniform(4.0, 11.0));
        if (n == 1 && m_dice.chance(0.2)) addSpecies({{metal, 1}, {ligand, 1}}, 1, lg + m_dice.uniform(2.0, 6.0));
      }
      if (m_dice.chance(0.15)) addSpecies({{metal, 2}, {ligand, 2}}, -2, 2.0 * lg - m_dice.uniform(6.0, 20.0));
      if (l > 0 && m_dice.chance(0.5)) {
        addSpecies({{metal, 1}, {m_system.ligands[l - 1], 1}, {ligand, 1}}, 0, m_dice.uniform(1.0, 12.0));
      }
    }
  }

  /// lg c of every species at given activities is lgCoefficient + sum nu lg a.
  struct Row {
    double lg = 0.0;
    std::vector<double> nu;
    int z = 0;
  };

  void prepareRows(double I) {
    m_rows.clear();
    const auto gamma = [&](int z, double ks) {
      return independentLgGamma(m_system.activityModel, z, ks, I, m_state.t_C);
    };
    const std::size_t n = m_system.components.size();
    for (std::size_t i = 0; i < n; ++i) {
      Row row{-gamma(chargeOf(i), 0.0), std::vector<double>(n, 0.0), chargeOf(i)};
      row.nu[i] = 1.0;
      m_rows.push_back(row);
    }
    Reaction water;  // OH^- alone, by the same replacement that every row gets
    water.hydroxide = 1.0;
    const auto oh = independentRow(m_system, water, -1, m_state.t_C);
    m_rows.push_back({oh.lgK - gamma(-1, 0.0), oh.nu, -1});
    for (const Species& s : m_system.species) {
      const auto at = independentRow(m_system, s.formation, s.charge, m_state.t_C);
      m_rows.push_back({at.lgK - gamma(s.charge, s.setschenow), at.nu, s.charge});
    }
  }

  bool present(const Row& row) const {
    for (std::size_t i = 0; i < row.nu.size(); ++i) {
      if (row.nu[i] != 0.0 && m_state.absent[i]) return false;
    }
    return true;
  }
  double amount(const Row& row) const {
    if (!present(row)) return 0.0;
    double lg = row.lg;
    for (std::size_t i = 0; i < row.nu.size(); ++i) {
      if (row.nu[i] != 0.0) lg += row.nu[i] * m_state.lgA[i];
    }
    return std::pow(10.0, lg);
  }
  bool holdsMetal(const Row& row) const {
    return std::any_of(m_metals.begin(), m_metals.end(), [&](std::size_t m) { return row.nu[m] != 0.0; });
  }
  double total(std::size_t i) const {
    double sum = 0.0;
    for (const Row& row : m_rows) {
      if (row.nu[i] != 0.0) sum += row.nu[i] * amount(row);
    }
    return sum;
  }
  double freeSum(std::size_t i) const {
    double sum = 0.0;
    for (const Row& row : m_rows) {
      if (row.nu[i] > 0.0 && !holdsMetal(row)) sum += row.nu[i] * amount(row);
    }
    return sum;
  }

  /// Activities from drawn free ligand and total metal at ionic strength I.
  void setActivities(double scale, double I) {
    prepareRows(I);
    for (std::size_t l = 0; l < m_system.ligands.size(); ++l) {
      const std::size_t i = m_system.ligands[l];
      if (m_state.absent[i]) continue;
      m_state.lgA[i] = 0.0;
      m_state.lgA[i] = std::log10(std::max(scale * m_drawnFree[l], kTraceLeast) / freeSum(i));
    }
    for (std::size_t m = 0; m < m_metals.size(); ++m) {
      const std::size_t i = m_metals[m];
      if (m_state.absent[i]) continue;
      const double aim = std::max(scale * m_drawnMetal[m], kTraceLeast);
      double low = -120.0, high = 4.0;
      for (int step = 0; step < 100; ++step) {
        m_state.lgA[i] = 0.5 * (low + high);
        (total(i) < aim ? low : high) = m_state.lgA[i];
      }
    }
  }

  struct Sums {
    double charge = 0.0, I = 0.0;
  };
  Sums sums() const {
    Sums s;
    for (const Row& row : m_rows) {
      const double c = amount(row);
      s.charge += row.z * c;
      s.I += 0.5 * row.z * row.z * c;
    }
    return s;
  }

  void drawState() {
    const std::size_t n = m_system.components.size();
    m_state.lgA.assign(n, 0.0);
    m_state.absent.assign(n, false);
    m_state.I = davies() ? m_dice.logUniform(0.003, m_dice.chance(0.2) ? 1.5 : 0.5) : 0.0;
    double ph = m_dice.uniform(0.3, 14.3);
    if (davies()) {
      const double edge = -std::log10(0.25 * m_state.I);
      ph = std::clamp(ph, edge, 14.0 - edge);
      if (m_state.t_C > 40.0) ph = std::min(ph, 12.0 - edge + 0.8);
    }
    m_state.lgA[m_system.proton] = -ph;
    for (std::size_t l = 0; l < m_system.ligands.size(); ++l) {
      m_drawnFree.push_back(m_dice.chance(0.12) ? m_dice.logUniform(kTraceLeast, 1e-6)
                                                : m_dice.logUniform(1e-6, 2.0));
      if (m_dice.chance(0.04)) m_state.absent[m_system.ligands[l]] = true;
    }
    for (const std::size_t metal : m_metals) {
      m_drawnMetal.push_back(m_dice.chance(0.2) ? m_dice.logUniform(kTraceLeast, 1e-6)
                                                : m_dice.logUniform(1e-4, 1.0));
      if (m_dice.chance(0.04)) m_state.absent[metal] = true;
    }
    if (m_balance) m_state.absent[*m_balance] = true;
    if (m_inert) m_state.absent[*m_inert] = true;
    double scale = 1.0;
    setActivities(scale, m_state.I);
    if (davies()) {
      for (int i = 0; i < 45; ++i) {
        const Sums rest = sums();
        if (rest.I + 0.5 * std::abs(rest.charge) < 0.9 * m_state.I) break;
        setActivities(scale *= 0.5, m_state.I);
      }
    }
    closeCharge();
    m_state.totals.clear();
    for (std::size_t i = 0; i < n; ++i) m_state.totals.push_back(m_state.absent[i] ? 0.0 : total(i));
    m_state.hydroxide = amount(m_rows[n]);
  }

  /// Amounts of the balance (or `other`) and inert ions: charge zero and, with davies, I as aimed.
  void closeCharge() {
    const Sums rest = sums();
    const double room = std::max(0.0, m_state.I - rest.I);
    if (!m_balance) {
      if (m_inert) place(*m_inert, davies() ? 2.0 * room : m_dice.logUniform(1e-4, 2.0));
      return;
    }
    const int zb = chargeOf(*m_balance);
    if (!m_inert) {
      // Whatever sign there is: the balance ion or `other`. Only `conditional` meets I exactly; with
      // davies the liquor then settles at another ionic strength, as feasible as this one.
      m_closedByOther = rest.charge * zb > 0.0;
      if (!m_closedByOther) place(*m_balance, std::abs(rest.charge) / balanceCharge());
      return;
    }
    const int zx = chargeOf(*m_inert);
    double inert = 0.0;
    if (davies()) {
      // zc c + zx x = -Q and c + x = 2 room, where c closes with charge -zx.
      inert = room - 0.5 * rest.charge * zx;
    } else {
      inert = std::max(0.0, -rest.charge * zx) + m_dice.logUniform(1e-4, 2.0);
      if (m_dice.chance(0.08) && -rest.charge * zx > 0.0) inert = -rest.charge * zx;  // neutral as it is
    }
    place(*m_inert, std::max(inert, 1e-9));
    const double Q = sums().charge;
    m_closedByOther = Q * zb > 0.0;
    if (!m_closedByOther) place(*m_balance, std::abs(Q) / balanceCharge());
  }

  /// Charge per unit of balance ion activity (its pairs included), in its own sign.
  double balanceCharge() {
    const int zb = chargeOf(*m_balance);
    m_state.absent[*m_balance] = false;
    m_state.lgA[*m_balance] = 0.0;
    double sum = 0.0;
    for (const Row& row : m_rows) {
      if (row.nu[*m_balance] != 0.0) sum += row.z * zb * amount(row);
    }
    if (m_paired && sum < 0.5) {
      // The pair takes more charge than the ion brings: drop it.
      m_system.species.pop_back();
      m_rows.pop_back();
      m_paired = false;
      return balanceCharge();
    }
    m_ownShare = std::pow(10.0, m_rows[*m_balance].lg);
    return sum / m_ownShare;
  }

  void place(std::size_t i, double concentration) {
    m_state.absent[i] = !(concentration > 0.0);
    if (concentration > 0.0) m_state.lgA[i] = std::log10(concentration) - m_rows[i].lg;
  }

  void drawSolids() {
    const int count = m_dice.pick(1, 3);
    for (int k = 0; k < count; ++k) {
      Solid solid;
      solid.id = "solid " + std::to_string(k + 1) + " fresh";
      const std::size_t metal = m_metals[static_cast<std::size_t>(m_dice.pick(0, static_cast<int>(m_metals.size()) - 1))];
      solid.dissolution.terms = {{metal, 1.0}};
      const int z = chargeOf(metal);
      int hydroxides = z;
      if (!m_system.ligands.empty() && m_dice.chance(0.25)) {
        const std::size_t ligand = m_system.ligands.front();
        solid.dissolution.terms.push_back({ligand, 1.0});
        hydroxides = std::max(0, z + chargeOf(ligand));
      }
      if (hydroxides > 0 && m_dice.chance(0.6)) {
        solid.dissolution.hydroxide = hydroxides;
      } else if (hydroxides > 0) {
        solid.dissolution.terms.push_back({m_system.proton, static_cast<double>(-hydroxides)});
        solid.dissolution.water = hydroxides;
      }
      if (k > 0 && m_dice.chance(0.3)) solid.role = m_dice.chance(0.5) ? SolidRole::Aged : SolidRole::Scale;
      if (m_dice.chance(0.2)) solid.threshold = m_dice.rounded(-0.3, 0.3, 0.05);
      placeSolid(solid);
      m_system.solids.push_back(solid);
    }
  }

  /// lg Ks so that the liquor stands at a drawn distance from the line.
  void placeSolid(Solid& solid) {
    solid.dissolution.K = constant(0.0);
    const auto at = independentRow(m_system, solid.dissolution, std::nullopt, m_state.t_C);
    double lg = -at.lgK;
    for (std::size_t i = 0; i < at.nu.size(); ++i) {
      if (at.nu[i] != 0.0 && !m_state.absent[i]) lg += at.nu[i] * m_state.lgA[i];
    }
    const double below = m_dice.chance(0.08) ? -m_dice.uniform(0.0, 1.0) : m_dice.uniform(0.02, 5.0);
    solid.dissolution.K.lgK = std::round((lg + below) * 1000.0) / 1000.0;
  }

  void chooseSetBy() {
    const std::size_t n = m_system.components.size();
    m_input.value.assign(n, 0.0);
    for (std::size_t i = 0; i < n; ++i) {
      auto& component = m_system.components[i];
      m_input.value[i] = m_state.totals[i];
      if (i == m_system.proton) {
        chooseProton(component);
      } else if (m_balance == i) {
        m_input.value[i] = 0.0;
        cell(std::string("balance") + (component.charge > 0 ? "+" : "-") +
             (m_closedByOther ? " by other" : ""));
      } else if (m_inert == i) {
        component.setBy = SetBy::Fixed;
        cell("fixed");
      } else if (std::count(m_system.ligands.begin(), m_system.ligands.end(), i) > 0) {
        chooseLigand(i);
      } else {
        component.setBy = m_dice.chance(0.9) ? SetBy::Total : SetBy::Fixed;
        cell(component.setBy == SetBy::Total ? "total" : "fixed");
      }
      if (i != m_system.proton && m_balance != i && m_input.value[i] == 0.0) cell("zero");
    }
    if (m_sampled) cell("cooled sample");
  }

  void chooseLigand(std::size_t i) {
    auto& component = m_system.components[i];
    const double roll = m_dice.uniform(0.0, 1.0);
    if (roll < 0.35 || m_state.absent[i]) {
      component.setBy = SetBy::Total;
      cell("total");
    } else if (roll < 0.65) {
      component.setBy = SetBy::Free;
      m_input.value[i] = freeSum(i);
      cell("free");
    } else if (roll < 0.92) {
      component.setBy = SetBy::Excess;
      bool any = false;
      for (const std::size_t metal : m_metals) {
        const double T = m_state.totals[metal];
        if (T <= 0.0 || m_dice.chance(0.2)) continue;
        const double most = m_input.value[i] / T;
        const int nk = m_dice.pick(1, 4);
        if (nk * 1.001 > most) continue;
        component.perMetal.push_back({metal, static_cast<double>(nk)});
        m_input.value[i] -= nk * T;
        any = true;
      }
      cell(any ? "excess+per_metal" : "excess");
    } else {
      component.setBy = SetBy::Fixed;
      cell("fixed");
    }
  }

  void chooseProton(Component& component) {
    auto& value = m_input.value[m_system.proton];
    const double roll = m_sampled ? 0.0 : m_dice.uniform(0.0, 1.0);
    if (roll < 0.45) {
      component.setBy = SetBy::Ph;
      value = -m_state.lgA[m_system.proton];
      cell("ph");
    } else if (roll < 0.75) {
      component.setBy = SetBy::Hydroxide;
      value = m_state.hydroxide;
      bool any = false;
      for (const std::size_t metal : m_metals) {
        const double T = m_state.totals[metal];
        // A free caustic far below what the metal takes cannot be had from their difference.
        if (T <= 0.0 || m_state.hydroxide < 0.01 * T || m_dice.chance(0.3)) continue;
        const double nk = m_dice.pick(1, 4);
        component.perMetal.push_back({metal, nk});
        value += nk * T;
        any = true;
      }
      cell(any ? "hydroxide+per_metal" : "hydroxide");
    } else {
      component.setBy = SetBy::ProtonTotal;
      cell("proton_total");
    }
  }

  /// Order of components and species must not matter.
  void shuffle() {
    const std::size_t n = m_system.components.size();
    std::vector<std::size_t> place(n);
    for (std::size_t i = 0; i < n; ++i) place[i] = i;
    for (std::size_t i = n; i-- > 1;) std::swap(place[i], place[static_cast<std::size_t>(m_dice.pick(0, static_cast<int>(i)))]);
    const auto moved = [&](std::vector<ComponentTerm>& terms) {
      for (auto& term : terms) term.component = place[term.component];
    };
    std::vector<Component> components(n);
    std::vector<double> value(n);
    for (std::size_t i = 0; i < n; ++i) {
      components[place[i]] = m_system.components[i];
      value[place[i]] = m_input.value[i];
    }
    m_system.components = components;
    m_input.value = value;
    for (auto& component : m_system.components) moved(component.perMetal);
    for (auto& s : m_system.species) moved(s.formation.terms);
    for (auto& s : m_system.solids) moved(s.dissolution.terms);
    if (m_system.ownHydroxide) moved(m_system.ownHydroxide->formation.terms);
    m_system.proton = place[m_system.proton];
    m_system.metal = place[m_system.metal];
    for (auto& ligand : m_system.ligands) ligand = place[ligand];
    for (std::size_t i = m_system.species.size(); i-- > 1;) {
      std::swap(m_system.species[i], m_system.species[static_cast<std::size_t>(m_dice.pick(0, static_cast<int>(i)))]);
    }
  }

  Dice m_dice;
  RandomLiquor m_out;
  ChemicalSystem m_system;
  LiquorInput m_input;
  Drawn m_state;
  std::vector<std::size_t> m_metals;
  std::optional<std::size_t> m_balance, m_inert;
  bool m_closedByOther = false, m_sampled = false, m_paired = false;
  double m_ownShare = 1.0;
  std::vector<double> m_drawnFree, m_drawnMetal;
  std::vector<Row> m_rows;
};

}  // namespace

std::string RandomLiquor::describe() const {
  std::ostringstream text;
  text.precision(17);
  text << "seed " << seed << ", " << system.components.size() << " components, " << system.species.size()
       << " species, " << input.temperature_C << " degC";
  if (input.sampleTemperature_C) text << " (sample " << *input.sampleTemperature_C << ")";
  for (const auto& name : cells) text << ", " << name;
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    text << "; " << system.components[i].formula << " = " << input.value[i];
  }
  return text.str();
}

RandomLiquor randomLiquor(std::uint64_t seed) { return Maker(seed).make(); }

RandomLiquor withOtherAsComponent(RandomLiquor liquor) {
  Dice dice(liquor.seed + 77);
  Component other;
  for (const Component& component : liquor.system.components) {
    if (component.setBy != SetBy::Balance || component.other.empty()) continue;
    other.formula = component.other;
    other.charge = component.otherCharge;
  }
  if (other.formula.empty()) return liquor;
  other.setBy = dice.chance(0.5) ? SetBy::Total : SetBy::Fixed;
  liquor.system.components.push_back(other);
  liquor.input.value.push_back(dice.chance(0.3) ? 0.0 : dice.logUniform(1e-6, 0.3));
  liquor.cells.push_back("other as component");
  return liquor;
}

std::vector<std::uint64_t> regressionSeeds() {
  std::ifstream file(TW_SOURCE_DIR "/tests/property/regressions/seeds.txt");
  if (!file) throw std::runtime_error("tests/property/regressions/seeds.txt is not there");
  std::vector<std::uint64_t> seeds;
  for (std::string line; std::getline(file, line);) {
    if (!line.empty() && line[0] != '#') seeds.push_back(std::stoull(line));
  }
  return seeds;
}

std::vector<std::string> allCells() {
  std::vector<std::string> cells;
  for (const char* model : {"conditional", "davies"}) {
    for (const char* kind :
         {"total", "free", "excess", "excess+per_metal", "ph", "hydroxide", "hydroxide+per_metal",
          "proton_total", "fixed", "balance+", "balance-", "balance+ by other", "balance- by other", "zero",
          "cooled sample"}) {
      cells.push_back(std::string(kind) + "/" + model);
    }
  }
  return cells;
}

}  // namespace tw::test
