// SPDX-License-Identifier: GPL-3.0-or-later
// The tables of a shop file. Inside io/recipe only.
#pragma once

#include <string>
#include <vector>

#include "io/recipe/shop.hpp"
#include "io/recipe/toml_reader.hpp"

namespace tw::io {

/// [[line]] with its [[line.tank]].
Line readLine(TableReader& reader);
/// [[drop]]; the path as written.
DropFolder readDrop(TableReader& reader);
/// [[serial]]; its tank must be one of `tanks`.
SerialPort readSerial(TableReader& reader, const std::vector<std::string>& tanks);
/// [[route]]
Route readRoute(TableReader& reader);

}  // namespace tw::io
