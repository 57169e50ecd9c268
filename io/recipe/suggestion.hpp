// SPDX-License-Identifier: GPL-3.0-or-later
// "did you mean ...?" for keys and names that nobody knows.
#pragma once

#include <string>
#include <vector>

namespace tw::io {

/// Insertions, deletions, substitutions and swaps of neighbours that turn one word into the other
/// (Damerau, Communications of the ACM 7 (1964) 171; restricted form).
[[nodiscard]] std::size_t editDistance(const std::string& a, const std::string& b);

/// The nearest of `known` within a third of the word's length (at least one step), else empty.
[[nodiscard]] std::string nearest(const std::string& word, const std::vector<std::string>& known);

/// `; did you mean "low"?` or empty.
[[nodiscard]] std::string didYouMean(const std::string& word, const std::vector<std::string>& known);

/// `a, b, c`.
[[nodiscard]] std::string listed(const std::vector<std::string>& words);

}  // namespace tw::io
