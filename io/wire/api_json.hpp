// SPDX-License-Identifier: GPL-3.0-or-later
// JSON of the wire values, both ways, so that service and desk share one piece of code.
#pragma once

#include <nlohmann/json_fwd.hpp>

#include "io/wire/api.hpp"
#include "model/result.hpp"

namespace tw::io::wire {

void to_json(nlohmann::json& json, const TankView& view);
void to_json(nlohmann::json& json, const ReadingView& view);
void to_json(nlohmann::json& json, const ResultView& view);
void to_json(nlohmann::json& json, const AlarmView& view);
void to_json(nlohmann::json& json, const LiveMessage& message);

/// A missing or wrong field throws nlohmann::json::exception; unknown fields are ignored, so that a desk
/// of an earlier version keeps working. Catch it once per message.
void from_json(const nlohmann::json& json, TankView& view);
void from_json(const nlohmann::json& json, ReadingView& view);
void from_json(const nlohmann::json& json, ResultView& view);
void from_json(const nlohmann::json& json, AlarmView& view);
void from_json(const nlohmann::json& json, LiveMessage& message);

}  // namespace tw::io::wire
