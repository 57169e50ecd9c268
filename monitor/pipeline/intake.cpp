// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/intake.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <map>
#include <optional>
#include <tuple>
#include <utility>

#include <fmt/format.h>

#include "io/recipe/units.hpp"

namespace tw::monitor {
namespace {

using io::Incoming;
using io::NewReading;
using io::ReadingState;

constexpr std::array<const char*, 8> kEventKinds = {"addition", "dump",          "dilution",
                                                    "level",    "ampere_hours",  "note",
                                                    "out_of_service", "in_service"};
/// Two texts for the same number may differ in the last digit (FORMATS section 5, identity).
constexpr double kSameValue = 1e-9;

bool sameValue(double a, double b) {
  return std::abs(a - b) <= kSameValue * std::max(std::abs(a), std::abs(b));
}

std::string shown(const Incoming& cell) {
  if (!cell.text.empty()) return cell.text;
  if (!cell.inputsText.empty()) return cell.inputsText;
  return cell.value ? fmt::format("{}", *cell.value) : std::string{};
}

io::Refusal refuse(const Incoming& cell, std::string code, std::string reason) {
  const std::string& column = cell.column.empty() ? cell.channel : cell.column;
  return {cell.line, column, shown(cell), std::move(code), std::move(reason)};
}

std::string futureReason(io::Instant at, io::Instant now) {
  return fmt::format("the time {} is more than {} minutes ahead of the service's clock ({})",
                     io::toRfc3339(at), kFutureTolerance.count(), io::toRfc3339(now));
}

/// Everything of a cell but its value.
NewReading frame(const Incoming& cell, const io::Channel& channel, const std::string& source,
                 io::Instant now) {
  NewReading row;
  row.tank = cell.tank;
  row.channel = cell.channel;
  row.sampledAt = cell.sampledAt;
  row.unit = channel.canonicalUnit;
  row.entered = cell.text;
  row.enteredUnit = cell.enteredUnit.value_or(cell.unit);
  if (row.enteredUnit.empty() && cell.inputs.empty()) row.enteredUnit = channel.unit;
  row.inputs = cell.inputsText;
  row.op = cell.op;
  row.source = cell.source.empty() ? source : cell.source;
  row.receivedAt = cell.receivedAt.value_or(now);
  row.reason = cell.reason;
  return row;
}

/// The state an exported row came with; accepted for every other input.
ReadingState statedState(const Incoming& cell) {
  return io::readingState(cell.state).value_or(ReadingState::Accepted);
}

std::optional<std::string> implausible(const io::Channel& channel, double canonical) {
  const double x = io::fromCanonical(channel, canonical);
  if (x >= channel.plausibleLow && x <= channel.plausibleHigh) return std::nullopt;
  return fmt::format("{:.6g} {} is outside the plausible range {:g} to {:g} {}", x, channel.unit,
                     channel.plausibleLow, channel.plausibleHigh, channel.unit);
}

/// Burette inputs in the worksheet's units, where a header gave others.
model::Result<std::map<std::string, double>> worksheetInputs(const io::Channel& channel, const Incoming& cell) {
  std::map<std::string, double> inputs = cell.inputs;
  if (!channel.worksheet) return inputs;
  for (const io::WorksheetInput& input : channel.worksheet->inputs) {
    const auto unit = cell.inputUnits.find(input.id);
    const auto value = inputs.find(input.id);
    if (unit == cell.inputUnits.end() || value == inputs.end()) continue;
    const auto converted = io::convert(value->second, unit->second, input.unit);
    if (!converted) return model::fail(converted.error());
    value->second = *converted;
  }
  return inputs;
}

class Judge {
 public:
  Judge(const Plant& plant, const io::IncomingBatch& batch, io::Instant now, const KnownValues& known)
      : m_plant(plant), m_batch(batch), m_now(now), m_known(known) {
    m_out.refusals = batch.refused;
  }

  IntakeOutcome run() {
    m_rows.resize(m_batch.readings.size());
    for (std::size_t i = 0; i < m_batch.readings.size(); ++i) {
      if (m_batch.readings[i].inputs.empty()) plain(i);
    }
    worksheets();
    for (auto& row : m_rows) {
      if (row) keepOnce(std::move(*row));
    }
    for (const io::IncomingEvent& event : m_batch.events) judgeEvent(event);
    std::stable_sort(m_out.refusals.begin(), m_out.refusals.end(),
                     [](const io::Refusal& a, const io::Refusal& b) { return a.line < b.line; });
    return std::move(m_out);
  }

