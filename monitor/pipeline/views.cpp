// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/pipeline/views.hpp"

#include <utility>

#include <nlohmann/json.hpp>

#include "monitor/pipeline/report_json.hpp"

namespace tw::monitor {
namespace {

std::string timeOrEmpty(const std::optional<io::Instant>& at) { return at ? io::toRfc3339(*at) : std::string{}; }

std::vector<io::wire::ChannelView> valueViews(const TankSetup* setup, const std::string& json) {
  std::vector<io::wire::ChannelView> views;
  for (const auto& [id, value] : readValues(json)) {
    io::wire::ChannelView view;
    view.id = view.title = id;
    view.value = value;
    view.ratio = true;
    if (setup != nullptr) {
      if (const io::Channel* channel = setup->recipe.channel(id)) {
        view.title = channel->title;
        view.unit = channel->unit;
        view.ratio = false;
      }
    }
    views.push_back(std::move(view));
  }
  return views;
}

}  // namespace

io::wire::ReadingView readingView(const TankSetup* setup, const io::Reading& reading) {
  io::wire::ReadingView view;
  view.id = reading.id;
  view.tank = reading.tank;
  view.channel = reading.channel;
  view.sampledAt = io::toRfc3339(reading.sampledAt.at, reading.sampledAt.offset);
  view.receivedAt = io::toRfc3339(reading.receivedAt);
  view.unit = reading.unit;
  view.value = reading.value;
  const io::Channel* channel = setup == nullptr ? nullptr : setup->recipe.channel(reading.channel);
  if (channel != nullptr) {
    view.unit = channel->unit;
    if (reading.value) view.value = inUnit(*channel, *reading.value);
  }
  view.entered = reading.entered;
  view.enteredUnit = reading.enteredUnit;
  view.op = reading.op;
  view.source = reading.source;
  view.state = io::name(reading.state);
  view.supersedes = reading.supersedes;
  view.reason = reading.reason;
  // An imported text may be anything; only JSON may go into JSON.
  if (nlohmann::json::accept(reading.inputs)) view.inputs = reading.inputs;
  return view;
}

io::wire::ResultView resultView(const TankSetup* setup, const io::ResultRow& row) {
  io::wire::ResultView view;
  view.id = row.id;
  view.tank = row.tank;
  view.sampledAt = io::toRfc3339(row.sampledAt);
  view.computedAt = io::toRfc3339(row.computedAt);
  view.condition = row.condition;
  view.recipeSha256 = row.recipeSha256;
  view.doubtful = row.doubtful;
  view.reliable = row.reliable;
  view.historic = row.historic;
  view.pM = row.pM;
  view.ph = row.ph;
  view.temperature_C = row.temperature_C;
  view.bed = row.bed;
  for (std::size_t i = 0; i < model::kMarginCount; ++i) {
    const auto kind = static_cast<model::MarginKind>(i);
    const auto margin = row.margins.find(model::name(kind));
    if (margin == row.margins.end()) continue;
    io::wire::MarginView each;
    each.id = margin->first;
    each.judged = margin->second;
    if (setup != nullptr && setup->recipe.limits[i]) {
      each.limit = io::wire::LimitPair{setup->recipe.limits[i]->caution, setup->recipe.limits[i]->act};
    }
    view.margins.push_back(std::move(each));
  }
  view.values = valueViews(setup, row.values);
  view.readings = row.readings;
  return view;
}

io::wire::AlarmView alarmView(const io::AlarmRow& row) {
  io::wire::AlarmView view;
  view.id = row.id;
  view.tank = row.tank;
  view.kind = row.kind;
  view.subject = row.subject;
  view.word = row.word;
  view.priority = row.priority;
  view.state = row.state;
  view.raisedAt = io::toRfc3339(row.raisedAt);
  view.clearedAt = timeOrEmpty(row.clearedAt);
  view.acknowledgedAt = timeOrEmpty(row.acknowledgedAt);
  view.acknowledgedBy = row.acknowledgedBy;
  view.comment = row.comment;
  view.value = row.value;
  view.limit = row.limit;
  view.unit = row.unit;
  view.toDo = row.toDo;
  return view;
}

}  // namespace tw::monitor
