// SPDX-License-Identifier: GPL-3.0-or-later
// From the liquor solved last to the plain values of a LiquorReport.
#pragma once

#include "model/closed_liquor.hpp"
#include "model/liquor.hpp"
#include "model/margins.hpp"

namespace tw::model {

/// Everything but margins, warnings and the totals of the opened liquor, for the state `liquor.now()`.
LiquorReport reportOf(const ClosedLiquor& liquor);

/// Adds warnings, no_enthalpy and `reliable` for a finished report (EQUATIONS.md section 7).
void addWarnings(const ChemicalSystem& system, const LiquorInput& input, LiquorReport& report);

}  // namespace tw::model
