// SPDX-License-Identifier: GPL-3.0-or-later
// [[drop]], [[serial]], [[route]].
#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "io/recipe/recipe_draft.hpp"
#include "io/recipe/shop_parts.hpp"
#include "io/recipe/suggestion.hpp"

namespace tw::io {
namespace {

template <std::size_t N>
Choices<std::string> words(const char* const (&list)[N]) {
  Choices<std::string> choices;
  for (const char* word : list) choices.emplace_back(word, word);
  return choices;
}

/// A number that must be one of a few whole ones.
int wholeOf(TableReader& reader, const std::string& key, int fallback, const std::vector<int>& allowed) {
  const auto value = reader.number(key);
  if (!value) return fallback;
  for (const int one : allowed) {
    if (*value == one) return one;
  }
  reader.fault(key, "unknown_value",
               fmt::format("{} is {}; expected one of: {}", key, *value, fmt::join(allowed, ", ")));
  return fallback;
}

/// What a route of each kind needs, and may have.
struct RouteKeys {
  std::string kind;
  std::vector<std::string> required, optional;
};
const std::vector<RouteKeys>& routeKinds() {
  static const std::vector<RouteKeys> kinds = {
      {"mail", {"smtp", "from", "to"}, {"user", "password_file"}},
      {"webhook", {"url"}, {"token_file"}},
      {"mqtt", {"broker", "topic"}, {"user", "password_file"}},
      {"command", {"argv"}, {}},
  };
  return kinds;
}

/// A text, or a list of texts joined by line breaks.
std::string textOrList(TableReader& reader, const std::string& key) {
  if (!reader.isList(key)) return reader.requiredText(key);
  std::string joined;
  for (const std::string& item : reader.texts(key)) joined += (joined.empty() ? "" : "\n") + item;
  return joined;
}

void refuseSecrets(TableReader& reader) {
  for (const char* key : {"password", "token", "secret"}) {
    if (!reader.has(key)) continue;
    reader.text(key);
    reader.fault(
        key, "secret_in_file",
        fmt::format("{} must not stand in this file; expected {}_file with the path of a file that holds it",
                    key, key));
  }
}

void readFrame(TableReader& reader, SerialPort& serial) {
  static const Choices<FrameKind> kinds = {
      {"named", FrameKind::Named}, {"columns", FrameKind::Columns}, {"pattern", FrameKind::Pattern}};
  serial.frame = reader.choice("frame", kinds).value_or(serial.frame);
  serial.columns = reader.texts("columns");
  serial.separator = reader.text("separator", serial.separator);
  serial.pattern = reader.text("pattern", "");
  serial.checksum = reader.choice("checksum", words({"none", "xor"})).value_or(serial.checksum);
  if (serial.frame == FrameKind::Columns && serial.columns.empty()) {
    reader.fault("columns", "missing_key",
                 "frame is \"columns\"; expected columns with the channels in order");
  }
  if (serial.frame == FrameKind::Pattern && serial.pattern.find("(?<") == std::string::npos) {
    reader.fault(
        "pattern", "missing_key",
        "frame is \"pattern\"; expected pattern with a named group for each channel, such as (?<ph>[0-9.]+)");
  }
  if (serial.separator.size() != 1) {
    reader.fault("separator", "unknown_value",
                 fmt::format("separator is \"{}\"; expected one character", serial.separator));
  }
}

}  // namespace

DropFolder readDrop(TableReader& reader) {
  DropFolder drop;
  drop.path = reader.requiredText("path");
  reader.setSubject(fmt::format("drop {}", drop.path.string()));
  const auto settle = reader.notNegative("settle_ms");
  if (settle) drop.settle_ms = static_cast<int>(std::min(std::round(*settle), 3.6e6));
  drop.source = reader.text("source", "");
  drop.decimal = reader.choice("decimal", words({".", ","})).value_or("");
  drop.separator = reader.choice("separator", words({",", ";", "\t", "|"})).value_or("");
  drop.encoding =
      reader.choice("encoding", words({"utf-8", "utf-16", "utf-16le", "utf-16be", "latin1", "windows-1252"}))
          .value_or("");
  drop.dateOrder = reader.choice("date_order", words({"dmy", "mdy", "ymd"})).value_or("");
  reader.allowRemarks();
  reader.finish();
  return drop;
}

SerialPort readSerial(TableReader& reader, const std::vector<std::string>& tanks) {
  SerialPort serial;
  serial.port = reader.requiredText("port");
  if (!serial.port.empty()) reader.setSubject(fmt::format("serial {}", serial.port));
  serial.tank = reader.requiredText("tank");
  if (!serial.tank.empty() && std::find(tanks.begin(), tanks.end(), serial.tank) == tanks.end()) {
    reader.fault("tank", "unknown_tank",
                 fmt::format("tank is \"{}\"; expected one of: {}{}", serial.tank, listed(tanks),
                             didYouMean(serial.tank, tanks)));
  }
  serial.baud =
      wholeOf(reader, "baud", serial.baud,
              {300, 600, 1200, 2400, 4800, 9600, 19200, 38400, 57600, 115200, 230400, 460800, 921600});
  serial.dataBits = wholeOf(reader, "data_bits", serial.dataBits, {5, 6, 7, 8});
  serial.stopBits = wholeOf(reader, "stop_bits", serial.stopBits, {1, 2});
  serial.parity = reader.choice("parity", words({"none", "odd", "even"})).value_or(serial.parity);
  serial.flow = reader.choice("flow", words({"none", "software", "hardware"})).value_or(serial.flow);
  readFrame(reader, serial);
  serial.every_s = reader.notNegative("every_s").value_or(serial.every_s);
  reader.allowRemarks();
  reader.finish();
  return serial;
}

Route readRoute(TableReader& reader) {
  Route route;
  route.id = reader.requiredText("id");
  if (!route.id.empty()) reader.setSubject(fmt::format("route {}", route.id));
  reader.require("kind");
  route.kind = reader.choice("kind", words({"mail", "webhook", "mqtt", "command"})).value_or("");
  for (const RouteKeys& keys : routeKinds()) {
    if (keys.kind != route.kind) continue;
    for (const std::string& key : keys.required) route.settings[key] = textOrList(reader, key);
    for (const std::string& key : keys.optional) {
      if (const auto value = reader.text(key)) route.settings[key] = *value;
    }
  }
  refuseSecrets(reader);
  route.minPriority =
      reader.choice("min_priority", words({"high", "medium", "low"})).value_or(route.minPriority);
  route.after = reader.text("after", "");
  if (const auto minutes = reader.notNegative("escalate_after_min")) {
    route.settings["escalate_after_min"] = fmt::format("{}", *minutes);
  }
  reader.allowRemarks();
  if (!route.kind.empty()) reader.finish();
  return route;
}

}  // namespace tw::io
