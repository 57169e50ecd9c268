// SPDX-License-Identifier: GPL-3.0-or-later
// Where drop files go when they have been read: `taken/` and `refused/` inside the drop folder.
#pragma once

#include <cstddef>
#include <filesystem>
#include <string>
#include <vector>

#include "io/incoming.hpp"
#include "model/result.hpp"

namespace tw::io {

/// Makes `taken/` and `refused/`. Fault `folder_unusable` when the folder is missing, no folder, or
/// cannot be written.
model::Result<model::Done> prepareDropFolder(const std::filesystem::path& folder);

/// What became of a file's cells, without the cells that were taken.
struct Verdict {
  bool whole = false;     ///< nothing could be read: the file itself goes to `refused/`
  std::size_t taken = 0;  ///< readings and events
  std::vector<Refusal> refused;
};
[[nodiscard]] Verdict verdictOf(const IncomingBatch& batch);

/// Moves a file that has been read: to `taken/`, or to `refused/` when the whole of it was refused. What was refused is written first (copy and `<file>.why.txt`), so that a power cut in between repeats
/// the filing instead of losing the reasons. Nothing is overwritten: a name that exists gets the UTC of
/// `now` before its extension. Fault `filing_failed` (the file is still where it was, try again).
model::Result<model::Done> fileAway(const std::filesystem::path& file, const Verdict& verdict,
                                    Instant now);

/// One line a refusal: line, column, value, reason.
[[nodiscard]] std::string whyText(const std::string& fileName, const Verdict& verdict, Instant now);

/// True for the extensions csv, tsv, jsonl, txt in any case, and no temporary or hidden name.
[[nodiscard]] bool isDropName(const std::string& fileName);

}  // namespace tw::io
