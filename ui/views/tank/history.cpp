// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/views/tank/history.hpp"

#include <algorithm>
#include <limits>

#include "ui/words/words.hpp"

namespace tw::ui {
namespace {

constexpr double kSecondsPerDay = 86400.0;
constexpr int kShownAtFirst = 2;  // channels besides margin: metal and ligand, which recipes list first

/// A dump starts a new chapter: the line breaks there.
void breakAtDumps(std::vector<StripPoint>& points, const std::vector<EventView>& events) {
  for (const EventView& event : events) {
    if (event.event == "dump") points.push_back({axisTime(event.time), std::numeric_limits<double>::quiet_NaN()});
  }
  std::stable_sort(points.begin(), points.end(), [](const auto& a, const auto& b) { return a.t < b.t; });
}

bool alwaysLast(const std::string& channel) {
  return channel == "ph" || channel == "temperature" || channel == "sample_temperature";
}

}  // namespace

double axisTime(const QDateTime& at) { return static_cast<double>(at.toMSecsSinceEpoch()) / 1000.0; }
double axisTime(const std::string& rfc3339) { return axisTime(instant(rfc3339)); }

Strip History::marginStrip(const io::wire::TankView& tank, const TankHistory& history,
                           const std::string& margin) const {
  Strip strip;
  strip.id = "margin:" + margin;
  strip.folded = false;
  const io::wire::MarginView* now = findMargin(tank, margin);
  const double scale = Words::marginIsFraction(margin) ? 100.0 : 1.0;
  strip.title = Words::marginShort(margin, now != nullptr ? now->ligand : std::string{});
  strip.unit = Words::marginIsFraction(margin)                ? QStringLiteral("%")
               : margin == "ph_up" || margin == "ph_down"     ? QStringLiteral("pH")
               : margin == "warming" || margin == "cooling" ? QStringLiteral("K")
                                                            : QString();
  for (const io::wire::ResultView& result : history.results) {
    for (const io::wire::MarginView& view : result.margins) {
      if (view.id == margin) strip.points.push_back({axisTime(result.sampledAt), view.judged * scale});
    }
  }
  if (now != nullptr && now->limit) {
    strip.limits = {{now->limit->caution * scale, false}, {now->limit->act * scale, true}};
  }
  if (tank.projection && tank.projection->margin == margin && !strip.points.empty()) {
    const StripPoint last = strip.points.back();
    const double days = tank.projection->horizon_h / 24.0;
    strip.projection = {last, {last.t + days * kSecondsPerDay, last.value + tank.projection->slope_per_day * scale * days}};
  }
  breakAtDumps(strip.points, history.events);
  return strip;
}

Strip History::channelStrip(const io::wire::ChannelView& channel, const TankHistory& history) const {
  Strip strip;
  strip.id = channel.id;
  strip.title = QString::fromStdString(channel.title.empty() ? channel.id : channel.title);
  strip.shortTitle = Words::channelShort(channel.id, channel.title);
  strip.unit = unitText(channel.unit);
  if (channel.high > channel.low) {
    strip.low = channel.low;
    strip.high = channel.high;
  }
  for (const auto& [limit, act] : {std::pair{channel.guardCautionLow, false}, std::pair{channel.guardCautionHigh, false},
                                   std::pair{channel.guardActLow, true}, std::pair{channel.guardActHigh, true}}) {
    if (limit) strip.limits.push_back({*limit, act});
  }
  if (channel.ratio) {
    for (const io::wire::ResultView& result : history.results) {
      for (const io::wire::ChannelView& value : result.values) {
        if (value.id == channel.id && value.value) strip.points.push_back({axisTime(result.sampledAt), *value.value});
      }
    }
  } else {
    for (const io::wire::ReadingView& reading : history.readings) {
      if (reading.channel != channel.id || !reading.value) continue;
      const StripPoint point{axisTime(reading.sampledAt), *reading.value};
      if (reading.state == "accepted") strip.points.push_back(point);
      if (reading.state == "superseded") strip.hollow.push_back(point);
      if (reading.state == "suspicious") strip.waiting.push_back(point);
    }
  }
  breakAtDumps(strip.points, history.events);
  return strip;
}

std::vector<TimeMark> History::marks(const TankHistory& history) const {
  std::vector<TimeMark> marks;
  for (const EventView& event : history.events) {
    TimeMark mark{axisTime(event.time), event.event == "dump", Words::event(event.event)};
    if (!event.stock.empty()) mark.text += QLatin1Char(' ') + QString::fromStdString(event.stock);
    if (event.amount) mark.text += QLatin1Char(' ') + m_format.quantity(event.amount, event.unit);
    marks.push_back(mark);
  }
  return marks;
}

StripSet History::strips(const io::wire::TankView& tank, const TankHistory& history, const std::string& margin,
                         const QDateTime& now) const {
  StripSet set;
  set.now = axisTime(now);
  set.horizon_s = tank.horizon_h * 3600.0;
  if (!margin.empty()) set.strips.push_back(marginStrip(tank, history, margin));
  Strip activity;
  activity.id = "pM";
  activity.title = tr("pM of %1").arg(formulaText(tank.metal));
  activity.shortTitle = QStringLiteral("pM");
  for (const io::wire::ResultView& result : history.results) {
    if (result.pM) activity.points.push_back({axisTime(result.sampledAt), *result.pM});
    set.results.push_back({axisTime(result.sampledAt), result.id, result.sampledAt});
  }
  breakAtDumps(activity.points, history.events);
  set.strips.push_back(activity);
  int shown = 0;
  for (const io::wire::ChannelView& channel : tank.channels) {
    set.strips.push_back(channelStrip(channel, history));
    if (!channel.ratio && !alwaysLast(channel.id) && shown < kShownAtFirst) {
      set.strips.back().folded = false;
      ++shown;
    }
  }
  set.marks = marks(history);
  for (const io::wire::AlarmView& alarm : history.alarms) {
    if (alarm.tank != tank.id) continue;
    set.alarms.push_back({axisTime(alarm.raisedAt), alarm.clearedAt.empty() ? set.now : axisTime(alarm.clearedAt),
                          alarm.priority == "high", Reasons(m_format).alarm(alarm, &tank)});
  }
  return set;
}

}  // namespace tw::ui
