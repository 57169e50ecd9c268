// SPDX-License-Identifier: GPL-3.0-or-later
// What the service says to the desk (FORMATS section 5; monitor/openapi.yaml is its document): plain
// values, and their JSON in api_json.hpp. Sentences are not made here: a reason is a code with numbers,
// and the desk translates.
//
// JSON names are the field names below in snake_case (`op` is "operator"; pM, mol_L, temperature_C keep
// their capitals). `inputs` and `json` hold JSON text here and go as JSON values, null when empty. Times are RFC 3339 in UTC. An absent optional is
// JSON null. Numbers of channels are in the channel's unit.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

namespace tw::io::wire {

/// Limits of one margin or guard as the screens draw them.
struct LimitPair {
  double caution = 0.0, act = 0.0;
};

struct MarginView {
  std::string id;                  ///< "ligand_loss" ...
  double judged = 0.0;             ///< the number limits are compared with (fraction where there is one)
  std::optional<double> mol_L;     ///< ligand_loss and metal_gain
  std::optional<double> sigma;
  std::string solid, ligand;
  std::optional<LimitPair> limit;
};

struct ChannelView {
  std::string id, title, unit;
  bool ratio = false;
  std::optional<double> value;     ///< newest accepted, in `unit`
  std::string sampledAt;           ///< empty = never
  std::string source;              ///< drop | serial | http | load, with its name: "serial:/dev/ttyUSB0"
  double low = 0.0, target = 0.0, high = 0.0;
  std::optional<double> every_h;
  double maxAge_h = 26.0;
  bool tooOld = false;             ///< older than maxAge_h now
  std::optional<std::string> dueAt;
  std::optional<double> guardCautionLow, guardActLow, guardCautionHigh, guardActHigh;
};

/// Why a bath is not fine, worst first. Codes: "margin" (subject = margin id, value, limit, word),
/// "guard" (channel or ratio id), "solid" (solid id past its line), "forecast" (margin id, hours to the
/// caution limit), "window" (channel outside low..high), "stale" (channel too old or missing), "link"
/// (serial port), "unreliable" (warning code).
struct ReasonView {
  std::string code, subject, word;
  std::optional<double> value, limit, hours;
};

struct ProjectionView {
  std::string method = "straight line";
  std::string margin;
  double slope_per_day = 0.0;
  std::optional<double> hoursToCaution, hoursToAct, hoursToLine;
  double horizon_h = 48.0;
  std::optional<double> bedAtHorizon;  ///< the bed's second mark
};

struct AlarmView {
  std::int64_t id = 0;
  std::string tank, kind, subject;     ///< kind: margin | guard | solid | window | stale | link
  std::string word;                    ///< condition word or kind that it stands for: "tight", "brink", ...
  std::string priority;                ///< high | medium | low
  std::string state;                   ///< unacknowledged | acknowledged | returned_unacknowledged | normal
  std::string raisedAt, clearedAt, acknowledgedAt, acknowledgedBy, comment;
  std::optional<double> value, limit;
  std::string unit;
  std::string toDo;                    ///< one plain English line; screens translate by kind and subject
};

struct TankView {
  std::string id, title, lineId, lineTitle, recipeId, recipeTitle, metal, liquorColor, confidence;
  std::string unreliableBecause;
  std::vector<std::string> hazards;
  bool inService = true;
  double volume_L = 0.0, horizon_h = 48.0;
  std::string condition;               ///< condition word; empty = no result yet
  bool stale = false;                  ///< as a second mark on a worse word
  bool doubtful = false, reliable = true;
  std::vector<ReasonView> reasons;
  std::optional<double> bed;           ///< 0..1 used margin
  std::optional<ProjectionView> projection;
  std::string sampledAt;               ///< of the newest result; empty = none
  std::optional<double> pM, ph, temperature_C;
  std::vector<MarginView> margins;
  std::vector<ChannelView> channels;   ///< channels, then ratios
  std::vector<AlarmView> alarms;       ///< not normal, worst first
};

struct ReadingView {
  std::int64_t id = 0;
  std::string tank, channel, sampledAt, receivedAt, unit, enteredUnit, entered, op, source, state;
  std::optional<double> value;         ///< in `unit`; null when the text was no number
  std::optional<std::int64_t> supersedes;
  std::string reason, inputs;          ///< inputs: JSON object of burette numbers, or empty
};

/// One point of the trends: enough to draw, the whole analysis by id.
struct ResultView {
  std::int64_t id = 0;
  std::string tank, sampledAt, computedAt, condition, recipeSha256;
  bool doubtful = false, reliable = true, historic = false;
  std::optional<double> pM, ph, temperature_C, bed;
  std::vector<MarginView> margins;
  std::vector<ChannelView> values;     ///< id, value, unit only: what the liquor used, and the ratios
  std::vector<std::int64_t> readings;
  std::string json;                    ///< the whole `solve --json` object; sent only when asked for
};

/// One pushed message on /live. Exactly one of the bodies is set, as `type` says.
struct LiveMessage {
  std::string type;                    ///< hello | reading | result | condition | alarm | link
  std::string tank, at;
  std::optional<ReadingView> reading;
  std::optional<ResultView> result;
  std::optional<TankView> condition;   ///< the tank as it is now
  std::optional<AlarmView> alarm;
  std::string link, linkState;         ///< serial port or drop folder; "up" | "lost"
};

}  // namespace tw::io::wire
