// SPDX-License-Identifier: GPL-3.0-or-later
// The expression of a worksheet: + - * / ( ), numbers, names; every value carries its unit.
//
// Channel ids may hold a hyphen ("free-cyanide"): at each place the
// longest known name wins, so a subtraction of such names wants blanks around the minus.
#pragma once

#include <map>
#include <set>
#include <string>

#include "io/recipe/recipe.hpp"
#include "io/recipe/units.hpp"
#include "model/result.hpp"

namespace tw::io {

/// A number in base units (g, mol, L, h, A, mV, degC, pH) with its dimension.
struct Quantity {
  double value = 0.0;
  Dimension dimension;
};

struct Evaluation {
  Quantity result;
  std::set<std::string> used;  ///< names the expression reads
};

/// Faults `bad_expression` (syntax), `unknown_name`, `unit_mismatch` (unlike things added). A division by
/// zero gives an infinite value, not a fault: only the dimension may be wanted.
model::Result<Evaluation> evaluateExpression(const std::string& expression,
                                             const std::map<std::string, Quantity>& names);

/// What a worksheet's names stand for, all values 1: for checking. Units that do not exist are left out.
[[nodiscard]] std::map<std::string, Quantity> worksheetNames(const Worksheet& worksheet,
                                                             const std::vector<Channel>& channels,
                                                             const std::string& ownChannel);

}  // namespace tw::io
