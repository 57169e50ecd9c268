// SPDX-License-Identifier: GPL-3.0-or-later
// Where the recipes that came with the program are.
#pragma once

#include <filesystem>

namespace tw::io {

/// The folder of shipped recipes (its `constants/` inside): `share/tankward/baths` beside the running
/// program's `bin`, else the source tree's when the program runs from a build, else where it was
/// configured to be installed.
[[nodiscard]] std::filesystem::path shippedBaths();

}  // namespace tw::io
