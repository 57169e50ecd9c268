// SPDX-License-Identifier: GPL-3.0-or-later
// Every row of tests/reference/bath_behaviour.toml, through the command line: what the shipped recipes must say
// of liquors whose behaviour is known. Sources stand in the table.
#include <gtest/gtest.h>
#include <toml++/toml.h>

#include <nlohmann/json.hpp>

#include <algorithm>
#include <optional>

#include "tests/monitor/cli/command_line.hpp"

namespace tw::monitor::cli::testing {
namespace {

using Json = nlohmann::json;

struct Behaviour {
  std::string recipe, what, reading, quantity, source;
  double low = 0.0, high = 0.0;
  bool none = false;
};

void PrintTo(const Behaviour& row, std::ostream* out) {
  *out << row.recipe << ": " << row.what << " (" << row.quantity << " of " << row.reading << "; " << row.source << ")";
}

std::vector<Behaviour> table() {
  const toml::table file = toml::parse_file(std::string(TW_SOURCE_DIR) + "/tests/reference/bath_behaviour.toml");
  std::vector<Behaviour> rows;
  for (const toml::node& node : *file["row"].as_array()) {
    const toml::table& row = *node.as_table();
    const auto text = [&](const char* key) { return row[key].value_or(std::string()); };
    rows.push_back({text("recipe"), text("what"), text("reading"), text("quantity"), text("source"),
                    row["low"].value_or(0.0), row["high"].value_or(0.0), row["none"].value_or(false)});
  }
  return rows;
}

/// The named number of a solved liquor; nullopt where it is null.
std::optional<double> numberOf(const Json& solved, const std::string& quantity) {
  const auto colon = quantity.find(':');
  const std::string path = quantity.substr(0, colon);
  const std::string of = colon == std::string::npos ? "" : quantity.substr(colon + 1);
  Json found;
  if (path == "lg_saturation") {
    for (const Json& solid : solved.at("solids")) {
      if (solid.at("id") == of) found = solid.at("lg_saturation");
    }
  } else if (path.rfind("margin.", 0) == 0) {
    const std::string rest = path.substr(7);
    Json margin = solved.at("margins").at(rest.substr(0, rest.find('.')));
    if (!of.empty() && !margin.is_null()) margin = margin.at("by_ligand").at(of);
    const bool fraction = rest.find(".fraction") != std::string::npos;
    if (!margin.is_null()) found = margin.at(fraction ? "fraction" : "value");
  } else {
    found = solved.at(path);
  }
  return found.is_null() ? std::nullopt : std::optional<double>(found.get<double>());
}

class BathBehaviour : public ::testing::TestWithParam<Behaviour> {};

TEST_P(BathBehaviour, IsWhatPracticeAndPublicationsSay) {
  const Behaviour& row = GetParam();
  ASSERT_FALSE(row.source.empty());
  std::string file = row.recipe + ".toml";
  std::replace(file.begin(), file.end(), '-', '_');
  const Said said = say({"solve", "--recipe", bath(file), "--reading", row.reading, "--json"});
  ASSERT_EQ(said.status, 0) << said.err;
  const std::optional<double> number = numberOf(Json::parse(said.out), row.quantity);
  ASSERT_EQ(number.has_value(), !row.none);
  if (row.none) return;
  EXPECT_GE(*number, row.low);
  EXPECT_LE(*number, row.high);
}

INSTANTIATE_TEST_SUITE_P(Table, BathBehaviour, ::testing::ValuesIn(table()));

TEST(BathBehaviourTable, SpeaksOfEveryShippedRecipe) {
  const std::vector<Behaviour> rows = table();
  for (const auto& entry : std::filesystem::directory_iterator(std::string(TW_SOURCE_DIR) + "/baths")) {
    if (entry.path().extension() != ".toml") continue;
    std::string id = entry.path().stem().string();
    std::replace(id.begin(), id.end(), '_', '-');
    EXPECT_TRUE(std::any_of(rows.begin(), rows.end(), [&](const Behaviour& row) { return row.recipe == id; })) << id;
  }
}

}  // namespace
}  // namespace tw::monitor::cli::testing