 private:
  using Key = std::pair<std::string, io::Instant>;

  /// The channel of a cell that has an identity; else the refusal is noted and nullptr returned.
  const io::Channel* identify(const Incoming& cell) {
    const TankSetup* setup = m_plant.tank(cell.tank);
    if (setup == nullptr) {
      m_out.refusals.push_back(
          refuse(cell, "unknown_tank", fmt::format("the shop has no tank '{}'", cell.tank)));
      return nullptr;
    }
    const io::Channel* channel = setup->recipe.channel(cell.channel);
    if (channel == nullptr) {
      m_out.refusals.push_back(refuse(
          cell, "unknown_channel",
          fmt::format("tank {} ({}) has no channel '{}'", cell.tank, setup->recipe.id, cell.channel)));
      return nullptr;
    }
    if (cell.sampledAt.at > m_now + kFutureTolerance) {
      m_out.refusals.push_back(refuse(cell, "in_future", futureReason(cell.sampledAt.at, m_now)));
      return nullptr;
    }
    return channel;
  }

  void plain(std::size_t i) {
    const Incoming& cell = m_batch.readings[i];
    const io::Channel* channel = identify(cell);
    if (channel == nullptr) return;
    const ReadingState stated = statedState(cell);
    if (!cell.value && (stated == ReadingState::Refused || stated == ReadingState::Superseded)) {
      m_rows[i] = frame(cell, *channel, m_batch.source, m_now);
      m_rows[i]->state = stated;
      return;
    }
    if (!cell.value || !std::isfinite(*cell.value)) {
      m_out.refusals.push_back(refuse(cell, "not_a_number", "a number was expected"));
      return;
    }
    const auto canonical = io::toCanonical(*channel, *cell.value, cell.unit);
    if (!canonical) {
      m_out.refusals.push_back(refuse(cell, canonical.error().code, canonical.error().detail));
      return;
    }
    take(i, *channel, *canonical);
  }

  void take(std::size_t i, const io::Channel& channel, double canonical) {
    const Incoming& cell = m_batch.readings[i];
    NewReading row = frame(cell, channel, m_batch.source, m_now);
    row.value = canonical;
    row.state = statedState(cell);
    const auto why = implausible(channel, canonical);
    if (row.state == ReadingState::Accepted && why) {
      row.state = ReadingState::Refused;
      row.reason = *why;
      m_out.refusals.push_back(refuse(cell, "implausible", *why));
    }
    if (row.state == ReadingState::Accepted) m_values[{row.tank, row.sampledAt.at}][row.channel] = canonical;
    m_rows[i] = std::move(row);
  }

  /// Burette inputs; one worksheet may need another's channel, so they are tried until none gets further.
  void worksheets() {
    std::vector<std::size_t> open;
    for (std::size_t i = 0; i < m_batch.readings.size(); ++i) {
      if (!m_batch.readings[i].inputs.empty() && identify(m_batch.readings[i]) != nullptr) open.push_back(i);
    }
    while (!open.empty()) {
      std::vector<std::size_t> still;
      std::vector<io::Refusal> faults;
      for (const std::size_t i : open) {
        if (auto refusal = worksheet(i)) {
          still.push_back(i);
          faults.push_back(std::move(*refusal));
        }
      }
      if (still.size() == open.size()) {
        m_out.refusals.insert(m_out.refusals.end(), faults.begin(), faults.end());
        return;
      }
      open = std::move(still);
    }
  }

  std::optional<io::Refusal> worksheet(std::size_t i) {
    const Incoming& cell = m_batch.readings[i];
    const TankSetup& setup = *m_plant.tank(cell.tank);
    const io::Channel& channel = *setup.recipe.channel(cell.channel);
    io::ChannelValues values = m_known ? m_known(cell.tank, cell.sampledAt.at) : io::ChannelValues{};
    const auto together = m_values.find({cell.tank, cell.sampledAt.at});
    if (together != m_values.end()) {
      for (const auto& [id, value] : together->second) values[id] = value;
    }
    const auto inputs = worksheetInputs(channel, cell);
    if (!inputs) return refuse(cell, inputs.error().code, inputs.error().detail);
    const auto canonical = io::evaluateWorksheet(setup.recipe, channel, *inputs, values);
    if (!canonical) return refuse(cell, canonical.error().code, canonical.error().detail);
    if (!std::isfinite(*canonical)) return refuse(cell, "not_a_number", "the worksheet gives no number");
    take(i, channel, *canonical);
    return std::nullopt;
  }

