// SPDX-License-Identifier: GPL-3.0-or-later
// Drop files as text: every dialect of FORMATS section 5, sorted into cells. Pure; no file access.
#pragma once

#include <string>
#include <string_view>

#include "io/incoming.hpp"
#include "io/local_time.hpp"

namespace tw::io {

/// What a file cannot say itself; empty = decide from the file.
struct TableHints {
  std::string decimal, separator, encoding, dateOrder;
};

/// Reads CSV, TSV, semicolon or bar tables (wide and long), JSON lines and event tables; `fileName`
/// only decides nothing and names the source. Header in any case, units in brackets, burette inputs as
/// `channel.input`. Refusal is per cell; a file with no readable header has headerReadable = false.
/// A file that `tankward export --csv` wrote is read back with its state, id and times.
IncomingBatch parseTable(std::string_view bytes, const std::string& fileName, const TimeZone& zone,
                         const TableHints& hints = {});

}  // namespace tw::io
