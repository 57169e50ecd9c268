// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/worksheet.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "files.hpp"
#include "io/recipe/recipe.hpp"

namespace tw::io {
namespace {

using Names = std::map<std::string, Quantity>;

Quantity of(double value, const std::string& unit) {
  return {toBase(*findUnit(unit), value), findUnit(unit)->dimension};
}

struct TitrationRow {
  const char* id;
  const char* expression;
  Names names;
  const char* unit;
  double expected, tolerance;
};
void PrintTo(const TitrationRow& row, std::ostream* out) { *out << row.id; }
class Titration : public testing::TestWithParam<TitrationRow> {};

TEST_P(Titration, WorksOutAsByHand) {
  const auto& row = GetParam();
  const auto worked = evaluateExpression(row.expression, row.names);
  ASSERT_TRUE(worked) << worked.error().detail;
  const auto unit = findUnit(row.unit);
  EXPECT_EQ(worked->result.dimension, unit->dimension) << dimensionText(worked->result.dimension);
  EXPECT_NEAR(fromBase(*unit, worked->result.value), row.expected, row.tolerance);
}

// Methods: Vogel's Textbook of Quantitative Chemical Analysis (from memory). Titres are invented, the
// results worked out by hand from (V - V_blank) c M / (nu V_s) and rounded as printed here.
INSTANTIATE_TEST_SUITE_P(
    Vogel, Titration,
    testing::Values(
        TitrationRow{"nickel_edta",
                     "V * c * M / s",
                     {{"V", of(25.60, "mL")},
                      {"c", of(0.0998, "mol/L")},
                      {"M", of(58.693, "g/mol")},
                      {"s", of(2, "mL")}},
                     "g/L",
                     74.98,
                     0.005},
        TitrationRow{"nickel_back",
                     "(V1 * c1 - V2 * c2) * M / s",
                     {{"V1", of(25, "mL")},
                      {"c1", of(0.1, "mol/L")},
                      {"V2", of(9.35, "mL")},
                      {"c2", of(0.1, "mol/L")},
                      {"M", of(58.693, "g/mol")},
                      {"s", of(5, "mL")}},
                     "g/L",
                     18.37,
                     0.005},
        TitrationRow{
            "copper_pyrophosphate",
            "V*c*M/s",
            {{"V", of(19.72, "mL")}, {"c", of(0.1, "mol/L")}, {"M", of(63.546, "g/mol")}, {"s", of(5, "mL")}},
            "g/L",
            25.06,
            0.005},
        TitrationRow{"free_cyanide",
                     "V * c * 2 * M_NaCN / s",
                     {{"V", of(12.40, "mL")},
                      {"c", of(0.1, "mol/L")},
                      {"M_NaCN", of(49.008, "g/mol")},
                      {"s", of(10, "mL")}},
                     "g/L",
                     12.15,
                     0.005},
        TitrationRow{"silver_volhard",
                     "(V - blank) * c * M / s",
                     {{"V", of(13.97, "mL")},
                      {"blank", of(0.05, "mL")},
                      {"c", of(0.0998, "mol/L")},
                      {"M", of(107.87, "g/mol")},
                      {"s", of(5, "mL")}},
                     "oz/gal",
                     4.00,
                     0.005},
        TitrationRow{
            "zincate_caustic",
            "V * c * M / s",
            {{"V", of(16.30, "mL")}, {"c", of(1, "mol/L")}, {"M", of(39.997, "g/mol")}, {"s", of(5, "mL")}},
            "g/L",
            130.4,
            0.05},
        TitrationRow{"diluted_sample",
                     "V * c * M / s * (flask / aliquot)",
                     {{"V", of(10, "mL")},
                      {"c", of(0.1, "mol/L")},
                      {"M", of(63.546, "g/mol")},
                      {"s", of(10, "mL")},
                      {"flask", of(100, "mL")},
                      {"aliquot", of(20, "mL")}},
                     "g/L",
                     31.773,
                     1e-9},
        TitrationRow{"free_edta",
                     "V * c / s",
                     {{"V", of(8.44, "mL")}, {"c", of(0.05, "mol/L")}, {"s", of(10, "mL")}},
                     "mmol/L",
                     42.2,
                     0.05},
        TitrationRow{
            "millimoles", "n / s", {{"n", of(6.311, "mmol")}, {"s", of(1, "mL")}}, "mol/L", 6.311, 1e-12}),
    [](const auto& row) { return std::string(row.param.id); });

double number(const std::string& expression, const Names& names = {}) {
  const auto worked = evaluateExpression(expression, names);
  EXPECT_TRUE(worked) << worked.error().detail;
  return worked ? worked->result.value : std::nan("");
}

TEST(Expression, FollowsTheUsualOrder) {
  EXPECT_EQ(number("1 + 2 * 3"), 7.0);
  EXPECT_EQ(number("(1 + 2) * 3"), 9.0);
  EXPECT_EQ(number("8 / 4 / 2"), 1.0);
  EXPECT_EQ(number("8 - 4 - 2"), 2.0);
  EXPECT_EQ(number("-2 * -3"), 6.0);
  EXPECT_EQ(number("2.5e2*.4"), 100.0);
  EXPECT_EQ(number(" 1\t+\n1 "), 2.0);
}

TEST(Expression, ReadsTheLongestNameItKnows) {
  const Names names = {
      {"free", {10, {}}}, {"cyanide", {3, {}}}, {"free-cyanide", {1, {}}}, {"free2", {5, {}}}};
  EXPECT_EQ(number("free-cyanide", names), 1.0);
  EXPECT_EQ(number("free - cyanide", names), 7.0);
  EXPECT_EQ(number("free2", names), 5.0);
}

TEST(Expression, SaysWhichNamesItReads) {
  const auto worked = evaluateExpression("a * 2 - b", {{"a", {}}, {"b", {}}, {"c", {}}});
  ASSERT_TRUE(worked);
  EXPECT_EQ(worked->used, (std::set<std::string>{"a", "b"}));
}

TEST(Expression, RefusesWhatCannotBeWorkedOut) {
  for (const char* text : {"", "1 +", "(1", "1)", "1 2", "* 3", "a", "1 + $", "()", ".", "2 a"}) {
    const auto worked = evaluateExpression(text, {{"b", {}}});
    ASSERT_FALSE(worked) << text;
    EXPECT_TRUE(worked.error().code == "bad_expression" || worked.error().code == "unknown_name") << text;
  }
  EXPECT_FALSE(evaluateExpression(std::string(100000, '('), {}));
  EXPECT_FALSE(evaluateExpression(std::string(100000, '-') + "1", {}));
}

TEST(Expression, RefusesToAddUnlikeThings) {
  const Names names = {{"V", of(1, "mL")}, {"c", of(1, "mol/L")}};
  const auto worked = evaluateExpression("V + c", names);
  ASSERT_FALSE(worked);
  EXPECT_EQ(worked.error().code, "unit_mismatch");
  EXPECT_NE(worked.error().detail.find("adds mol/L to L"), std::string::npos) << worked.error().detail;
  EXPECT_FALSE(evaluateExpression("V - 1", names));
}

class SheetOfARecipe : public testing::Test {
 protected:
  void SetUp() override {
    m_folder.write("constants/a.toml", test::kConstants);
    const std::string text = test::with(test::kRecipe, "max_age_h = 12", R"(max_age_h = 12
[channel.worksheet]
value = "(Va * ca - V * cb) / s * M - n * copper * M / M_Cu"
inputs = [ { id = "V", unit = "mL" }, { id = "Va", unit = "mL", default = 50.0 } ]
constants = { ca = { value = 0.2, unit = "mol/L" }, cb = { value = 0.2005, unit = "mol/L" }, s = { value = 1.0, unit = "mL" }, M = { value = 17.031, unit = "g/mol" }, M_Cu = { value = 63.546, unit = "g/mol" }, n = { value = 4.0 } })");
    auto recipe = loadRecipe(m_folder.write("r.toml", text));
    ASSERT_TRUE(recipe) << test::shown(recipe.error());
    m_recipe = *recipe;
  }
  test::Folder m_folder;
  Recipe m_recipe;
};

TEST_F(SheetOfARecipe, GivesTheChannelInItsCanonicalUnit) {
  // 19.72 mL of 0.1 mol/L into 2 mL: by hand 19.72 * 0.1 / 2 mol/L.
  const auto value = evaluateWorksheet(m_recipe, *m_recipe.channel("copper"), {{"V", 19.72}});
  ASSERT_TRUE(value) << value.error().detail;
  EXPECT_NEAR(*value, 0.986, 1e-12);
  const auto blanked =
      evaluateWorksheet(m_recipe, *m_recipe.channel("copper"), {{"V", 19.72}, {"blank", 0.72}});
  EXPECT_NEAR(*blanked, 0.95, 1e-12);
}

TEST_F(SheetOfARecipe, LetsAnotherChannelFlowIn) {
  // Back titration as in Vogel (from memory), by hand: 50.00 * 0.2 - 18.40 * 0.2005 = 6.3108 mmol in 1 mL,
  // less four for each mole of copper.
  const auto value =
      evaluateWorksheet(m_recipe, *m_recipe.channel("ammonia"), {{"V", 18.40}}, {{"copper", 0.35}});
  ASSERT_TRUE(value) << value.error().detail;
  EXPECT_NEAR(*value, 6.3108 - 1.4, 1e-12);
}

TEST_F(SheetOfARecipe, NamesWhatIsMissingUnknownOrImplausible) {
  const auto code = [&](const char* channel, const std::map<std::string, double>& inputs) {
    const auto value = evaluateWorksheet(m_recipe, *m_recipe.channel(channel), inputs);
    return value ? std::string("none") : value.error().code;
  };
  EXPECT_EQ(code("copper", {}), "missing_input");
  EXPECT_EQ(code("copper", {{"V", 12}, {"W", 1}}), "unknown_input");
  EXPECT_EQ(code("copper", {{"V", 51}}), "implausible_input");
  EXPECT_EQ(code("copper", {{"V", std::nan("")}}), "implausible_input");
  EXPECT_EQ(code("ph", {{"V", 5}}), "no_worksheet");
  EXPECT_EQ(code("ammonia", {{"V", 5}}), "missing_channel");
  EXPECT_EQ(code("copper", {{"V", 50}}), "none");
}

}  // namespace
}  // namespace tw::io
