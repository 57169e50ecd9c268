// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/serial/frame_pattern.hpp"

#include <boost/regex.hpp>
#include <exception>

namespace tw::io {
namespace {

bool isNameCharacter(char c) {
  return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9') || c == '_';
}

/// The library finds a group by name but does not list the names, so they are read from the text.
std::vector<std::string> groupNames(const std::string& pattern) {
  std::vector<std::string> names;
  for (std::size_t at = pattern.find("(?<"); at != std::string::npos; at = pattern.find("(?<", at + 1)) {
    std::string name;
    std::size_t i = at + 3;
    while (i < pattern.size() && isNameCharacter(pattern[i])) name += pattern[i++];
    if (!name.empty() && i < pattern.size() && pattern[i] == '>') names.push_back(name);
  }
  return names;
}

struct Compiled {
  std::string pattern, fault;
  boost::regex expression = boost::regex();
  std::vector<std::string> names;
};

/// A port has one pattern, so remembering the last one of this thread saves compiling it for each line.
const Compiled& compiled(const std::string& pattern) {
  thread_local Compiled last;
  if (last.pattern == pattern && !pattern.empty()) return last;
  last = Compiled{};
  last.pattern = pattern;
  last.names = groupNames(pattern);
  try {
    last.expression = boost::regex(pattern, boost::regex::perl);
    if (last.names.empty()) last.fault = "no group has a name such as (?<ph>...)";
  } catch (const std::exception& error) {
    last.fault = error.what();
  }
  return last;
}

}  // namespace

std::string patternFault(const std::string& pattern) { return compiled(pattern).fault; }

std::optional<std::vector<std::pair<std::string, std::string>>> matchPattern(const std::string& pattern,
                                                                             std::string_view line) {
  const Compiled& use = compiled(pattern);
  if (!use.fault.empty()) return std::nullopt;
  boost::cmatch match;
  try {
    if (!boost::regex_search(line.data(), line.data() + line.size(), match, use.expression)) {
      return std::nullopt;
    }
  } catch (const std::exception&) {
    return std::nullopt;  // the expression backtracked beyond the library's bound
  }
  std::vector<std::pair<std::string, std::string>> groups;
  for (const std::string& name : use.names) {
    const auto& group = match[name];
    if (group.matched) groups.emplace_back(name, group.str());
  }
  return groups;
}

}  // namespace tw::io
