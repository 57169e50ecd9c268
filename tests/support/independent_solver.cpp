// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/support/independent_solver.hpp"

#include <boost/multiprecision/float128.hpp>

#include "tests/support/independent_margins.hpp"

namespace tw::test {
namespace {

using namespace independent;
using Quad = boost::multiprecision::float128;  // 34 digits

Mode modeOf(SetBy setBy) {
  switch (setBy) {
    case SetBy::Free:
      return Mode::Free;
    case SetBy::Excess:
      return Mode::Excess;
    case SetBy::Ph:
      return Mode::Activity;
    case SetBy::Hydroxide:
      return Mode::Hydroxide;
    case SetBy::Balance:
      return Mode::Charge;
    case SetBy::Total:
    case SetBy::ProtonTotal:
    case SetBy::Fixed:
      break;
  }
  return Mode::Total;
}

template <class R>
Conditions<R> asAnalysed(const ChemicalSystem& system, const model::LiquorInput& input) {
  Conditions<R> k;
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    const auto& component = system.components[i];
    Mode mode = modeOf(component.setBy);
    R value = input.value[i];
    if (mode == Mode::Activity) value = -value;
    if (mode == Mode::Charge) {
      value = 0;
      k.balance = i;
      k.other = component.other;
      k.otherCharge = component.otherCharge;
    }
    if ((mode == Mode::Total || mode == Mode::Free) && i != system.proton && value == 0) {
      mode = Mode::Absent;
    }
    if (mode == Mode::Excess && value == 0) {
      bool nothing = true;
      for (const auto& term : component.perMetal) nothing = nothing && input.value[term.component] == 0.0;
      if (nothing) mode = Mode::Absent;
    }
    k.mode.push_back(mode);
    k.value.push_back(value);
    k.perMetal.push_back(component.perMetal);
  }
  return k;
}

std::vector<Quad> totalsOf(const Chemistry<Quad>& chem, const State<Quad>& s) {
  std::vector<Quad> totals(chem.n, Quad(0));
  for (std::size_t j = 0; j < s.c.size(); ++j) {
    for (std::size_t i = 0; i < chem.n; ++i) totals[i] += Quad(chem.species[j].nu[i]) * s.c[j];
  }
  for (std::size_t i = 0; i < chem.n; ++i) {
    if (s.absent[i]) totals[i] = 0;
  }
  return totals;
}

double asDouble(const Quad& x) { return static_cast<double>(x); }

void fill(Reference& out, const ChemicalSystem& system, const Chemistry<Quad>& chem,
          const State<Quad>& s) {
  const Quad toLg = ln10<Quad>();
  out.ionicStrength_mol_L = asDouble(s.I);
  out.ph = asDouble(-s.x[system.proton] / toLg);
  for (std::size_t i = 0; i < chem.n; ++i) {
    std::optional<double> p;
    if (!s.absent[i]) p = asDouble(-s.x[i] / toLg);
    out.pComponent.push_back(p);
  }
  out.pM = out.pComponent[system.metal];
  out.hydroxide_mol_L = asDouble(s.c[chem.hydroxide()]);
  for (std::size_t j = chem.n + 1; j < s.c.size(); ++j) out.species_mol_L.push_back(asDouble(s.c[j]));
  for (const auto& total : totalsOf(chem, s)) out.totals_mol_L.push_back(asDouble(total));
  for (const std::size_t ligand : system.ligands) {
    Quad sum = 0;
    for (std::size_t j = 0; j < s.c.size(); ++j) {
      bool metal = false;
      for (std::size_t i = 0; i < chem.n; ++i) {
        const bool isMetal = i == system.metal || system.components[i].isMetal;
        metal = metal || (isMetal && chem.species[j].nu[i] != 0.0);
      }
      if (!metal && chem.species[j].nu[ligand] > 0.0) sum += Quad(chem.species[j].nu[ligand]) * s.c[j];
    }
    out.freeLigands_mol_L.push_back(asDouble(sum));
  }
  for (const auto& solid : chem.solids) {
    Quad lg = -solid.lgKs;
    bool present = true;
    for (std::size_t i = 0; i < chem.n; ++i) {
      if (solid.nu[i] == 0.0) continue;
      present = present && !s.absent[i];
      lg += Quad(solid.nu[i]) * s.x[i] / toLg;
    }
    out.lgSaturation.push_back(present ? std::optional<double>(asDouble(lg)) : std::nullopt);
  }
}

}  // namespace

