// SPDX-License-Identifier: GPL-3.0-or-later
// A bath's recipe as read from its file, resolved against the constants library (FORMATS sections 1-3).
// Values only; read once, then shared between threads.
#pragma once

#include <filesystem>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "model/condition.hpp"
#include "model/liquor.hpp"
#include "model/result.hpp"
#include "model/system.hpp"

namespace tw::io {

/// One number that a worksheet asks for (a burette reading, a blank).
struct WorksheetInput {
  std::string id, title, unit;
  double plausibleLow = 0.0, plausibleHigh = 0.0;  ///< equal = not stated
  std::optional<double> defaultValue;
  double repeatability = 0.0;                      ///< standard uncertainty in `unit`
};

struct WorksheetConstant {
  std::string name, unit;
  double value = 0.0;
};

/// How burette numbers become a channel's value; units are carried (io/recipe/worksheet.hpp).
struct Worksheet {
  std::string title, expression, titrant;
  std::vector<WorksheetInput> inputs;
  std::vector<WorksheetConstant> constants;
  std::vector<std::string> steps, cautions;
};

struct Channel {
  std::string id, title;
  std::string unit;            ///< what people type and read
  /// What the store keeps: "mol/L" for a channel of a component or with as_formula_mass, "degC", "pH";
  /// "g/L" for a mass concentration nothing gives a molar mass for; else the unit itself.
  std::string canonicalUnit;
  double low = 0.0, target = 0.0, high = 0.0;            ///< in `unit`
  double plausibleLow = 0.0, plausibleHigh = 0.0;        ///< in `unit`
  double sigmaRel = 0.0, sigmaAbs = 0.0;                 ///< u^2 = (sigmaRel x)^2 + sigmaAbs^2
  std::optional<double> every_h;
  double maxAge_h = 26.0;
  std::optional<model::Guard> guard;                     ///< in `unit`
  /// g per mol of the component, for mass units; 0 when there is none.
  double formulaMass = 0.0;
  std::optional<Worksheet> worksheet;
};

struct Ratio {
  std::string id, title, of, to;  ///< channel ids
  bool byMole = true;             ///< else by mass
  double low = 0.0, target = 0.0, high = 0.0;
  std::optional<model::Guard> guard;
};

struct Stock {
  std::string id, title, unit;               ///< unit: "L" or "kg"
  std::map<std::string, double> supplies;    ///< component formula -> mol per unit of stock
  std::vector<std::string> kinds, after, cautions;
  std::optional<double> volume_L_per_kg, maxPerStep, costPerUnit, mix_min;
};

/// Where a component's number comes from.
struct ComponentSource {
  std::string formula, title;
  std::optional<std::string> channel;  ///< channel id
  std::optional<double> mol_L;         ///< a constant of the recipe
};

/// One row that takes part: for `check --list` and the recipe page.
struct RowNote {
  std::string name, set, source, provenance, note, where;  ///< where = FILE:LINE
  bool isSolid = false;
  double lgK = 0.0, sigma = 0.0, T_C = 25.0, I = 0.0;
};

struct Recipe {
  std::filesystem::path file;
  std::string id, title, metal, confidence = "published", unreliableBecause;
  std::vector<std::string> sets, hazards;
  double volume_L = 0.0, maxReadingAge_h = 26.0, horizon_h = 48.0;
  std::optional<double> sampleTemperature_C;  ///< ph_taken_at = "sample"
  model::ChemicalSystem system;
  std::vector<ComponentSource> sources;       ///< in the order of system.components
  std::vector<Channel> channels;              ///< `ph` and `temperature` always among them
  std::vector<Ratio> ratios;
  model::MarginLimits limits;
  std::vector<Stock> stocks;
  std::vector<RowNote> rows;
  std::string sha256;          ///< of the file's bytes
  std::string resolvedJson;    ///< canonical JSON: recipe and every constant used
  std::string resolvedSha256;  ///< of resolvedJson

  [[nodiscard]] const Channel* channel(const std::string& channelId) const;
};

/// Values of one liquor by channel id, in each channel's canonical unit.
using ChannelValues = std::map<std::string, double>;

/// Reads and resolves a recipe. `constantsDir` empty = `constants/` beside the recipe, else the installed
/// library, else the source tree's. Every fault of the document is listed, each with FILE:LINE.
model::Result<Recipe, model::Faults> loadRecipe(const std::filesystem::path& file,
                                                const std::filesystem::path& constantsDir = {});

/// A number in `unit` (empty = the channel's) to the channel's canonical unit.
/// Fault `unit_mismatch` when the unit is unknown or of another kind.
model::Result<double> toCanonical(const Channel& channel, double value, const std::string& unit = {});
/// Back to the channel's own unit.
[[nodiscard]] double fromCanonical(const Channel& channel, double canonical);

/// What the solver needs. Fault `missing_channel` names each channel that is needed and absent
/// (`temperature` and every channel a component uses; `sample_temperature` overrides the recipe's).
model::Result<model::LiquorInput, model::Faults> liquorInput(const Recipe& recipe,
                                                             const ChannelValues& values);
/// Channel ids a liquor of this recipe needs.
[[nodiscard]] std::vector<std::string> neededChannels(const Recipe& recipe);
/// Every channel at its target, canonical.
[[nodiscard]] ChannelValues targetValues(const Recipe& recipe);

struct RatioValue {
  const Ratio* ratio = nullptr;
  double value = 0.0;
};
/// Ratios whose two channels are both present; by mole or by mass of what the channels quote.
[[nodiscard]] std::vector<RatioValue> ratioValues(const Recipe& recipe, const ChannelValues& values);
/// Guarded channels and ratios that are present, in channel units.
[[nodiscard]] std::vector<model::GuardValue> guardValues(const Recipe& recipe, const ChannelValues& values);

/// A channel's value from its worksheet's inputs (and, where the expression names other channels, from
/// `values`): returned in the channel's canonical unit. Inputs by id in the worksheet's units; absent
/// ones take their default. Faults `missing_input`, `unknown_input`, `no_worksheet`, `implausible_input`.
model::Result<double> evaluateWorksheet(const Recipe& recipe, const Channel& channel,
                                        const std::map<std::string, double>& inputs,
                                        const ChannelValues& values = {});

}  // namespace tw::io
