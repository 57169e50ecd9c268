// SPDX-License-Identifier: GPL-3.0-or-later
// The structured log: one line an entry, `key=value` pairs, to stderr (and so to the journal).
#pragma once

#include <initializer_list>
#include <string>
#include <string_view>
#include <utility>

namespace tw::io {

enum class LogLevel { Debug, Info, Warning, Error };

/// `event` is a stable word ("reading_stored"); fields follow in the given order, values quoted where
/// they hold blanks. Thread-safe. Never log a secret.
void log(LogLevel level, std::string_view event,
         std::initializer_list<std::pair<std::string_view, std::string>> fields = {});
/// Entries below `level` are dropped; default Info.
void setLogLevel(LogLevel level);

}  // namespace tw::io
