// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/check.hpp"

#include <gtest/gtest.h>

#include <algorithm>

#include "files.hpp"

namespace tw::io {
namespace {

using test::Folder;
using test::kConstants;
using test::kRecipe;
using test::shown;
using test::with;

TEST(Check, FindsNothingWrongWithGoodFiles) {
  const Folder folder;
  folder.write("constants/a.toml", kConstants);
  folder.write("r.toml", kRecipe);
  EXPECT_TRUE(checkPath(folder.path()).empty()) << shown(checkPath(folder.path()));
  EXPECT_TRUE(checkPath(folder.path() / "r.toml").empty());
  EXPECT_TRUE(checkPath(folder.path() / "constants" / "a.toml").empty());
}

TEST(Check, ListsTheFaultsOfAllFilesOnceEach) {
  const Folder folder;
  folder.write("constants/a.toml", with(kConstants, "sigma = 0.1", "sigam = 0.1"));
  folder.write("r.toml", kRecipe);
  folder.write("s.toml", kRecipe);
  folder.write("odd.toml", "format = \"tankward-recip/1\"\n");
  folder.write("none.toml", "x = 1\n");
  const auto faults = checkPath(folder.path());
  ASSERT_EQ(faults.size(), 3u) << shown(faults);
  const auto has = [&](const std::string& code) {
    return std::any_of(faults.begin(), faults.end(), [&](const auto& fault) { return fault.code == code; });
  };
  EXPECT_TRUE(has("unknown_key"));
  EXPECT_TRUE(has("unknown_format"));
  EXPECT_TRUE(has("missing_key"));
}

TEST(Check, UsesTheConstantsItIsGiven) {
  const Folder folder;
  folder.write("other/a.toml", kConstants);
  folder.write("r/constants/a.toml", "format = \"tankward-constants/1\"\n");
  const auto recipe = folder.write("r/r.toml", kRecipe);
  EXPECT_FALSE(checkPath(recipe).empty());
  EXPECT_TRUE(checkPath(recipe, folder.path() / "other").empty());
}

TEST(Check, ListsEachSpeciesAndSolidThatTakesPartWithItsSetAndSource) {
  const Folder folder;
  folder.write("constants/a.toml", kConstants);
  folder.write("r.toml", kRecipe);
  const std::string list = listPath(folder.path());
  for (const char* text :
       {"sample-bath", "species NH4^+ | set I0", "solid Cu(OH)2 fresh | set I0", "invented"}) {
    EXPECT_NE(list.find(text), std::string::npos) << text << "\n" << list;
  }
  EXPECT_EQ(list.find("citrate"), std::string::npos);
}

TEST(Check, SaysThatAFileIsNotThere) {
  const auto faults = checkPath("/nowhere/at/all.toml");
  ASSERT_EQ(faults.size(), 1u);
  EXPECT_EQ(faults[0].code, "cannot_read");
}

}  // namespace
}  // namespace tw::io
