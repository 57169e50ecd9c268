// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/batch_builder.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <charconv>

#include "io/drop/rows.hpp"
#include "io/wire/time.hpp"

namespace tw::io {
namespace {

/// Bounds on one file, so that no file can exhaust memory: 500 000 rows of five channels fit.
constexpr std::size_t kMostReadings = 2'500'000;
constexpr std::size_t kMostRefusals = 100'000;
constexpr std::size_t kLongestShown = 200;

constexpr std::array<std::string_view, 8> kEventKinds = {
    "addition", "dump", "dilution", "level", "ampere_hours", "note", "out_of_service", "in_service"};
constexpr std::array<std::string_view, 4> kStates = {"accepted", "suspicious", "refused", "superseded"};

void appendQuoted(std::string& out, std::string_view text) {
  out += '"';
  for (const char c : text) {
    if (c == '"' || c == '\\') {
      out += '\\';
      out += c;
    } else if (static_cast<unsigned char>(c) < 0x20) {
      out += fmt::format("\\u{:04x}", static_cast<unsigned>(static_cast<unsigned char>(c)));
    } else {
      out += c;
    }
  }
  out += '"';
}

}  // namespace

std::string shortened(std::string_view text) {
  if (text.size() <= kLongestShown) return std::string(text);
  std::size_t end = kLongestShown;
  while (end > 0 && (static_cast<unsigned char>(text[end]) & 0xC0) == 0x80) --end;
  return std::string(text.substr(0, end)) + "...";
}

std::string inputsJson(const std::vector<std::pair<std::string, std::string>>& numbers) {
  std::string out = "{";
  for (const auto& [id, number] : numbers) {
    if (out.size() > 1) out += ',';
    appendQuoted(out, id);
    out += ':';
    out += number;
  }
  return out + '}';
}

BatchBuilder::BatchBuilder(std::string source, const TimeZone& zone)
    : m_shopZone(&zone), m_zone(&zone) {
  m_batch.source = std::move(source);
}

void BatchBuilder::setZone(const TimeZone* zone) {
  m_zone = zone == nullptr ? m_shopZone : zone;
  m_lastTime.reset();
}

void BatchBuilder::refuse(int line, std::string_view column, std::string_view value, std::string code,
                          std::string reason) {
  if (m_batch.refused.size() >= kMostRefusals) {
    ++m_moreRefused;
    return;
  }
  m_batch.refused.push_back(
      {line, shortened(column), shortened(value), std::move(code), std::move(reason)});
}

void BatchBuilder::refuseFile(int line, std::string_view value, std::string reason) {
  m_batch.headerReadable = false;
  refuse(line, {}, value, "header_unreadable", std::move(reason));
}

/// Neighbouring rows often share their time, so the last answer is kept.
const model::Result<StampedTime>& BatchBuilder::timeOf(std::string_view text) {
  if (!m_lastTime || text != m_lastTimeText) {
    m_lastTimeText = text;
    m_lastTime = parseTime(m_lastTimeText, *m_zone, m_dateOrder);
  }
  return *m_lastTime;
}

bool BatchBuilder::beginRow(const RowHead& head) {
  if (head.time.empty()) {
    refuse(head.line, head.timeColumn, {}, "time_missing", "a reading needs its sample time");
    return false;
  }
  const auto& time = timeOf(head.time);
  if (!time) {
    refuse(head.line, head.timeColumn, head.time, time.error().code, time.error().detail);
    return false;
  }
  if (head.tank.empty()) {
    refuse(head.line, head.tankColumn, {}, "tank_missing", "a reading needs the id of its tank");
    return false;
  }
  m_row.line = head.line;
  m_row.tank = head.tank;
  m_row.sampledAt = *time;
  m_row.op = head.op;
  m_row.source = head.source;
  m_firstOfRow = m_batch.readings.size();
  return true;
}

std::optional<NumberText> BatchBuilder::number(const ValueCell& cell, Decimal decimal) {
  NumberText number = readNumber(cell.text, decimal);
  if (number.kind == NumberKind::Number) return number;
  if (number.kind != NumberKind::Empty) {
    refuse(m_row.line, cell.column, cell.text, numberRefusalCode(number.kind),
           numberRefusalReason(number.kind));
  }
  return std::nullopt;
}

void BatchBuilder::expect(std::size_t readings) {
  m_batch.readings.reserve(std::min(readings, kMostReadings));
}

/// The next reading, begun with what its row says; nullptr when the file holds too many.
Incoming* BatchBuilder::append() {
  if (m_batch.readings.size() >= kMostReadings) {
    ++m_moreReadings;
    return nullptr;
  }
  return &m_batch.readings.emplace_back(m_row);
}

void BatchBuilder::addCell(const ValueCell& cell, Decimal decimal) {
  if (!cell.input.empty()) return addInput(cell, decimal);
  const auto parsed = number(cell, decimal);
  Incoming* reading = parsed ? append() : nullptr;
  if (reading == nullptr) return;
  reading->column = cell.column;
  reading->channel = cell.channel;
  reading->value = parsed->value;
  reading->text = cell.text;
  reading->unit = cell.unit;
}

void BatchBuilder::addInput(const ValueCell& cell, Decimal decimal) {
  if (trimmed(cell.text).empty()) return;
  auto found = std::find_if(m_titrations.begin(), m_titrations.end(), [&](const Titration& t) {
    return t.reading.channel == cell.channel && t.reading.tank == m_row.tank &&
           t.reading.sampledAt.at == m_row.sampledAt.at;
  });
  if (found == m_titrations.end()) {
    // Rows of a long table that belong together stand together: another sample ends the titration.
    if (!m_titrations.empty() && m_titrations.front().reading.sampledAt.at != m_row.sampledAt.at) {
      flushTitrations();
    }
    m_titrations.push_back({m_row, {}, false, {}});
    found = std::prev(m_titrations.end());
    found->reading.column = cell.column;
    found->reading.channel = cell.channel;
  }
  const auto parsed = number(cell, decimal);
  if (!parsed) {
    found->spoilt = true;
    return;
  }
  const std::string id(cell.input);
  if (!found->reading.inputs.emplace(id, parsed->value).second) {
    refuse(m_row.line, cell.column, cell.text, "input_twice", "this input was given before");
    found->spoilt = true;
    return;
  }
  if (!cell.unit.empty()) found->reading.inputUnits[id] = cell.unit;
  found->numbers.emplace_back(id, asJsonNumber(*parsed));
  found->cells.emplace_back(cell.column, cell.text);
}

/// One bad input spoils its titration: the others alone would give another value.
void BatchBuilder::flushTitrations() {
  for (Titration& titration : m_titrations) {
    if (titration.spoilt) {
      for (const auto& [column, text] : titration.cells) {
        refuse(titration.reading.line, column, text, "titration_incomplete",
               "another input of the same titration was refused");
      }
      continue;
    }
    titration.reading.inputsText = inputsJson(titration.numbers);
    // A value given beside its burette numbers stands; they are kept with it.
    const auto given = std::find_if(
        m_batch.readings.begin() + static_cast<std::ptrdiff_t>(m_firstOfRow), m_batch.readings.end(),
        [&](const Incoming& r) {
          return r.channel == titration.reading.channel && r.tank == titration.reading.tank &&
                 r.sampledAt.at == titration.reading.sampledAt.at;
        });
    if (given != m_batch.readings.end()) {
      given->inputs = std::move(titration.reading.inputs);
      given->inputUnits = std::move(titration.reading.inputUnits);
      given->inputsText = std::move(titration.reading.inputsText);
      continue;
    }
    titration.reading.text = titration.reading.inputsText;
    if (Incoming* reading = append()) *reading = std::move(titration.reading);
  }
  m_titrations.clear();
}

void BatchBuilder::endRow() { flushTitrations(); }

bool BatchBuilder::addExtras(Incoming& reading, const LongExtras& extras) {
  if (!extras.state.empty() && std::find(kStates.begin(), kStates.end(), extras.state) == kStates.end()) {
    refuse(reading.line, "state", extras.state, "state_unknown",
           "expected accepted, suspicious, refused or superseded");
    return false;
  }
  if (!extras.received.empty()) {
    const auto received = parseRfc3339(std::string(extras.received));
    if (!received) {
      refuse(reading.line, "received", extras.received, "time_unreadable", "expected RFC 3339");
      return false;
    }
    reading.receivedAt = received->at;
  }
  reading.state = extras.state;
  reading.id = extras.id;
  reading.supersedes = extras.supersedes;
  reading.reason = extras.reason;
  if (!extras.entered.empty()) reading.text = extras.entered;
  if (extras.enteredUnit) reading.enteredUnit = std::string(*extras.enteredUnit);
  for (const auto& [id, number] : extras.inputs) {
    double value = 0.0;
    std::from_chars(number.data(), number.data() + number.size(), value);
    reading.inputs.emplace(id, value);
  }
  reading.inputsText = extras.inputsText;
  return true;
}

void BatchBuilder::addLong(const RowHead& head, const ValueCell& cell, const LongExtras& extras,
                           Decimal decimal) {
  if (!beginRow(head)) return;
  if (cell.channel.empty()) {
    refuse(head.line, "channel", {}, "channel_missing", "a reading needs its channel");
    return;
  }
  if (!cell.input.empty()) return addInput(cell, decimal);
  Incoming reading = m_row;
  reading.column = cell.column;
  reading.channel = cell.channel;
  reading.unit = cell.unit;
  reading.text = cell.text;
  const NumberText parsed = readNumber(cell.text, decimal);
  if (parsed.kind == NumberKind::Number) reading.value = parsed.value;
  // A row refused long ago may hold a text that is no number; export writes it, so it comes back.
  const bool refusedText = extras.state == "refused" && !extras.entered.empty();
  if (parsed.kind != NumberKind::Number && !(parsed.kind == NumberKind::Empty && refusedText)) {
    if (parsed.kind != NumberKind::Empty) return void(number(cell, decimal));
    if (extras.inputs.empty()) {
      refuse(head.line, cell.column, {}, "value_missing", "neither a value nor burette inputs");
      return;
    }
  }
  if (!addExtras(reading, extras)) return;
  if (Incoming* slot = append()) *slot = std::move(reading);
}

void BatchBuilder::addEvent(const RowHead& head, const EventText& row, Decimal decimal) {
  if (!beginRow(head)) return;
  IncomingEvent event;
  event.line = head.line;
  event.tank = m_row.tank;
  event.at = m_row.sampledAt;
  event.op = m_row.op;
  event.kind = lowerCase(row.event);
  if (std::find(kEventKinds.begin(), kEventKinds.end(), event.kind) == kEventKinds.end()) {
    refuse(head.line, "event", row.event, "event_unknown",
           "expected addition, dump, dilution, level, ampere_hours, note, out_of_service or in_service");
    return;
  }
  const NumberText amount = readNumber(row.amount, decimal);
  if (amount.kind == NumberKind::Number) {
    event.amount = amount.value;
  } else if (amount.kind != NumberKind::Empty) {
    refuse(head.line, "amount", row.amount, numberRefusalCode(amount.kind),
           numberRefusalReason(amount.kind));
    return;
  }
  event.amountText = row.amount;
  event.stock = row.stock;
  event.unit = row.unit;
  event.lot = row.lot;
  event.note = row.note;
  m_batch.events.push_back(std::move(event));
}

IncomingBatch BatchBuilder::finish() {
  flushTitrations();
  if (m_moreReadings > 0) {
    m_batch.refused.push_back({0, {}, {}, "file_too_long",
                               fmt::format("{} readings beyond the first {} were not read: split the file",
                                           m_moreReadings, kMostReadings)});
  }
  if (m_moreRefused > 0) {
    m_batch.refused.push_back({0, {}, {}, "more_refused",
                               fmt::format("{} further refusals are not listed", m_moreRefused)});
  }
  return std::move(m_batch);
}

}  // namespace tw::io
