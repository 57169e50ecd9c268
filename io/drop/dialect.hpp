// SPDX-License-Identifier: GPL-3.0-or-later
// Which separator a table uses and where its header stands. Pure.
#pragma once

#include <optional>
#include <string>
#include <string_view>

#include "io/drop/header.hpp"

namespace tw::io {

struct Dialect {
  char separator = ',';
  Header header;
  int headerLine = 1;
};

/// The separator under which a header stands earliest in the first lines (on a tie the one with more
/// columns): the file's own `sep=` line and then `hint` only go first. nullopt = no readable header.
[[nodiscard]] std::optional<Dialect> findDialect(std::string_view text, const std::string& hint);

/// A first line `sep=;` of some spreadsheets; nullopt for any other line.
[[nodiscard]] std::optional<char> separatorLine(std::string_view line);

}  // namespace tw::io
