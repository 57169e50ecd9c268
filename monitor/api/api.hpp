// SPDX-License-Identifier: GPL-3.0-or-later
// The routes of the service (monitor/openapi.yaml is their document). Handlers run on the loop's thread;
// reads use a read-only view of the store, writes go through the pipeline and answer after the commit.
#pragma once

#include <functional>
#include <optional>
#include <string>

#include "io/clock.hpp"
#include "io/local_time.hpp"
#include "io/store/store.hpp"
#include "monitor/api/router.hpp"
#include "monitor/pipeline/board.hpp"
#include "monitor/pipeline/pipeline.hpp"

namespace tw::monitor {

inline constexpr const char* kApiRoot = "/api/v1";

/// What the handlers work with; all of it outlives them.
struct ApiContext {
  const Plant& plant;
  const io::Clock& clock;
  const io::TimeZone& zone;
  io::Store& store;  ///< read-only
  Board& board;
  Pipeline& pipeline;
  io::Loop& loop;
  /// Saves an alarm's change and answers with the alarm once it is durable.
  std::function<void(AlarmChange change, std::function<void(model::Result<model::Done>)> then)> saveAlarm;
  std::function<std::string()> metrics;
};

/// All routes, with the sign-in check in front of those under /api/v1: a shop with sign_in = "required"
/// answers 401 there, because this version has no accounts yet to sign in with.
[[nodiscard]] Router makeRouter(const ApiContext& context);

// Parts of makeRouter.
void addReadRoutes(Router& router, const ApiContext& context);
void addWriteRoutes(Router& router, const ApiContext& context);

/// 200 with a JSON text.
[[nodiscard]] Response jsonResponse(std::string body, int status = 200);
[[nodiscard]] Response unknownTank(const std::string& id);

}  // namespace tw::monitor
