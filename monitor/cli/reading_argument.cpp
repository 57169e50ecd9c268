// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/cli/reading_argument.hpp"

#include <charconv>
#include <cmath>
#include <string_view>

namespace tw::monitor::cli {
namespace {

std::string_view trimmed(std::string_view text) {
  const auto first = text.find_first_not_of(" \t");
  if (first == std::string_view::npos) return {};
  return text.substr(first, text.find_last_not_of(" \t") - first + 1);
}

struct Pair {
  std::string name, unit;
  double value = 0.0;
};

model::Result<Pair> readPair(std::string_view text) {
  const auto unreadable = [&](const char* why) {
    return model::fail(model::Fault{"reading_unreadable", std::string(text), why, "", model::FaultKind::Input});
  };
  const auto equals = text.find('=');
  if (equals == std::string_view::npos) return unreadable("expected channel=value");
  Pair pair;
  pair.name = std::string(trimmed(text.substr(0, equals)));
  std::string_view rest = trimmed(text.substr(equals + 1));
  if (!rest.empty() && rest.front() == '+') rest.remove_prefix(1);
  const auto parsed = std::from_chars(rest.data(), rest.data() + rest.size(), pair.value);
  if (parsed.ec != std::errc{} || !std::isfinite(pair.value)) {
    return unreadable("the value is not a number; write 10.2 with a decimal point");
  }
  const auto used = static_cast<std::size_t>(parsed.ptr - rest.data());
  pair.unit = std::string(trimmed(rest.substr(used)));
  if (pair.name.empty()) return unreadable("the channel's name is missing");
  return pair;
}

struct Collected {
  std::map<std::string, std::map<std::string, double>> inputs;  // channel -> worksheet inputs
  TypedLiquor liquor;
  model::Faults faults;
};

void place(const io::Recipe& recipe, const Pair& pair, Collected& all) {
  const auto dot = pair.name.find('.');
  const std::string id = pair.name.substr(0, dot);
  const io::Channel* channel = recipe.channel(id);
  if (channel == nullptr) {
    all.faults.push_back({"channel_unknown", id, "the recipe '" + recipe.id + "' has no channel of this name", "",
                          model::FaultKind::Input});
    return;
  }
  if (dot != std::string::npos) {
    if (!all.inputs[id].emplace(pair.name.substr(dot + 1), pair.value).second) {
      all.faults.push_back({"channel_twice", pair.name, "given twice", "", model::FaultKind::Input});
    }
    return;
  }
  auto canonical = io::toCanonical(*channel, pair.value, pair.unit);
  if (!canonical) {
    all.faults.push_back(canonical.error());
  } else if (!all.liquor.values.emplace(id, *canonical).second) {
    all.faults.push_back({"channel_twice", id, "given twice", "", model::FaultKind::Input});
  }
}

void evaluateInputs(const io::Recipe& recipe, Collected& all) {
  for (const auto& [id, inputs] : all.inputs) {
    if (all.liquor.values.count(id) != 0) {
      all.faults.push_back({"channel_twice", id, "given both as a value and as burette inputs", "",
                            model::FaultKind::Input});
      continue;
    }
    auto value = io::evaluateWorksheet(recipe, *recipe.channel(id), inputs, all.liquor.values);
    if (value) {
      all.liquor.values.emplace(id, *value);
    } else {
      all.faults.push_back(value.error());
    }
  }
}

}  // namespace

model::Result<TypedLiquor, model::Faults> parseReading(const io::Recipe& recipe, const std::string& text) {
  Collected all;
  std::string_view rest = text;
  while (true) {
    const auto comma = rest.find(',');
    const std::string_view part = trimmed(rest.substr(0, comma));
    if (!part.empty()) {
      auto pair = readPair(part);
      if (pair) {
        place(recipe, *pair, all);
      } else {
        all.faults.push_back(pair.error());
      }
    }
    if (comma == std::string_view::npos) break;
    rest.remove_prefix(comma + 1);
  }
  evaluateInputs(recipe, all);
  if (!all.faults.empty()) return model::fail(all.faults);
  for (const auto& [id, canonical] : all.liquor.values) {
    const io::Channel& channel = *recipe.channel(id);
    const double value = io::fromCanonical(channel, canonical);
    if (value < channel.plausibleLow || value > channel.plausibleHigh) {
      all.liquor.warnings.push_back("implausible:" + id);
    }
  }
  return all.liquor;
}

}  // namespace tw::monitor::cli
