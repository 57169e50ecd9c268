// SPDX-License-Identifier: GPL-3.0-or-later
// Every recipe and constants file of the source tree.
#include <gtest/gtest.h>

#include <algorithm>
#include <filesystem>

#include "files.hpp"
#include "io/recipe/check.hpp"
#include "io/recipe/recipe.hpp"

namespace tw::io {
namespace {

std::vector<std::filesystem::path> shipped() {
  std::vector<std::filesystem::path> files;
  for (const auto& entry :
       std::filesystem::directory_iterator(std::filesystem::path(TW_SOURCE_DIR) / "baths")) {
    if (entry.path().extension() == ".toml") files.push_back(entry.path());
  }
  std::sort(files.begin(), files.end());
  return files;
}

TEST(ShippedFiles, CheckWithoutAFault) {
  const auto faults = checkPath(std::filesystem::path(TW_SOURCE_DIR) / "baths");
  EXPECT_TRUE(faults.empty()) << test::shown(faults);
}

TEST(ShippedFiles, GiveASystemWithAWatchedSludge) {
  ASSERT_FALSE(shipped().empty());
  for (const auto& file : shipped()) {
    const auto recipe = loadRecipe(file);
    ASSERT_TRUE(recipe) << test::shown(recipe.error());
    EXPECT_FALSE(recipe->system.species.empty()) << file;
    EXPECT_TRUE(std::any_of(recipe->system.solids.begin(), recipe->system.solids.end(),
                            [](const auto& solid) { return solid.role == model::SolidRole::Sludge; }))
        << file;
    EXPECT_TRUE(liquorInput(*recipe, targetValues(*recipe))) << file;
    for (const auto& row : recipe->rows) EXPECT_FALSE(row.source.empty()) << file << row.name;
  }
}

TEST(ShippedFiles, WorksheetsGiveTheTargetFromSomeTitre) {
  // A sheet that can never reach its channel's target holds a slip in a volume or a strength.
  for (const auto& file : shipped()) {
    const auto recipe = loadRecipe(file);
    ASSERT_TRUE(recipe) << test::shown(recipe.error());
    for (const Channel& channel : recipe->channels) {
      if (!channel.worksheet) continue;
      const auto& inputs = channel.worksheet->inputs;
      const auto burette =
          std::find_if(inputs.begin(), inputs.end(), [](const auto& i) { return !i.defaultValue; });
      ASSERT_NE(burette, inputs.end()) << file << channel.id;
      double least = 1e300, most = -1e300;
      for (int step = 0; step <= 20; ++step) {
        std::map<std::string, double> given;
        for (const auto& input : inputs) {
          if (input.defaultValue) continue;
          given[input.id] = input.plausibleLow + step * (input.plausibleHigh - input.plausibleLow) / 20;
        }
        const auto value = evaluateWorksheet(*recipe, channel, given, targetValues(*recipe));
        if (!value) continue;
        least = std::min(least, fromCanonical(channel, *value));
        most = std::max(most, fromCanonical(channel, *value));
      }
      EXPECT_LE(least, channel.target) << file << " " << channel.id;
      EXPECT_GE(most, channel.target) << file << " " << channel.id;
    }
  }
}

}  // namespace
}  // namespace tw::io
