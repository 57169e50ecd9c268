// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/row_checks.hpp"

#include <fmt/format.h>

#include <cmath>

#include "io/recipe/toml_reader.hpp"

namespace tw::io {
namespace {

/// Coefficients are small decimals such as 0.5: what is left over beyond this is no rounding.
constexpr double kBalanceTolerance = 1e-6;

}  // namespace

std::optional<Formula> formulaIn(TableReader& row, const std::string& key, const std::string& text) {
  auto parsed = parseFormula(text);
  if (parsed) return *std::move(parsed);
  row.fault(key, parsed.error().code, parsed.error().detail);
  return std::nullopt;
}

void checkBalance(TableReader& row, const std::string& key, const Formula& product,
                  const std::map<std::string, double>& coefficients) {
  double charge = 0.0;
  std::map<std::string, double> elements;
  bool opaque = product.opaque;
  for (const auto& [name, nu] : coefficients) {
    const auto part = formulaIn(row, key, name);
    if (!part) return;
    charge += nu * part->charge;
    opaque = opaque || part->opaque;
    for (const auto& [symbol, atoms] : part->elements) elements[symbol] += nu * atoms;
  }
  if (std::abs(charge - product.charge) > kBalanceTolerance) {
    row.fault(
        key, "charge_unbalanced",
        fmt::format("{} has charge {:+d}, {} adds up to {:+g}", product.text, product.charge, key, charge));
  }
  if (opaque) return;
  for (const auto& [symbol, atoms] : product.elements) elements[symbol] -= atoms;
  for (const auto& [symbol, atoms] : elements) {
    if (std::abs(atoms) <= kBalanceTolerance) continue;
    const double inProduct = product.elements.contains(symbol) ? product.elements.at(symbol) : 0.0;
    row.fault(key, "element_unbalanced",
              fmt::format("{} holds {:g} {}, {} adds up to {:g}; state H2O where water takes part",
                          product.text, inProduct, symbol, key, inProduct + atoms));
  }
}

}  // namespace tw::io
