// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/suggestion.hpp"

#include <gtest/gtest.h>

namespace tw::io {
namespace {

TEST(Suggestion, CountsInsertionsDeletionsChangesAndSwaps) {
  EXPECT_EQ(editDistance("low", "low"), 0u);
  EXPECT_EQ(editDistance("low", "lows"), 1u);
  EXPECT_EQ(editDistance("volume", "voluem"), 1u);
  EXPECT_EQ(editDistance("kitten", "sitting"), 3u);  // Levenshtein's usual example, worked by hand
  EXPECT_EQ(editDistance("", "abc"), 3u);
}

TEST(Suggestion, NamesTheNearestOnlyWhenItIsNear) {
  EXPECT_EQ(nearest("tagret", {"low", "target", "high"}), "target");
  EXPECT_EQ(nearest("banana", {"low", "target", "high"}), "");
  EXPECT_EQ(didYouMean("hihg", {"low", "target", "high"}), "; did you mean \"high\"?");
  EXPECT_EQ(didYouMean("zzz", {"low"}), "");
}

}  // namespace
}  // namespace tw::io