Reference solveIndependently(const ChemicalSystem& system, const model::LiquorInput& input,
                             bool withMargins) {
  Reference out;
  const bool cooled = system.phTakenAtSample && input.sampleTemperature_C &&
                      *input.sampleTemperature_C != input.temperature_C;
  const Chemistry<Quad> bath(system, Quad(input.temperature_C));
  const Chemistry<Quad> first(system, Quad(cooled ? *input.sampleTemperature_C : input.temperature_C));
  Equilibrium<Quad> analysis(first);
  const Conditions<Quad> given = asAnalysed<Quad>(system, input);
  State<Quad> s = analysis.solve(given);
  if (!s.ok) {
    out.fault = "no liquor with these values";
    return out;
  }
  out.condition = analysis.condition(given, s);
  out.other_mol_L = asDouble(s.other);
  out.closedByOther = s.byOther;
  const std::vector<Quad> totals = totalsOf(first, s);
  if (cooled) {
    Conditions<Quad> k;
    k.perMetal.assign(bath.n, {});
    k.value = totals;
    for (std::size_t i = 0; i < bath.n; ++i) k.mode.push_back(s.absent[i] ? Mode::Absent : Mode::Total);
    k.inertCharge = s.other * Quad(given.otherCharge);
    k.inertIonic = s.other * Quad(given.otherCharge * given.otherCharge) / 2;
    Equilibrium<Quad> closed(bath);
    s = closed.solve(k, &s);
    if (!s.ok) {
      out.fault = "no liquor at bath temperature";
      return out;
    }
    out.condition = std::max(out.condition, closed.condition(k, s));
  }
  fill(out, system, bath, s);
  if (!withMargins) return out;

  Closed closed;
  closed.system = &system;
  closed.t = input.temperature_C;
  closed.ph = static_cast<Scan>(Quad(-s.x[system.proton] / ln10<Quad>()));
  for (const Quad& total : totals) closed.totals.push_back(static_cast<Scan>(total));
  closed.other = static_cast<Scan>(Quad(out.other_mol_L));
  closed.otherCharge = given.otherCharge;
  closed.otherName = given.other;
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    if (given.other.empty() || system.components[i].formula != given.other) continue;
    closed.otherComponent = i;
    closed.otherLeast = input.value[i];
  }
  findMargins(closed, out);
  return out;
}

double independentResidual(const ChemicalSystem& system, const model::LiquorInput& input,
                           const model::LiquorReport& report) {
  const Chemistry<Scan> chem(system, Scan(input.temperature_C));
  const bool cooled = system.phTakenAtSample && input.sampleTemperature_C &&
                      *input.sampleTemperature_C != input.temperature_C;
  Conditions<Scan> k = asAnalysed<Scan>(system, input);
  State<Scan> s;
  s.I = report.ionicStrength_mol_L;
  s.x.assign(chem.n, Scan(0));
  s.absent.assign(chem.n, true);
  for (std::size_t i = 0; i < chem.n; ++i) {
    for (const auto& amount : report.species) {
      if (amount.formula != system.components[i].formula || !amount.lgActivity) continue;
      s.x[i] = Scan(*amount.lgActivity) * ln10<Scan>();
      s.absent[i] = false;
    }
  }
  s.byOther = k.balance && s.absent[*k.balance];
  bool inert = s.byOther;
  for (const auto& component : system.components) inert = inert && component.formula != k.other;
  for (const auto& amount : report.species) {
    if (inert && amount.formula == k.other) s.other = amount.mol_L;
  }
  if (cooled) k.balance.reset();  // every total is known by then, the charge with them
  for (std::size_t i = 0; i < chem.n; ++i) {
    if (cooled) {
      // Closed at the sample's temperature: only the totals that were found there still hold.
      k.mode[i] = s.absent[i] ? Mode::Absent : Mode::Total;
      k.value[i] = report.totals_mol_L[i].second;
    }
    const bool closes = !cooled && k.balance && s.absent[*k.balance] && system.components[i].formula == k.other;
    if (closes) continue;
    if (k.mode[i] == Mode::Absent && !s.absent[i]) return 1.0;
    if (k.mode[i] != Mode::Absent && k.mode[i] != Mode::Charge && s.absent[i]) return 1.0;
  }
  Equilibrium<Scan> equilibrium(chem);
  return static_cast<double>(equilibrium.worstResidual(k, s));
}

double independentDensity_kg_L(double t) { return asDouble(density<Quad>(t)); }
double independentPermittivity(double t) { return asDouble(permittivity<Quad>(t)); }
double independentA(double t) { return asDouble(debyeHueckel<Quad>(t)); }
double independentPKw(double t) { return asDouble(pKw<Quad>(t)); }

RowAtTemperature independentRow(const ChemicalSystem& system, const model::Reaction& row,
                                std::optional<int> productCharge, double t_C) {
  const Row<Quad> at = rowAt<Quad>(system, row, productCharge, t_C);
  return {asDouble(at.lgK), at.nu};
}

double independentLgGamma(model::ActivityModel model, int charge, double setschenow, double I,
                          double t_C) {
  return asDouble(lgGamma<Quad>(model, charge, setschenow, I, debyeHueckel<Quad>(t_C)));
}

}  // namespace tw::test
