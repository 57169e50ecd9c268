// SPDX-License-Identifier: GPL-3.0-or-later
// Units that may stand in recipes, headers and requests (FORMATS section 3), with their dimensions, so
// that worksheets can be checked and headers converted. Factors: NIST SP 811 (from memory) where exact.
#pragma once

#include <array>
#include <optional>
#include <string>

#include "model/result.hpp"

namespace tw::io {

/// Exponents of: mass (g), amount (mol), volume (L), charge amount (mEq counts as mol), time (h),
/// current (A), potential (mV), temperature (K), pH.
struct Dimension {
  std::array<int, 8> exponent{};  ///< g, mol, L, h, A, mV, K, pH
  friend bool operator==(const Dimension&, const Dimension&) = default;
};

/// value in base units = value * factor + offset (offset only for degC and degF; base K differences are
/// never mixed with readings: a temperature reading converts to degC).
struct Unit {
  std::string name;
  Dimension dimension;
  double factor = 1.0;
  double offset = 0.0;
};

/// "g/L mg/L mol/L mmol/L oz/gal g/mol mol mmol mEq mV A A.h % degC degF K pH mL L US-gal kg g lb h min";
/// empty = dimensionless. nullopt when unknown.
std::optional<Unit> findUnit(const std::string& name);
/// A value to base units (temperatures to degC) and back.
[[nodiscard]] double toBase(const Unit& unit, double value);
[[nodiscard]] double fromBase(const Unit& unit, double base);
/// Every unit's name, blank between: for messages.
[[nodiscard]] std::string unitNames();
/// "g/L", "mol^2/L", "no unit": for messages.
[[nodiscard]] std::string dimensionText(const Dimension& dimension);

/// Converts between two units; mass and amount concentrations convert through `formulaMass` (g/mol, 0 =
/// none). Fault `unit_unknown` or `unit_mismatch` with both units in the detail.
model::Result<double> convert(double value, const std::string& from, const std::string& to,
                              double formulaMass = 0.0);

}  // namespace tw::io
