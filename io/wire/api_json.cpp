// SPDX-License-Identifier: GPL-3.0-or-later
// One list of names and members per value, used for writing and for reading, so that the two cannot part.
#include "io/wire/api_json.hpp"

#include <nlohmann/json.hpp>

#include <cmath>
#include <type_traits>

namespace tw::io::wire {
namespace {

using nlohmann::json;

template <class V, class F>
using Of = std::enable_if_t<std::is_same_v<std::remove_const_t<V>, F>, int>;

/// Text that is JSON itself goes as JSON: burette inputs, a whole analysis.
template <class Text>
struct JsonText {
  Text& text;
};
template <class Text>
JsonText(Text&) -> JsonText<Text>;

template <class V, class F, Of<V, LimitPair> = 0>
void fields(V& v, F&& f) {
  f("caution", v.caution);
  f("act", v.act);
}

template <class V, class F, Of<V, MarginView> = 0>
void fields(V& v, F&& f) {
  f("id", v.id);
  f("judged", v.judged);
  f("mol_L", v.mol_L);
  f("sigma", v.sigma);
  f("solid", v.solid);
  f("ligand", v.ligand);
  f("limit", v.limit);
}

template <class V, class F, Of<V, ChannelView> = 0>
void fields(V& v, F&& f) {
  f("id", v.id);
  f("title", v.title);
  f("unit", v.unit);
  f("ratio", v.ratio);
  f("value", v.value);
  f("sampled_at", v.sampledAt);
  f("source", v.source);
  f("low", v.low);
  f("target", v.target);
  f("high", v.high);
  f("every_h", v.every_h);
  f("max_age_h", v.maxAge_h);
  f("too_old", v.tooOld);
  f("due_at", v.dueAt);
  f("guard_caution_low", v.guardCautionLow);
  f("guard_act_low", v.guardActLow);
  f("guard_caution_high", v.guardCautionHigh);
  f("guard_act_high", v.guardActHigh);
}

template <class V, class F, Of<V, ReasonView> = 0>
void fields(V& v, F&& f) {
  f("code", v.code);
  f("subject", v.subject);
  f("word", v.word);
  f("value", v.value);
  f("limit", v.limit);
  f("hours", v.hours);
}

template <class V, class F, Of<V, ProjectionView> = 0>
void fields(V& v, F&& f) {
  f("method", v.method);
  f("margin", v.margin);
  f("slope_per_day", v.slope_per_day);
  f("hours_to_caution", v.hoursToCaution);
  f("hours_to_act", v.hoursToAct);
  f("hours_to_line", v.hoursToLine);
  f("horizon_h", v.horizon_h);
  f("bed_at_horizon", v.bedAtHorizon);
}

template <class V, class F, Of<V, AlarmView> = 0>
void fields(V& v, F&& f) {
  f("id", v.id);
  f("tank", v.tank);
  f("kind", v.kind);
  f("subject", v.subject);
  f("word", v.word);
  f("priority", v.priority);
  f("state", v.state);
  f("raised_at", v.raisedAt);
  f("cleared_at", v.clearedAt);
  f("acknowledged_at", v.acknowledgedAt);
  f("acknowledged_by", v.acknowledgedBy);
  f("comment", v.comment);
  f("value", v.value);
  f("limit", v.limit);
  f("unit", v.unit);
  f("to_do", v.toDo);
}

template <class V, class F, Of<V, TankView> = 0>
void fields(V& v, F&& f) {
  f("id", v.id);
  f("title", v.title);
  f("line_id", v.lineId);
  f("line_title", v.lineTitle);
  f("recipe_id", v.recipeId);
  f("recipe_title", v.recipeTitle);
  f("metal", v.metal);
  f("liquor_color", v.liquorColor);
  f("confidence", v.confidence);
  f("unreliable_because", v.unreliableBecause);
  f("hazards", v.hazards);
  f("in_service", v.inService);
  f("volume_L", v.volume_L);
  f("horizon_h", v.horizon_h);
  f("condition", v.condition);
  f("stale", v.stale);
  f("doubtful", v.doubtful);
  f("reliable", v.reliable);
  f("reasons", v.reasons);
  f("bed", v.bed);
  f("projection", v.projection);
  f("sampled_at", v.sampledAt);
  f("pM", v.pM);
  f("ph", v.ph);
  f("temperature_C", v.temperature_C);
  f("margins", v.margins);
  f("channels", v.channels);
  f("alarms", v.alarms);
}

template <class V, class F, Of<V, ReadingView> = 0>
void fields(V& v, F&& f) {
  f("id", v.id);
  f("tank", v.tank);
  f("channel", v.channel);
  f("sampled_at", v.sampledAt);
  f("received_at", v.receivedAt);
  f("unit", v.unit);
  f("entered_unit", v.enteredUnit);
  f("entered", v.entered);
  f("operator", v.op);
  f("source", v.source);
  f("state", v.state);
  f("value", v.value);
  f("supersedes", v.supersedes);
  f("reason", v.reason);
  f("inputs", JsonText{v.inputs});
}

template <class V, class F, Of<V, ResultView> = 0>
void fields(V& v, F&& f) {
  f("id", v.id);
  f("tank", v.tank);
  f("sampled_at", v.sampledAt);
  f("computed_at", v.computedAt);
  f("condition", v.condition);
  f("recipe_sha256", v.recipeSha256);
  f("doubtful", v.doubtful);
  f("reliable", v.reliable);
  f("historic", v.historic);
  f("pM", v.pM);
  f("ph", v.ph);
  f("temperature_C", v.temperature_C);
  f("bed", v.bed);
  f("margins", v.margins);
  f("values", v.values);
  f("readings", v.readings);
  f("json", JsonText{v.json});
}

template <class V, class F, Of<V, LiveMessage> = 0>
void fields(V& v, F&& f) {
  f("type", v.type);
  f("tank", v.tank);
  f("at", v.at);
  f("reading", v.reading);
  f("result", v.result);
  f("condition", v.condition);
  f("alarm", v.alarm);
  f("link", v.link);
  f("link_state", v.linkState);
}

template <class T>
concept View = requires(T& view) { fields(view, [](const char*, auto&&) {}); };

template <class T>
json write(const T& value);

template <class T>
json write(const std::optional<T>& value) {
  return value ? write(*value) : json();
}

template <class T>
json write(const std::vector<T>& values) {
  json list = json::array();
  for (const T& value : values) list.push_back(write(value));
  return list;
}

template <class Text>
json write(const JsonText<Text>& value) {
  return value.text.empty() ? json() : json::parse(value.text);
}

template <class T>
json write(const T& value) {
  if constexpr (View<const T>) {
    json object = json::object();
    fields(value, [&](const char* name, const auto& member) { object[name] = write(member); });
    return object;
  } else if constexpr (std::is_floating_point_v<T>) {
    return std::isfinite(value) ? json(value) : json();
  } else {
    return json(value);
  }
}

template <class T>
void read(const json& from, T& value);

template <class T>
void read(const json& from, std::optional<T>& value) {
  value.reset();
  if (!from.is_null()) read(from, value.emplace());
}

template <class T>
void read(const json& from, std::vector<T>& values) {
  values.clear();
  if (!from.is_array()) throw json::type_error::create(302, "expected an array", &from);
  for (const json& element : from) read(element, values.emplace_back());
}

template <class Text>
void read(const json& from, JsonText<Text>& value) {
  value.text = from.is_null() ? std::string() : from.dump();
}

template <class T>
void read(const json& from, T& value) {
  if constexpr (View<T>) {
    fields(value, [&](const char* name, auto&& member) { read(from.at(name), member); });
  } else {
    from.get_to(value);
  }
}

}  // namespace

void to_json(json& out, const TankView& view) { out = write(view); }
void to_json(json& out, const ReadingView& view) { out = write(view); }
void to_json(json& out, const ResultView& view) { out = write(view); }
void to_json(json& out, const AlarmView& view) { out = write(view); }
void to_json(json& out, const LiveMessage& message) { out = write(message); }

void from_json(const json& in, TankView& view) { read(in, view); }
void from_json(const json& in, ReadingView& view) { read(in, view); }
void from_json(const json& in, ResultView& view) { read(in, view); }
void from_json(const json& in, AlarmView& view) { read(in, view); }
void from_json(const json& in, LiveMessage& message) { read(in, message); }

}  // namespace tw::io::wire
