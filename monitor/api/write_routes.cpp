// SPDX-License-Identifier: GPL-3.0-or-later
// POST: readings, corrections, events, acknowledgements. Every write carries a typed operator.
#include <utility>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "io/recipe/units.hpp"
#include "io/wire/api_json.hpp"
#include "io/wire/solve_json.hpp"
#include "monitor/api/api.hpp"
#include "monitor/pipeline/liquor.hpp"
#include "monitor/pipeline/views.hpp"

namespace tw::monitor {
namespace {

using nlohmann::json;

constexpr std::size_t kLongestText = 4096;  // bytes of a name, note or reason

std::string dump(const json& value) {
  return value.dump(-1, ' ', false, json::error_handler_t::replace);
}

Response busy() {
  Response answer = problem(503, "busy", "the store's queue is full; try again in a moment");
  answer.headers["Retry-After"] = "1";
  return answer;
}

model::Fault fault(std::string code, std::string subject, std::string detail) {
  return {std::move(code), std::move(subject), std::move(detail), ""};
}

/// The body as an object.
model::Result<json> body(const Request& request) {
  json object = json::parse(request.body, nullptr, false);
  if (object.is_discarded()) return model::fail(fault("bad_json", "body", "the body is not JSON"));
  if (!object.is_object()) return model::fail(fault("bad_json", "body", "a JSON object was expected"));
  return object;
}

/// A text member; absent or null = empty. Faults when it is no text or is too long.
model::Result<std::string> text(const json& object, const char* name) {
  const auto at = object.find(name);
  if (at == object.end() || at->is_null()) return std::string{};
  if (!at->is_string()) {
    return model::fail(fault("wrong_type", name, fmt::format("'{}' must be a text", name)));
  }
  auto value = at->get<std::string>();
  if (value.size() > kLongestText) {
    return model::fail(fault("too_long", name, fmt::format("'{}' is longer than {} bytes", name, kLongestText)));
  }
  return value;
}

model::Result<std::string> person(const json& object) {
  auto name = text(object, "operator");
  if (!name) return name;
  if (name->find_first_not_of(" \t") == std::string::npos) {
    return model::fail(fault("operator_missing", "operator", "say who: `operator` must not be empty"));
  }
  return name;
}

model::Result<io::StampedTime> time(const ApiContext& context, const json& object) {
  const auto value = text(object, "time");
  if (!value) return model::fail(value.error());
  if (value->empty()) return model::fail(fault("time_missing", "time", "`time` must say when"));
  return io::parseTime(*value, context.zone);
}

void addInputs(io::Incoming& cell, const json& value, std::vector<io::Refusal>& refused) {
  for (const auto& [id, number] : value.items()) {
    if (!number.is_number()) {
      refused.push_back({0, cell.channel, dump(value), "not_a_number",
                         fmt::format("burette input '{}' is no number", id)});
      return;
    }
    cell.inputs[id] = number.get<double>();
  }
  cell.inputsText = dump(value);
}

/// One member of `values`: a number, {value, unit}, or burette inputs.
void addCell(io::IncomingBatch& batch, io::Incoming cell, const json& value) {
  const json* number = &value;
  if (value.is_object() && value.contains("value")) {
    number = &value.at("value");
    const auto unit = value.find("unit");
    if (unit != value.end() && unit->is_string()) cell.unit = unit->get<std::string>();
  } else if (value.is_object() && !value.empty()) {
    const std::size_t before = batch.refused.size();
    addInputs(cell, value, batch.refused);
    if (batch.refused.size() == before) batch.readings.push_back(std::move(cell));
    return;
  }
  if (!number->is_number()) {
    batch.refused.push_back({0, cell.channel, dump(*number), "not_a_number", "a number was expected"});
    return;
  }
  cell.value = number->get<double>();
  cell.text = dump(*number);
  batch.readings.push_back(std::move(cell));
}

model::Result<io::IncomingBatch> incoming(const ApiContext& context, const std::string& tank,
                                          const json& object) {
  const auto who = person(object);
  if (!who) return model::fail(who.error());
  const auto when = time(context, object);
  if (!when) return model::fail(when.error());
  const auto values = object.find("values");
  if (values == object.end() || !values->is_object() || values->empty()) {
    return model::fail(fault("values_missing", "values", "`values` must hold at least one channel"));
  }
  io::IncomingBatch batch;
  batch.source = "http";
  for (const auto& [channel, value] : values->items()) {
    io::Incoming cell;
    cell.column = cell.channel = channel;
    cell.tank = tank;
    cell.sampledAt = *when;
    cell.op = *who;
    addCell(batch, std::move(cell), value);
  }
  return batch;
}

json refusedJson(const std::vector<io::Refusal>& refused) {
  json list = json::array();
  for (const io::Refusal& each : refused) {
    list.push_back({{"channel", each.column},
                    {"value", each.value},
                    {"code", each.code},
                    {"message", each.reason}});
  }
  return list;
}

Response batchResponse(const TankSetup* setup, const BatchAnswer& answer) {
  json body = {{"accepted", answer.accepted},
               {"duplicates", answer.duplicates},
               {"refused", refusedJson(answer.refused)},
               {"suspicious", json::array()},
               {"ids", answer.ids}};
  for (const io::Reading& row : answer.conflicts) {
    const auto view = readingView(setup, row);
    body["suspicious"].push_back(
        {{"channel", row.channel}, {"value", view.entered}, {"code", "conflict"}, {"id", row.id},
         {"message", "another value of this channel and time is already accepted; kept until someone decides"}});
  }
  if (answer.accepted > 0 || !answer.conflicts.empty()) return jsonResponse(dump(body), 201);
  if (answer.duplicates > 0) return jsonResponse(dump(body), 200);
  Response none = problem(422, "nothing_usable", "none of the values could be used");
  body.update(json::parse(none.body));
  none.body = dump(body);
  return none;
}

/// What the liquor would be with these values; on a solver's thread.
Response preview(const ApiContext& context, const std::string& tank, const io::IncomingBatch& batch,
                 io::Store& store) {
  const TankSetup& setup = *context.plant.tank(tank);
  const auto outcome =
      judgeIntake(context.plant, batch, context.clock.now(),
                  [&](const std::string& id, io::Instant at) { return knownValues(store, id, at); });
  if (outcome.readings.empty()) {
    return batchResponse(&setup, {0, 0, 0, outcome.refusals, {}, {}, {}});
  }
  const io::Instant at = outcome.readings.front().sampledAt.at;
  auto newest = store.newestAccepted(tank, at);
  if (!newest) return problem(newest.error());
  for (const io::NewReading& row : outcome.readings) {
    if (row.state != io::ReadingState::Accepted) continue;
    io::Reading& place = (*newest)[row.channel];
    static_cast<io::NewReading&>(place) = row;
    place.id = 0;
  }
  const LiquorPick pick = pickLiquor(setup, *newest, at);
  if (!pick.complete()) {
    std::string missing;
    for (const Lacking& each : pick.lacking) {
      missing += (missing.empty() ? "" : ", ") + each.channel + (each.tooOld ? " (too old)" : "");
    }
    return problem(422, "missing_channel", "the liquor lacks " + missing);
  }
  const auto solved = solveValues(setup, pick.values());
  if (!solved) return problem(solved.error());
  const std::string result = io::wire::solveJson(setup.recipe, solved->report, solved->judgement, {}, -1);
  return jsonResponse("{\"result\":" + result + ",\"refused\":" + dump(refusedJson(outcome.refusals)) + "}");
}

void postReadings(const ApiContext& context, const Request& request, const std::string& tank,
                  const Reply& reply) {
  const TankSetup* setup = context.plant.tank(tank);
  if (setup == nullptr) return reply(unknownTank(tank));
  const auto object = body(request);
  if (!object) return reply(problem(400, object.error().code, object.error().detail));
  auto batch = incoming(context, tank, *object);
  if (!batch) return reply(problem(batch.error()));
  const auto wanted = request.query.find("preview");
  if (wanted != request.query.end() && wanted->second != "false") {
    auto shared = std::make_shared<const io::IncomingBatch>(std::move(*batch));
    const ApiContext* c = &context;
    context.pipeline.background([c, tank, shared, reply](io::Store& store) {
      auto answer = std::make_shared<Response>(preview(*c, tank, *shared, store));
      c->loop.post([reply, answer] { reply(std::move(*answer)); });
    });
    return;
  }
  auto outcome = judgeIntake(context.plant, *batch, context.clock.now(),
                             [&](const std::string& id, io::Instant at) {
                               return knownValues(context.store, id, at);
                             });
  const bool taken =
      context.pipeline.add(std::move(outcome), [reply, setup](const model::Result<BatchAnswer>& answer) {
        reply(answer ? batchResponse(setup, *answer) : problem(answer.error()));
      });
  if (!taken) reply(busy());
}

Response created(const model::Result<std::int64_t>& id) {
  return id ? jsonResponse(dump({{"id", *id}}), 201) : problem(id.error());
}

/// The id of a path, or nullopt.
std::optional<std::int64_t> idOf(const PathValues& path) {
  const std::string& text = path.at("id");
  if (text.empty() || text.size() > 18 || text.find_first_not_of("0123456789") != std::string::npos) {
    return std::nullopt;
  }
  return std::stoll(text);
}

void correct(const ApiContext& context, const Request& request, const PathValues& path, const Reply& reply) {
  const auto object = body(request);
  if (!object) return reply(problem(400, object.error().code, object.error().detail));
  const auto who = person(*object);
  if (!who) return reply(problem(who.error()));
  const auto why = text(*object, "reason");
  if (!why) return reply(problem(why.error()));
  if (why->empty()) return reply(problem(fault("reason_missing", "reason", "a correction needs a reason")));
  const auto unit = text(*object, "unit");
  if (!unit) return reply(problem(unit.error()));
  const auto value = object->find("value");
  if (value == object->end() || !value->is_number()) {
    return reply(problem(fault("not_a_number", "value", "`value` must be a number")));
  }
  const auto id = idOf(path);
  const auto old = context.store.reading(id.value_or(0));
  if (!old) return reply(problem(old.error()));
  if (!*old) return reply(problem(404, "reading_unknown", "there is no such reading"));
  const TankSetup* setup = context.plant.tank((*old)->tank);
  if (setup == nullptr) return reply(unknownTank((*old)->tank));
  auto row = judgeCorrection(*setup, **old, value->get<double>(), dump(*value), *unit, *who, *why,
                             context.clock.now());
  if (!row) return reply(problem(row.error()));
  const bool taken = context.pipeline.correct(
      *id, std::move(*row), [reply](const model::Result<std::int64_t>& newId) { reply(created(newId)); });
  if (!taken) reply(busy());
}

void confirm(const ApiContext& context, const Request& request, const PathValues& path, const Reply& reply) {
  const auto object = body(request);
  if (!object) return reply(problem(400, object.error().code, object.error().detail));
  const auto who = person(*object);
  if (!who) return reply(problem(who.error()));
  const auto id = idOf(path);
  if (!id) return reply(problem(404, "reading_unknown", "there is no such reading"));
  const bool taken = context.pipeline.confirm(
      *id, *who, [reply](const model::Result<std::int64_t>& newId) { reply(created(newId)); });
  if (!taken) reply(busy());
}

model::Result<io::IncomingEvent> incomingEvent(const ApiContext& context, const std::string& tank,
                                               const json& object) {
  io::IncomingEvent event;
  event.tank = tank;
  const auto who = person(object);
  if (!who) return model::fail(who.error());
  event.op = *who;
  const auto when = time(context, object);
  if (!when) return model::fail(when.error());
  event.at = *when;
  const std::pair<const char*, std::string*> texts[] = {{"event", &event.kind}, {"stock", &event.stock},
                                                        {"unit", &event.unit},  {"lot", &event.lot},
                                                        {"note", &event.note}};
  for (const auto& [name, place] : texts) {
    auto value = text(object, name);
    if (!value) return model::fail(value.error());
    *place = std::move(*value);
  }
  const auto amount = object.find("amount");
  if (amount != object.end() && !amount->is_null()) {
    if (!amount->is_number()) {
      return model::fail(fault("missing_amount", "amount", "`amount` must be a number"));
    }
    event.amount = amount->get<double>();
    event.amountText = dump(*amount);
  }
  return event;
}

void postEvent(const ApiContext& context, const Request& request, const std::string& tank,
               const Reply& reply) {
  if (context.plant.tank(tank) == nullptr) return reply(unknownTank(tank));
  const auto object = body(request);
  if (!object) return reply(problem(400, object.error().code, object.error().detail));
  auto event = incomingEvent(context, tank, *object);
  if (!event) return reply(problem(event.error()));
  io::IncomingBatch batch;
  batch.source = "http";
  batch.events.push_back(std::move(*event));
  auto outcome = judgeIntake(context.plant, batch, context.clock.now());
  if (outcome.events.empty()) {
    const io::Refusal& why = outcome.refusals.front();
    return reply(problem(422, why.code, why.reason));
  }
  const bool taken =
      context.pipeline.add(std::move(outcome), [reply](const model::Result<BatchAnswer>& answer) {
        if (!answer) return reply(problem(answer.error()));
        reply(jsonResponse(dump({{"id", answer->eventIds.front()}}), answer->events > 0 ? 201 : 200));
      });
  if (!taken) reply(busy());
}

void acknowledge(const ApiContext& context, const Request& request, const PathValues& path,
                 const Reply& reply) {
  const auto object = body(request);
  if (!object) return reply(problem(400, object.error().code, object.error().detail));
  const auto who = person(*object);
  if (!who) return reply(problem(who.error()));
  const auto comment = text(*object, "comment");
  if (!comment) return reply(problem(comment.error()));
  const auto change = context.board.acknowledge(idOf(path).value_or(0), *who, *comment);
  if (!change) return reply(problem(404, "alarm_unknown", "there is no standing alarm with this id"));
  const std::string view = dump(json(alarmView(change->alarm)));
  if (change->change.empty()) return reply(jsonResponse(view));
  context.saveAlarm(*change, [reply, view](const model::Result<model::Done>& done) {
    reply(done ? jsonResponse(view) : problem(done.error()));
  });
}

}  // namespace

void addWriteRoutes(Router& router, const ApiContext& c) {
  const std::string root = kApiRoot;
  router.add("POST", root + "/tanks/{id}/readings",
             [&c](const Request& r, const PathValues& p, const Reply& reply) {
               postReadings(c, r, p.at("id"), reply);
             });
  router.add("POST", root + "/tanks/{id}/events",
             [&c](const Request& r, const PathValues& p, const Reply& reply) {
               postEvent(c, r, p.at("id"), reply);
             });
  router.add("POST", root + "/readings/{id}/correct",
             [&c](const Request& r, const PathValues& p, const Reply& reply) { correct(c, r, p, reply); });
  router.add("POST", root + "/readings/{id}/confirm",
             [&c](const Request& r, const PathValues& p, const Reply& reply) { confirm(c, r, p, reply); });
  router.add("POST", root + "/alarms/{id}/acknowledge",
             [&c](const Request& r, const PathValues& p, const Reply& reply) { acknowledge(c, r, p, reply); });
}

Response jsonResponse(std::string body, int status) { return {status, std::move(body), "application/json", {}}; }

Response unknownTank(const std::string& id) {
  return problem(404, "unknown_tank", "the shop has no tank '" + id + "'");
}

Router makeRouter(const ApiContext& context) {
  Router plain;
  addReadRoutes(plain, context);
  addWriteRoutes(plain, context);
  const bool locked = context.plant.shop().signIn != "none";
  if (!locked) return plain;
  Router guarded;
  for (const Route& route : plain.routes()) {
    if (!route.pattern.starts_with(kApiRoot)) {
      guarded.add(route.method, route.pattern, route.handler);
      continue;
    }
    guarded.add(route.method, route.pattern, [](const Request&, const PathValues&, const Reply& reply) {
      reply(problem(401, "sign_in_required",
                    "this shop requires signing in, and this version has no accounts yet; on a loopback "
                    "address, sign_in = \"none\" in the shop file serves everyone on this machine"));
    });
  }
  return guarded;
}

}  // namespace tw::monitor
