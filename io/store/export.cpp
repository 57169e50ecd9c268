// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/store/export.hpp"

#include <array>
#include <charconv>

#include <nlohmann/json.hpp>

namespace tw::io {

namespace {

constexpr const char* kHeader =
    "time,tank,channel,value,unit,operator,source,state,id,supersedes,reason,received,entered,entered_unit,"
    "inputs\r\n";

/// A reading's value as people read it.
struct Shown {
  std::optional<double> value;
  std::string unit;
};

Shown shown(const Reading& reading, const Recipe& recipe) {
  const Channel* channel = recipe.channel(reading.channel);
  if (channel == nullptr || channel->canonicalUnit != reading.unit) return {reading.value, reading.unit};
  if (!reading.value) return {std::nullopt, channel->unit};
  return {fromCanonical(*channel, *reading.value), channel->unit};
}

/// The shortest text that reads back to the same double.
std::string numberText(double value) {
  std::array<char, 32> bytes{};
  const auto end = std::to_chars(bytes.data(), bytes.data() + bytes.size(), value);
  return {bytes.data(), end.ptr};
}

void addField(std::string& line, const std::string& text, char after = ',') {
  // Blanks at an end are quoted too: a reader may trim what is not.
  const bool plain = text.find_first_of(",\"\r\n") == std::string::npos &&
                     (text.empty() || (text.front() != ' ' && text.back() != ' '));
  if (plain) {
    line += text;
  } else {
    line += '"';
    for (const char c : text) {
      if (c == '"') line += '"';
      line += c;
    }
    line += '"';
  }
  line += after;
}

}  // namespace

std::string exportCsv(const std::vector<Reading>& readings, const Recipe& recipe) {
  std::string text = kHeader;
  for (const Reading& reading : readings) {
    const Shown value = shown(reading, recipe);
    addField(text, toRfc3339(reading.sampledAt.at, reading.sampledAt.offset));
    addField(text, reading.tank);
    addField(text, reading.channel);
    addField(text, value.value ? numberText(*value.value) : std::string());
    addField(text, value.unit);
    addField(text, reading.op);
    addField(text, reading.source);
    addField(text, name(reading.state));
    addField(text, std::to_string(reading.id));
    addField(text, reading.supersedes ? std::to_string(*reading.supersedes) : std::string());
    addField(text, reading.reason);
    addField(text, toRfc3339(reading.receivedAt));
    addField(text, reading.entered);
    addField(text, reading.enteredUnit);
    addField(text, reading.inputs, '\r');
    text += '\n';
  }
  return text;
}

std::string exportJson(const std::vector<Reading>& readings, const Recipe& recipe) {
  using Json = nlohmann::ordered_json;
  std::string text = "[";
  for (const Reading& reading : readings) {
    const Shown value = shown(reading, recipe);
    Json inputs = reading.inputs.empty() ? Json() : Json::parse(reading.inputs, nullptr, false);
    if (inputs.is_discarded()) inputs = reading.inputs;
    const Json row = {{"time", toRfc3339(reading.sampledAt.at, reading.sampledAt.offset)},
                      {"tank", reading.tank},
                      {"channel", reading.channel},
                      {"value", value.value ? Json(*value.value) : Json()},
                      {"unit", value.unit},
                      {"operator", reading.op},
                      {"source", reading.source},
                      {"state", name(reading.state)},
                      {"id", reading.id},
                      {"supersedes", reading.supersedes ? Json(*reading.supersedes) : Json()},
                      {"reason", reading.reason},
                      {"received", toRfc3339(reading.receivedAt)},
                      {"entered", reading.entered},
                      {"entered_unit", reading.enteredUnit},
                      {"inputs", std::move(inputs)}};
    text += text.size() > 1 ? ",\n" : "\n";
    // Bytes that are no UTF-8 (an old instrument's text) must not stop an export.
    text += row.dump(-1, ' ', false, Json::error_handler_t::replace);
  }
  return text + "\n]\n";
}

}  // namespace tw::io
