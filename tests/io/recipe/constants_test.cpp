// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/constants.hpp"

#include <gtest/gtest.h>

#include "files.hpp"

namespace tw::io {
namespace {

using test::Folder;
using test::kConstants;
using test::lineOf;
using test::shown;
using test::with;

struct FaultRow {
  const char* id;
  const char* from;
  const char* to;
  const char* code;
  const char* near;  ///< text on the line that the fault must name
  const char* says;  ///< part of the detail
};
void PrintTo(const FaultRow& row, std::ostream* out) { *out << row.id; }
class BadConstants : public testing::TestWithParam<FaultRow> {};

TEST_P(BadConstants, NamesFileLineAndReason) {
  const auto& row = GetParam();
  const Folder folder;
  const std::string text = with(kConstants, row.from, row.to);
  const auto file = folder.write("a.toml", text);
  const auto library = loadConstants(folder.path());
  ASSERT_FALSE(library);
  const std::string where = file.string() + ":" + std::to_string(lineOf(text, row.near));
  bool found = false;
  for (const auto& fault : library.error()) {
    found = found || (fault.code == row.code && fault.where == where &&
                      fault.detail.find(row.says) != std::string::npos);
  }
  EXPECT_TRUE(found) << "expected " << where << " [" << row.code << "] " << row.says << "\n"
                     << shown(library.error());
}

INSTANTIATE_TEST_SUITE_P(
    Table, BadConstants,
    testing::Values(
        FaultRow{"charge", "\"NH3\" = 1, \"H^+\" = 1 }\nlg_K = 9.0", "\"NH3\" = 1, \"H^+\" = 2 }\nlg_K = 9.0",
                 "charge_unbalanced", "\"H^+\" = 2", "charge +1"},
        FaultRow{"element_without_water", "\"H2O\" = 1, \"H^+\" = -1", "\"H^+\" = -1", "element_unbalanced",
                 "from = { \"Cu^2+\" = 1, \"H^+\" = -1", "state H2O"},
        FaultRow{"solid_charge", "\"OH^-\" = 2 }\nlg_K = -19", "\"OH^-\" = 3 }\nlg_K = -19",
                 "charge_unbalanced", "\"OH^-\" = 3", "adds up to -1"},
        FaultRow{"word_ligand_charge", "Cu(citrate)^-", "Cu(citrate)^2-", "charge_unbalanced",
                 "\"citrate^3-\" = 1 }", "charge -2"},
        FaultRow{"empty_source", "lg_K = 12.0\nsigma = 0.1\ndH_kJ_mol = -92.0\nsource = \"invented\"",
                 "lg_K = 12.0\nsigma = 0.1\ndH_kJ_mol = -92.0\nsource = \" \"", "missing_key",
                 "source = \" \"", "source is empty"},
        FaultRow{"provenance", "provenance = \"from memory\"", "provenance = \"from memori\"",
                 "unknown_value", "from memori", "did you mean \"from memory\"?"},
        FaultRow{"unknown_key", "sigma = 0.1", "sigam = 0.1", "unknown_key", "sigam",
                 "did you mean \"sigma\"?"},
        FaultRow{"wrong_type", "lg_K = 12.0", "lg_K = \"12\"", "wrong_type", "lg_K = \"12\"",
                 "expected a number"},
        FaultRow{"not_finite", "lg_K = 12.0", "lg_K = nan", "not_a_number", "lg_K = nan", "finite"},
        FaultRow{"negative_sigma", "sigma = 0.1", "sigma = -0.1", "out_of_range", "sigma = -0.1", "-0.1"},
        FaultRow{"medium", "medium = \"Na^+|Cl^-\"", "medium = \"NaCl\"", "bad_medium", "NaCl",
                 "cation|anion"},
        FaultRow{"divalent_medium", "medium = \"Na^+|Cl^-\"", "medium = \"Na^+|SO4^2-\"", "bad_medium",
                 "medium =", "1:1"},
        FaultRow{"hydroxide_row", "formula = \"CuOH^+\"\nfrom = { \"Cu^2+\" = 1, \"H2O\" = 1, \"H^+\" = -1 }",
                 "formula = \"OH^-\"\nfrom = { \"H2O\" = 1, \"H^+\" = -1 }", "reserved_species",
                 "formula = \"OH^-\"", "only a recipe"},
        FaultRow{"bad_formula", "formula = \"CuOH^+\"", "formula = \"CuOH+\"", "bad_formula", "CuOH+",
                 "CuOH+"},
        FaultRow{"no_molar_mass", "molar_mass = 97.561\n", "", "missing_key", "[[solid]]",
                 "molar_mass is missing"},
        FaultRow{"no_lg_K", "lg_K = 12.0\n", "", "missing_key", "[[species]]\nformula = \"Cu(NH3)4^2+\"",
                 "lg_K"},
        FaultRow{"gas", "of = \"NH3\"", "of = \"CN^-\"", "charge_unbalanced", "of = \"CN^-\"", "NH3"},
        FaultRow{"pair", "[\"NH4^+\", \"SO4^2-\"]", "[\"NH4^+\"]", "wrong_type", "[\"NH4^+\"]", "two"},
        FaultRow{"misspelled_word", "\"citrate^3-\" = 1 }", "\"citarte^3-\" = 1 }", "unknown_component",
                 "[[species]]\nformula = \"Cu(citrate)^-\"", "did you mean \"citrate^3-\"?"},
        FaultRow{"format", "tankward-constants/1", "tankward-constants/9", "unknown_format", "format",
                 "tankward-constants/1"},
        FaultRow{"not_toml", "lg_K = 12.0", "lg_K = = 12", "bad_toml", "lg_K = = 12", "TOML"}),
    [](const auto& row) { return std::string(row.param.id); });

TEST(Constants, EveryRowIsRead) {
  const Folder folder;
  folder.write("a.toml", kConstants);
  const auto library = loadConstants(folder.path());
  ASSERT_TRUE(library) << shown(library.error());
  EXPECT_EQ(library->components.size(), 4u);
  EXPECT_EQ(library->species.size(), 5u);
  EXPECT_EQ(library->solids.size(), 2u);
  EXPECT_EQ(library->gases.size(), 1u);
  EXPECT_EQ(library->interactions.size(), 2u);
  const ReactionRow& salty = library->species[1];
  EXPECT_EQ(salty.set, "salty");
  EXPECT_EQ(salty.K.I, 1.0);
  EXPECT_EQ(salty.K.medium, "Na^+|Cl^-");
  EXPECT_FALSE(salty.K.dH_kJ_mol);
  EXPECT_EQ(library->species[2].K.dH_kJ_mol, -92.0);
  EXPECT_EQ(library->species[0].K.T_C, 25.0);
}

TEST(Constants, ADuplicateIsAnErrorWithinOneSetAcrossFiles) {
  const Folder folder;
  folder.write("a.toml", kConstants);
  folder.write("b.toml", R"(format = "tankward-constants/1"
[[species]]
formula = "NH4^+"
from = { "NH3" = 1, "H^+" = 1 }
lg_K = 9.1
source = "invented"
provenance = "from memory"
[[species]]
formula = "NH4^+"
set = "third"
from = { "NH3" = 1, "H^+" = 1 }
lg_K = 9.1
source = "invented"
provenance = "from memory"
)");
  const auto library = loadConstants(folder.path());
  ASSERT_FALSE(library);
  ASSERT_EQ(library.error().size(), 1u) << shown(library.error());
  EXPECT_EQ(library.error()[0].code, "duplicate");
  EXPECT_EQ(library.error()[0].where, (folder.path() / "b.toml").string() + ":2");
  EXPECT_NE(library.error()[0].detail.find("a.toml:"), std::string::npos);
}

TEST(Constants, AllFaultsOfAFileAreListed) {
  const Folder folder;
  std::string text = with(kConstants, "sigma = 0.1", "sigam = 0.1");
  text = with(text, "lg_K = -8.0", "lg_K = \"x\"");
  text = with(text, "of = \"NH3\"", "off = \"NH3\"");
  folder.write("a.toml", text);
  const auto library = loadConstants(folder.path());
  ASSERT_FALSE(library);
  EXPECT_EQ(library.error().size(), 4u) << shown(library.error());  // off: unknown, and of missing
}

TEST(Constants, AMissingFolderIsAFault) {
  const Folder folder;
  const auto library = loadConstants(folder.path() / "none");
  ASSERT_FALSE(library);
  EXPECT_EQ(library.error()[0].code, "cannot_read");
}

TEST(Constants, TheFolderGivenComesBeforeTheOneBesideTheRecipe) {
  const Folder folder;
  const auto recipe = folder.write("r.toml", "");
  std::filesystem::create_directories(folder.path() / "constants");
  EXPECT_EQ(*constantsDirectory(recipe, {}), folder.path() / "constants");
  EXPECT_EQ(*constantsDirectory(recipe, "/elsewhere"), "/elsewhere");
}

TEST(Constants, WithoutAnyBesideTheRecipeTheLibraryOfTheProgramIsTaken) {
  const Folder folder;
  const auto found = constantsDirectory(folder.write("r.toml", ""), {});
  ASSERT_TRUE(found);
  EXPECT_TRUE(std::filesystem::is_directory(*found)) << *found;
}

}  // namespace
}  // namespace tw::io
