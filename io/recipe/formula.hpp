// SPDX-License-Identifier: GPL-3.0-or-later
// Names of chemical things (FORMATS section 1): charge, and the elements where the name is a formula.
#pragma once

#include <map>
#include <string>

#include "model/result.hpp"

namespace tw::io {

/// A parsed name. Elements are empty and `opaque` is true where part of the name is a word or an
/// abbreviation that is no element formula ("citrate^3-", "Ni(EDTA)^2-"): only its charge is known.
struct Formula {
  std::string text;
  int charge = 0;
  bool opaque = false;
  std::map<std::string, double> elements;  ///< element symbol -> atoms per formula unit
};

/// "Cu(NH3)4^2+", "SO4^2-", "NH3", "citrate^3-", "NiHPO3·3H2O" ("." for the dot where H2O follows).
/// Fault `bad_formula` with the reason: unbalanced parenthesis, a charge that is not `^` digits? sign,
/// a character that belongs to no name.
model::Result<Formula> parseFormula(const std::string& text);

/// A solid's or gas's name without its form: "Cu(OH)2 fresh" -> "Cu(OH)2".
[[nodiscard]] std::string formulaOfSolid(const std::string& id);

/// g/mol from the standard atomic weights (IUPAC/CIAAW abridged 2021, from memory); 0 where the name is
/// opaque or holds an element without one. The electrons of a charge are not counted.
[[nodiscard]] double molarMass(const Formula& formula);

}  // namespace tw::io
