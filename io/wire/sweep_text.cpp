// SPDX-License-Identifier: GPL-3.0-or-later
// `sweep` as CSV and JSON: one table, two spellings.
#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include <algorithm>
#include <cmath>

#include "io/wire/solve_json.hpp"

namespace tw::io::wire {
namespace {

using Row = std::vector<std::optional<double>>;

/// Species that hold the metal, in the order in which the points name them first.
std::vector<std::string> sharedSpecies(const std::vector<model::SweepPoint>& points) {
  std::vector<std::string> formulas;
  for (const auto& point : points) {
    for (const auto& [formula, share] : point.shares) {
      if (std::find(formulas.begin(), formulas.end(), formula) == formulas.end()) formulas.push_back(formula);
    }
  }
  return formulas;
}

std::vector<std::string> columns(const model::ChemicalSystem& system,
                                 const std::vector<std::string>& formulas) {
  std::vector<std::string> names = {"x", "ph", "pM"};
  for (const auto& solid : system.solids) names.push_back("lg_saturation:" + solid.id);
  for (const auto& formula : formulas) names.push_back("share:" + formula);
  return names;
}

std::optional<double> saturationOf(const model::LiquorReport& liquor, const std::string& id) {
  for (const auto& solid : liquor.solids) {
    if (solid.id == id) return solid.lgSaturation;
  }
  return std::nullopt;
}

Row rowOf(const model::ChemicalSystem& system, const std::vector<std::string>& formulas,
          const model::SweepPoint& point) {
  Row row = {point.x};
  const auto* liquor = point.liquor ? &*point.liquor : nullptr;
  row.push_back(liquor != nullptr ? std::optional(liquor->ph) : std::nullopt);
  row.push_back(liquor != nullptr ? liquor->pM : std::nullopt);
  for (const auto& solid : system.solids) {
    row.push_back(liquor != nullptr ? saturationOf(*liquor, solid.id) : std::nullopt);
  }
  for (const auto& formula : formulas) {
    const auto found = std::find_if(point.shares.begin(), point.shares.end(),
                                    [&](const auto& entry) { return entry.first == formula; });
    row.push_back(found != point.shares.end() ? std::optional(found->second) : std::nullopt);
  }
  return row;
}

/// RFC 4180: a cell with a comma, a quote or a line break stands in quotes, its quotes doubled.
std::string cell(const std::string& text) {
  if (text.find_first_of(",\"\r\n") == std::string::npos) return text;
  std::string quoted = "\"";
  for (const char c : text) quoted += c == '"' ? std::string("\"\"") : std::string(1, c);
  return quoted + "\"";
}

}  // namespace

std::string sweepCsv(const model::ChemicalSystem& system, const std::vector<model::SweepPoint>& points) {
  const auto formulas = sharedSpecies(points);
  std::string text;
  for (const auto& name : columns(system, formulas)) text += (text.empty() ? "" : ",") + cell(name);
  text += '\n';
  for (const auto& point : points) {
    bool first = true;
    for (const auto& value : rowOf(system, formulas, point)) {
      if (!first) text += ',';
      first = false;
      // The shortest text that reads back the same; fmt ignores the locale.
      if (value && std::isfinite(*value)) text += fmt::format("{}", *value);
    }
    text += '\n';
  }
  return text;
}

std::string sweepJson(const model::ChemicalSystem& system, const std::vector<model::SweepPoint>& points) {
  const auto formulas = sharedSpecies(points);
  const auto names = columns(system, formulas);
  auto list = nlohmann::ordered_json::array();
  for (const auto& point : points) {
    const Row row = rowOf(system, formulas, point);
    nlohmann::ordered_json object = nlohmann::ordered_json::object();
    for (std::size_t i = 0; i < names.size(); ++i) {
      const bool known = row[i] && std::isfinite(*row[i]);
      object[names[i]] = known ? nlohmann::ordered_json(*row[i]) : nlohmann::ordered_json();
    }
    list.push_back(std::move(object));
  }
  return list.dump(2);
}

}  // namespace tw::io::wire
