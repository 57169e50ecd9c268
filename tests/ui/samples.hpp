// SPDX-License-Identifier: GPL-3.0-or-later
// Invented tanks for the tests of the desk.
#pragma once

#include <string>

#include "io/wire/api.hpp"

namespace tw::test {

/// 2026-03-02T12:00:00Z, the tests' present.
[[nodiscard]] long long noon();
[[nodiscard]] io::wire::ChannelView channel(const std::string& id, const std::string& title,
                                            const std::string& unit, double value);
[[nodiscard]] io::wire::MarginView margin(const std::string& id, double judged, const std::string& ligand = {});
/// An ammoniacal copper bath of 900 L with a ligand margin of 0.52 and limits 0.30 / 0.15.
[[nodiscard]] io::wire::TankView copperTank(const std::string& id, const std::string& condition);
[[nodiscard]] io::wire::AlarmView alarm(long long id, const std::string& tank, const std::string& kind,
                                        const std::string& subject, const std::string& word);
/// Bodies of the service for two tanks on one line, one alarm and one overdue titration.
[[nodiscard]] std::string shopBody();
[[nodiscard]] std::string tanksBody();
[[nodiscard]] std::string alarmsBody();
[[nodiscard]] std::string dueBody();

}  // namespace tw::test
