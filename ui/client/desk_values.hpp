// SPDX-License-Identifier: GPL-3.0-or-later
// Values of the API that only the desk reads; everything else is io/wire/api.hpp. Times are RFC 3339.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "io/wire/api.hpp"

namespace tw::ui {

struct ShopLine {
  std::string id, title;
};

/// GET /shop.
struct ShopView {
  std::string title, timeZone, version, now;
  std::vector<ShopLine> lines;
};

/// One row of GET /due.
struct DueView {
  std::string tank, tankTitle, channel, title, dueAt, lastAt;
  bool overdue = false;
};

/// One row of GET /tanks/{id}/events.
struct EventView {
  std::int64_t id = 0;
  std::string tank, event, time, stock, unit, op, lot, note;
  std::optional<double> amount;
};

struct SpeciesRow {
  std::string formula;
  double mol_L = 0.0;
};

struct SolidRow {
  std::string id, role;
  std::optional<double> lgSaturation;
  double threshold = 0.0;
};

/// One whole analysis of one liquor, as far as the desk shows it.
struct AnalysisView {
  std::int64_t id = 0;
  std::string tank, sampledAt, condition;
  bool reliable = true, doubtful = false;
  std::optional<double> pM, ph, temperature_C, ionicStrength_mol_L;
  std::vector<SpeciesRow> species, totals, freeLigands;
  std::vector<SolidRow> solids;
  std::vector<std::string> warnings;
};

/// What a trend of one tank is drawn from.
struct TankHistory {
  std::vector<io::wire::ResultView> results;   ///< by sample time
  std::vector<io::wire::ReadingView> readings; ///< by sample time, all states
  std::vector<EventView> events;
  std::vector<io::wire::AlarmView> alarms;     ///< closed ones too
};

}  // namespace tw::ui
