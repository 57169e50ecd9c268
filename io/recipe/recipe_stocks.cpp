// SPDX-License-Identifier: GPL-3.0-or-later
// [[stock]]: what can be added.
#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "io/recipe/cautions.hpp"
#include "io/recipe/formula.hpp"
#include "io/recipe/recipe_draft.hpp"
#include "io/recipe/row_checks.hpp"
#include "io/recipe/suggestion.hpp"

namespace tw::io {
namespace {

/// What is supplied is rounded to a few digits: a net charge below a thousandth of what goes in is none.
constexpr double kChargeTolerance = 1e-3;

const Choices<std::string> kStockUnits = {{"L", "L"}, {"kg", "kg"}};

void checkSupplies(TableReader& reader, const Draft& draft, const Stock& stock) {
  std::vector<std::string> known = draft.componentNames();
  for (const auto& component : draft.recipe.system.components) {
    if (!component.other.empty()) known.push_back(component.other);
  }
  known.insert(known.end(), {model::kHydroxide, model::kWater});
  double charge = 0.0, size = 0.0;
  for (const auto& [name, amount] : stock.supplies) {
    const auto formula = formulaIn(reader, "supplies", name);
    if (!formula) return;
    charge += amount * formula->charge;
    size += std::abs(amount * formula->charge);
    if (std::find(known.begin(), known.end(), name) == known.end()) {
      reader.fault("supplies", "unknown_component",
                   fmt::format("supplies names \"{}\"; expected some of: {}{}", name, listed(known),
                               didYouMean(name, known)));
    }
  }
  if (std::abs(charge) > kChargeTolerance * size) {
    reader.fault("supplies", "charge_unbalanced",
                 fmt::format("{} supplies a net charge of {:+g} mol per {}; expected 0", stock.id, charge,
                             stock.unit));
  }
}

void readStock(TableReader& reader, Draft& draft) {
  Stock stock;
  stock.id = reader.requiredText("id");
  if (!stock.id.empty()) {
    reader.setSubject(fmt::format("stock {}", stock.id));
    checkId(reader, "id", stock.id);
  }
  stock.title = reader.text("title", stock.id);
  reader.require("supplies");
  stock.supplies = reader.numbers("supplies");
  reader.require("unit");
  stock.unit = reader.choice("unit", kStockUnits).value_or("L");
  reader.require("kind");
  stock.kinds = reader.texts("kind");
  for (const std::string& kind : stock.kinds) {
    if (std::find(stockKinds().begin(), stockKinds().end(), kind) != stockKinds().end()) continue;
    reader.fault("kind", "unknown_value",
                 fmt::format("kind names \"{}\"; expected some of: {}{}", kind, listed(stockKinds()),
                             didYouMean(kind, stockKinds())));
  }
  stock.volume_L_per_kg = reader.notNegative("volume_L_per_kg");
  if (stock.unit == "kg") reader.require("volume_L_per_kg");
  stock.maxPerStep = reader.positive("max_per_step");
  stock.costPerUnit = reader.notNegative("cost_per_unit");
  stock.after = reader.texts("after");
  stock.mix_min = reader.notNegative("mix_min");
  stock.cautions = reader.texts("caution");
  checkCautions(reader, "caution", stock.cautions);
  checkSupplies(reader, draft, stock);
  const auto& stocks = draft.recipe.stocks;
  if (std::any_of(stocks.begin(), stocks.end(), [&](const Stock& other) { return other.id == stock.id; })) {
    reader.fault("id", "duplicate", fmt::format("stock {} stands twice", stock.id));
  }
  reader.allowRemarks();
  reader.finish();
  draft.recipe.stocks.push_back(std::move(stock));
}

}  // namespace

void readStocks(TableReader& document, Draft& draft) {
  std::vector<TableReader> readers = document.tables("stock");
  std::vector<std::string> ids;
  for (TableReader& reader : readers) {
    readStock(reader, draft);
    ids.push_back(draft.recipe.stocks.back().id);
  }
  for (std::size_t i = 0; i < readers.size(); ++i) {
    for (const std::string& other : draft.recipe.stocks[i].after) {
      if (other != ids[i] && std::find(ids.begin(), ids.end(), other) != ids.end()) continue;
      readers[i].fault("after", "unknown_stock",
                       fmt::format("after names \"{}\"; expected another stock of this recipe: {}{}", other,
                                   listed(ids), didYouMean(other, ids)));
    }
  }
}

}  // namespace tw::io
