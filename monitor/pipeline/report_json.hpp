// SPDX-License-Identifier: GPL-3.0-or-later
// Reads a stored `solve --json` object back, as far as judging and showing need it: after a restart the
// condition follows from the stored result and today's limits, without solving again.
#pragma once

#include <map>
#include <string>
#include <vector>

#include "io/recipe/recipe.hpp"
#include "io/wire/api.hpp"
#include "model/liquor.hpp"
#include "model/result.hpp"

namespace tw::monitor {

struct StoredReport {
  /// Filled: temperature, ph, pM, reliable, warnings, solids, margins with their bySolid and byLigand.
  model::LiquorReport report;
  std::map<std::string, double> sigma;  ///< of margins, by margin name, where the object has it
};

/// Fault `stored_result_unreadable`.
model::Result<StoredReport> readReport(const std::string& solveJson);

/// Values of a result (`ResultRow::values`) by channel or ratio id, each in its own unit; empty when
/// unreadable.
[[nodiscard]] std::map<std::string, double> readValues(const std::string& valuesJson);

/// Margins as the screens draw them, in FORMATS' order.
[[nodiscard]] std::vector<io::wire::MarginView> marginViews(const StoredReport& stored,
                                                            const model::MarginLimits& limits);

/// Guards with the values of a result beside them.
[[nodiscard]] std::vector<model::GuardValue> guardsOf(const io::Recipe& recipe,
                                                      const std::map<std::string, double>& values);

}  // namespace tw::monitor
