// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/suggestion.hpp"

#include <algorithm>

namespace tw::io {

std::size_t editDistance(const std::string& a, const std::string& b) {
  std::vector<std::vector<std::size_t>> cost(a.size() + 1, std::vector<std::size_t>(b.size() + 1));
  for (std::size_t i = 0; i <= a.size(); ++i) cost[i][0] = i;
  for (std::size_t j = 0; j <= b.size(); ++j) cost[0][j] = j;
  for (std::size_t i = 1; i <= a.size(); ++i) {
    for (std::size_t j = 1; j <= b.size(); ++j) {
      const std::size_t change = a[i - 1] == b[j - 1] ? 0 : 1;
      cost[i][j] = std::min({cost[i - 1][j] + 1, cost[i][j - 1] + 1, cost[i - 1][j - 1] + change});
      if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1]) {
        cost[i][j] = std::min(cost[i][j], cost[i - 2][j - 2] + 1);
      }
    }
  }
  return cost[a.size()][b.size()];
}

std::string nearest(const std::string& word, const std::vector<std::string>& known) {
  std::size_t best = std::max<std::size_t>(1, word.size() / 3) + 1;
  std::string found;
  for (const std::string& candidate : known) {
    const std::size_t distance = editDistance(word, candidate);
    if (distance < best && candidate != word) {
      best = distance;
      found = candidate;
    }
  }
  return found;
}

std::string didYouMean(const std::string& word, const std::vector<std::string>& known) {
  const std::string found = nearest(word, known);
  return found.empty() ? "" : "; did you mean \"" + found + "\"?";
}

std::string listed(const std::vector<std::string>& words) {
  std::string text;
  for (const std::string& word : words) text += (text.empty() ? "" : ", ") + word;
  return text;
}

}  // namespace tw::io
