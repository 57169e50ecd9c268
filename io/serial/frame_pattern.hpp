// SPDX-License-Identifier: GPL-3.0-or-later
// Frames described by a regular expression whose named groups are channels. Kept apart: it alone needs
// the expression library.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace tw::io {

/// Group name and matched text of each group that took part; nullopt when the line does not match or the
/// expression gives up on it. An expression that cannot be compiled matches nothing.
[[nodiscard]] std::optional<std::vector<std::pair<std::string, std::string>>> matchPattern(
    const std::string& pattern, std::string_view line);

/// Empty when the expression can be used; else what is wrong with it (also when no group has a name).
[[nodiscard]] std::string patternFault(const std::string& pattern);

}  // namespace tw::io
