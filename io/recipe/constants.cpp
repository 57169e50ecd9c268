// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/constants.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "io/recipe/row_checks.hpp"
#include "io/recipe/shipped.hpp"
#include "io/recipe/suggestion.hpp"
#include "io/recipe/toml_reader.hpp"

namespace tw::io {
namespace {

namespace fs = std::filesystem;
using model::Fault;
using model::Faults;

const Choices<std::string> kProvenances = {
    {"published", "published"}, {"common practice", "common practice"}, {"from memory", "from memory"}};

bool isWaterPart(const std::string& name) {
  return name == model::kProton || name == model::kHydroxide || name == model::kWater;
}

/// "cation|anion" of a 1:1 salt, or empty.
void checkMedium(TableReader& row, const std::string& medium) {
  if (medium.empty()) return;
  const auto bar = medium.find('|');
  if (bar != std::string::npos) {
    const auto cation = parseFormula(medium.substr(0, bar));
    const auto anion = parseFormula(medium.substr(bar + 1));
    if (cation && anion && cation->charge == 1 && anion->charge == -1) return;
  }
  row.fault(
      "medium", "bad_medium",
      fmt::format("medium is \"{}\"; expected cation|anion of a 1:1 salt, such as Na^+|ClO4^-", medium));
}

model::Constant readConstant(TableReader& row) {
  model::Constant K;
  K.lgK = row.requiredNumber("lg_K");
  K.sigma = row.notNegative("sigma").value_or(0.0);
  K.T_C = row.number("T_C", 25.0);
  K.I = row.notNegative("I").value_or(0.0);
  K.medium = row.text("medium", "");
  checkMedium(row, K.medium);
  K.dH_kJ_mol = row.number("dH_kJ_mol");
  K.dCp_J_mol_K = row.number("dCp_J_mol_K", 0.0);
  return K;
}

template <class Row>
void readOrigin(TableReader& reader, Row& row) {
  row.source = reader.requiredText("source");
  reader.require("provenance");
  row.provenance = reader.choice("provenance", kProvenances).value_or("");
  row.note = reader.text("note", "");
  row.where = reader.where();
}

/// OH^- is water less a proton; only a recipe may define it, and only so.
void checkReserved(TableReader& reader, const ReactionRow& row, bool ownRows) {
  if (!isWaterPart(row.name)) return;
  if (row.name != model::kHydroxide || !ownRows) {
    reader.fault("formula", "reserved_species",
                 fmt::format("{} cannot be a row here; {}", row.name,
                             row.name == model::kHydroxide ? "only a recipe of its own may define OH^-"
                                                           : "it is always there"));
    return;
  }
  const std::map<std::string, double> expected = {{model::kWater, 1.0}, {model::kProton, -1.0}};
  if (row.coefficients != expected) {
    reader.fault("from", "reserved_species", "OH^- must be made from = { \"H2O\" = 1, \"H^+\" = -1 }");
  }
}

void readSpecies(TableReader& reader, bool ownRows, Library& library) {
  ReactionRow row;
  row.name = reader.requiredText("formula");
  if (!row.name.empty()) reader.setSubject(fmt::format("species {}", row.name));
  row.title = reader.text("title", row.name);
  row.set = reader.text("set", kDefaultSet);
  reader.require("from");
  row.coefficients = reader.numbers("from");
  row.K = readConstant(reader);
  row.setschenow = reader.number("setschenow", 0.0);
  readOrigin(reader, row);
  if (const auto product = row.name.empty() ? std::nullopt : formulaIn(reader, "formula", row.name)) {
    if (!row.coefficients.empty()) checkBalance(reader, "from", *product, row.coefficients);
    checkReserved(reader, row, ownRows);
  }
  reader.finish();
  library.species.push_back(std::move(row));
}

void readSolid(TableReader& reader, Library& library) {
  ReactionRow row;
  row.isSolid = true;
  row.name = reader.requiredText("id");
  if (!row.name.empty()) reader.setSubject(fmt::format("solid {}", row.name));
  row.title = reader.text("title", row.name);
  row.set = reader.text("set", kDefaultSet);
  reader.require("gives");
  row.coefficients = reader.numbers("gives");
  row.K = readConstant(reader);
  reader.require("molar_mass");
  row.molarMass = reader.positive("molar_mass").value_or(0.0);
  readOrigin(reader, row);
  if (const auto product =
          row.name.empty() ? std::nullopt : formulaIn(reader, "id", formulaOfSolid(row.name))) {
    if (!row.coefficients.empty()) checkBalance(reader, "gives", *product, row.coefficients);
  }
  reader.finish();
  library.solids.push_back(std::move(row));
}

void readGas(TableReader& reader, Library& library) {
  GasRow row;
  row.id = reader.requiredText("id");
  if (!row.id.empty()) reader.setSubject(fmt::format("gas {}", row.id));
  row.of = reader.requiredText("of");
  row.lgH = reader.requiredNumber("lg_H");
  row.T_C = reader.number("T_C", 25.0);
  row.dH_kJ_mol = reader.number("dH_kJ_mol");
  reader.notNegative("sigma");
  reader.text("title");
  readOrigin(reader, row);
  if (!row.id.empty() && !row.of.empty()) {
    const auto gas = formulaIn(reader, "id", formulaOfSolid(row.id));
    if (gas) checkBalance(reader, "of", *gas, {{row.of, 1.0}});
  }
  reader.finish();
  library.gases.push_back(std::move(row));
}

void readInteraction(TableReader& reader, Library& library) {
  InteractionRow row;
  reader.require("pair");
  const auto pair = reader.texts("pair");
  if (reader.has("pair") && pair.size() != 2) {
    reader.fault("pair", "wrong_type", fmt::format("pair names {} species; expected two", pair.size()));
  }
  if (pair.size() == 2) {
    row.first = pair[0];
    row.second = pair[1];
    reader.setSubject(fmt::format("interaction {} with {}", row.first, row.second));
    formulaIn(reader, "pair", row.first);
    formulaIn(reader, "pair", row.second);
  }
  row.epsilon = reader.requiredNumber("epsilon");
  reader.notNegative("sigma");
  row.source = reader.requiredText("source");
  row.provenance = reader.choice("provenance", kProvenances).value_or("");
  row.note = reader.text("note", "");
  row.where = reader.where();
  reader.finish();
  library.interactions.push_back(std::move(row));
}

void readComponent(TableReader& reader, Library& library) {
  ComponentRow row;
  row.formula = reader.requiredText("formula");
  if (!row.formula.empty()) {
    reader.setSubject(fmt::format("component {}", row.formula));
    formulaIn(reader, "formula", row.formula);
  }
  row.title = reader.text("title", row.formula);
  row.molarMass = reader.positive("molar_mass").value_or(0.0);
  row.where = reader.where();
  reader.allowRemarks();
  reader.finish();
  library.components.push_back(std::move(row));
}

/// A word ligand spelled unlike any component would leave its species out without a sound.
void findMisspelled(const Library& library, Faults& faults) {
  std::vector<std::string> known;
  for (const ComponentRow& row : library.components) known.push_back(row.formula);
  const auto check = [&](const ReactionRow& row) {
    for (const auto& [name, nu] : row.coefficients) {
      const auto formula = parseFormula(name);
      if (!formula || !formula->opaque || library.component(name) != nullptr) continue;
      const std::string hint = didYouMean(name, known);
      if (hint.empty()) continue;
      faults.push_back({.code = "unknown_component",
                        .subject = row.name,
                        .detail = fmt::format("\"{}\" is no component of the library{}", name, hint),
                        .where = row.where});
    }
  };
  std::for_each(library.species.begin(), library.species.end(), check);
  std::for_each(library.solids.begin(), library.solids.end(), check);
}

void readFile(const fs::path& path, Library& library, Faults& faults) {
  auto file = readToml(path);
  if (!file) {
    faults.insert(faults.end(), file.error().begin(), file.error().end());
    return;
  }
  TableReader document(file->root, path.string(), "", faults);
  if (document.requiredText("format") != kConstantsFormat) {
    document.fault("format", "unknown_format", fmt::format("expected format = \"{}\"", kConstantsFormat));
    return;
  }
  for (TableReader& row : document.tables("component")) readComponent(row, library);
  readRows(document, false, library);
  document.allowRemarks();
  document.text("title");
  document.finish();
}

model::Result<Library, Faults> finished(Library library, Faults faults) {
  findDuplicates(library, faults);
  findMisspelled(library, faults);
  if (!faults.empty()) return model::fail(std::move(faults));
  return library;
}

void reportDuplicate(const std::string& name, const std::string& earlier, const std::string& where,
                     const std::string& what, Faults& faults) {
  faults.push_back({.code = "duplicate",
                    .subject = name,
                    .detail = fmt::format("{} {} stands twice; the first is at {}", what, name, earlier),
                    .where = where});
}

template <class Row, class Key>
void findTwice(const std::vector<Row>& rows, const Key& key, const std::string& what, Faults& faults) {
  std::map<std::string, std::string> seen;
  for (const Row& row : rows) {
    const auto [place, isNew] = seen.emplace(key(row), row.where);
    if (!isNew) reportDuplicate(key(row), place->second, row.where, what, faults);
  }
}

}  // namespace

const ComponentRow* Library::component(const std::string& formula) const {
  const auto found = std::find_if(components.begin(), components.end(),
                                  [&](const ComponentRow& row) { return row.formula == formula; });
  return found == components.end() ? nullptr : &*found;
}

void findDuplicates(const Library& library, Faults& faults) {
  const auto reactionKey = [](const ReactionRow& row) {
    return row.set == kDefaultSet ? row.name : row.name + " of set " + row.set;
  };
  findTwice(
      library.components, [](const ComponentRow& row) { return row.formula; }, "component", faults);
  findTwice(library.species, reactionKey, "species", faults);
  findTwice(library.solids, reactionKey, "solid", faults);
  findTwice(
      library.gases, [](const GasRow& row) { return row.id; }, "gas", faults);
  findTwice(
      library.interactions,
      [](const InteractionRow& row) {
        return std::min(row.first, row.second) + " with " + std::max(row.first, row.second);
      },
      "interaction", faults);
}

void readRows(TableReader& document, bool ownRows, Library& library) {
  for (TableReader& row : document.tables("species")) readSpecies(row, ownRows, library);
  for (TableReader& row : document.tables("solid")) readSolid(row, library);
  for (TableReader& row : document.tables("gas")) readGas(row, library);
  for (TableReader& row : document.tables("interaction")) readInteraction(row, library);
}

model::Result<Library, Faults> loadConstantsFile(const fs::path& file) {
  Library library;
  Faults faults;
  readFile(file, library, faults);
  return finished(std::move(library), std::move(faults));
}

model::Result<Library, Faults> loadConstants(const fs::path& directory) {
  std::error_code code;
  std::vector<fs::path> files;
  for (const auto& entry : fs::directory_iterator(directory, code)) {
    if (entry.path().extension() == ".toml") files.push_back(entry.path());
  }
  if (code) {
    return model::fail(Faults{{.code = "cannot_read",
                               .subject = directory.string(),
                               .detail = "the folder of constants cannot be read: " + code.message(),
                               .where = directory.string()}});
  }
  std::sort(files.begin(), files.end());
  Library library;
  Faults faults;
  for (const fs::path& file : files) readFile(file, library, faults);
  return finished(std::move(library), std::move(faults));
}

model::Result<fs::path> constantsDirectory(const fs::path& recipe, const fs::path& given) {
  if (!given.empty()) return given;
  std::error_code code;
  const std::vector<fs::path> places = {recipe.parent_path() / "constants", shippedBaths() / "constants"};
  for (const fs::path& place : places) {
    if (fs::is_directory(place, code)) return place;
  }
  return model::fail(Fault{.code = "constants_missing",
                           .subject = recipe.filename().string(),
                           .detail = "no constants beside the recipe and none installed; name their folder",
                           .where = recipe.string()});
}

}  // namespace tw::io
