// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/client/decode.hpp"

#include <exception>
#include <nlohmann/json.hpp>
#include <utility>

#include "io/wire/api_json.hpp"

namespace tw::ui {
namespace {

using nlohmann::json;

template <class Read>
auto decode(const QByteArray& body, Read&& read) -> model::Result<decltype(read(json{}))> {
  try {
    return read(json::parse(body.begin(), body.end()));
  } catch (const json::exception& error) {
    return model::fail({"bad_answer", "", error.what(), "", model::FaultKind::Machine});
  }
}

std::string text(const json& object, const char* key) {
  const auto found = object.find(key);
  return found != object.end() && found->is_string() ? found->get<std::string>() : std::string{};
}

std::optional<double> number(const json& object, const char* key) {
  const auto found = object.find(key);
  if (found == object.end() || !found->is_number()) return std::nullopt;
  return found->get<double>();
}

bool flag(const json& object, const char* key, bool otherwise) {
  const auto found = object.find(key);
  return found != object.end() && found->is_boolean() ? found->get<bool>() : otherwise;
}

std::vector<SpeciesRow> amounts(const json& object, const char* key) {
  std::vector<SpeciesRow> rows;
  const auto found = object.find(key);
  if (found == object.end() || !found->is_object()) return rows;
  for (const auto& [name, value] : found->items()) {
    if (value.is_number()) rows.push_back({name, value.get<double>()});
  }
  return rows;
}

AnalysisView analysisOf(const json& object) {
  AnalysisView view;
  view.id = object.at("id").get<std::int64_t>();
  view.tank = text(object, "tank");
  view.sampledAt = text(object, "sampled_at");
  view.condition = text(object, "condition");
  view.reliable = flag(object, "reliable", true);
  view.doubtful = flag(object, "doubtful", false);
  view.pM = number(object, "pM");
  view.ph = number(object, "ph");
  view.temperature_C = number(object, "temperature_C");
  view.ionicStrength_mol_L = number(object, "ionic_strength_mol_L");
  for (const json& row : object.at("species")) {
    view.species.push_back({text(row, "formula"), number(row, "mol_L").value_or(0.0)});
  }
  for (const json& row : object.at("solids")) {
    view.solids.push_back({text(row, "id"), text(row, "role"), number(row, "lg_saturation"),
                           number(row, "threshold").value_or(0.0)});
  }
  view.totals = amounts(object, "totals_mol_L");
  view.freeLigands = amounts(object, "free_ligands_mol_L");
  if (const auto warnings = object.find("warnings"); warnings != object.end() && warnings->is_array()) {
    for (const json& warning : *warnings) {
      if (warning.is_string()) view.warnings.push_back(warning.get<std::string>());
    }
  }
  return view;
}

}  // namespace

model::Result<ShopView> decodeShop(const QByteArray& body) {
  return decode(body, [](const json& object) {
    ShopView shop{object.at("title").get<std::string>(), text(object, "time_zone"), text(object, "version"),
                  text(object, "now"), {}};
    for (const json& line : object.at("lines")) {
      shop.lines.push_back({line.at("id").get<std::string>(), text(line, "title")});
    }
    return shop;
  });
}

model::Result<std::vector<io::wire::TankView>> decodeTanks(const QByteArray& body) {
  return decode(body, [](const json& array) { return array.get<std::vector<io::wire::TankView>>(); });
}

model::Result<std::vector<io::wire::AlarmView>> decodeAlarms(const QByteArray& body) {
  return decode(body, [](const json& array) { return array.get<std::vector<io::wire::AlarmView>>(); });
}

model::Result<io::wire::AlarmView> decodeAlarm(const QByteArray& body) {
  return decode(body, [](const json& object) { return object.get<io::wire::AlarmView>(); });
}

model::Result<std::vector<DueView>> decodeDue(const QByteArray& body) {
  return decode(body, [](const json& array) {
    std::vector<DueView> rows;
    for (const json& row : array) {
      rows.push_back({row.at("tank").get<std::string>(), text(row, "tank_title"),
                      row.at("channel").get<std::string>(), text(row, "title"), text(row, "due_at"),
                      text(row, "last_at"), flag(row, "overdue", false)});
    }
    return rows;
  });
}

model::Result<std::vector<io::wire::ResultView>> decodeResults(const QByteArray& body) {
  return decode(body, [](const json& array) { return array.get<std::vector<io::wire::ResultView>>(); });
}

model::Result<std::vector<io::wire::ReadingView>> decodeReadings(const QByteArray& body) {
  return decode(body, [](const json& array) { return array.get<std::vector<io::wire::ReadingView>>(); });
}

model::Result<std::vector<EventView>> decodeEvents(const QByteArray& body) {
  return decode(body, [](const json& array) {
    std::vector<EventView> rows;
    for (const json& row : array) {
      rows.push_back({row.at("id").get<std::int64_t>(), text(row, "tank"), text(row, "event"),
                      text(row, "time"), text(row, "stock"), text(row, "unit"), text(row, "operator"),
                      text(row, "lot"), text(row, "note"), number(row, "amount")});
    }
    return rows;
  });
}

model::Result<AnalysisView> decodeAnalysis(const QByteArray& body, std::int64_t id) {
  using Found = std::optional<AnalysisView>;
  auto found = decode(body, [id](const json& array) -> Found {
    for (const json& row : array) {
      if (row.at("id").get<std::int64_t>() == id) return analysisOf(row);
    }
    return std::nullopt;
  });
  if (!found) return model::fail(std::move(found.error()));
  if (!found->has_value()) {
    return model::fail({"not_found", std::to_string(id), "the service does not hold this result any more", "",
                        model::FaultKind::Input});
  }
  return std::move(**found);
}

model::Result<io::wire::LiveMessage> decodeLive(const QByteArray& body) {
  return decode(body, [](const json& object) { return object.get<io::wire::LiveMessage>(); });
}

std::string problemText(const QByteArray& body) {
  const json object = json::parse(body.begin(), body.end(), nullptr, false);
  if (!object.is_object()) return {};
  const std::string detail = text(object, "detail");
  return detail.empty() ? text(object, "title") : detail;
}

QByteArray encodeAcknowledge(const std::string& op, const std::string& comment) {
  json object = {{"operator", op}};
  if (!comment.empty()) object["comment"] = comment;
  return QByteArray::fromStdString(object.dump());
}

}  // namespace tw::ui
