// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/cautions.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <sstream>

namespace tw::io {
namespace {

TEST(Cautions, EveryKeyOfTheContractHasAText) {
  std::istringstream keys(
      "ammonia cyanide caustic acid formaldehyde nickel cadmium oxidiser hypophosphite hot ventilation "
      "barium-fluoride silver-ammonia electrical");
  std::size_t count = 0;
  for (std::string key; keys >> key; ++count) {
    const Caution* caution = findCaution(key);
    ASSERT_NE(caution, nullptr) << key;
    EXPECT_FALSE(caution->title.empty());
    EXPECT_GT(caution->text.size(), 30u);
  }
  EXPECT_EQ(cautions().size(), count);
  EXPECT_EQ(findCaution("Ammonia"), nullptr);
}

TEST(Cautions, TheFooterDefersToCodesDataSheetsAndLicence) {
  for (const char* word : {"codes", "safety data sheet", "licensed"}) {
    EXPECT_NE(cautionFooter().find(word), std::string::npos) << word;
  }
}

TEST(Cautions, AcidAmmoniumAndOxidiserNeverGoToCyanide) {
  for (const char* kind : {"acid", "ammonium", "oxidiser"}) {
    const auto rules = kindRulesFor({kind}, {"cyanide"});
    ASSERT_FALSE(rules.empty()) << kind;
    EXPECT_EQ(rules.front().verdict, KindVerdict::Refuse) << kind;
  }
}

TEST(Cautions, RefusalsComeBeforeCautions) {
  const auto rules = kindRulesFor({"base", "oxidiser"}, {"ammonia"});
  ASSERT_EQ(rules.size(), 2u);
  EXPECT_EQ(rules[0].verdict, KindVerdict::Refuse);
  EXPECT_EQ(rules[1].verdict, KindVerdict::Caution);
}

TEST(Cautions, WaterToAHarmlessTankNeedsNoRule) { EXPECT_TRUE(kindRulesFor({"water"}, {"nickel"}).empty()); }

TEST(Cautions, RulesNameOnlyKnownKindsAndHazards) {
  for (const KindRule& rule : kindRules()) {
    EXPECT_NE(std::find(stockKinds().begin(), stockKinds().end(), rule.kind), stockKinds().end())
        << rule.kind;
    EXPECT_NE(findCaution(rule.hazard), nullptr) << rule.hazard;
    EXPECT_FALSE(rule.reason.empty());
  }
}

}  // namespace
}  // namespace tw::io
