// SPDX-License-Identifier: GPL-3.0-or-later
// JSON lines (and an array of objects) with the names of the tables (FORMATS section 5). Pure.
#pragma once

#include <string_view>

#include "io/drop/batch_builder.hpp"

namespace tw::io {

/// True when the first character that counts opens an object or an array, or an early line does.
[[nodiscard]] bool looksLikeJson(std::string_view text);

/// One object a line, objects over several lines, an array of them, or what `tankward export --json`
/// writes (`{"readings": [...], "results": [...]}`; results are passed over). Wide: `{"time", "tank",
/// "operator", "copper": 22.1, "ammonia": {"value", "unit"}, "nickel": {"V": 12.3}, "nickel.V": 12.3}`,
/// the channels also inside `values`; long: with `channel` and `value`; events: with `event`. Numbers in
/// quotes are read like table cells under `decimalHint`.
void readJson(std::string_view text, const std::string& decimalHint, BatchBuilder& out);

/// The `inputs` cell of an exported row: a JSON object of numbers, or empty. False = refused.
bool readInputsText(std::string_view text, int line, LongExtras& extras, BatchBuilder& out);

}  // namespace tw::io
