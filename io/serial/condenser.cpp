// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/serial/condenser.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace tw::io {
namespace {

using std::chrono::milliseconds;

/// The finest step of readings while lines come faster than they can be kept (design, threads).
constexpr milliseconds kSecond{1000};
/// Longer intervals mean a mistaken setting; also keeps the arithmetic far from overflow.
constexpr double kLongestInterval_s = 7.0 * 24 * 3600;
/// One interval's lines are bounded: an hour at a hundred lines a second.
constexpr std::size_t kMostSamples = 360'000;

/// One past the end of the interval that holds `at`.
Instant intervalEnd(Instant at, milliseconds interval) {
  const auto since = at.time_since_epoch();
  auto into = since % interval;
  if (into < milliseconds{0}) into += interval;
  return at - into + interval;
}

}  // namespace

Condenser::Condenser(const SerialPort& settings) : m_settings(settings) {
  const double seconds = std::clamp(settings.every_s, 0.0, kLongestInterval_s);
  m_interval = milliseconds{std::llround(seconds * 1000.0)};
}

std::vector<IncomingBatch> Condenser::add(Instant at, const FrameOutcome& frame, bool behind) {
  std::vector<IncomingBatch> done;
  // The clock was set back: what was stamped before must not hold up what comes now.
  if (m_lastStamp > at + 2 * kSecond) m_lastStamp = at - milliseconds{1};
  if (m_interval == milliseconds{0}) {
    const Instant stamp = std::max(at, m_lastStamp + milliseconds{1});
    if (!behind && !m_held && stamp <= at + kSecond) {
      done.push_back(single(stamp, frame));
      return done;
    }
    if (m_held) ++m_skipped;
    m_held = {at, frame};
    return flush(at);
  }
  const bool outside = at >= m_intervalEnd || at < m_intervalEnd - m_interval;
  if (!m_samples.empty() && outside) done.push_back(closeInterval());
  if (m_samples.empty()) m_intervalEnd = intervalEnd(at, m_interval);
  m_lastFrame = at;
  for (const FrameValue& value : frame.values) {
    auto& samples = m_samples[value.channel];
    if (samples.size() < kMostSamples) {
      samples.push_back({value.value, value.text, value.unit});
    } else {
      ++m_skipped;
    }
  }
  return done;
}

std::vector<IncomingBatch> Condenser::flush(Instant now) {
  std::vector<IncomingBatch> done;
  const auto due = dueAt();
  if (!due || now < *due) return done;
  if (m_held) {
    const auto [at, frame] = *m_held;
    m_held.reset();
    done.push_back(single(std::max(at, m_lastStamp + milliseconds{1}), frame));
  } else {
    done.push_back(closeInterval());
  }
  return done;
}

std::optional<Instant> Condenser::dueAt() const {
  if (m_held) return m_lastStamp + kSecond;
  if (!m_samples.empty()) return m_intervalEnd;
  return std::nullopt;
}

IncomingBatch Condenser::single(Instant at, const FrameOutcome& frame) {
  m_lastStamp = at;
  IncomingBatch batch;
  batch.source = "serial:" + m_settings.port;
  for (const FrameValue& value : frame.values) {
    Incoming reading;
    reading.column = value.channel;
    reading.channel = value.channel;
    reading.tank = m_settings.tank;
    reading.sampledAt = {at, std::chrono::minutes{0}};
    reading.value = value.value;
    reading.text = value.text;
    reading.unit = value.unit;
    batch.readings.push_back(std::move(reading));
  }
  return batch;
}

/// The median shrugs off single bad lines; of an even number it is the mean of the middle two. Lines in
/// another unit than the newest one's do not take part.
IncomingBatch Condenser::closeInterval() {
  FrameOutcome condensed;
  for (auto& [channel, samples] : m_samples) {
    const std::string unit = samples.back().unit;
    std::erase_if(samples, [&](const Sample& sample) { return sample.unit != unit; });
    const auto middle = samples.begin() + static_cast<std::ptrdiff_t>(samples.size() / 2);
    const auto byValue = [](const Sample& a, const Sample& b) { return a.value < b.value; };
    std::nth_element(samples.begin(), middle, samples.end(), byValue);
    FrameValue value{channel, middle->text, unit, middle->value};
    if (samples.size() % 2 == 0) {
      const auto below = std::max_element(samples.begin(), middle, byValue);
      if (below->value != middle->value) {
        value.value = 0.5 * (below->value + middle->value);
        value.text = fmt::format("{}", value.value);
      }
    }
    condensed.values.push_back(std::move(value));
  }
  m_samples.clear();
  return single(m_lastFrame, condensed);
}

}  // namespace tw::io
