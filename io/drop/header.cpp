// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/header.hpp"

#include <algorithm>
#include <array>
#include <set>
#include <utility>

#include "io/drop/rows.hpp"

namespace tw::io {
namespace {

/// More columns than any bath has channels: such a line is noise.
constexpr std::size_t kMostColumns = 1024;

using Names = std::pair<std::string_view, Field>;
constexpr std::array<Names, 4> kEverywhere = {
    {{"time", Field::Time}, {"tank", Field::Tank}, {"operator", Field::Operator}, {"source", Field::Source}}};
constexpr std::array<Names, 11> kLong = {{{"channel", Field::Channel},
                                          {"value", Field::Value},
                                          {"unit", Field::Unit},
                                          {"inputs", Field::Inputs},
                                          {"state", Field::State},
                                          {"id", Field::Id},
                                          {"supersedes", Field::Supersedes},
                                          {"reason", Field::Reason},
                                          {"received", Field::Received},
                                          {"entered", Field::Entered},
                                          {"entered_unit", Field::EnteredUnit}}};
constexpr std::array<Names, 6> kEvents = {{{"event", Field::Event},
                                           {"stock", Field::Stock},
                                           {"amount", Field::Amount},
                                           {"unit", Field::Unit},
                                           {"lot", Field::Lot},
                                           {"note", Field::Note}}};

template <std::size_t N>
std::optional<Field> lookUp(const std::array<Names, N>& table, const std::string& name) {
  const auto found =
      std::find_if(table.begin(), table.end(), [&](const Names& row) { return row.first == name; });
  if (found == table.end()) return std::nullopt;
  return found->second;
}

TableShape shapeOf(const std::vector<ColumnName>& names) {
  const auto has = [&](std::string_view name) {
    return std::any_of(names.begin(), names.end(), [&](const ColumnName& c) { return c.name == name; });
  };
  if (has("event")) return TableShape::Events;
  if (has("channel") && (has("value") || has("inputs"))) return TableShape::Long;
  return TableShape::Wide;
}

}  // namespace

ColumnName readColumnName(std::string_view written) {
  ColumnName out;
  std::string_view name = trimmed(written);
  for (const auto& [open, close] : {std::pair{'[', ']'}, std::pair{'(', ')'}}) {
    const std::size_t at = name.find(open);
    if (at == std::string_view::npos || at == 0 || name.back() != close) continue;
    out.unit = trimmed(name.substr(at + 1, name.size() - at - 2));
    name = trimmed(name.substr(0, at));
    break;
  }
  out.name = lowerCase(name);
  const std::size_t point = name.find('.');
  if (point != std::string_view::npos && point > 0 && point + 1 < name.size()) {
    out.channel = lowerCase(trimmed(name.substr(0, point)));
    out.input = trimmed(name.substr(point + 1));
  } else {
    out.channel = out.name;
  }
  return out;
}

Field fieldOf(const ColumnName& name, TableShape shape) {
  if (name.name.empty()) return Field::Nameless;
  if (const auto field = lookUp(kEverywhere, name.name)) return *field;
  if (shape == TableShape::Long) return lookUp(kLong, name.name).value_or(Field::Unknown);
  if (shape == TableShape::Events) return lookUp(kEvents, name.name).value_or(Field::Unknown);
  return name.input.empty() ? Field::Reading : Field::Input;
}

std::optional<std::size_t> Header::find(Field field) const {
  for (std::size_t i = 0; i < columns.size(); ++i) {
    if (columns[i].field == field) return i;
  }
  return std::nullopt;
}

std::optional<Header> readHeader(const std::vector<std::string_view>& cells) {
  if (cells.size() < 3 || cells.size() > kMostColumns) return std::nullopt;
  std::vector<ColumnName> names;
  names.reserve(cells.size());
  for (const std::string_view cell : cells) names.push_back(readColumnName(cell));
  Header header;
  header.shape = shapeOf(names);
  // A channel may have one value and several inputs, each once.
  std::set<std::pair<Field, std::string>> seen;
  for (std::size_t i = 0; i < cells.size(); ++i) {
    Column column{fieldOf(names[i], header.shape), std::string(trimmed(cells[i])), {}, {}, names[i].unit};
    std::string key;
    if (column.field == Field::Reading || column.field == Field::Input) {
      column.channel = names[i].channel;
      column.input = names[i].input;
      key = column.channel + '.' + lowerCase(column.input);
    }
    const bool counted = column.field != Field::Nameless && column.field != Field::Unknown;
    if (counted && !seen.emplace(column.field, key).second) column.field = Field::Twice;
    if (column.field == Field::Time) header.timeUnit = column.unit;
    header.columns.push_back(std::move(column));
  }
  if (!header.find(Field::Time) || !header.find(Field::Tank)) return std::nullopt;
  const bool wideWithChannel = header.find(Field::Reading) || header.find(Field::Input);
  if (header.shape == TableShape::Wide && !wideWithChannel) return std::nullopt;
  return header;
}

}  // namespace tw::io
