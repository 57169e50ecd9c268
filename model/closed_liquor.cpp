// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/closed_liquor.hpp"

#include <cmath>
#include <limits>
#include <utility>

#include "model/activity.hpp"
#include "model/physical.hpp"

namespace tw::model {

ClosedLiquor::ClosedLiquor(const ChemicalSystem& system, Layout layout)
    : m_system(system), m_layout(std::move(layout)), m_solver(m_layout) {
  m_moved.rows.resize(m_layout.components);
}

Result<std::unique_ptr<ClosedLiquor>> ClosedLiquor::open(const ChemicalSystem& system,
                                                         const LiquorInput& input) {
  if (const auto ok = checkTemperature(input.temperature_C, "temperature"); !ok) return fail(ok.error());
  const bool sampled = system.phTakenAtSample && input.sampleTemperature_C;
  if (sampled) {
    const auto ok = checkTemperature(*input.sampleTemperature_C, "sample_temperature");
    if (!ok) return fail(ok.error());
  }
  Result<Layout> layout = layOut(system);
  if (!layout) return fail(std::move(layout.error()));
  std::unique_ptr<ClosedLiquor> liquor(new ClosedLiquor(system, std::move(*layout)));
  if (auto fault = liquor->solveStated(input)) return fail(std::move(*fault));
  return liquor;
}

std::optional<Fault> ClosedLiquor::solveStated(const LiquorInput& input) {
  Result<Problem> stated = statedProblem(m_system, m_layout, input);
  if (!stated) return stated.error();
  m_stated = std::move(*stated);
  m_temperature_C = input.temperature_C;
  const bool sampled = m_system.phTakenAtSample && input.sampleTemperature_C;
  setTemperature(sampled ? *input.sampleTemperature_C : m_temperature_C);
  m_outcome = m_solver.solve(m_constants, m_stated, m_start);
  if (m_outcome.status != SolveStatus::Solved) return faultOf(m_outcome);
  close();
  if (!sampled) return std::nullopt;

  m_phMeasured = m_ph;
  m_phMeasuredAt_C = input.sampleTemperature_C;
  const int iterations = m_outcome.iterations;
  if (!moveClosed(m_temperature_C, 1.0, m_start)) return faultOf(m_outcome);
  m_outcome.iterations += iterations;
  m_ph = -m_solver.lnActivity(m_layout.proton) / kLn10;
  return std::nullopt;
}

void ClosedLiquor::close() {
  m_totals.assign(m_layout.components, 0.0);
  for (std::size_t i = 0; i < m_layout.components; ++i) {
    const ComponentRow& row = m_stated.rows[i];
    const bool byBalance = m_start.byOther && m_layout.other == i;
    const bool stated = row.kind == RowKind::Total && !byBalance;
    if (m_solver.present(i)) m_totals[i] = stated ? row.value : m_solver.total(i);
  }
  if (m_layout.other && !m_layout.otherIsInert) {
    const ComponentRow& row = m_stated.rows[*m_layout.other];
    m_otherLeast = row.kind == RowKind::Total ? row.value : m_start.byOther ? 0.0 : m_totals[*m_layout.other];
  }
  m_ph = -m_solver.lnActivity(m_layout.proton) / kLn10;
}

void ClosedLiquor::setTemperature(double t_C) { constantsAt(m_system, m_layout, t_C, m_constants); }

bool ClosedLiquor::moveHeld(const Totals& totals, Estimate& estimate) {
  if (m_constants.t_C != m_temperature_C) setTemperature(m_temperature_C);
  const bool closes = m_layout.balance && m_stated.rows[*m_layout.balance].kind == RowKind::Balance;
  for (std::size_t i = 0; i < m_layout.components; ++i) {
    if (i == m_layout.proton) continue;
    ComponentRow& row = m_moved.rows[i];
    row.value = totals[i];
    if (closes && m_layout.other == i) row.value = m_otherLeast;
    row.kind = row.value == 0.0 ? RowKind::Absent : RowKind::Total;
    if (closes && m_layout.balance == i) row = {RowKind::Balance, 0.0, {}};
  }
  m_outcome = m_solver.solve(m_constants, m_moved, estimate);
  return m_outcome.status == SolveStatus::Solved;
}

bool ClosedLiquor::moveToPh(double ph, const Totals& totals, Estimate& estimate) {
  m_moved.rows[m_layout.proton] = {RowKind::Activity, -ph * kLn10, {}};
  return moveHeld(totals, estimate);
}

bool ClosedLiquor::moveToHydroxide(double hydroxide_mol_L, const Totals& totals, Estimate& estimate) {
  if (!(hydroxide_mol_L > 0.0)) return false;
  m_moved.rows[m_layout.proton] = {RowKind::Hydroxide, hydroxide_mol_L, {}};
  return moveHeld(totals, estimate);
}

bool ClosedLiquor::moveClosed(double t_C, double factor, Estimate& estimate) {
  if (m_constants.t_C != t_C) setTemperature(t_C);
  for (std::size_t i = 0; i < m_layout.components; ++i) {
    ComponentRow& row = m_moved.rows[i];
    row.value = m_totals[i] / factor;
    row.kind = row.value == 0.0 && i != m_layout.proton ? RowKind::Absent : RowKind::Total;
  }
  m_outcome = m_solver.solve(m_constants, m_moved, estimate);
  return m_outcome.status == SolveStatus::Solved;
}

double ClosedLiquor::lgSaturation(std::size_t s) const {
  double lnProduct = -m_constants.lnKs[s];
  for (std::size_t i = 0; i < m_layout.components; ++i) {
    const double nu = m_layout.solidNuOf(s, i);
    if (nu == 0.0) continue;
    if (!m_solver.present(i)) return std::numeric_limits<double>::quiet_NaN();
    lnProduct += nu * m_solver.lnActivity(i);
  }
  return lnProduct / kLn10;
}

Fault ClosedLiquor::faultOf(const SolveOutcome& outcome) const {
  switch (outcome.status) {
    case SolveStatus::ChargeCannotClose:
      return {"charge_cannot_close", m_layout.componentFormula[m_layout.balance.value_or(m_layout.proton)],
              "the charge to close has the sign of this ion itself and no other ion is named", "",
              FaultKind::Input};
    case SolveStatus::IonicStrengthOutOfRange:
      return {"ionic_strength_out_of_range", "ionic_strength",
              "no liquor of these values has an ionic strength up to " +
                  std::to_string(static_cast<int>(kLargestIonicStrength)) + " mol/L",
              "", FaultKind::Input};
    case SolveStatus::NoSolution:
    case SolveStatus::Solved:
      break;
  }
  return {"infeasible", m_layout.componentFormula[m_layout.proton], "no liquor has these values", "",
          FaultKind::Input};
}

}  // namespace tw::model
