// SPDX-License-Identifier: GPL-3.0-or-later
// A few words to write down a chemical system and its analysis in a test.
#pragma once

#include <algorithm>
#include <stdexcept>
#include <string>
#include <utility>
#include <vector>

#include "model/analysis.hpp"

namespace tw::test {

/// Builds a ChemicalSystem component by component; H^+ is there from the start. Concentrations mol/L.
class BathBuilder {
 public:
  using Terms = std::vector<std::pair<std::string, double>>;

  explicit BathBuilder(model::ActivityModel activityModel) {
    m_system.activityModel = activityModel;
    m_system.proton = add(model::kProton, 1, model::SetBy::Ph, 7.0);
  }
  BathBuilder& ph(double value) {
    m_input.value[m_system.proton] = value;
    return *this;
  }
  BathBuilder& metal(const std::string& formula, int z, double total) {
    m_system.metal = add(formula, z, model::SetBy::Total, total);
    return *this;
  }
  BathBuilder& ligandTotal(const std::string& formula, int z, double total) {
    m_system.ligands.push_back(add(formula, z, model::SetBy::Total, total));
    return *this;
  }
  BathBuilder& ligandFree(const std::string& formula, int z, double free) {
    m_system.ligands.push_back(add(formula, z, model::SetBy::Free, free));
    return *this;
  }
  BathBuilder& fixed(const std::string& formula, int z, double total) {
    add(formula, z, model::SetBy::Fixed, total);
    return *this;
  }
  /// `terms` may name OH^- and H2O; they go to their own places.
  BathBuilder& complex(const std::string& formula, int z, const Terms& terms, double lgK) {
    model::Species species;
    species.formula = formula;
    species.charge = z;
    species.formation = reaction(terms, lgK);
    m_system.species.push_back(species);
    return *this;
  }
  /// M + n H2O = M(OH)n + n H^+ for each cumulative lg *beta in turn.
  BathBuilder& hydroxo(const std::string& metal, int z, const std::vector<double>& lgBeta) {
    for (std::size_t k = 0; k < lgBeta.size(); ++k) {
      const int n = static_cast<int>(k) + 1;
      complex(metal + "(OH)" + std::to_string(n), z - n, {{metal, 1}, {model::kWater, n}, {model::kProton, -n}},
              lgBeta[k]);
    }
    return *this;
  }
  BathBuilder& solid(const std::string& id, const Terms& gives, double lgK) {
    model::Solid solid;
    solid.id = id;
    solid.dissolution = reaction(gives, lgK);
    m_system.solids.push_back(solid);
    return *this;
  }

  /// Throws on a fault: these liquors are all feasible.
  model::LiquorReport solve(double t_C, bool margins = false) {
    m_input.temperature_C = t_C;
    auto report = model::analyse(m_system, m_input, {.margins = margins});
    if (!report) throw std::runtime_error(report.error().code + " " + report.error().subject);
    return *report;
  }
  [[nodiscard]] const model::ChemicalSystem& system() const { return m_system; }
  [[nodiscard]] const model::LiquorInput& input() const { return m_input; }

 private:
  std::size_t add(const std::string& formula, int z, model::SetBy setBy, double value) {
    model::Component component;
    component.formula = formula;
    component.charge = z;
    component.setBy = setBy;
    m_system.components.push_back(component);
    m_input.value.push_back(value);
    return m_system.components.size() - 1;
  }
  model::Reaction reaction(const Terms& terms, double lgK) const {
    model::Reaction row;
    row.K.lgK = lgK;
    for (const auto& [formula, nu] : terms) {
      if (formula == model::kHydroxide) {
        row.hydroxide = nu;
        continue;
      }
      if (formula == model::kWater) {
        row.water = nu;
        continue;
      }
      const auto& all = m_system.components;
      const auto at = std::find_if(all.begin(), all.end(), [&](const auto& c) { return c.formula == formula; });
      if (at == all.end()) throw std::logic_error("no component " + formula);
      row.terms.push_back({static_cast<std::size_t>(at - all.begin()), nu});
    }
    return row;
  }

  model::ChemicalSystem m_system;
  model::LiquorInput m_input;
};

/// mol/L of a species by formula; throws when there is none.
inline double amount(const model::LiquorReport& report, const std::string& formula) {
  for (const auto& species : report.species) {
    if (species.formula == formula) return species.mol_L;
  }
  throw std::logic_error("no species " + formula);
}
/// Total of a component by formula, mol/L.
inline double total(const model::LiquorReport& report, const std::string& formula) {
  for (const auto& [name, value] : report.totals_mol_L) {
    if (name == formula) return value;
  }
  throw std::logic_error("no component " + formula);
}

}  // namespace tw::test
