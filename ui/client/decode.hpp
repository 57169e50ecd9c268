// SPDX-License-Identifier: GPL-3.0-or-later
// Bodies of the service into values. Pure and free of Qt objects, so that long bodies can be read on
// another thread. A body that is no JSON, or lacks a field that the desk needs, is a Fault with code
// "bad_answer" and what was wrong in `detail`.
#pragma once

#include <QByteArray>
#include <optional>
#include <string>
#include <vector>

#include "model/result.hpp"
#include "ui/client/desk_values.hpp"

namespace tw::ui {

[[nodiscard]] model::Result<ShopView> decodeShop(const QByteArray& body);
[[nodiscard]] model::Result<std::vector<io::wire::TankView>> decodeTanks(const QByteArray& body);
[[nodiscard]] model::Result<std::vector<io::wire::AlarmView>> decodeAlarms(const QByteArray& body);
[[nodiscard]] model::Result<io::wire::AlarmView> decodeAlarm(const QByteArray& body);
[[nodiscard]] model::Result<std::vector<DueView>> decodeDue(const QByteArray& body);
[[nodiscard]] model::Result<std::vector<io::wire::ResultView>> decodeResults(const QByteArray& body);
[[nodiscard]] model::Result<std::vector<io::wire::ReadingView>> decodeReadings(const QByteArray& body);
[[nodiscard]] model::Result<std::vector<EventView>> decodeEvents(const QByteArray& body);
/// Picks the result `id` out of an array of whole results; "not_found" when it is not there.
[[nodiscard]] model::Result<AnalysisView> decodeAnalysis(const QByteArray& body, std::int64_t id);
[[nodiscard]] model::Result<io::wire::LiveMessage> decodeLive(const QByteArray& body);

/// The reason a refused write gives: `detail`, else `title` of a problem document, else empty.
[[nodiscard]] std::string problemText(const QByteArray& body);
/// Body of POST /alarms/{id}/acknowledge.
[[nodiscard]] QByteArray encodeAcknowledge(const std::string& op, const std::string& comment);

}  // namespace tw::ui
