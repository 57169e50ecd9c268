// SPDX-License-Identifier: GPL-3.0-or-later
// The text of `--reading`: one liquor typed by hand.
#pragma once

#include <string>
#include <vector>

#include "io/recipe/recipe.hpp"
#include "model/result.hpp"

namespace tw::monitor::cli {

struct TypedLiquor {
  io::ChannelValues values;           ///< canonical units
  std::vector<std::string> warnings;  ///< "implausible:<channel>": told, not refused
};

/// `channel=value` or `channel=value unit`, separated by commas; `channel.input=number` gives burette
/// inputs of the channel's worksheet. Faults: `reading_unreadable`, `channel_unknown`,
/// `channel_twice`, those of toCanonical and evaluateWorksheet.
model::Result<TypedLiquor, model::Faults> parseReading(const io::Recipe& recipe, const std::string& text);

}  // namespace tw::monitor::cli
