// SPDX-License-Identifier: GPL-3.0-or-later
// Rows of equilibrium data (FORMATS section 2): a library of a directory, or a recipe's own rows.
//
// Checked at load: charge balance of every row, element balance where all names are element formulas,
// source and provenance, duplicates within one set.
#pragma once

#include <filesystem>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "model/result.hpp"
#include "model/system.hpp"

namespace tw::io {

class TableReader;

inline constexpr const char* kConstantsFormat = "tankward-constants/1";
inline constexpr const char* kDefaultSet = "I0";  ///< extrapolated to zero ionic strength

struct ComponentRow {
  std::string formula, title, where;
  double molarMass = 0.0;  ///< g/mol; 0 = not stated
};

/// A species (coefficients: what it is made from) or a solid (what one formula unit gives).
struct ReactionRow {
  std::string name, title, set = kDefaultSet, source, provenance, note, where;
  bool isSolid = false;
  std::map<std::string, double> coefficients;
  model::Constant K;
  double setschenow = 0.0;  ///< L/mol, species only
  double molarMass = 0.0;   ///< g/mol, solids only
};

struct GasRow {
  std::string id, of, source, provenance, note, where;
  double lgH = 0.0;  ///< lg(a/p), mol/L/atm, at T_C
  double T_C = 25.0;
  std::optional<double> dH_kJ_mol;
};

struct InteractionRow {
  std::string first, second, source, provenance, note, where;
  double epsilon = 0.0;  ///< kg/mol
};

struct Library {
  std::vector<ComponentRow> components;
  std::vector<ReactionRow> species, solids;
  std::vector<GasRow> gases;
  std::vector<InteractionRow> interactions;

  [[nodiscard]] const ComponentRow* component(const std::string& formula) const;
};

/// Every `*.toml` of the directory (not of its sub-folders), by file name.
model::Result<Library, model::Faults> loadConstants(const std::filesystem::path& directory);
/// One file of a library, alone.
model::Result<Library, model::Faults> loadConstantsFile(const std::filesystem::path& file);

/// Where the constants of a recipe are: `given`; else `constants/` beside the recipe; else the installed
/// library; else the source tree's. Fault `constants_missing` when there is none of them.
model::Result<std::filesystem::path> constantsDirectory(const std::filesystem::path& recipe,
                                                        const std::filesystem::path& given);

/// Reads the row tables ([[species]], [[solid]], [[gas]], [[interaction]]) of a document and appends
/// them; `ownRows` = a recipe's, which may define OH^-.
void readRows(TableReader& document, bool ownRows, Library& library);
/// Two rows of one name in one set.
void findDuplicates(const Library& library, model::Faults& faults);

}  // namespace tw::io
