// SPDX-License-Identifier: GPL-3.0-or-later
// Charge and element balance of a row. Inside io/recipe only.
#pragma once

#include <map>
#include <optional>
#include <string>

#include "io/recipe/formula.hpp"

namespace tw::io {

class TableReader;

/// Balances `product` (a species, or a solid of charge 0) against `coefficients`, H2O included; faults
/// `bad_formula`, `charge_unbalanced`, `element_unbalanced` on `key` of the row.
void checkBalance(TableReader& row, const std::string& key, const Formula& product,
                  const std::map<std::string, double>& coefficients);

/// Parses a name out of a row; a fault on `key` when it is none.
std::optional<Formula> formulaIn(TableReader& row, const std::string& key, const std::string& text);

}  // namespace tw::io
