// SPDX-License-Identifier: GPL-3.0-or-later
// Readings as `tankward export` writes them and `load` and a drop folder read them back (FORMATS section 6).
#pragma once

#include <string>
#include <vector>

#include "io/recipe/recipe.hpp"
#include "io/store/store.hpp"

namespace tw::io {

/// RFC 4180 (CRLF, quotes only where needed), long form, first line:
/// time,tank,channel,value,unit,operator,source,state,id,supersedes,reason,received,entered,entered_unit,inputs
/// `value` and `unit` are in the channel's unit, with the fewest digits that read back to the same number;
/// a channel that the recipe has no more stays in its canonical unit. `time` keeps the entered offset,
/// `received` is UTC. `value` is empty for a refused text that is no number.
[[nodiscard]] std::string exportCsv(const std::vector<Reading>& readings, const Recipe& recipe);

/// The same fields as an array of objects, one a line. `value` is a number or null, `id` and `supersedes`
/// numbers or null, `inputs` an object or null.
[[nodiscard]] std::string exportJson(const std::vector<Reading>& readings, const Recipe& recipe);

}  // namespace tw::io
