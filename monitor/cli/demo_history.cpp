// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/cli/demo_history.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <iterator>
#include <numbers>
#include <random>

namespace tw::monitor::cli {
namespace {

/// Normal draws by Box and Muller: std::normal_distribution differs between libraries.
class Noise {
 public:
  explicit Noise(std::uint64_t seed) : m_engine(seed) {}
  double uniform() { return (static_cast<double>(m_engine() >> 11) + 0.5) * 0x1p-53; }
  double normal() {
    return std::sqrt(-2.0 * std::log(uniform())) * std::cos(2.0 * std::numbers::pi * uniform());
  }

 private:
  std::mt19937_64 m_engine;
};

std::uint64_t mixed(unsigned long seed, const std::string& text) {
  std::uint64_t hash = 1469598103934665603ULL ^ seed;  // FNV-1a, so that each tank has its own stream
  for (const char c : text) hash = (hash ^ static_cast<unsigned char>(c)) * 1099511628211ULL;
  return hash;
}

struct ChannelState {
  const ChannelStory* story = nullptr;
  const io::Channel* channel = nullptr;
  double value = 0.0;   ///< true value, channel unit
  double offset = 0.0;  ///< of the slow wandering
  long lastHour = 0;
  bool neverRead = true;
};

constexpr double kSameRound = 0.6;  ///< read with the others once this share of its interval has passed

/// Decimals a technician writes: 0.01 for pH and anything below 10, 0.1 above, more below 1.
std::string written(const io::Channel& channel, double value) {
  const int decimals = channel.unit == "pH" ? 2 : std::abs(value) < 1.0 ? 4 : std::abs(value) < 10.0 ? 2 : 1;
  return fmt::format("{:.{}f}", value, decimals);
}

class TankPast {
 public:
  TankPast(const TankStory& story, const io::Recipe& recipe, io::Instant end, int days, unsigned long seed)
      : m_story(story), m_recipe(recipe), m_noise(mixed(seed, story.id)), m_hours(days * 24L) {
    m_start = end - std::chrono::hours(m_hours);
    for (const ChannelStory& one : story.channels) {
      if (const io::Channel* channel = recipe.channel(one.channel)) {
        m_channels.push_back({&one, channel, channel->target * one.start, 0.0, 0, true});
      }
    }
  }

  HistoryFiles tell() {
    std::string header = "time,tank,operator";
    for (const ChannelState& state : m_channels) header += "," + state.channel->id;
    m_files.readings = header + "\r\n";
    for (long hour = 0; hour < m_hours; ++hour) {
      live(hour);
      if (hour <= m_hours - static_cast<long>(m_story.silentForHours)) sample(hour);
    }
    if (!m_files.events.empty()) {
      m_files.events = "time,tank,event,stock,amount,unit,operator,lot,note\r\n" + m_files.events;
    }
    return m_files;
  }

 private:
  [[nodiscard]] bool neglected(long hour) const {
    return m_story.neglectedForDays && static_cast<double>(m_hours - hour) <= *m_story.neglectedForDays * 24.0;
  }

  void live(long hour) {
    const double haste = neglected(hour) ? m_story.neglectFactor : 1.0;
    for (ChannelState& state : m_channels) {
      // Only what a neglected tank loses hurries; its metal keeps its pace, so that the ligand falls behind.
      const bool metal = state.channel == &m_recipe.channels.front();
      state.value *= 1.0 - state.story->lossPerDay * (metal ? 1.0 : haste) / 24.0;
      constexpr double kMemory = 0.97;  // an hour's share of the wandering that stays
      state.offset = kMemory * state.offset +
                     state.story->wander * std::sqrt(1.0 - kMemory * kMemory) * m_noise.normal();
    }
  }

  [[nodiscard]] static bool due(const ChannelState& state, long hour, double share) {
    const double every = state.channel->every_h.value_or(24.0);
    return state.neverRead || static_cast<double>(hour - state.lastHour) >= every * share;
  }

  void sample(long hour) {
    const bool any = std::any_of(m_channels.begin(), m_channels.end(),
                                 [&](const ChannelState& state) { return due(state, hour, 1.0); });
    if (!any) return;
    const auto minute = std::chrono::minutes(static_cast<int>(m_noise.uniform() * 25.0));
    const io::Instant at = m_start + std::chrono::hours(hour) + minute;
    std::string row = fmt::format("{},{},{}", io::toRfc3339(at), m_story.id, operatorAt(hour));
    for (ChannelState& state : m_channels) {
      row += ",";
      if (!due(state, hour, kSameRound)) continue;
      const double truth = state.value + state.offset;
      const double sigma = std::hypot(state.channel->sigmaRel * truth, state.channel->sigmaAbs);
      const double found = truth + 0.5 * sigma * m_noise.normal();
      row += written(*state.channel, found);
      state.lastHour = hour;
      state.neverRead = false;
      correct(state, found, hour, at);
    }
    m_files.readings += row + "\r\n";
  }

  /// Brings a low channel back, as a shift would: what is missing, dosed half an hour after the sample.
  void correct(ChannelState& state, double found, long hour, io::Instant at) {
    if (state.story->stock.empty() || neglected(hour)) return;
    const io::Channel& channel = *state.channel;
    constexpr double kActBelow = 0.4;  // of the way from target to the window's edge
    if (found > channel.target - kActBelow * (channel.target - channel.low)) return;
    const auto stock = std::find_if(m_recipe.stocks.begin(), m_recipe.stocks.end(),
                                    [&](const io::Stock& one) { return one.id == state.story->stock; });
    if (stock == m_recipe.stocks.end()) return;
    const double perUnit = suppliedPerUnit(*stock, channel);
    const auto want = io::toCanonical(channel, channel.target);
    const auto have = io::toCanonical(channel, found);
    if (!want || !have || perUnit <= 0.0) return;
    const double amount = (*want - *have) * m_story.volume_L / perUnit;
    m_files.events += fmt::format("{},{},addition,{},{:.1f},{},{},{},\r\n",
                                  io::toRfc3339(at + std::chrono::minutes(30)), m_story.id, stock->id, amount,
                                  stock->unit, operatorAt(hour), lotAt(hour));
    state.value += channel.target - found;
  }

  [[nodiscard]] double suppliedPerUnit(const io::Stock& stock, const io::Channel& channel) const {
    for (const io::ComponentSource& source : m_recipe.sources) {
      if (source.channel && *source.channel == channel.id) {
        const auto found = stock.supplies.find(source.formula);
        if (found != stock.supplies.end()) return std::abs(found->second);
        // Caustic stocks supply OH^- where the recipe titrates hydroxide through H^+.
        const auto hydroxide = stock.supplies.find("OH^-");
        if (source.formula == model::kProton && hydroxide != stock.supplies.end()) return hydroxide->second;
        return 0.0;
      }
    }
    return 0.0;
  }

  [[nodiscard]] static std::string operatorAt(long hour) {
    static constexpr const char* kShift[] = {"mt", "kb", "js"};
    return kShift[(hour / 8) % 3];
  }
  [[nodiscard]] static std::string lotAt(long hour) { return fmt::format("A{:03}", 100 + hour / 240); }

  const TankStory& m_story;
  const io::Recipe& m_recipe;
  Noise m_noise;
  long m_hours = 0;
  io::Instant m_start{};
  std::vector<ChannelState> m_channels;
  HistoryFiles m_files;
};

}  // namespace

HistoryFiles demoHistory(const TankStory& story, const io::Recipe& recipe, io::Instant end, int days,
                         unsigned long seed) {
  return TankPast(story, recipe, end, days, seed).tell();
}

}  // namespace tw::monitor::cli
