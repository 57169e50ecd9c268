// SPDX-License-Identifier: GPL-3.0-or-later
// From readings to the rows of a problem: what is known beforehand is worked in, what cannot be is a fault.
#include <cmath>
#include <stdexcept>

#include "model/closed_liquor.hpp"
#include "model/physical.hpp"

namespace tw::model {

namespace {

Fault faulty(const char* code, const Component& component, const std::string& detail) {
  return {code, component.formula, detail, "", FaultKind::Input};
}

/// Totals of the metals n_k stands for, where all of them are stated.
std::optional<double> knownSum(const ChemicalSystem& system, const LiquorInput& input,
                               const std::vector<ComponentTerm>& perMetal) {
  double sum = 0.0;
  for (const ComponentTerm& term : perMetal) {
    const SetBy setBy = system.components[term.component].setBy;
    if (setBy != SetBy::Total && setBy != SetBy::Fixed) return std::nullopt;
    sum += term.nu * input.value[term.component];
  }
  return sum;
}

bool isMetal(const ChemicalSystem& system, std::size_t i) {
  return system.components[i].isMetal || i == system.metal;
}

Result<ComponentRow> protonRow(const ChemicalSystem& system, const LiquorInput& input) {
  const Component& proton = system.components[system.proton];
  const double value = input.value[system.proton];
  switch (proton.setBy) {
    case SetBy::Ph:
      return ComponentRow{RowKind::Activity, -value * kLn10, {}};
    case SetBy::ProtonTotal:
      return ComponentRow{RowKind::Total, value, {}};
    case SetBy::Hydroxide:
      break;
    default:
      return fail(faulty("infeasible", proton, "H^+ is set by ph, hydroxide or proton_total only"));
  }
  if (value < 0.0) return fail(faulty("negative_total", proton, "the concentration of OH^- is negative"));
  const auto bound = knownSum(system, input, proton.perMetal);
  if (!bound) return ComponentRow{RowKind::Hydroxide, value, proton.perMetal};
  if (value - *bound <= 0.0) {
    return fail(faulty("infeasible", proton,
                       "no free OH^- is left: " + std::to_string(value) + " mol/L stated, " +
                           std::to_string(*bound) + " mol/L of it counted to the metals"));
  }
  return ComponentRow{RowKind::Hydroxide, value - *bound, {}};
}

Result<ComponentRow> otherRow(const ChemicalSystem& system, const Layout& layout, const LiquorInput& input,
                              std::size_t i) {
  const Component& component = system.components[i];
  if (component.setBy == SetBy::Balance) {
    return ComponentRow{layout.balance == i ? RowKind::Balance : RowKind::Absent, 0.0, {}};
  }
  const double value = input.value[i];
  if (value < 0.0) {
    return fail(faulty("negative_total", component, std::to_string(value) + " mol/L is negative"));
  }
  const ComponentRow absent{RowKind::Absent, 0.0, {}};
  switch (component.setBy) {
    case SetBy::Total:
    case SetBy::Fixed:
      return value == 0.0 ? absent : ComponentRow{RowKind::Total, value, {}};
    case SetBy::Free:
      if (isMetal(system, i)) return fail(faulty("infeasible", component, "a metal cannot be set by free"));
      return value == 0.0 ? absent : ComponentRow{RowKind::Free, value, {}};
    case SetBy::Excess:
      break;
    default:
      return fail(faulty("infeasible", component, "only H^+ is set by ph, hydroxide or proton_total"));
  }
  const auto bound = knownSum(system, input, component.perMetal);
  if (!bound) return ComponentRow{RowKind::Excess, value, component.perMetal};
  if (value + *bound < 0.0) return fail(faulty("negative_total", component, "the total comes out negative"));
  return value + *bound == 0.0 ? absent : ComponentRow{RowKind::Total, value + *bound, {}};
}

/// An excess over metals that are not there is a total.
void settleExcess(Problem& problem) {
  for (ComponentRow& row : problem.rows) {
    if (row.kind != RowKind::Excess) continue;
    bool anyMetal = false;
    for (const ComponentTerm& term : row.perMetal) {
      anyMetal = anyMetal || problem.rows[term.component].kind != RowKind::Absent;
    }
    if (anyMetal) continue;
    row = row.value == 0.0 ? ComponentRow{} : ComponentRow{RowKind::Total, row.value, {}};
  }
}

}  // namespace

Result<Problem> statedProblem(const ChemicalSystem& system, const Layout& layout, const LiquorInput& input) {
  if (input.value.size() != system.components.size()) {
    throw std::logic_error("LiquorInput has not one value per component");
  }
  Problem problem;
  problem.rows.resize(layout.components);
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    const bool closes = system.components[i].setBy == SetBy::Balance;
    if (!closes && !std::isfinite(input.value[i])) {
      return fail(faulty("not_a_number", system.components[i], "the value is not a finite number"));
    }
    Result<ComponentRow> row =
        i == system.proton ? protonRow(system, input) : otherRow(system, layout, input, i);
    if (!row) return fail(std::move(row.error()));
    problem.rows[i] = std::move(*row);
  }
  settleExcess(problem);
  return problem;
}

}  // namespace tw::model
