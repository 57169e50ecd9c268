// SPDX-License-Identifier: GPL-3.0-or-later
#include <gtest/gtest.h>

#include <algorithm>

#include "files.hpp"
#include "io/recipe/recipe.hpp"

namespace tw::io {
namespace {

using test::Folder;
using test::kConstants;
using test::kRecipe;
using test::shown;
using test::with;

class Values : public testing::Test {
 protected:
  Recipe load(const std::string& text) {
    m_folder.write("constants/a.toml", kConstants);
    auto recipe = loadRecipe(m_folder.write("r.toml", text));
    EXPECT_TRUE(recipe) << shown(recipe.error());
    return recipe ? *recipe : Recipe{};
  }
  Folder m_folder;
};

TEST_F(Values, GoToMolesAndBack) {
  const Recipe recipe = load(kRecipe);
  const Channel& copper = *recipe.channel("copper");
  EXPECT_NEAR(*toCanonical(copper, 22.0), 22.0 / 63.546, 1e-15);
  EXPECT_NEAR(*toCanonical(copper, 0.3, "mol/L"), 0.3, 1e-15);
  EXPECT_NEAR(*toCanonical(copper, 3.0, "oz/gal"), 3 * 28.349523125 / 3.785411784 / 63.546, 1e-14);
  EXPECT_NEAR(fromCanonical(copper, 22.0 / 63.546), 22.0, 1e-13);
  EXPECT_NEAR(*toCanonical(*recipe.channel("temperature"), 104, "degF"), 40.0, 1e-12);
}

TEST_F(Values, InAnotherKindOfUnitAreRefused) {
  const Recipe recipe = load(kRecipe);
  for (const char* unit : {"degC", "g/l", "mL"}) {
    const auto value = toCanonical(*recipe.channel("copper"), 1.0, unit);
    ASSERT_FALSE(value) << unit;
    EXPECT_EQ(value.error().code, "unit_mismatch");
    EXPECT_EQ(value.error().subject, "copper");
    EXPECT_NE(value.error().detail.find(unit), std::string::npos);
  }
}

TEST_F(Values, FillTheSolversInputInComponentOrder) {
  const Recipe recipe = load(kRecipe);
  const auto input =
      liquorInput(recipe, {{"copper", 0.35}, {"ammonia", 5.0}, {"ph", 10.2}, {"temperature", 40.0}});
  ASSERT_TRUE(input);
  EXPECT_EQ(input->temperature_C, 40.0);
  EXPECT_FALSE(input->sampleTemperature_C);
  EXPECT_EQ(input->value, (std::vector<double>{0.35, 5.0, 10.2, 0.45, 0.0}));
}

TEST_F(Values, NameEveryMissingChannel) {
  const auto input = liquorInput(load(kRecipe), {{"copper", 0.35}, {"ph", 10.2}});
  ASSERT_FALSE(input);
  ASSERT_EQ(input.error().size(), 2u);
  EXPECT_EQ(input.error()[0].code, "missing_channel");
  EXPECT_EQ(input.error()[0].subject, "ammonia");
  EXPECT_EQ(input.error()[1].subject, "temperature");
}

TEST_F(Values, NeededAreTheComponentsChannelsAndTemperature) {
  EXPECT_EQ(neededChannels(load(kRecipe)),
            (std::vector<std::string>{"copper", "ammonia", "ph", "temperature"}));
}

TEST_F(Values, ASampleTemperatureOverridesTheRecipes) {
  const Recipe recipe = load(
      with(kRecipe, "volume_L = 900", "volume_L = 900\nph_taken_at = \"sample\"\nsample_temperature_C = 22"));
  EXPECT_TRUE(recipe.system.phTakenAtSample);
  ChannelValues values = targetValues(recipe);
  values.erase("sample_temperature");
  EXPECT_EQ(liquorInput(recipe, values)->sampleTemperature_C, 22.0);
  values["sample_temperature"] = 27.0;
  EXPECT_EQ(liquorInput(recipe, values)->sampleTemperature_C, 27.0);
  ASSERT_NE(recipe.channel("sample_temperature"), nullptr);
}

TEST_F(Values, TargetsAreEveryChannelsInCanonicalUnits) {
  const auto values = targetValues(load(kRecipe));
  EXPECT_EQ(values.size(), 4u);
  EXPECT_NEAR(values.at("copper"), 22.0 / 63.546, 1e-15);
  EXPECT_EQ(values.at("ph"), 10.2);
  EXPECT_EQ(values.at("temperature"), 40.0);
}

TEST_F(Values, RatiosCompareMolesOrMasses) {
  const ChannelValues values = {{"copper", 0.5}, {"ammonia", 4.0}};
  const Recipe recipe = load(kRecipe);
  const auto byMole = ratioValues(recipe, values);
  ASSERT_EQ(byMole.size(), 1u);
  EXPECT_NEAR(byMole[0].value, 8.0, 1e-12);
  const Recipe masses = load(with(kRecipe, "by = \"mole\"", "by = \"mass\""));
  EXPECT_NEAR(ratioValues(masses, values)[0].value, 8.0 * 17.031 / 63.546, 1e-12);
  EXPECT_TRUE(ratioValues(recipe, {{"copper", 0.5}}).empty());
}

TEST_F(Values, GuardsSeeChannelUnits) {
  const Recipe recipe =
      load(with(kRecipe, "by = \"mole\"", "by = \"mole\"\nguard = { act_low = 4, caution_low = 5 }"));
  const auto guards = guardValues(recipe, {{"copper", 0.5}, {"ammonia", 4.0}});
  ASSERT_EQ(guards.size(), 2u);
  EXPECT_EQ(guards[0].guard.id, "copper");
  EXPECT_NEAR(guards[0].value, 31.773, 1e-9);
  EXPECT_EQ(guards[0].target, 22.0);
  EXPECT_EQ(guards[1].guard.id, "ammonia-to-copper");
  EXPECT_NEAR(guards[1].value, 8.0, 1e-12);
}

TEST_F(Values, AConcentrationNobodyGivesAMassForStaysInGrams) {
  const Recipe recipe = load(with(kRecipe, "[[ratio]]", R"([[channel]]
id = "carbonate"
unit = "oz/gal"
low = 0
target = 1
high = 2
plausible = [0, 20]

[[ratio]])"));
  const Channel& channel = *recipe.channel("carbonate");
  EXPECT_EQ(channel.canonicalUnit, "g/L");
  EXPECT_NEAR(*toCanonical(channel, 1.0), 7.489151707, 1e-8);
  EXPECT_FALSE(toCanonical(channel, 1.0, "mol/L"));
}

}  // namespace
}  // namespace tw::io
