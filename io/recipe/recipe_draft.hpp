// SPDX-License-Identifier: GPL-3.0-or-later
// A recipe while it is being read: the stages fill it in this order. Inside io/recipe only.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "io/recipe/constants.hpp"
#include "io/recipe/recipe.hpp"
#include "io/recipe/toml_reader.hpp"

namespace tw::io {

struct Draft {
  Recipe recipe;
  Library own;             ///< the recipe's own rows
  const Library& library;  ///< outlives the draft
  std::vector<std::string> ligands, exclude;
  /// One per declared component, in order, for faults that later stages find.
  std::vector<TableReader> componentReaders;
  /// Rows that take part, for the resolved document.
  std::vector<const ReactionRow*> usedRows;
  std::vector<const GasRow*> usedGases;
  std::vector<const InteractionRow*> usedInteractions;

  [[nodiscard]] std::optional<model::ComponentIndex> component(const std::string& formula) const;
  [[nodiscard]] std::vector<std::string> componentNames() const;
  [[nodiscard]] std::vector<std::string> channelNames() const;
  [[nodiscard]] std::optional<std::size_t> channelIndex(const std::string& id) const;
};

/// [bath]
void readBath(TableReader& document, Draft& draft);
/// [[component]]; then metal, ligands, per_metal and the balance against each other.
void readComponents(TableReader& document, Draft& draft);
/// [[channel]], the implicit ones, and what each component reads.
void readChannels(TableReader& document, Draft& draft);
/// [[ratio]]
void readRatios(TableReader& document, Draft& draft);
/// Own rows, sets, exclude: which species take part; [[watch]].
void resolveRows(TableReader& document, Draft& draft);
/// [limits]
void readLimits(TableReader& document, Draft& draft);
/// [[stock]]
void readStocks(TableReader& document, Draft& draft);

/// { caution, act }; a margin shrinks towards act, lg_saturation (`rising`) grows towards it.
std::optional<model::MarginLimit> readLimit(TableReader& parent, const std::string& key, bool rising = false);
std::vector<std::string> marginNames();
/// { act_low, caution_low, caution_high, act_high }, in this order where present.
std::optional<model::Guard> readGuard(TableReader& parent, const std::string& id);
/// low <= target <= high.
void checkWindow(TableReader& reader, double low, double target, double high);
/// An id: a letter, then letters, digits, - and _.
void checkId(TableReader& reader, const std::string& key, const std::string& id);
/// Every word is a key of the safety table.
void checkCautions(TableReader& reader, const std::string& key, const std::vector<std::string>& keys);

/// Canonical JSON of the document and every constant used: keys sorted, numbers as doubles.
std::string resolvedDocument(const toml::table& document, const Draft& draft);

}  // namespace tw::io
