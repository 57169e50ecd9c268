// SPDX-License-Identifier: GPL-3.0-or-later
#include "model/analysis.hpp"

#include "model/closed_liquor.hpp"
#include "model/margins.hpp"
#include "model/report.hpp"

namespace tw::model {

Result<LiquorReport> analyse(const ChemicalSystem& system, const LiquorInput& input,
                             const AnalyseOptions& options) {
  Result<std::unique_ptr<ClosedLiquor>> opened = ClosedLiquor::open(system, input);
  if (!opened) return fail(std::move(opened.error()));
  ClosedLiquor& liquor = **opened;

  LiquorReport report = reportOf(liquor);
  for (std::size_t i = 0; i < system.components.size(); ++i) {
    report.totals_mol_L[i].second = liquor.totals()[i];
  }
  report.ph = liquor.ph();
  report.phMeasured = liquor.phMeasured();
  report.phMeasuredAt_C = liquor.phMeasuredAt_C();
  if (options.margins) {
    Margins margins = marginsOf(liquor);
    report.margins = std::move(margins.byKind);
    for (std::size_t k = 0; k < report.secondMetals.size(); ++k) {
      report.secondMetals[k].metalGain = std::move(margins.secondMetalGain[k]);
    }
  }
  addWarnings(system, input, report);
  return report;
}

}  // namespace tw::model
