// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/formula.hpp"

#include <gtest/gtest.h>

#include <random>

namespace tw::io {
namespace {

using Elements = std::map<std::string, double>;

struct GoodRow {
  const char* text;
  int charge;
  bool opaque;
  Elements elements;
};
void PrintTo(const GoodRow& row, std::ostream* out) { *out << row.text; }
class GoodFormula : public testing::TestWithParam<GoodRow> {};

TEST_P(GoodFormula, IsReadToChargeAndElements) {
  const auto& row = GetParam();
  const auto formula = parseFormula(row.text);
  ASSERT_TRUE(formula) << formula.error().detail;
  EXPECT_EQ(formula->charge, row.charge);
  EXPECT_EQ(formula->opaque, row.opaque);
  EXPECT_EQ(formula->elements, row.elements);
}

INSTANTIATE_TEST_SUITE_P(
    Table, GoodFormula,
    testing::Values(GoodRow{"Cu^2+", 2, false, {{"Cu", 1}}},
                    GoodRow{"SO4^2-", -2, false, {{"S", 1}, {"O", 4}}},
                    GoodRow{"Na^+", 1, false, {{"Na", 1}}}, GoodRow{"NH3", 0, false, {{"N", 1}, {"H", 3}}},
                    GoodRow{"Cu(NH3)4^2+", 2, false, {{"Cu", 1}, {"N", 4}, {"H", 12}}},
                    GoodRow{"Co(NH3)5(H2O)^3+", 3, false, {{"Co", 1}, {"N", 5}, {"H", 17}, {"O", 1}}},
                    GoodRow{"Cu(P2O7)2^6-", -6, false, {{"Cu", 1}, {"P", 4}, {"O", 14}}},
                    GoodRow{"CO3^2-", -2, false, {{"C", 1}, {"O", 3}}}, GoodRow{"I^-", -1, false, {{"I", 1}}},
                    GoodRow{"Sn6(O(OH)2)3", 0, false, {{"Sn", 6}, {"O", 9}, {"H", 6}}},
                    GoodRow{"CuSO4.5H2O", 0, false, {{"Cu", 1}, {"S", 1}, {"O", 9}, {"H", 10}}},
                    GoodRow{"CuSO4\xC2\xB7"
                            "5H2O",
                            0,
                            false,
                            {{"Cu", 1}, {"S", 1}, {"O", 9}, {"H", 10}}},
                    GoodRow{"Cu(OH)1.5Cl0.5", 0, false, {{"Cu", 1}, {"O", 1.5}, {"H", 1.5}, {"Cl", 0.5}}},
                    GoodRow{"citrate^3-", -3, true, {}}, GoodRow{"Ni(citrate)^-", -1, true, {}},
                    GoodRow{"Hcitrate^2-", -2, true, {}}, GoodRow{"H2EDTA^2-", -2, true, {}},
                    GoodRow{"CuEDTA^2-", -2, true, {}}, GoodRow{"EDTA^4-", -4, true, {}},
                    GoodRow{"HEEDTA^3-", -3, true, {}}, GoodRow{"DTPA^5-", -5, true, {}},
                    GoodRow{"NTA^3-", -3, true, {}}, GoodRow{"tartrate^2-", -2, true, {}},
                    GoodRow{"lactate^-", -1, true, {}}, GoodRow{"en", 0, true, {}},
                    GoodRow{"Cu(en)2^2+", 2, true, {}},
                    GoodRow{"Al13O4(OH)24^7+", 7, false, {{"Al", 13}, {"O", 28}, {"H", 24}}},
                    GoodRow{"X12^12-", -12, true, {}}));

struct BadRow {
  const char* text;
  const char* reason;
};
void PrintTo(const BadRow& row, std::ostream* out) { *out << row.text; }
class BadFormula : public testing::TestWithParam<BadRow> {};

TEST_P(BadFormula, IsRefusedWithTextAndReason) {
  const auto formula = parseFormula(GetParam().text);
  ASSERT_FALSE(formula);
  EXPECT_EQ(formula.error().code, "bad_formula");
  EXPECT_NE(formula.error().detail.find(GetParam().text), std::string::npos) << formula.error().detail;
  EXPECT_NE(formula.error().detail.find(GetParam().reason), std::string::npos) << formula.error().detail;
}

INSTANTIATE_TEST_SUITE_P(Table, BadFormula,
                         testing::Values(BadRow{"", "empty"}, BadRow{"^2+", "empty"},
                                         BadRow{"Cu^2", "charge"}, BadRow{"Cu^+2", "charge"},
                                         BadRow{"Cu^", "charge"}, BadRow{"Cu^0+", "charge"},
                                         BadRow{"Cu^2+2", "charge"}, BadRow{"Cu++", "belongs to no name"},
                                         BadRow{"Cu(NH3", "not closed"}, BadRow{"CuNH3)4", "unexpected"},
                                         BadRow{"Cu()2", "empty parentheses"},
                                         BadRow{"Cu OH", "belongs to no name"},
                                         BadRow{"Cu[NH3]4", "belongs to no name"}, BadRow{"2", "no formula"},
                                         BadRow{"Cu0", "no count"}));

TEST(Formula, ASolidIsItsFirstWord) {
  EXPECT_EQ(formulaOfSolid("Cu(OH)2 fresh"), "Cu(OH)2");
  EXPECT_EQ(formulaOfSolid("AgCN"), "AgCN");
}

TEST(Formula, MolarMassesFollowFromStandardAtomicWeights) {
  // Sums of IUPAC/CIAAW abridged standard atomic weights 2021 (from memory).
  EXPECT_NEAR(molarMass(*parseFormula("NH3")), 14.007 + 3 * 1.008, 1e-12);
  EXPECT_NEAR(molarMass(*parseFormula("SO4^2-")), 32.06 + 4 * 15.999, 1e-12);
  EXPECT_NEAR(molarMass(*parseFormula("Cu(OH)2")), 63.546 + 2 * (15.999 + 1.008), 1e-12);
  EXPECT_EQ(molarMass(*parseFormula("citrate^3-")), 0.0);
}

TEST(Formula, DeepNestingIsRefused) {
  EXPECT_FALSE(parseFormula(std::string(100000, '(') + "Cu" + std::string(100000, ')')));
  EXPECT_TRUE(parseFormula("((((Cu))))"));
}

TEST(Formula, NoTextMakesTheParserFall) {
  const std::string alphabet = "CuNHO()2.^+- aez9\xC2\xB7";
  std::mt19937 random(7);
  std::uniform_int_distribution<std::size_t> letter(0, alphabet.size() - 1), length(0, 24);
  int good = 0;
  for (int i = 0; i < 20000; ++i) {
    std::string text;
    for (std::size_t n = length(random); n > 0; --n) text += alphabet[letter(random)];
    const auto formula = parseFormula(text);
    if (!formula) {
      EXPECT_FALSE(formula.error().detail.empty());
      continue;
    }
    ++good;
    EXPECT_EQ(formula->text, text);
    EXPECT_TRUE(formula->opaque != !formula->elements.empty() || formula->elements.empty());
  }
  EXPECT_GT(good, 0);
}

}  // namespace
}  // namespace tw::io
