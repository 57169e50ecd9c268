// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/log.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <atomic>
#include <cstdio>
#include <memory>
#include <mutex>

#include "io/clock.hpp"

namespace tw::io {
namespace {

std::atomic<LogLevel> g_level{LogLevel::Info};
std::mutex g_write;

std::string_view levelWord(LogLevel level) {
  switch (level) {
    case LogLevel::Debug: return "debug";
    case LogLevel::Info: return "info";
    case LogLevel::Warning: return "warning";
    case LogLevel::Error: return "error";
  }
  return "error";
}

bool isPlain(char c) {
  const auto byte = static_cast<unsigned char>(c);
  return byte > 0x20 && byte != 0x7f && c != '"' && c != '=' && c != '\\';
}

/// Quoted when it must be; control characters escaped, so that no value can forge a second entry.
void appendValue(std::string& line, std::string_view value) {
  if (!value.empty() && std::all_of(value.begin(), value.end(), isPlain)) {
    line += value;
    return;
  }
  line += '"';
  for (const char c : value) {
    const auto byte = static_cast<unsigned char>(c);
    if (c == '"' || c == '\\') {
      line += '\\';
      line += c;
    } else if (c == '\n') {
      line += "\\n";
    } else if (byte < 0x20 || byte == 0x7f) {
      line += fmt::format("\\x{:02x}", byte);
    } else {
      line += c;
    }
  }
  line += '"';
}

}  // namespace

void log(LogLevel level, std::string_view event,
         std::initializer_list<std::pair<std::string_view, std::string>> fields) {
  if (level < g_level.load(std::memory_order_relaxed)) return;
  static const std::unique_ptr<Clock> clock = systemClock();
  std::string line = fmt::format("time={} level={} event=", toRfc3339(clock->now()), levelWord(level));
  appendValue(line, event);
  for (const auto& [key, value] : fields) {
    line += fmt::format(" {}=", key);
    appendValue(line, value);
  }
  line += '\n';
  const std::scoped_lock lock(g_write);
  std::fwrite(line.data(), 1, line.size(), stderr);
  std::fflush(stderr);
}

void setLogLevel(LogLevel level) { g_level.store(level, std::memory_order_relaxed); }

}  // namespace tw::io