  void keepOnce(NewReading row) {
    if (!row.value) {
      m_out.readings.push_back(std::move(row));
      return;
    }
    // An export holds a suspicious row and its confirmation: the same number twice, in two states.
    auto& sames = m_seen[{row.tank, row.sampledAt.at, row.channel, row.state}];
    for (const double value : sames) {
      if (sameValue(value, *row.value)) {
        ++m_out.duplicates;
        return;
      }
    }
    sames.push_back(*row.value);
    m_out.readings.push_back(std::move(row));
  }

  void judgeEvent(const io::IncomingEvent& event) {
    const auto no = [&](const char* column, const std::string& value, const char* code,
                        std::string reason) {
      m_out.refusals.push_back({event.line, column, value, code, std::move(reason)});
    };
    if (m_plant.tank(event.tank) == nullptr) {
      return no("tank", event.tank, "unknown_tank", fmt::format("the shop has no tank '{}'", event.tank));
    }
    if (std::find(kEventKinds.begin(), kEventKinds.end(), event.kind) == kEventKinds.end()) {
      return no("event", event.kind, "unknown_event",
                fmt::format("'{}' is none of addition, dump, dilution, level, ampere_hours, note, "
                            "out_of_service, in_service", event.kind));
    }
    if (event.at.at > m_now + kFutureTolerance) {
      return no("time", io::toRfc3339(event.at.at), "in_future", futureReason(event.at.at, m_now));
    }
    if (event.kind == "addition" && event.stock.empty()) {
      return no("stock", "", "missing_stock", "an addition names its stock");
    }
    const bool counts = event.kind == "addition" || event.kind == "level" || event.kind == "ampere_hours";
    if ((counts && !event.amount) || (event.amount && !std::isfinite(*event.amount))) {
      return no("amount", event.amountText, "missing_amount", "an amount was expected");
    }
    if (!event.unit.empty() && !io::findUnit(event.unit)) {
      return no("unit", event.unit, "unit_unknown", fmt::format("'{}' is no unit known here", event.unit));
    }
    io::EventRow row;
    row.tank = event.tank;
    row.kind = event.kind;
    row.at = event.at;
    row.stock = event.stock;
    row.amount = event.amount;
    row.unit = event.unit;
    row.op = event.op;
    row.lot = event.lot;
    row.note = event.note;
    row.source = m_batch.source;
    row.receivedAt = m_now;
    m_out.events.push_back(std::move(row));
  }

  const Plant& m_plant;
  const io::IncomingBatch& m_batch;
  io::Instant m_now;
  const KnownValues& m_known;
  IntakeOutcome m_out;
  std::vector<std::optional<NewReading>> m_rows;   ///< by position in the batch
  std::map<Key, io::ChannelValues> m_values;       ///< what this batch says of each liquor, canonical
  std::map<std::tuple<std::string, io::Instant, std::string, io::ReadingState>, std::vector<double>> m_seen;
};

}  // namespace

std::size_t IntakeOutcome::acceptable() const {
  return static_cast<std::size_t>(
      std::count_if(readings.begin(), readings.end(),
                    [](const NewReading& row) { return row.state == ReadingState::Accepted; }));
}

IntakeOutcome judgeIntake(const Plant& plant, const io::IncomingBatch& batch, io::Instant now,
                          const KnownValues& known) {
  return Judge(plant, batch, now, known).run();
}

model::Result<io::NewReading> judgeCorrection(const TankSetup& setup, const io::Reading& old, double value,
                                              const std::string& text, const std::string& unit,
                                              const std::string& person, const std::string& reason,
                                              io::Instant now) {
  const io::Channel* channel = setup.recipe.channel(old.channel);
  if (channel == nullptr) {
    return model::fail(model::Fault{"unknown_channel", old.channel, "the tank's recipe no longer has it", ""});
  }
  const auto canonical = io::toCanonical(*channel, value, unit);
  if (!canonical) return model::fail(canonical.error());
  if (const auto why = implausible(*channel, *canonical)) {
    return model::fail(model::Fault{"implausible", old.channel, *why, ""});
  }
  io::NewReading row;
  row.tank = old.tank;
  row.channel = old.channel;
  row.sampledAt = old.sampledAt;
  row.value = *canonical;
  row.unit = channel->canonicalUnit;
  row.entered = text;
  row.enteredUnit = unit.empty() ? channel->unit : unit;
  row.op = person;
  row.source = "http";
  row.state = ReadingState::Accepted;
  row.reason = reason;
  row.receivedAt = now;
  return row;
}

}  // namespace tw::monitor
