// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/recipe.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <nlohmann/json.hpp>

#include "files.hpp"
#include "io/recipe/digest.hpp"

namespace tw::io {
namespace {

using model::SetBy;
using test::Folder;
using test::kConstants;
using test::kRecipe;
using test::shown;
using test::with;

class RecipeFile : public testing::Test {
 protected:
  Recipe load(const std::string& text) {
    m_folder.write("constants/a.toml", kConstants);
    auto recipe = loadRecipe(m_folder.write("r.toml", text));
    EXPECT_TRUE(recipe) << shown(recipe.error());
    return recipe ? *recipe : Recipe{};
  }
  Folder m_folder;
};

std::vector<std::string> speciesOf(const Recipe& recipe) {
  std::vector<std::string> names;
  for (const auto& species : recipe.system.species) names.push_back(species.formula);
  return names;
}

const model::Species& species(const Recipe& recipe, const std::string& name) {
  for (const auto& one : recipe.system.species) {
    if (one.formula == name) return one;
  }
  throw std::logic_error("no species " + name);
}

TEST_F(RecipeFile, GivesTheSolverItsSystem) {
  const Recipe recipe = load(kRecipe);
  EXPECT_EQ(recipe.id, "sample-bath");
  EXPECT_EQ(recipe.horizon_h, 24.0);
  EXPECT_EQ(recipe.maxReadingAge_h, 26.0);
  EXPECT_EQ(recipe.sets, std::vector<std::string>{"I0"});
  const auto& system = recipe.system;
  EXPECT_EQ(system.activityModel, model::ActivityModel::Davies);
  ASSERT_EQ(system.components.size(), 5u);
  EXPECT_EQ(system.components[system.metal].formula, "Cu^2+");
  EXPECT_TRUE(system.components[system.metal].isMetal);
  EXPECT_EQ(system.components[system.proton].formula, "H^+");
  ASSERT_EQ(system.ligands.size(), 1u);
  EXPECT_EQ(system.components[system.ligands[0]].formula, "NH3");
  EXPECT_EQ(system.components[4].setBy, SetBy::Balance);
  EXPECT_EQ(system.components[4].other, "Cl^-");
  EXPECT_EQ(system.components[4].otherCharge, -1);
  EXPECT_EQ(recipe.sources[3].mol_L, 0.45);
  ASSERT_EQ(system.solids.size(), 2u);
  EXPECT_EQ(system.solids[0].dissolution.hydroxide, 2.0);
  EXPECT_EQ(system.solids[1].dissolution.water, -1.0);
  EXPECT_EQ(system.solids[1].role, model::SolidRole::Aged);
  const auto& limit = recipe.limits[static_cast<std::size_t>(model::MarginKind::PhUp)];
  ASSERT_TRUE(limit);
  EXPECT_EQ(limit->caution, 0.6);
  EXPECT_FALSE(recipe.limits[static_cast<std::size_t>(model::MarginKind::Warming)]);
}

TEST_F(RecipeFile, LetsEverySpeciesTakePartThatItsComponentsCanMake) {
  const Recipe recipe = load(kRecipe);
  EXPECT_EQ(speciesOf(recipe), (std::vector<std::string>{"NH4^+", "Cu(NH3)4^2+", "CuOH^+"}));
  const auto& hydroxo = species(recipe, "CuOH^+").formation;
  EXPECT_EQ(hydroxo.water, 1.0);
  EXPECT_EQ(hydroxo.hydroxide, 0.0);
  EXPECT_EQ(hydroxo.terms.size(), 2u);
}

TEST_F(RecipeFile, LeavesExcludedSpeciesOut) {
  const Recipe recipe = load(with(kRecipe, "volume_L = 900", "volume_L = 900\nexclude = [\"CuOH^+\"]"));
  EXPECT_EQ(speciesOf(recipe), (std::vector<std::string>{"NH4^+", "Cu(NH3)4^2+"}));
}

TEST_F(RecipeFile, TakesTheFirstListedSet) {
  const Recipe salty = load(with(kRecipe, "volume_L = 900", "volume_L = 900\nsets = [\"salty\", \"I0\"]"));
  EXPECT_EQ(species(salty, "NH4^+").formation.K.lgK, 9.5);
  EXPECT_EQ(species(salty, "CuOH^+").formation.K.lgK, -8.0);
  const Recipe plain = load(with(kRecipe, "volume_L = 900", "volume_L = 900\nsets = [\"I0\", \"salty\"]"));
  EXPECT_EQ(species(plain, "NH4^+").formation.K.lgK, 9.0);
}

TEST_F(RecipeFile, DrawsOnNoSetItDoesNotList) {
  const std::string text = with(kRecipe, "volume_L = 900", "volume_L = 900\nsets = [\"salty\"]");
  const auto start = text.find("[[watch]]");
  const auto end = text.find("[limits]");
  const Recipe recipe = load(text.substr(0, start) + text.substr(end));
  EXPECT_EQ(speciesOf(recipe), std::vector<std::string>{"NH4^+"});
}

TEST_F(RecipeFile, OverridesTheLibraryByItsOwnRow) {
  const Recipe recipe = load(std::string(kRecipe) + R"(
[[species]]
formula = "CuOH^+"
from = { "Cu^2+" = 1, "OH^-" = 1 }
lg_K = 6.5
source = "invented"
provenance = "from memory"
)");
  EXPECT_EQ(speciesOf(recipe).size(), 3u);
  EXPECT_EQ(species(recipe, "CuOH^+").formation.K.lgK, 6.5);
  EXPECT_EQ(species(recipe, "CuOH^+").formation.hydroxide, 1.0);
  const auto row =
      std::find_if(recipe.rows.begin(), recipe.rows.end(), [](const auto& r) { return r.name == "CuOH^+"; });
  EXPECT_NE(row->where.find("r.toml:"), std::string::npos);
}

TEST_F(RecipeFile, ReplacesKwByItsOwnHydroxideRow) {
  EXPECT_FALSE(load(kRecipe).system.ownHydroxide);
  const Recipe recipe = load(std::string(kRecipe) + R"(
[[species]]
formula = "OH^-"
from = { "H2O" = 1, "H^+" = -1 }
lg_K = -13.8
dH_kJ_mol = 55.8
source = "invented"
provenance = "from memory"
)");
  ASSERT_TRUE(recipe.system.ownHydroxide);
  EXPECT_EQ(recipe.system.ownHydroxide->formation.K.lgK, -13.8);
  EXPECT_EQ(recipe.system.ownHydroxide->charge, -1);
  EXPECT_EQ(speciesOf(recipe).size(), 3u);
}

TEST_F(RecipeFile, AlwaysHasPhAndTemperature) {
  std::string text = kRecipe;
  for (const char* id : {"id = \"ph\"", "id = \"temperature\""}) {
    const auto at = text.find(id);
    const auto start = text.rfind("[[channel]]", at);
    text.erase(start, text.find("\n[[", at) + 1 - start);
  }
  const Recipe recipe = load(text);
  ASSERT_NE(recipe.channel("ph"), nullptr);
  ASSERT_NE(recipe.channel("temperature"), nullptr);
  EXPECT_EQ(recipe.channel("ph")->canonicalUnit, "pH");
  EXPECT_EQ(recipe.channel("temperature")->canonicalUnit, "degC");
  EXPECT_LT(recipe.channel("ph")->plausibleLow, recipe.channel("ph")->plausibleHigh);
}

TEST_F(RecipeFile, AddsTheProtonItDoesNotName) {
  const Recipe recipe =
      load(with(kRecipe, "[[component]]\nformula = \"H^+\"\nset_by = \"ph\"\nchannel = \"ph\"\n", ""));
  const auto& proton = recipe.system.components[recipe.system.proton];
  EXPECT_EQ(proton.formula, "H^+");
  EXPECT_EQ(proton.setBy, SetBy::Ph);
  EXPECT_EQ(recipe.sources[recipe.system.proton].channel, "ph");
}

TEST_F(RecipeFile, ReadsChannelsGuardsRatiosAndStocks) {
  const Recipe recipe = load(kRecipe);
  const Channel& copper = *recipe.channel("copper");
  EXPECT_EQ(copper.title, "Copper metal");
  EXPECT_EQ(copper.canonicalUnit, "mol/L");
  EXPECT_EQ(copper.formulaMass, 63.546);
  EXPECT_EQ(copper.maxAge_h, 26.0);
  EXPECT_EQ(recipe.channel("ammonia")->maxAge_h, 12.0);
  EXPECT_EQ(recipe.channel("ammonia")->title, "ammonia");
  ASSERT_TRUE(copper.guard);
  EXPECT_EQ(copper.guard->actLow, 10.0);
  EXPECT_FALSE(copper.guard->actHigh);
  ASSERT_EQ(recipe.ratios.size(), 1u);
  EXPECT_TRUE(recipe.ratios[0].byMole);
  ASSERT_EQ(recipe.stocks.size(), 2u);
  EXPECT_EQ(recipe.stocks[1].unit, "kg");
  EXPECT_EQ(recipe.stocks[1].after, std::vector<std::string>{"aqua-ammonia"});
}

TEST_F(RecipeFile, QuotesCausticAsHydroxideUnlessToldOtherwise) {
  const std::string caustic =
      with(with(kRecipe, "set_by = \"ph\"\nchannel = \"ph\"",
                "set_by = \"hydroxide\"\nchannel = \"caustic\"\nper_metal = { \"Cu^2+\" = 2 }"),
           "[[ratio]]", R"([[channel]]
id = "caustic"
unit = "g/L"
low = 50
target = 60
high = 70
plausible = [0, 200]

[[ratio]])");
  const Recipe plain = load(caustic);
  EXPECT_NEAR(*toCanonical(*plain.channel("caustic"), 17.007), 1.0, 1e-12);
  const auto& proton = plain.system.components[plain.system.proton];
  ASSERT_EQ(proton.perMetal.size(), 1u);
  EXPECT_EQ(proton.perMetal[0].component, plain.system.metal);
  EXPECT_EQ(proton.perMetal[0].nu, 2.0);
  const Recipe soda =
      load(with(caustic, "plausible = [0, 200]", "plausible = [0, 200]\nas_formula_mass = 39.997"));
  EXPECT_NEAR(*toCanonical(*soda.channel("caustic"), 39.997), 1.0, 1e-12);
}

TEST_F(RecipeFile, ReadsAScaleWithLimitsOfItsOwn) {
  const Recipe recipe = load(with(kRecipe, "solid = \"CuO aged\"\nrole = \"aged\"", R"(solid = "CuO aged"
role = "scale"
threshold = 0.3
threshold_sigma = 0.1
threshold_from = "jar test 2026-03-02"
limits = { ph_up = { caution = 0.3, act = 0.15 }, lg_saturation = { caution = -0.3, act = 0.0 } })"));
  const auto& scale = recipe.system.solids[1];
  EXPECT_EQ(scale.role, model::SolidRole::Scale);
  EXPECT_EQ(scale.threshold, 0.3);
  ASSERT_EQ(scale.limits.size(), 1u);
  EXPECT_EQ(scale.limits[0].first, model::MarginKind::PhUp);
  ASSERT_TRUE(scale.saturationLimit);
  EXPECT_EQ(scale.saturationLimit->caution, -0.3);
}

TEST_F(RecipeFile, ReadsSitAsAnyOtherActivityModel) {
  const Recipe recipe =
      load(with(kRecipe, "\"davies\"", "\"sit\"\nwater_activity = true\nwater_kg_L = 0.95"));
  EXPECT_EQ(recipe.system.activityModel, model::ActivityModel::Sit);
  EXPECT_TRUE(recipe.system.waterActivity);
  EXPECT_EQ(recipe.system.water_kg_L, 0.95);
}

TEST_F(RecipeFile, NamesHydroxideAsALigandWithoutAComponent) {
  const Recipe recipe = load(with(kRecipe, "ligands = [\"NH3\"]", "ligands = [\"NH3\", \"OH^-\"]"));
  EXPECT_TRUE(recipe.system.hydroxideIsLigand);
  EXPECT_EQ(recipe.system.ligands.size(), 1u);
}

TEST_F(RecipeFile, WorksMolarMassOutWhereNobodyStatesIt) {
  const Recipe recipe = load(kRecipe);
  EXPECT_NEAR(recipe.system.components[3].molarMass, 96.056, 1e-9);  // SO4, IUPAC 2021
  const Recipe own = load(with(kRecipe, "mol_L = 0.45", "mol_L = 0.45\nmolar_mass = 96.0"));
  EXPECT_EQ(own.system.components[3].molarMass, 96.0);
}

TEST_F(RecipeFile, IsNamedByTheHashOfItsBytesAndOfWhatItResolvesTo) {
  const Recipe plain = load(kRecipe);
  EXPECT_EQ(plain.sha256, sha256Hex(kRecipe));
  EXPECT_EQ(plain.resolvedSha256, sha256Hex(plain.resolvedJson));
  const Recipe commented = load(std::string(kRecipe) + "# a remark\n");
  EXPECT_NE(commented.sha256, plain.sha256);
  EXPECT_EQ(commented.resolvedSha256, plain.resolvedSha256);
  m_folder.write("constants/a.toml", with(kConstants, "lg_K = 12.0", "lg_K = 12.1"));
  const auto moved = loadRecipe(m_folder.path() / "r.toml");
  ASSERT_TRUE(moved);
  EXPECT_EQ(moved->sha256, commented.sha256);
  EXPECT_NE(moved->resolvedSha256, plain.resolvedSha256);
}

TEST_F(RecipeFile, ResolvesToSortedJsonWithTheConstantsItUses) {
  const auto resolved = nlohmann::json::parse(load(kRecipe).resolvedJson);
  EXPECT_EQ(resolved.at("recipe").at("bath").at("volume_L"), 900.0);
  EXPECT_EQ(resolved.at("species").size(), 3u);
  EXPECT_EQ(resolved.at("solid").size(), 2u);
  EXPECT_EQ(resolved.at("gas").size(), 1u);
  ASSERT_EQ(resolved.at("interaction").size(), 1u);  // the perchlorate pair has no part here
  EXPECT_EQ(resolved.at("interaction")[0].at("epsilon"), 0.1);
  EXPECT_EQ(resolved.at("species")[0].at("source"), "invented");
}

TEST(Digest, MatchesTheStandardsExample) {
  // FIPS 180-2, appendix B.1: SHA-256 of "abc".
  EXPECT_EQ(sha256Hex("abc"), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
}

}  // namespace
}  // namespace tw::io
