// SPDX-License-Identifier: GPL-3.0-or-later
// Store rows as the wire shows them.
#pragma once

#include <string>

#include "io/store/store.hpp"
#include "io/wire/api.hpp"
#include "monitor/pipeline/plant.hpp"

namespace tw::monitor {

/// `setup` may be nullptr (the shop no longer has the tank): values then stay canonical.
[[nodiscard]] io::wire::ReadingView readingView(const TankSetup* setup, const io::Reading& reading);
/// `json` of the view stays empty.
[[nodiscard]] io::wire::ResultView resultView(const TankSetup* setup, const io::ResultRow& row);
[[nodiscard]] io::wire::AlarmView alarmView(const io::AlarmRow& row);

}  // namespace tw::monitor
