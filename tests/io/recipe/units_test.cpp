// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/units.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <random>
#include <sstream>

namespace tw::io {
namespace {

struct ConversionRow {
  const char* id;
  double value;
  const char* from;
  const char* to;
  double formulaMass, expected;
};

void PrintTo(const ConversionRow& row, std::ostream* out) { *out << row.id; }

class Conversion : public testing::TestWithParam<ConversionRow> {};

TEST_P(Conversion, GivesTheNumberOfTheTable) {
  const auto& row = GetParam();
  const auto converted = convert(row.value, row.from, row.to, row.formulaMass);
  ASSERT_TRUE(converted) << converted.error().detail;
  EXPECT_NEAR(*converted, row.expected, 1e-12 * std::abs(row.expected));
}

// Exact definitions of NIST SP 811 (from memory): ounce 28.349523125 g, pound 453.59237 g, US gallon
// 3.785411784 L, degF = 1.8 degC + 32. The quotients are worked out from them by hand.
INSTANTIATE_TEST_SUITE_P(
    Table, Conversion,
    testing::Values(ConversionRow{"ounce_per_gallon", 1, "oz/gal", "g/L", 0, 28.349523125 / 3.785411784},
                    ConversionRow{"gram_per_litre_back", 28.349523125, "g/L", "oz/gal", 0, 3.785411784},
                    ConversionRow{"milligram", 2500, "mg/L", "g/L", 0, 2.5},
                    ConversionRow{"millimole", 12, "mmol/L", "mol/L", 0, 0.012},
                    ConversionRow{"boiling", 212, "degF", "degC", 0, 100},
                    ConversionRow{"forty_below", -40, "degC", "degF", 0, -40},
                    ConversionRow{"kelvin", 313.15, "K", "degC", 0, 40},
                    ConversionRow{"to_kelvin", 25, "degC", "K", 0, 298.15},
                    ConversionRow{"gallon", 1, "US-gal", "L", 0, 3.785411784},
                    ConversionRow{"pound", 1, "lb", "kg", 0, 0.45359237},
                    ConversionRow{"minute", 90, "min", "h", 0, 1.5},
                    ConversionRow{"milliequivalent", 5, "mEq", "mmol", 0, 5},
                    ConversionRow{"copper_to_moles", 63.546, "g/L", "mol/L", 63.546, 1},
                    ConversionRow{"copper_ounces", 3, "oz/gal", "mol/L", 63.546,
                                  3 * 28.349523125 / 3.785411784 / 63.546},
                    ConversionRow{"moles_to_grams", 0.5, "mol/L", "mg/L", 17.031, 8515.5},
                    ConversionRow{"same", 0.1, "oz/gal", "oz/gal", 0, 0.1}),
    [](const auto& row) { return std::string(row.param.id); });

TEST(Units, FixedPointsOfTemperatureComeOutExact) {
  EXPECT_EQ(*convert(212, "degF", "degC"), 100.0);
  EXPECT_EQ(*convert(32, "degF", "degC"), 0.0);
}

TEST(Units, EveryUnitOfTheContractIsKnown) {
  std::istringstream names(
      "g/L mg/L mol/L mmol/L oz/gal g/mol mol mmol mEq mV A A.h % degC degF K pH mL L US-gal kg g lb h min");
  for (std::string name; names >> name;) {
    const auto unit = findUnit(name);
    ASSERT_TRUE(unit) << name;
    EXPECT_EQ(unit->name, name);
  }
  ASSERT_TRUE(findUnit(""));
  EXPECT_EQ(findUnit("")->dimension, Dimension{});
  EXPECT_FALSE(findUnit("G/L"));
  EXPECT_FALSE(findUnit("gal"));
}

TEST(Units, GoingThereAndBackIsIdentity) {
  std::istringstream names("g/L mg/L oz/gal mol/L mmol/L");
  std::vector<std::string> units{std::istream_iterator<std::string>(names), {}};
  std::mt19937 random(20260302);
  std::uniform_real_distribution<double> lg(-6, 6);
  for (int i = 0; i < 500; ++i) {
    const double value = std::pow(10, lg(random));
    for (const auto& from : units) {
      for (const auto& to : units) {
        const auto there = convert(value, from, to, 63.546);
        ASSERT_TRUE(there) << from << " " << to;
        const auto back = convert(*there, to, from, 63.546);
        ASSERT_TRUE(back);
        EXPECT_NEAR(*back, value, 4e-16 * 4 * value) << from << " " << to;
      }
    }
  }
}

TEST(Units, AnUnknownUnitNamesItselfAndTheKnownOnes) {
  const auto converted = convert(1, "g/l", "g/L");
  ASSERT_FALSE(converted);
  EXPECT_EQ(converted.error().code, "unit_unknown");
  EXPECT_NE(converted.error().detail.find("\"g/l\""), std::string::npos);
  EXPECT_NE(converted.error().detail.find("mg/L"), std::string::npos);
}

TEST(Units, UnlikeThingsDoNotConvert) {
  for (const auto& [from, to] : {std::pair{"g/L", "degC"}, std::pair{"mL", "g"}, std::pair{"pH", "mol/L"},
                                 std::pair{"g/L", "mol/L"}}) {
    const auto converted = convert(1, from, to);
    ASSERT_FALSE(converted) << from << to;
    EXPECT_EQ(converted.error().code, "unit_mismatch");
    EXPECT_NE(converted.error().detail.find(from), std::string::npos);
    EXPECT_NE(converted.error().detail.find(to), std::string::npos);
  }
}

TEST(Units, DimensionsReadAsPeopleWriteThem) {
  EXPECT_EQ(dimensionText(findUnit("oz/gal")->dimension), "g/L");
  EXPECT_EQ(dimensionText(findUnit("A.h")->dimension), "h.A");
  EXPECT_EQ(dimensionText({}), "no unit");
}

}  // namespace
}  // namespace tw::io
