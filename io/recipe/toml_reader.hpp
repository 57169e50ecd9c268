// SPDX-License-Identifier: GPL-3.0-or-later
// Strict reading of a TOML file: every wrong type, missing key, unknown word and unknown key becomes a
// fault with FILE:LINE, and reading goes on, so that one run lists all of them. Inside io/recipe only.
//
// Fault codes: cannot_read, bad_toml, missing_key, wrong_type, unknown_key, unknown_value, not_a_number,
// out_of_range.
#pragma once

#include <toml++/toml.h>

#include <filesystem>
#include <map>
#include <optional>
#include <set>
#include <string>
#include <utility>
#include <vector>

#include "model/result.hpp"

namespace tw::io {

struct TomlFile {
  std::filesystem::path path;
  std::string bytes;
  toml::table root;
};

/// The whole file. A file that is not there is wrong input; one that is there and cannot be read is the
/// machine's fault.
model::Result<TomlFile, model::Faults> readToml(const std::filesystem::path& path);

/// A word in a file and what it stands for.
template <class T>
using Choices = std::vector<std::pair<std::string, T>>;

/// One table. The keys that were asked for are the known ones: `finish` reports all others.
class TableReader {
 public:
  TableReader(const toml::table& table, std::string file, std::string subject, model::Faults& faults);

  [[nodiscard]] bool has(const std::string& key) const { return find(key) != nullptr; }
  [[nodiscard]] bool isTable(const std::string& key) const;
  [[nodiscard]] bool isList(const std::string& key) const;
  [[nodiscard]] std::vector<std::string> keys() const;
  /// FILE:LINE of a key, of the table when the key is absent or empty.
  [[nodiscard]] std::string where(const std::string& key = {}) const;
  [[nodiscard]] const std::string& subject() const { return m_subject; }
  [[nodiscard]] const std::string& file() const { return m_file; }
  void setSubject(std::string subject) { m_subject = std::move(subject); }

  std::optional<std::string> text(const std::string& key);
  std::string text(const std::string& key, const std::string& fallback);
  /// Missing or blank is a fault; the answer is then empty.
  std::string requiredText(const std::string& key);
  std::optional<double> number(const std::string& key);
  double number(const std::string& key, double fallback);
  /// Missing is a fault; the answer is then 0.
  double requiredNumber(const std::string& key);
  /// As number(), with a value of 0 or less a fault.
  std::optional<double> positive(const std::string& key);
  /// As number(), with a value below 0 a fault.
  std::optional<double> notNegative(const std::string& key);
  bool flag(const std::string& key, bool fallback);
  std::vector<std::string> texts(const std::string& key);
  /// [low, high] with low < high.
  std::optional<std::pair<double, double>> interval(const std::string& key);
  /// A table of numbers with free keys: coefficients of a reaction, what a stock supplies.
  std::map<std::string, double> numbers(const std::string& key);
  std::optional<TableReader> table(const std::string& key);
  std::vector<TableReader> tables(const std::string& key);
  /// A word out of a list; nullopt when absent, or (with a fault) when it is not in the list.
  template <class T>
  std::optional<T> choice(const std::string& key, const Choices<T>& choices) {
    const auto word = text(key);
    if (!word) return std::nullopt;
    std::vector<std::string> names;
    for (const auto& [name, value] : choices) {
      if (name == *word) return value;
      names.push_back(name);
    }
    notOneOf(key, *word, names);
    return std::nullopt;
  }
  /// `note` and `source` may stand in every table.
  void allowRemarks();
  void require(const std::string& key);
  /// "bath.volume_L", or the key alone at the top of a file.
  [[nodiscard]] std::string path(const std::string& key) const;
  void fault(const std::string& key, const std::string& code, const std::string& detail);
  void report(model::Fault fault) { m_faults->push_back(std::move(fault)); }
  /// Reports every key nobody asked for.
  void finish();

 private:
  const toml::node* find(const std::string& key) const;
  const toml::node* ask(const std::string& key);
  void wrongType(const std::string& key, const toml::node& node, const std::string& expected);
  void notOneOf(const std::string& key, const std::string& word, const std::vector<std::string>& names);
  std::optional<double> finite(const std::string& key, const toml::node& node);

  const toml::table* m_table;
  std::string m_file, m_subject;
  model::Faults* m_faults;
  std::set<std::string> m_asked;
};

}  // namespace tw::io
