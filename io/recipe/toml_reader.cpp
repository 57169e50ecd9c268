// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/toml_reader.hpp"

#include <fmt/format.h>

#include <cmath>
#include <fstream>
#include <iterator>
#include <sstream>

#include "io/recipe/suggestion.hpp"

namespace tw::io {
namespace {

std::string shown(const toml::node& node) {
  std::ostringstream stream;
  stream.imbue(std::locale::classic());
  node.visit([&](const auto& concrete) { stream << concrete; });
  std::string text = stream.str();
  if (text.size() > 60) text = text.substr(0, 57) + "...";
  return text;
}

std::string lineOf(const std::string& file, const toml::source_region& region) {
  return region.begin.line == 0 ? file : fmt::format("{}:{}", file, region.begin.line);
}

}  // namespace

model::Result<TomlFile, model::Faults> readToml(const std::filesystem::path& path) {
  std::error_code code;
  const bool there = std::filesystem::exists(path, code);
  std::ifstream stream(path, std::ios::binary);
  if (!there || std::filesystem::is_directory(path, code) || !stream) {
    return model::fail(
        model::Faults{{.code = "cannot_read",
                       .subject = path.string(),
                       .detail = there ? "the file cannot be opened for reading" : "there is no such file",
                       .where = path.string(),
                       .kind = there ? model::FaultKind::Machine : model::FaultKind::Input}});
  }
  TomlFile file{.path = path, .bytes = {}, .root = {}};
  file.bytes.assign(std::istreambuf_iterator<char>(stream), {});
  try {
    file.root = toml::parse(std::string_view(file.bytes), std::string_view(path.native()));
  } catch (const toml::parse_error& error) {
    return model::fail(model::Faults{{.code = "bad_toml",
                                      .subject = path.filename().string(),
                                      .detail = fmt::format("not valid TOML: {}", error.description()),
                                      .where = lineOf(path.string(), error.source())}});
  }
  return file;
}

TableReader::TableReader(const toml::table& table, std::string file, std::string subject,
                         model::Faults& faults)
    : m_table(&table), m_file(std::move(file)), m_subject(std::move(subject)), m_faults(&faults) {}

const toml::node* TableReader::find(const std::string& key) const { return m_table->get(key); }

const toml::node* TableReader::ask(const std::string& key) {
  m_asked.insert(key);
  return find(key);
}

bool TableReader::isTable(const std::string& key) const {
  const toml::node* node = find(key);
  return node != nullptr && node->is_table();
}

bool TableReader::isList(const std::string& key) const {
  const toml::node* node = find(key);
  return node != nullptr && node->is_array();
}

std::vector<std::string> TableReader::keys() const {
  std::vector<std::string> names;
  for (const auto& [key, node] : *m_table) names.emplace_back(key.str());
  return names;
}

std::string TableReader::where(const std::string& key) const {
  if (!key.empty()) {
    const auto found = m_table->find(key);
    if (found != m_table->end()) return lineOf(m_file, found->first.source());
  }
  return lineOf(m_file, m_table->source());
}

std::string TableReader::path(const std::string& key) const {
  if (m_subject.empty()) return key;
  return key.empty() ? m_subject : m_subject + "." + key;
}

void TableReader::fault(const std::string& key, const std::string& code, const std::string& detail) {
  // A message stands alone: it names its table where the sentence does not.
  const bool named = m_subject.empty() || detail.find(m_subject) != std::string::npos;
  m_faults->push_back({.code = code,
                       .subject = path(key),
                       .detail = named ? detail : m_subject + ": " + detail,
                       .where = where(key)});
}

void TableReader::wrongType(const std::string& key, const toml::node& node, const std::string& expected) {
  fault(key, "wrong_type", fmt::format("{} is {}; expected {}", key, shown(node), expected));
}

void TableReader::notOneOf(const std::string& key, const std::string& word,
                           const std::vector<std::string>& names) {
  fault(
      key, "unknown_value",
      fmt::format("{} is \"{}\"; expected one of: {}{}", key, word, listed(names), didYouMean(word, names)));
}

std::optional<double> TableReader::finite(const std::string& key, const toml::node& node) {
  const auto value = node.is_number() ? node.value<double>() : std::nullopt;
  if (!value) {
    wrongType(key, node, "a number");
    return std::nullopt;
  }
  if (!std::isfinite(*value)) {
    fault(key, "not_a_number", fmt::format("{} is {}; expected a finite number", key, shown(node)));
    return std::nullopt;
  }
  return value;
}

void TableReader::require(const std::string& key) {
  m_asked.insert(key);
  if (!has(key)) fault(key, "missing_key", fmt::format("{} is missing", path(key)));
}

std::optional<std::string> TableReader::text(const std::string& key) {
  const toml::node* node = ask(key);
  if (node == nullptr) return std::nullopt;
  const auto value = node->is_string() ? node->value<std::string>() : std::nullopt;
  if (!value) wrongType(key, *node, "text in quotes");
  return value;
}

std::string TableReader::text(const std::string& key, const std::string& fallback) {
  return text(key).value_or(fallback);
}

std::string TableReader::requiredText(const std::string& key) {
  require(key);
  const auto value = text(key);
  if (value && value->find_first_not_of(" \t\n") == std::string::npos) {
    fault(key, "missing_key", fmt::format("{} is empty; expected text", path(key)));
  }
  return value.value_or("");
}

std::optional<double> TableReader::number(const std::string& key) {
  const toml::node* node = ask(key);
  return node == nullptr ? std::nullopt : finite(key, *node);
}

double TableReader::number(const std::string& key, double fallback) { return number(key).value_or(fallback); }

double TableReader::requiredNumber(const std::string& key) {
  require(key);
  return number(key).value_or(0.0);
}

std::optional<double> TableReader::positive(const std::string& key) {
  const auto value = number(key);
  if (value && *value <= 0.0)
    fault(key, "out_of_range", fmt::format("{} is {}; expected more than 0", key, *value));
  return value;
}

std::optional<double> TableReader::notNegative(const std::string& key) {
  const auto value = number(key);
  if (value && *value < 0.0)
    fault(key, "out_of_range", fmt::format("{} is {}; expected 0 or more", key, *value));
  return value;
}

bool TableReader::flag(const std::string& key, bool fallback) {
  const toml::node* node = ask(key);
  if (node == nullptr) return fallback;
  const auto value = node->is_boolean() ? node->value<bool>() : std::nullopt;
  if (!value) wrongType(key, *node, "true or false");
  return value.value_or(fallback);
}

std::vector<std::string> TableReader::texts(const std::string& key) {
  const toml::node* node = ask(key);
  std::vector<std::string> values;
  if (node == nullptr) return values;
  const toml::array* array = node->as_array();
  if (array == nullptr) {
    wrongType(key, *node, "a list of texts in [ ]");
    return values;
  }
  for (const toml::node& element : *array) {
    const auto value = element.is_string() ? element.value<std::string>() : std::nullopt;
    if (value) {
      values.push_back(*value);
    } else {
      wrongType(key, element, "a list of texts in [ ]");
    }
  }
  return values;
}

std::optional<std::pair<double, double>> TableReader::interval(const std::string& key) {
  const toml::node* node = ask(key);
  if (node == nullptr) return std::nullopt;
  const toml::array* array = node->as_array();
  if (array == nullptr || array->size() != 2) {
    wrongType(key, *node, "two numbers, [low, high]");
    return std::nullopt;
  }
  const auto low = finite(key, *array->get(0));
  const auto high = finite(key, *array->get(1));
  if (!low || !high) return std::nullopt;
  if (*low >= *high) {
    fault(key, "bad_window",
          fmt::format("{} is [{}, {}]; expected the lower number first", key, *low, *high));
    return std::nullopt;
  }
  return std::pair{*low, *high};
}

std::map<std::string, double> TableReader::numbers(const std::string& key) {
  std::map<std::string, double> values;
  auto inner = table(key);
  if (!inner) return values;
  for (const std::string& name : inner->keys()) {
    if (const auto value = inner->number(name)) values.emplace(name, *value);
  }
  return values;
}

std::optional<TableReader> TableReader::table(const std::string& key) {
  const toml::node* node = ask(key);
  if (node == nullptr) return std::nullopt;
  const toml::table* inner = node->as_table();
  if (inner == nullptr) {
    wrongType(key, *node, "a table");
    return std::nullopt;
  }
  return TableReader(*inner, m_file, path(key), *m_faults);
}

std::vector<TableReader> TableReader::tables(const std::string& key) {
  const toml::node* node = ask(key);
  std::vector<TableReader> readers;
  if (node == nullptr) return readers;
  const toml::array* array = node->as_array();
  if (array == nullptr) {
    wrongType(key, *node, fmt::format("tables headed [[{}]]", key));
    return readers;
  }
  for (const toml::node& element : *array) {
    if (const toml::table* inner = element.as_table()) {
      readers.emplace_back(*inner, m_file, path(key), *m_faults);
    } else {
      wrongType(key, element, fmt::format("tables headed [[{}]]", key));
    }
  }
  return readers;
}

void TableReader::allowRemarks() {
  text("note");
  text("source");
}

void TableReader::finish() {
  const std::vector<std::string> known(m_asked.begin(), m_asked.end());
  for (const std::string& key : keys()) {
    if (m_asked.contains(key)) continue;
    const std::string hint = didYouMean(key, known);
    fault(key, "unknown_key",
          fmt::format("\"{}\" is no key of {}{}", key, m_subject.empty() ? "this file" : m_subject,
                      hint.empty() ? "; known are: " + listed(known) : hint));
  }
}

}  // namespace tw::io
